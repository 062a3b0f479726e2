"""The layout engine's only source of files: an allow-list held in memory."""

from collections.abc import Mapping

from weasyprint.urls import FatalURLFetchingError, URLFetcher, URLFetcherResponse


class ClosedFetcher(URLFetcher):  # type: ignore[misc]  # the engine ships no types
    """Serve what is on the list and stop the run for anything else.

    Parameters
    ----------
    served
        Address → bytes and media type.
    """

    def __init__(self, served: Mapping[str, tuple[bytes, str]]) -> None:
        super().__init__(allowed_protocols=(), allow_redirects=False, fail_on_errors=True)
        self._served = served
        self.refused: list[str] = []

    def fetch(self, url: str, headers: Mapping[str, str] | None = None) -> URLFetcherResponse:  # noqa: ARG002
        """Return a listed file.

        Raises
        ------
        FatalURLFetchingError
            For every other address.  Inside an inline SVG the engine swallows even this one, so that the
            address is also kept in ``refused`` for a look afterwards.
        """
        if url in self._served:
            body, media_type = self._served[url]
            return URLFetcherResponse(url, body, {"Content-Type": media_type})
        self.refused.append(url)
        raise FatalURLFetchingError(f"{url!r} is not a part of the report")
