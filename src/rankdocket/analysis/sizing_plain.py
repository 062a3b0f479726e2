"""The answer about rows as plain data: every number of the page stands here under its address."""

from collections.abc import Mapping
from decimal import Decimal

from rankdocket.analysis.filing import filed
from rankdocket.analysis.sizing import Circumstances, Curve, Line, MeasureAnswer, ShowAnswer, SizeAnswer
from rankdocket.canonical import Plain
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.sample_size import RowsNeeded

SIZE_SCHEMA = "urn:rankdocket:size:1"


def size_to_plain(answer: SizeAnswer, program: str) -> dict[str, Plain]:
    """Return an answer as plain data; ``program`` is the program's own version."""
    match answer:
        case ShowAnswer():
            aim, found = _show(answer)
        case MeasureAnswer():
            aim, found = _measure(answer)
    return {
        "schema": SIZE_SCHEMA,
        "program": program,
        "question": {**aim, **_circumstances(answer.question.rows)},
        "rho_left": filed(answer.left),
        "rows": answer.rows,
        "rows_to_collect": answer.question.rows.collected(answer.rows),
        **found,
    }


def _show(answer: ShowAnswer) -> tuple[dict[str, Plain], dict[str, Plain]]:
    question, needed = answer.question, answer.needed
    aim: dict[str, Plain] = {
        "aim": "to show",
        "rho": str(question.rho),
        "power": str(question.power),
        "alpha": str(question.alpha),
        "sidedness": question.sidedness,
        "questions": question.questions,
        "alpha_each": filed(question.planned.tail * (2 if question.sidedness == "two-sided" else 1)),
    }
    found: dict[str, Plain] = {
        "formula_from": answer.formula_from,
        "power_may_be_overstated": answer.is_overstated,
        "power": _value(answer.power),
        "smallest_rho": _value(answer.smallest),
        "interval_width": _value(answer.width),
        "fewest_attainable": needed.fewest_attainable,
        "by_form": {
            "two variances": _needed(needed.two_variances),
            "Bonett-Wright": _needed(needed.bonett_wright),
            "Fieller-Hartley-Pearson": _needed(needed.fieller),
            "Fisher": _needed(needed.fisher),
        },
        "table": _table("powers", answer.powers, answer.lines),
        "curves": [_curve(curve, "power") for curve in answer.curves],
    }
    return aim, found


def _measure(answer: MeasureAnswer) -> tuple[dict[str, Plain], dict[str, Plain]]:
    question = answer.question
    mean, textbook = answer.curves
    aim: dict[str, Plain] = {"aim": "to measure", "rho": str(question.rho), "width": str(question.width)}
    found: dict[str, Plain] = {
        "width": filed(answer.width),
        "factor": filed(answer.factor),
        "textbook": _needed(answer.textbook),
        "table": _table("widths", answer.widths, answer.lines),
        "curves": [_curve(mean, "width"), _curve(textbook, "width")],
    }
    return aim, found


def _circumstances(rows: Circumstances) -> dict[str, Plain]:
    return {
        "level": str(rows.level),
        "missing": str(rows.missing),
        "expected_classes": [_shares(rows.first), _shares(rows.second)],
    }


def _shares(shares: tuple[Decimal, ...] | None) -> Plain:
    return None if shares is None else [str(share) for share in shares]


def _needed(needed: RowsNeeded) -> Mapping[str, Plain]:
    return {"raw": filed(needed.raw), "rows": needed.rows}


def _table(name: str, heads: tuple[Decimal, ...], lines: tuple[Line, ...]) -> Mapping[str, Plain]:
    return {
        name: [str(head) for head in heads],
        "lines": [
            {"rho": str(line.rho), "rho_left": filed(line.left), "rows": [_rows(each) for each in line.needed]}
            for line in lines
        ],
    }


def _rows(needed: int | NoAnswer) -> Plain:
    return {"reason": needed.reason} if isinstance(needed, NoAnswer) else needed


def _value(found: float | NoAnswer) -> Plain:
    return {"reason": found.reason} if isinstance(found, NoAnswer) else filed(found)


def _curve(curve: Curve, name: str) -> Mapping[str, Plain]:
    return {
        "rho": str(curve.rho),
        "points": [{"rows": rows, name: filed(value)} for rows, value in curve.points],
    }
