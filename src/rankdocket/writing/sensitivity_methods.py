"""What the methods text says of the sensitivity tables: the rules that ran, each once."""

from rankdocket.analysis.sensitivity.table import SensitivityTable, TableRow
from rankdocket.document.model import Number, Prose
from rankdocket.document.prose import joined, only, prose
from rankdocket.references import Description
from rankdocket.stats.intervals import INTERVAL_METHODS
from rankdocket.stats.intervals.bca_bootstrap import KEY as BOOTSTRAP
from rankdocket.stats.leave_one_out import LEAVE_ONE_OUT
from rankdocket.stats.product_moment import PRODUCT_MOMENT
from rankdocket.stats.removals import REMOVALS
from rankdocket.stats.studentised import STUDENTISED
from rankdocket.writing.citations import cite
from rankdocket.writing.described import described
from rankdocket.writing.section import Story


def sensitivity_paragraph(story: Story, printed: frozenset[str]) -> Prose:
    """Return the paragraph; empty without any table.

    Parameters
    ----------
    story
        The study.
    printed
        Keys of the interval rules that the text describes already.
    """
    rows = [
        row
        for table in story.analysis.sensitivity.values()
        if isinstance(table, SensitivityTable)
        for row in table.rows
    ]
    if not rows:
        return only("")
    parts = [
        only(
            "What other methods, and other rows, would have said is tabulated for each estimated association. P-values of "
            "these tables were counted where that is cheap, and otherwise taken from a series or from few drawn permutations "
            "that were looked at once; their error was not chased. Where thousands of subsets of the rows were looked "
            "through, coefficients clear of the bound at which the finding changes were compared with that bound for all "
            "rows, on the scale of the standardised coefficient."
        )
    ]
    parts += [described(description, **slots) for description, slots in _descriptions(story, rows)]
    ran = {row.interval.method for row in rows if row.interval is not None} - printed
    others = tuple(
        prose("{label} {cite}", label=method.label, cite=cite(*method.describe.cites))
        for method in INTERVAL_METHODS
        if method.key in ran
    )
    if others:
        parts.append(prose("Intervals were made by other rules as well: {rules}.", rules=joined(others, "; ")))
    if BOOTSTRAP in ran:
        parts.append(
            prose("Resamples drawn for the bootstrap: {number}.", number=story.numbers.whole("sensitivity/resamples"))
        )
    return joined(tuple(parts))


def _descriptions(story: Story, rows: list[TableRow]) -> list[tuple[Description, dict[str, Number]]]:
    numbers = story.numbers
    found: list[tuple[Description, dict[str, Number]]] = []
    slots = {"enumerated": numbers.whole("sensitivity/enumerated_rows"), "draws": numbers.whole("sensitivity/draws")}
    tested = {row.kind for row in rows if row.p is not None}
    found += [
        (rule, slots)
        for kind, rule in (("product-moment", PRODUCT_MOMENT), ("studentised", STUDENTISED))
        if kind in tested
    ]
    if any(row.ends is not None for row in rows):
        found.append((LEAVE_ONE_OUT, {}))
    if any(row.search is not None for row in rows):
        found.append((REMOVALS, {"exhaustive": numbers.whole("sensitivity/exhaustive_rows")}))
    return found
