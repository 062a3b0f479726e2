"""The layout process: a page comes in, a PDF goes out.  Started by :mod:`rankdocket.render.pdf`, not by hand.

The layout engine is imported inside the functions: when its system libraries are missing, the import itself
fails, and that has to be told in words.
"""

import json
import logging
import sys
import warnings
from pathlib import Path
from typing import Any, Final

from rankdocket.render.fonts import FACES

PAGE_NAME: Final = "page.html"
PDF_NAME: Final = "report.pdf"
OUTCOME_NAME: Final = "outcome.json"

VARIANT: Final = "pdf/a-3a"
"""Tags, embedded faces and a file identifier made from the content."""

_BASE: Final = "report:/"
_SHOWN_AT_MOST: Final = 5


def main(folder: Path) -> int:
    """Lay out the page in ``folder``; write the PDF and the outcome beside it.

    Returns 0 when there is a PDF, 1 when there is none; the outcome then says why.
    """
    warnings.simplefilter("ignore")
    try:
        import weasyprint  # noqa: F401, PLC0415
    except OSError as error:
        return _finish(folder, missing=str(error).splitlines()[0])
    return _lay_out(folder)


def _lay_out(folder: Path) -> int:
    from weasyprint import HTML  # noqa: PLC0415
    from weasyprint.text.fonts import FontConfiguration  # noqa: PLC0415
    from weasyprint.urls import FatalURLFetchingError  # noqa: PLC0415

    from rankdocket.render.fetcher import ClosedFetcher  # noqa: PLC0415

    complaints = _Complaints()
    logger = logging.getLogger("weasyprint")
    logger.handlers = [complaints]
    logger.propagate = False
    fetcher = ClosedFetcher({face.address: (face.path.read_bytes(), face.media_type) for face in FACES})
    page = (folder / PAGE_NAME).read_text(encoding="utf-8")
    faces = FontConfiguration()
    try:
        source = HTML(string=page, base_url=_BASE, url_fetcher=fetcher)
        laid_out = source.render(font_config=faces, pdf_variant=VARIANT)
        pdf = laid_out.write_pdf(pdf_variant=VARIANT, finisher=_leave_metadata_readable)
    except FatalURLFetchingError as refused:
        return _finish(folder, refused=str(refused))
    if fetcher.refused:
        return _finish(folder, refused=f"{fetcher.refused[0]!r} is not a part of the report")
    if complaints.texts:
        return _finish(folder, complaints=complaints.texts[:_SHOWN_AT_MOST])
    (folder / PDF_NAME).write_bytes(pdf)
    return _finish(folder, pages=len(laid_out.pages))


def _leave_metadata_readable(_document: Any, pdf: Any) -> None:
    """Keep the description of the file uncompressed, as archives ask for it (ISO 19005-3, 6.6.2.1)."""
    number = int(pdf.catalog["Metadata"].split()[0])
    pdf.objects[number].compress = False


class _Complaints(logging.Handler):
    """Keeps what the layout engine would only have logged."""

    def __init__(self) -> None:
        super().__init__(logging.WARNING)
        self.texts: list[str] = []

    def emit(self, record: logging.LogRecord) -> None:
        self.texts.append(record.getMessage())


def _finish(folder: Path, **outcome: str | int | list[str]) -> int:
    (folder / OUTCOME_NAME).write_text(json.dumps(outcome), encoding="utf-8")
    return 0 if "pages" in outcome else 1


if __name__ == "__main__":
    sys.exit(main(Path(sys.argv[1])))
