"""A screening as numbered sentences for a terminal, in our own order."""

from collections.abc import Iterator
from fractions import Fraction

from rankdocket.analysis.checks import CHECKS
from rankdocket.analysis.could_show import strictest_level
from rankdocket.analysis.results import CheckOutcome, Measure
from rankdocket.analysis.screening import Screening
from rankdocket.analysis.variables import VariableSummary, summarise
from rankdocket.document.numbers import Numbers
from rankdocket.writing.could_show import could_show_words
from rankdocket.writing.phrases import full_stop, outcome_words

_LABELS = {check.key: check.label for check in CHECKS}


def screening_page(screening: Screening) -> str:
    """Return the screening page."""
    sections = (
        ("What arrived", _arrived(screening)),
        ("How it was read", _read(screening)),
        ("Each variable alone", _variables(screening)),
        ("Keys and partners", iter(("No table is joined with another in this study.",))),
        ("Questions to the client", _questions(screening)),
        ("What this sample could show", _could_show(screening)),
    )
    lines: list[str] = [f"Screening of {screening.spec.study.number}: no joint result is shown."]
    number = 0
    for title, sentences in sections:
        lines += ["", title]
        for sentence in sentences:
            number += 1
            lines.append(f"  {number}. {sentence}")
    return "\n".join(lines)


def _arrived(screening: Screening) -> Iterator[str]:
    for name, table in screening.data.tables.items():
        received = f", received {table.spec.received_on}" if table.spec.received_on else ""
        yield (
            f"Table {name}: {table.source.path}, {table.source.size:,} bytes{received}, SHA-256 {table.source.digest[:12]}…, "
            f"{len(table.row_numbers):,} rows."
        )


def _read(screening: Screening) -> Iterator[str]:
    for name, table in screening.data.tables.items():
        codes = ", ".join(f"{code or 'blank'!s} ({meaning})" for code, meaning in table.spec.missing_codes.items())
        yield (
            f"Table {name}: {table.spec.text_encoding}, decimal mark “{table.spec.decimal_mark}”, names from line "
            f"{table.spec.column_names_in_row}, missing: {codes or 'no code declared'}."
        )
    rows = screening.spec.rows
    yield f"One row is {rows.one_row_is}. Repeated within: {rows.repeated_within or 'not stated'}. Time order: {rows.time_order or 'not stated'}."


def _variables(screening: Screening) -> Iterator[str]:
    for variable in screening.data.variables.values():
        found = summarise(variable, screening.spec, screening.data)
        yield f"{variable.spec.label}: {_summary(found, variable.spec.unit)}"


def _summary(found: VariableSummary, unit: str | None) -> str:
    missing = ", ".join(f"{meaning} {rows}" for meaning, rows in found.missing.items()) or "none declared"
    in_unit = f" {unit}" if unit and unit != "1" else ""
    spread = (
        f" Smallest, quartiles, largest: {' · '.join(found.five)}{in_unit}." if found.five else " No value is present."
    )
    return f"n {found.n}; missing: {missing}; distinct values: {found.distinct}; largest tie group: {found.largest_tie}.{spread}"


def _questions(screening: Screening) -> Iterator[str]:
    asked = False
    for name, outcomes in screening.outcomes.items():
        for outcome in outcomes:
            if outcome.state in ("not met", "doubtful"):
                asked = True
                yield f"{name}: {_LABELS[outcome.key].lower()} is {outcome_words(outcome)}: {outcome.reason}{_figures(screening, name, outcome)}."
                if outcome.waived is not None:
                    yield f"{name}: the plan waives that, with the reason: {full_stop(outcome.waived).text}"
    if screening.seedless:
        asked = True
        yield (
            f"{', '.join(screening.seedless)}: permutations must be drawn and the plan states no seed. Write one, as "
            "p_value: {by: exact when possible, seed: 417} with a number of your own."
        )
    if screening.unlike:
        asked = True
        yield (
            f"{', '.join(screening.unlike)}: the complete rows are not those of the family’s first association, and "
            "step-down maxT needs the same ones. Leave out the rows that lack a value in any of them, by leave_out and "
            "with a reason, or write adjust: Holm."
        )
    if not asked:
        yield "None: every requirement that can be looked at now is met."


def _could_show(screening: Screening) -> Iterator[str]:
    for name, outcomes in screening.outcomes.items():
        rows = screening.screened[name].flow.complete
        attainable = next((item for item in outcomes if item.key == "attainable_p" and item.found is not None), None)
        if attainable is None:
            yield f"{name}: {rows} complete rows; no rank correlation exists for them."
        else:
            is_strict = strictest_level(screening.spec.associations[name], screening.spec) < Fraction(
                screening.spec.inference.alpha
            )
            yield (
                f"{name}: {rows} complete rows; the smallest possible p is "
                f"{_printed(screening, name, attainable, attainable.found)}."
            )
            yield f"{name}: {could_show_words(_numbers(screening), name, is_strict=is_strict)}."


def _figures(screening: Screening, name: str, outcome: CheckOutcome) -> str:
    if outcome.found is None or outcome.limit is None:
        return ""
    return (
        f" (found {_printed(screening, name, outcome, outcome.found)}, "
        f"limit {_printed(screening, name, outcome, outcome.limit)})"
    )


def _numbers(screening: Screening) -> Numbers:
    spec = screening.spec
    return Numbers(
        screening.plain,
        spec.report.coefficient_decimals,
        spec.report.p_value_decimals,
        spec.report.number_style,
        spec.inference.alpha,
    )


def _printed(screening: Screening, name: str, outcome: CheckOutcome, measure: Measure | None) -> str:
    if measure is None:
        return ""
    numbers = _numbers(screening)
    side = "found" if measure is outcome.found else "limit"
    key = f"associations/{name}/checks/{outcome.key}/{side}"
    match measure.kind:
        case "count":
            return numbers.whole(key).text
        case "share":
            return numbers.share(key, f"associations/{name}/checks/{outcome.key}/limit").text
        case "percent":
            return numbers.percent(key).text
        case "p":
            return numbers.attainable_p(key).text if side == "found" else numbers.level(key).text
