"""The catalogue of caveats: for each rule a study in which it speaks and one in which it is silent."""

import inspect
from dataclasses import replace

import pytest

from analysis.invented import FALLING, INDEPENDENT, MIXED, RISING, Invented, association
from rankdocket.document.model import CaveatBlock
from rankdocket.document.prose import lint, text_of
from rankdocket.writing import caveats
from rankdocket.writing.caveat import CaveatRule
from rankdocket.writing.caveats import CAVEATS, requirements, results, study
from writing.reports import EVERY_FINDING, Told, demonstration_report, study_of_every_finding, told

QUIET = Invented(columns={"u": RISING, "v": "1 3 2 5 4 7 6 9 8 10"})
"""Ten rows nearly in order: nothing to say but what is said of every report."""

TAU = {"A1": association(more="coefficient: Kendall tau-b")}
LEFT_OUT = INDEPENDENT + ', leave_out: [{where: {v: "10"}, reason: the rig was broken}]'
SMALL_ORDERED = {"u": "1 2 3 4 5", "v": "1 3 2 5 4"}
LOPSIDED = {"u": "1 1 1 2", "v": "1 1 1 2"}
DRAWN = "alpha: {alpha}, p_value: {{by: permutation, permutations: 999, seed: 5}}"
TWELVE = {"u": RISING + " 11 12", "v": MIXED + " 12 11"}
"""Twelve rows whose p is 0.094 over all orderings."""

ALWAYS = {"association_only", "decision"}
"""Rules that hold for every report."""

SPEAKS: dict[str, Invented] = {
    "dependent_rows": replace(QUIET, rows="leave_out: []"),
    "supplied_words": replace(QUIET, study="title: Load causes creep, question: Do they rise together?"),
    "not_estimable": replace(QUIET, columns={"u": RISING, "v": "5 " * 10}),
    "requirements": replace(QUIET, requirements="fewest_complete_rows: 11"),
    "straddles_alpha": replace(QUIET, columns=TWELVE, inference=DRAWN.format(alpha="0.1")),
    "two_sided_rule": replace(QUIET, columns=LOPSIDED, inference="alpha: 0.3"),
    # n=10, sum of squared differences 58: exact p 0.049, while the interval of Bonett & Wright 2000 holds 0.
    "test_and_interval": replace(QUIET, columns={"u": RISING, "v": "3 4 1 9 2 5 6 8 10 7"}),
    "perfect_agreement": replace(QUIET, columns={"u": RISING, "v": FALLING}),
    "small_sample": replace(QUIET, columns=SMALL_ORDERED),
    "left_out_rows": replace(QUIET, rows=LEFT_OUT),
    "incomplete_rows": replace(QUIET, columns={"u": RISING, "v": "1 3 2 5 4 7 - 9 8 10"}),
    "no_interval": replace(QUIET, associations=TAU),
    "interval_basis": QUIET,
    "association_only": QUIET,
    "independence_null": QUIET,
    "decision": QUIET,
}

IS_SILENT: dict[str, Invented] = {
    **{rule.key: QUIET for rule in CAVEATS},
    "supplied_words": replace(QUIET, study="title: Load and creep, question: Do they rise together?"),
    "straddles_alpha": replace(QUIET, columns=TWELVE, inference=DRAWN.format(alpha="0.05")),
    "two_sided_rule": replace(QUIET, columns=LOPSIDED, inference="alpha: 0.2"),
    "no_interval": QUIET,
    "interval_basis": replace(QUIET, associations=TAU),
    "independence_null": replace(QUIET, rows="leave_out: []"),
}


def caveats_of(invented: Invented) -> dict[str, list[str]]:
    return told(invented.analysed()).caveats()


@pytest.mark.parametrize("rule", CAVEATS, ids=[rule.key for rule in CAVEATS])
def test_a_rule_speaks_where_it_should(rule: CaveatRule) -> None:
    """Each caveat is a sentence; it stands in the report under a number of its own."""
    report = told(SPEAKS[rule.key].analysed())
    found = report.caveats()[rule.key]
    assert found
    assert all(sentence.endswith(".") for sentence in found)
    printed = [text_of(caveat.block.prose) for caveat in report.story.caveats]
    assert set(found) <= set(printed)
    in_section = [block for block in report.section("requirements").blocks if isinstance(block, CaveatBlock)]
    assert [block.number for block in in_section] == list(range(1, len(printed) + 1))
    assert [text_of(block.prose) for block in in_section] == printed


@pytest.mark.parametrize("rule", [rule for rule in CAVEATS if rule.key not in ALWAYS], ids=lambda rule: rule.key)
def test_a_rule_is_silent_where_it_should_be(rule: CaveatRule) -> None:
    """The study differs in what the rule looks at."""
    assert caveats_of(IS_SILENT[rule.key])[rule.key] == []


@pytest.mark.parametrize("name", ALWAYS)
def test_two_cautions_stand_in_every_report(name: str) -> None:
    """Also where nothing could be estimated."""
    nothing = replace(QUIET, columns={"u": "1 2", "v": "1 2"})
    for report in (told(nothing.analysed()), study_of_every_finding(), demonstration_report("gasket-creep")):
        assert len(report.caveats()[name]) == 1


def test_the_quiet_study_has_only_general_cautions() -> None:
    """A study without oddities is not drowned in sentences."""
    spoken = {key for key, found in caveats_of(QUIET).items() if found}
    assert spoken == ALWAYS | {"interval_basis", "independence_null"}


def test_the_catalogue_holds_every_rule_once_with_a_weight_of_its_own() -> None:
    """A rule that is written and not listed would never speak."""
    written = [
        rule
        for module in (requirements, results, study)
        for _, rule in inspect.getmembers(module, lambda value: isinstance(value, CaveatRule))
    ]
    assert {rule.key for rule in written} == {rule.key for rule in CAVEATS}
    assert len({rule.key for rule in CAVEATS}) == len(CAVEATS)
    assert len({rule.weight for rule in CAVEATS}) == len(CAVEATS)
    assert set(SPEAKS) == set(IS_SILENT) == {rule.key for rule in CAVEATS}
    assert caveats.CAVEATS is CAVEATS


WORDS = {
    "dependent_rows": (
        "Every test is withheld: the plan does not say whether rows are repeated or in time order. Rows that belong "
        "together, treated as if they did not, give false findings far more often than alpha says."
    ),
    "supplied_words": (
        "The words supplied at study.title say “causes”. That is more than a rank correlation can support; they are "
        "printed as supplied and are not a result."
    ),
    "not_estimable": (
        "A1 is not estimable: the second variable has one value in all complete rows. It keeps its place in the family "
        "and in every table."
    ),
    "requirements": (
        "A1: the requirement “enough complete rows” is not met: fewer complete rows than the plan asks for (found 10, "
        "limit 11). The estimate is given without a test."
    ),
    "two_sided_rule": (
        "A1: the ties make the null lopsided. Counting orderings at least as far from zero gives p = 0.250; doubling "
        "the smaller tail would give 0.500. The plan’s rule is the first."
    ),
    "test_and_interval": (
        "A1: test and interval point different ways (p = 0.049; interval −0.04 to 0.92). They are built differently; "
        "the test decides about the association, the interval describes its size."
    ),
    "perfect_agreement": (
        "A1: all rows follow one order, so that the sample holds no disagreement from which an error could be "
        "estimated; for the interval half of the smallest visible disagreement was assumed."
    ),
    "small_sample": (
        "A1: with so few rows the data exclude little. The interval is indicative; the test from all orderings of the "
        "rows is the primary result."
    ),
    "left_out_rows": "The plan leaves out 1 of 10 rows of table trials; each is listed with its reason in section 2.",
    "incomplete_rows": (
        "Rows lacking a value were set aside for the association concerned (A1 10% of the rows that the plan does not "
        "leave out). That is harmless only if values are missing for reasons that have nothing to do with what would "
        "have been observed."
    ),
    "no_interval": "A1: no interval is offered for tau-b yet.",
}


@pytest.mark.parametrize("key", list(WORDS))
def test_a_caveat_in_words(key: str) -> None:
    """The sentence as it stands, numbers and all (golden)."""
    assert [sentence.replace("\u00a0", " ") for sentence in caveats_of(SPEAKS[key])[key]] == [WORDS[key]]


def test_supplied_words_are_quoted_wherever_they_stand() -> None:
    """Title, questions, labels, reasons: each place is named, each phrase quoted as supplied."""
    invented = replace(
        QUIET,
        study="title: Load proves it, question: Does load drive creep?",
        variables={"u": "label: effect of load, scale: measured, unit: N"},
        associations={"A1": association().replace("Do u and v rise together?", "Is there no association?")},
        rows=INDEPENDENT + ", independent_because: it is guaranteed",
    )
    report = told(invented.analysed(), reason="The client wants highly significant results")
    found = "\n".join(report.caveats()["supplied_words"])
    for where, phrase in (
        ("study.title", "proves"),
        ("study.question", "drive"),
        ("variables.u.label", "effect of"),
        ("associations.A1.question", "no association"),
        ("rows.independent_because", "guaranteed"),
        ("the reason for this edition", "highly significant"),
    ):
        assert f"supplied at {where} say “{phrase}”" in found
    assert lint(report.text())  # they are printed as supplied


@pytest.mark.parametrize(
    ("requirement", "expected"),
    [
        ("fewest_complete_rows: 11, if_not_met: test with caveat", "The result stands with this reservation."),
        ("fewest_complete_rows: 11, if_not_met: withhold all", "Neither an estimate nor a test is given."),
        ("fewest_complete_rows: 11, if_not_met: estimate without test", "The estimate is given without a test."),
    ],
)
def test_a_caveat_on_a_requirement_says_what_is_given_in_the_end(requirement: str, expected: str) -> None:
    """A requirement that withholds nothing does not promise a result that another one withholds."""
    tied = replace(QUIET, columns={"u": RISING, "v": "1 1 1 1 1 1 2 2 2 2"}, requirements=requirement)
    found = caveats_of(tied)["requirements"]
    assert len(found) == 2
    assert all(sentence.endswith(expected) for sentence in found)


def test_a_caveat_promises_nothing_for_what_cannot_be_estimated() -> None:
    """Two rows are too few for the plan and for any coefficient."""
    found = caveats_of(replace(QUIET, columns={"u": "1 2", "v": "1 2"}, requirements="fewest_complete_rows: 5"))
    assert all(sentence.endswith("No coefficient exists for these rows.") for sentence in found["requirements"])
    outside = replace(
        QUIET,
        columns={"u": "1 2", "v": "1 2"},
        associations={"A1": association(role="exploratory")},
    )
    assert caveats_of(outside)["not_estimable"][0].endswith("It keeps its place in every table.")


def test_a_small_sample_without_a_counted_test_promises_none() -> None:
    """Where the test is withheld, or drawn, it is not called the primary result."""
    small = replace(QUIET, columns=SMALL_ORDERED)
    for invented in (replace(small, rows="leave_out: []"), replace(small, inference=DRAWN.format(alpha="0.05"))):
        assert caveats_of(invented)["small_sample"] == [
            "A1: with so few rows the data exclude little. The interval is indicative."
        ]


def test_perfect_order_without_an_interval_assumes_nothing_for_it() -> None:
    """Three rows, and tau-b, have no interval."""
    for invented in (
        replace(QUIET, columns={"u": "1 2 3", "v": "1 2 3"}),
        replace(QUIET, columns={"u": RISING, "v": RISING}, associations=TAU),
    ):
        (sentence,) = caveats_of(invented)["perfect_agreement"]
        assert sentence.endswith("from which an error could be estimated.")


def test_a_report_points_from_an_association_to_its_caveats() -> None:
    """The master table and the spread give the numbers under which they stand."""
    report: Told = study_of_every_finding()
    table = report.table("results")
    for row in table.rows:
        name = text_of(row[0])
        numbers = [str(caveat.block.number) for caveat in report.story.caveats_about(name)]
        assert text_of(row[-1]) == (", ".join(numbers) or "–")
    assert EVERY_FINDING.associations.keys() == {text_of(row[0]) for row in table.rows}
