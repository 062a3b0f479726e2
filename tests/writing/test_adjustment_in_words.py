"""What is said of an adjustment: what alpha bounds, on which condition, by which permutations, with which error."""

from dataclasses import replace

import pytest

from analysis.invented import RISING, Invented, association
from rankdocket.document.model import FieldList, Paragraph
from rankdocket.document.prose import lint_document, text_of
from writing.reports import Told, told

COLUMNS = {"u": RISING, "v": "2 1 8 5 4 3 7 6 9 10", "w": "4 7 1 9 3 10 2 6 8 5"}
PLAN = {"A1": association(), "A2": association("w", "u")}
ANY = "the chance of any false finding"
SHARE = "the false discovery rate"
RULES = {
    "Holm": ANY,
    "Hochberg": ANY,
    "Bonferroni": ANY,
    "step-down maxT": ANY,
    "Benjamini-Hochberg": SHARE,
    "Benjamini-Yekutieli": SHARE,
}


def of(adjust: str, seed: int = 7, **parts: dict[str, str]) -> Told:
    """Return the report on two associations of one variable, adjusted by a rule."""
    inference = f"alpha: 0.05, several_tests: {{adjust: {adjust}}}, p_value: {{permutations: 999, seed: {seed}}}"
    base = Invented(columns=COLUMNS, associations=PLAN, inference=inference)
    return told(replace(base, **parts).analysed())  # type: ignore[arg-type]


def notes(report: Told) -> str:
    return " ".join(text_of(note) for note in report.table("results").notes)


def numbers_of_spread(report: Told, name: str) -> dict[str, str]:
    block = report.block(f"numbers-{name}")
    assert isinstance(block, FieldList)
    return {head: text_of(content) for head, content in block.rows}


@pytest.mark.parametrize(("adjust", "what"), RULES.items())
def test_what_alpha_bounds_is_said_wherever_the_finding_is(adjust: str, what: str) -> None:
    """In the summary, below the table of results and in the methods; the other bound is not claimed."""
    report = of(adjust)
    other = SHARE if what == ANY else "alpha bounds the chance of any"
    summary = " ".join(text_of(block.prose) for block in report.document.summary.blocks if isinstance(block, Paragraph))
    assert f"By the adjustment of the family ({adjust}) alpha bounds {what}" in summary
    assert f"By the adjustment of the family ({adjust}) alpha bounds {what}" in notes(report)
    assert other not in summary + notes(report)
    assert lint_document(report.document) == ()
    assert text_of(report.table("results").columns[9].head) == f"p, adjusted ({adjust})"


@pytest.mark.parametrize("adjust", RULES)
def test_one_test_alone_is_said_to_bound_nothing_else(adjust: str) -> None:
    """A family of one has nothing to share, and no condition."""
    report = of(adjust, associations={"A1": association()})
    assert "alpha bounds" not in report.text()
    assert report.caveats()["condition_of_adjustment"] == []


CONDITIONS = {
    "Holm": (),
    "Bonferroni": (),
    "Hochberg": ("depend on one another positively, or not at all", "Holm’s rule needs no such condition."),
    "Benjamini-Hochberg": (
        "some may be false",
        "depend positively, or not at all",
        "Yekutieli needs no such condition.",
    ),
    "Benjamini-Yekutieli": ("however p-values depend on one another", "some may be false"),
    "step-down maxT": ("value of u is independent of all the variables of true nulls taken together",),
}


@pytest.mark.parametrize(("adjust", "words"), CONDITIONS.items())
def test_the_condition_of_a_rule_is_a_caveat(adjust: str, words: tuple[str, ...]) -> None:
    """Rules that hold under any dependence and bound the chance of any false finding have none."""
    found = of(adjust).caveats()["condition_of_adjustment"]
    assert len(found) == bool(words)
    assert all(part in found[0] for part in words)


def test_the_permutations_of_a_family_are_told_with_their_error() -> None:
    """How many there were, how many reached the observed coefficient, from which seed, and between which ends."""
    report = of("step-down maxT")
    methods = " ".join(report.methods())
    assert "the ranks of value of u were put in random order 999 times, from seed 7" in methods
    assert "(subset pivotality)" in methods
    rows = numbers_of_spread(report, "A1")
    finding = report.analysis.findings["A1"]
    assert finding.max_t is not None
    assert f"in {finding.max_t.hits} of 999 permutations of the family" in rows["p, adjusted"]
    assert rows["Error of these draws"].startswith("95% interval of the share in all permutations: 0.0")
    assert "condition" not in notes(report)
    assert "if value of u is independent of all the variables of true nulls taken together" in notes(report)


def test_permutations_counted_one_and_all_have_no_error() -> None:
    """Five rows have 120."""
    columns = {"u": "1 2 3 4 5", "v": "1 2 3 5 4", "w": "2 1 3 4 5"}
    report = of("step-down maxT", columns=columns)
    rows = numbers_of_spread(report, "A1")
    assert rows["p, adjusted"].startswith("0.133: in 16 of 120 permutations of the family")
    assert "Error of these draws" not in rows
    assert "in every order of the ranks of value of u" in report.text()


def test_an_adjusted_p_set_to_its_own_says_so() -> None:
    """Two associations of the same values: drawn below the counted p by some seed, above it by another."""
    told_so = set()
    for seed in range(6):
        report = of("step-down maxT", seed, associations={"A1": association(), "A2": association()})
        finding = report.analysis.findings["A1"]
        assert finding.max_t is not None
        said = "its own, as the permutations of the family gave less" in numbers_of_spread(report, "A1")["p, adjusted"]
        assert said == (finding.max_t.share < (finding.p_adjusted or 0))
        told_so.add(said)
    assert told_so == {True, False}


def test_draws_of_a_family_that_leave_the_side_open_are_a_caveat() -> None:
    """With alpha at the drawn value itself."""
    share = of("step-down maxT").analysis.findings["A1"].p_adjusted
    assert share is not None
    inference = (
        f"alpha: {float(share)}, several_tests: {{adjust: step-down maxT}}, p_value: {{permutations: 999, seed: 7}}"
    )
    report = told(Invented(columns=COLUMNS, associations=PLAN, inference=inference).analysed())
    (caveat,) = report.caveats()["undecided"]
    assert caveat.startswith("A1: undecided by the draws of the family. With the adjusted p at another place")
    assert caveat.endswith("A plan with more permutations may settle the side.")
    row = next(row for row in report.table("results").rows if text_of(row[0]) == "A1")
    assert "exactly" not in text_of(row[9])  # never said of what was drawn
