"""Issues the committed editions of the demonstration studies anew: python tests/tooling/make_editions.py

The register of each starts afresh: these are demonstrations and nobody has been sent them. The time is given, the
actor is "demonstration", and no name, host or path of a machine goes into any file.
"""

import os
import shutil
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
GIVEN_TIME = {"gasket-creep": "1771340400", "weld-smoke": "1772708400", "two-kilns": "1776333600"}
"""2026-02-17, 2026-03-05 and 2026-04-16, days after which the invented data were received."""


def main() -> None:
    from rankdocket import issue

    for name, moment in GIVEN_TIME.items():
        folder = ROOT / "studies" / name
        shutil.rmtree(folder / "editions", ignore_errors=True)
        (folder / "register.jsonl").unlink(missing_ok=True)
        os.environ["SOURCE_DATE_EPOCH"] = moment
        done = issue(str(folder), reason="first issue", actor="demonstration")
        (folder / ".seal.lock").unlink(missing_ok=True)
        print(f"{name}: edition {done.edition}, {done.pages} pages, findings {dict(done.findings)}")


if __name__ == "__main__":
    main()
