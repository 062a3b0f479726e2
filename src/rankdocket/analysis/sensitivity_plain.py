"""Sensitivity tables to plain data: each row under its key, its figures as filed, what is missing with its reason."""

from decimal import Decimal

from rankdocket.analysis.filing import filed, filed_beside
from rankdocket.analysis.results import Analysis
from rankdocket.analysis.sensitivity.cheap import DRAWS, RESAMPLES
from rankdocket.analysis.sensitivity.table import NoTable, SensitivityTable, TableRow
from rankdocket.canonical import Plain
from rankdocket.stats.all_orders import MOST_ENUMERATED
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.removals import EXHAUSTIVE_N, EXHAUSTIVE_ROWS


def sensitivity_to_plain(table: SensitivityTable | NoTable | None, alpha: Decimal) -> dict[str, Plain]:
    """Return the table of one association as the key ``sensitivity``; nothing where none was asked for."""
    if table is None:
        return {}
    if isinstance(table, NoTable):
        return {"sensitivity": {"state": "none", "reason": table.reason}}
    return {
        "sensitivity": {
            "state": "made",
            "rows": {row.key: _row(row, alpha) for row in table.rows},
            "tally": {"asked": len(table.asked), "changing": len(table.answering_yes)},
        }
    }


def sensitivity_rules_to_plain(analysis: Analysis) -> dict[str, Plain]:
    """Return the figures that all tables share, where there is a table."""
    if not any(isinstance(table, SensitivityTable) for table in analysis.sensitivity.values()):
        return {}
    return {
        "sensitivity": {
            "draws": DRAWS,
            "resamples": RESAMPLES,
            "enumerated_rows": MOST_ENUMERATED,
            "exhaustive_rows": EXHAUSTIVE_ROWS,
            "exhaustive_n": EXHAUSTIVE_N,
        }
    }


def _row(row: TableRow, alpha: Decimal) -> dict[str, Plain]:
    plain: dict[str, Plain] = {
        "kind": row.kind,
        "label": row.label,
        "standing": row.standing,
        "change": row.verdict.change,
    }
    if row.verdict.finding is not None:
        plain["finding"] = row.verdict.finding
    if row.verdict.reason:
        plain["reason"] = row.verdict.reason
    if row.absent is not None:
        plain["absent"] = row.absent
    return {**plain, **_figures(row, alpha), **_which_rows(row)}


def _figures(row: TableRow, alpha: Decimal) -> dict[str, Plain]:
    plain: dict[str, Plain] = {}
    if row.value is not None:
        plain["value"] = row.value.decimal_text() if isinstance(row.value, Coefficient) else row.value.decimal_text
        plain["n"] = row.value.n if isinstance(row.value, Coefficient) else len(row.value.x)
    if row.p is not None:
        plain |= {"p": filed_beside(row.p.p, alpha), "method": row.p.method}
        if row.p.draws is not None:
            plain |= {"draws": row.p.draws, "stream": list(row.p.stream)}
    if row.interval is not None:
        interval = row.interval
        plain |= {
            "low": filed(interval.low),
            "high": filed(interval.high),
            "level": str(interval.level),
            "by": interval.method,
        }
        if interval.resampled is not None:
            plain |= {"resamples": interval.resampled.drawn, "undefined_resamples": interval.resampled.undefined}
    return plain


def _which_rows(row: TableRow) -> dict[str, Plain]:
    plain: dict[str, Plain] = {}
    if row.rows is not None:
        plain["lines"] = list(row.rows.lines)
        if row.rows.reason is not None:
            plain["because"] = row.rows.reason
    if row.ends is not None:
        plain |= {
            "lowest": row.ends.low.decimal_text(),
            "lowest_without": row.ends.low_line,
            "highest": row.ends.high.decimal_text(),
            "highest_without": row.ends.high_line,
        }
        if row.ends.changing is not None:
            plain["changing_rows"] = row.ends.changing
    if row.search is not None:
        plain |= {"tried": row.search.tried, "most": row.search.most}
        if row.search.how_sure is not None:
            plain["how_sure"] = row.search.how_sure
    return plain
