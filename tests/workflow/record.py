"""A record of an invented study, held against its checker without issuing an edition."""

import json
from collections.abc import Mapping
from functools import cache
from pathlib import Path
from typing import Any

import rankdocket.workflow.record_checker as checker
from analysis.invented import Invented, read_texts
from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.canonical import readable_bytes
from rankdocket.study.plan import plan_of
from rankdocket.workflow.record_tables import record_tables


def problems(invented: Invented, folder: Path, *forged: tuple[str, Any]) -> list[str]:
    """File a study's record, forge values of its analysis, and return what the checker says.

    Parameters
    ----------
    forged
        Address below an association with its name first, or from "inference" on, and the value there; ``None`` takes
        the key away.
    """
    files = _filed(invented.spec_text(), invented.data_text())
    for name, content in files.items():
        (folder / name).write_bytes(content)
    plain: Any = json.loads(files["analysis.json"])
    for key, value in forged:
        *way, last = key.split("/")
        part = plain if way[0] == "inference" else plain["associations"]
        for step in way:
            part = part[int(step)] if isinstance(part, list) else part[step]
        if value is None:
            del part[last]
        else:
            part[last] = value
    found: list[str] = []
    for check in (
        checker.check_associations,
        checker.check_waivers,
        checker.check_sizes,
        checker.check_intervals,
        checker.check_more_variables,
        checker.check_findings,
        checker.check_results,
    ):
        check(folder, plain, found)
    return found


@cache
def _filed(spec_text: str, data_text: str) -> Mapping[str, bytes]:
    analysis = analyse(*read_texts(spec_text, {"received/trials.csv": data_text}))
    plain = analysis_to_plain(analysis)
    return {
        **record_tables(analysis, plain),
        "plan.json": readable_bytes(plan_of(analysis.spec)),
        "analysis.json": readable_bytes(plain),
    }
