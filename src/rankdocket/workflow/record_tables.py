"""The tables of a record copy that a stranger's spreadsheet opens: rows used, ranks, results."""

import csv
import io
from collections.abc import Iterable, Mapping
from typing import Final

from rankdocket.analysis.deciding import deciding_p, deciding_test
from rankdocket.analysis.filing import filed, filed_value
from rankdocket.analysis.results import Analysis, AssociationAnalysis, Estimate, RankTest
from rankdocket.analysis.size_results import SizeAnalysis
from rankdocket.canonical import Plain
from rankdocket.document.numbers import look_up
from rankdocket.render.text import defused
from rankdocket.stats.interval import Interval
from rankdocket.workflow.more_rows import MORE_ROWS, MORE_ROWS_HEAD, asks_for_more_rows, more_rows

_ABSENT: Final = ""


def record_tables(analysis: Analysis, plain: Mapping[str, Plain]) -> dict[str, bytes]:
    """Return file name → CSV bytes (RFC 4180 with LF, UTF-8)."""
    tables = {"rows.csv": _rows(analysis), "results.csv": _results(analysis, plain)}
    for name, result in analysis.results.items():
        tables[f"ranks-{name}.csv"] = _ranks(name, result, plain)
    if asks_for_more_rows(analysis.spec):
        tables[MORE_ROWS] = _csv(MORE_ROWS_HEAD, more_rows(analysis))
    return tables


def _rows(analysis: Analysis) -> bytes:
    head = ("association", "row", "x", "y", "x_value", "y_value")
    return _csv(
        head,
        (
            (name, str(row.row), row.x_literal, row.y_literal, filed_value(row.x), filed_value(row.y))
            for name, result in analysis.results.items()
            for row in result.screened.rows
        ),
    )


def _ranks(name: str, result: AssociationAnalysis, plain: Mapping[str, Plain]) -> bytes:
    columns = ("rank_x", "rank_y", "difference", "squared")
    at = f"associations/{name}/worksheet"
    return _csv(
        ("row", "x", "y", *columns),
        (
            (
                str(row.row),
                row.x_literal,
                row.y_literal,
                *(str(look_up(plain, f"{at}/{column}/{position}")) for column in columns),
            )
            for position, row in enumerate(result.screened.rows)
        ),
    )


def _results(analysis: Analysis, plain: Mapping[str, Plain]) -> bytes:
    head = (
        "association", "x", "y", "n", "coefficient", "value", "interval_low", "interval_high",
        "interval_level", "interval_by", "p", "sidedness", "p_by", "finding_by", "p_of_finding", "p_adjusted", "size_verdict", "finding",
    )  # fmt: skip
    return _csv(head, (_result(name, result, analysis, plain) for name, result in analysis.results.items()))


def _result(name: str, result: AssociationAnalysis, analysis: Analysis, plain: Mapping[str, Plain]) -> tuple[str, ...]:
    at = f"associations/{name}"
    spec, finding = result.screened.spec, analysis.findings[name]
    interval = result.interval if isinstance(result.interval, Interval) else None
    tested = isinstance(result.test, RankTest)
    return (
        name,
        spec.x,
        spec.y,
        str(result.screened.flow.complete),
        spec.coefficient,
        str(look_up(plain, f"{at}/estimate/value")) if isinstance(result.estimate, Estimate) else _ABSENT,
        filed(interval.low) if interval else _ABSENT,
        filed(interval.high) if interval else _ABSENT,
        str(interval.level) if interval else _ABSENT,
        interval.method if interval else _ABSENT,
        str(look_up(plain, f"{at}/test/p")) if tested else _ABSENT,
        analysis.spec.inference.sidedness,
        str(look_up(plain, f"{at}/test/method")) if tested else _ABSENT,
        deciding_test(spec),
        str(look_up(plain, f"{at}/finding/p")) if deciding_p(result) is not None else _ABSENT,
        str(look_up(plain, f"{at}/finding/p_adjusted")) if finding.p_adjusted is not None else _ABSENT,
        result.size.size.verdict if isinstance(result.size, SizeAnalysis) and result.size.size else _ABSENT,
        finding.word or "no finding",
    )


def _csv(head: tuple[str, ...], rows: Iterable[tuple[str, ...]]) -> bytes:
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(head)
    for row in rows:
        writer.writerow([defused(cell) for cell in row])
    return text.getvalue().encode("utf-8")
