"""The catalogue of caveats: for each rule a study in which it speaks and one in which it is silent."""

import inspect
from dataclasses import replace

import pytest

from analysis.invented import FALLING, INDEPENDENT, MIXED, RISING, Invented, association
from rankdocket.document.model import CaveatBlock, Link, Paragraph
from rankdocket.document.prose import lint, text_of
from rankdocket.writing import caveats
from rankdocket.writing.caveat import CaveatRule
from rankdocket.writing.caveats import (
    CAVEATS,
    adjustment,
    built_in,
    coverage,
    intervals,
    more_variables,
    requirements,
    results,
    sensitivity,
    shape,
    size,
    study,
)
from writing.reports import (
    EVERY_FINDING,
    Occasion,
    Told,
    demonstration_report,
    study_of_every_finding,
    told,
)

QUIET = Invented(columns={"u": RISING, "v": "3 1 2 4 6 5 9 7 10 8"})
"""Ten rows nearly in order: nothing to say but what is said of every report."""

NEAR = "5 1 2 4 6 3 8 10 9 7"
"""Ten values that rise with RISING: two-sided p 0.017."""

TAU = {"A1": association(more="coefficient: Kendall tau-b")}
TWO = {"A1": association(), "A2": association()}
LEFT_OUT = INDEPENDENT + ', leave_out: [{where: {v: "10"}, reason: the rig was broken}]'
SMALL_ORDERED = {"u": "1 2 3 4 5", "v": "1 3 2 5 4"}
ONE_STEP_SHORT = {"u": "1 1 1 2 3 3 4 4 4 4", "v": "1 1 2 2 2 3 4 4 4 4"}
"""Rho 0.953 beside a cap of 0.95: the widest step between midranks is 3 in both, their squares sum to 75 and 75."""
LONE = {"u": "1 1 1 1 1 1 1 1 1 2", "v": RISING}
"""Without its last row u does not vary."""
HALVES = {"u": RISING, "v": "1 1 1 1 1 2 2 2 2 2"}
BY_BONETT_WRIGHT = "interval: {by: Bonett-Wright}"
RESAMPLED = "alpha: 0.05, p_value: {seed: 3}, interval: {by: BCa bootstrap}"
LOPSIDED = {"u": "1 1 1 2", "v": "1 1 1 2"}
DRAWN = "alpha: {alpha}, p_value: {{by: permutation, permutations: 999, most_draws: 999, seed: 5}}"
TWELVE = {"u": RISING + " 11 12", "v": MIXED + " 12 11"}
"""Twelve rows whose p is 0.094 over all orderings."""

THREE_LEVELS = {
    "u": "1 " * 38 + "2 " * 22 + "3 " * 15,
    "v": "1 " * 37 + "2 " * 23 + "3 " * 15,
    "w": "1 " * 38 + "2 " * 21 + "3 " * 16,
}
"""Three levels nearly in order: intervals for rho by Bonett-Wright and for tau-b by the jackknife cover less there."""
DERIVED = replace(QUIET, variables={"v": "label: the ratio, scale: measured, unit: mm, derived_from: [u]"})
BENT = {
    "u": " ".join(str(place) for place in range(1, 21)),
    "v": " ".join(str(abs(10 * place - 103)) for place in range(1, 21)),
}
"""Twenty values that fall and rise again: rho 0.09."""

ALWAYS = {"association_only", "decision"}
"""Rules that hold for every report."""

SPEAKS: dict[str, Invented] = {
    "dependent_rows": replace(QUIET, rows="leave_out: []"),
    "supplied_words": replace(QUIET, study="title: Load causes creep, question: Do they rise together?"),
    "not_estimable": replace(QUIET, columns={"u": RISING, "v": "5 " * 10}),
    "built_in": DERIVED,
    "built_in_size": DERIVED,
    "hidden_shape": replace(QUIET, columns=BENT),
    "requirements": replace(QUIET, requirements="fewest_complete_rows: 11"),
    "undecided": replace(QUIET, columns=TWELVE, inference=DRAWN.format(alpha="0.1")),
    "two_sided_rule": replace(QUIET, columns=LOPSIDED, inference="alpha: 0.3"),
    # n=10, sum of squared differences 58: exact p 0.049, while the interval of Bonett & Wright 2000, which the usual one
    # is never narrower than, holds 0.
    "test_and_interval": replace(QUIET, columns={"u": RISING, "v": "3 4 1 9 2 5 6 8 10 7"}),
    # The same rows: rho 0.648 within 0.9 has z = 1.565 with k = 1.405, short of 1.645; k = 1.210 of the interval is less.
    "equivalence_and_interval": replace(
        QUIET,
        columns={"u": RISING, "v": "3 4 1 9 2 5 6 8 10 7"},
        associations={"A1": association(more="smallest_of_interest: 0.9")},
        inference="alpha: 0.05, interval: {by: Bonett-Wright}",
    ),
    "size_finding": replace(QUIET, associations={"A1": association(more="null_value: 0.2")}),
    "size_basis": replace(QUIET, associations={"A1": association(more="smallest_of_interest: 0.3")}),
    "low_coverage": replace(
        QUIET,
        columns=THREE_LEVELS,
        associations={"A1": association(), "A2": association("u", "w", more="coefficient: Kendall tau-b")},
    ),
    "perfect_agreement": replace(QUIET, columns={"u": RISING, "v": FALLING}),
    "would_change": replace(QUIET, columns={"u": RISING, "v": NEAR}, inference="alpha: 0.02"),
    "small_sample": replace(QUIET, columns=SMALL_ORDERED),
    "left_out_rows": replace(QUIET, rows=LEFT_OUT),
    "incomplete_rows": replace(QUIET, columns={"u": RISING, "v": "1 3 2 5 4 7 - 9 8 10"}),
    "groups": replace(
        QUIET,
        columns={**QUIET.columns, "site": "a b " * 5},
        variables={"site": "label: site, scale: ordered, lowest_to_highest: [a, b]"},
        associations={"A1": association(more="groups: {column: site}")},
    ),
    "given_covariates": replace(
        QUIET, columns={**QUIET.columns, "w": MIXED}, associations={"A1": association(more="covariates: [w]")}
    ),
    "condition_of_adjustment": replace(
        QUIET, associations=TWO, inference="alpha: 0.05, several_tests: {adjust: Hochberg}"
    ),
    "no_interval": replace(QUIET, columns={"u": "1 2 3", "v": "1 3 2"}),
    "interval_guard": replace(QUIET, columns={"u": RISING, "v": "1 3 2 5 4 7 6 9 8 10"}),
    "interval_cap": replace(QUIET, columns=ONE_STEP_SHORT, inference=f"alpha: 0.05, {BY_BONETT_WRIGHT}"),
    "interval_fallback": replace(QUIET, columns=LONE),
    "interval_beyond_ties": replace(QUIET, columns=HALVES),
    "undefined_resamples": replace(QUIET, columns=HALVES, inference=RESAMPLED),
    "interval_basis": QUIET,
    "association_only": QUIET,
    "independence_null": QUIET,
    "decision": QUIET,
}

IS_SILENT: dict[str, Invented] = {
    **{rule.key: QUIET for rule in CAVEATS},
    "supplied_words": replace(QUIET, study="title: Load and creep, question: Do they rise together?"),
    "undecided": replace(QUIET, columns=TWELVE, inference=DRAWN.format(alpha="0.05")),
    "two_sided_rule": replace(QUIET, columns=LOPSIDED, inference="alpha: 0.2"),
    "no_interval": QUIET,
    "condition_of_adjustment": replace(QUIET, associations=TWO),
    "equivalence_and_interval": replace(QUIET, associations={"A1": association(more="smallest_of_interest: 0.9")}),
    "interval_basis": replace(QUIET, columns={"u": "1 2 3", "v": "1 3 2"}),
    "undefined_resamples": replace(QUIET, inference=RESAMPLED),
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
        for module in (
            adjustment,
            built_in,
            coverage,
            intervals,
            more_variables,
            requirements,
            results,
            sensitivity,
            shape,
            size,
            study,
        )
        for _, rule in inspect.getmembers(module, lambda value: isinstance(value, CaveatRule))
    ]
    assert {rule.key for rule in written} == {rule.key for rule in CAVEATS}
    assert len({rule.key for rule in CAVEATS}) == len(CAVEATS)
    assert len({rule.weight for rule in CAVEATS}) == len(CAVEATS)
    assert set(SPEAKS) == set(IS_SILENT) == {rule.key for rule in CAVEATS}
    assert caveats.CAVEATS is CAVEATS


WORDS = {
    "built_in": (
        "A1: the requirement “separate origins” is not met: one of the variables was worked out from the other (value of "
        "u), so that an association is built in, and zero is not what the rows would show if nothing else tied the two. "
        "The estimate is given without a test."
    ),
    "built_in_size": (
        "A1: variables of one origin move together, or against one another, by the way they were worked out (Pearson 1897; "
        "Oldham 1962). A common denominator and a part held against its whole push a coefficient up; a change held against "
        "its own baseline pushes it down. How far, by example: for quantities without any association among themselves, "
        "simulated by the authors of this program with 100 rows, the mean rho was 0.48 for two ratios with a common "
        "denominator (standard deviation 20% of the mean in all quantities) and −0.68 for a change against its baseline of "
        "equal spread."
    ),
    "hidden_shape": (
        "A1: look at the plot (Figure A1a): rho is near zero, and yet value of v visibly goes with value of u in a way that "
        "has no one direction, such as up and down again: Chatterjee’s xi is 0.72, 5.5 standard deviations above what rows "
        "without any relation give on average (Chatterjee 2021). A coefficient near zero says only that no common direction "
        "prevails."
    ),
    "dependent_rows": (
        "Every test and every interval is withheld: the plan does not say whether rows are repeated or in time order. "
        "Rows that belong together, treated as if they did not, give false findings far more often than alpha says."
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
    "undecided": (
        "A1: undecided by these draws. With p at another place in its interval, 0.070 to 0.106, the finding would be another "
        "one. The ceiling of draws that the plan sets was reached; a plan with more may settle the side."
    ),
    "two_sided_rule": (
        "A1: the ties make the null lopsided. Counting orderings at least as far from zero gives p = 0.250; doubling "
        "the smaller tail would give 0.500. The plan’s rule is the first."
    ),
    "test_and_interval": (
        "A1: test and interval point different ways (p = 0.049; interval −0.24 to 0.95). They are built differently; "
        "the test decides about the association, the interval describes its size."
    ),
    "perfect_agreement": (
        "A1: all rows follow one order, so that the sample holds no disagreement from which an error could be "
        "estimated. If up to 30.8% of such rows followed no relation at all, a sample of n = 10 would contain none of them "
        "with probability 2.5%; hence the limit −0.692."
    ),
    "interval_guard": (
        "A1: the rows stand nearly in one order. If up to 30.8% of such rows followed no relation at all, a sample of n = "
        "10 would contain none of them with probability 2.5%; a limit was drawn back to what is left of the coefficient "
        "then, 0.692."
    ),
    "interval_cap": (
        "A1: the estimate is nearer to perfect order than half of the smallest discordance that the ties could show. The "
        "interval is that of an estimate so far away, and its outer limit is one in size."
    ),
    "interval_fallback": (
        "A1: without one of the rows a variable does not vary, so that there is no jackknife. The variance of Bonett and "
        "Wright, which holds for normal-type dependence, stands in for it."
    ),
    "interval_beyond_ties": (
        "A1: the interval, 0.43 to 0.98, reaches beyond the coefficients that rows with these ties can give, −0.87 to 0.87. "
        "What lies beyond concerns a population with other ties."
    ),
    "undefined_resamples": (
        "A1: in 19 of 9,999 resamples a variable did not vary; they were left out, and the interval speaks of samples in "
        "which both vary."
    ),
    "small_sample": (
        "A1: with so few rows the data exclude little. Read the interval as indicative; the p-value, counted over all "
        "orderings of the rows, is exact and the primary result."
    ),
    "left_out_rows": "The plan leaves out 1 of 10 rows of table trials; each is listed with its reason in section 2.",
    "incomplete_rows": (
        "Rows lacking a value were set aside for the association concerned (A1 10% of the rows that the plan does not "
        "leave out). That is harmless only if values are missing for reasons that have nothing to do with what would "
        "have been observed."
    ),
    "no_interval": "A1: no interval exists for fewer than four complete rows.",
}


@pytest.mark.parametrize("key", list(WORDS))
def test_a_caveat_in_words(key: str) -> None:
    """The sentence as it stands, numbers and all (golden)."""
    assert [sentence.replace("\u00a0", " ") for sentence in caveats_of(SPEAKS[key])[key]] == [WORDS[key]]


@pytest.mark.parametrize(
    ("study", "rule", "said"),
    [
        (
            replace(QUIET, requirements="fewest_complete_rows: 11"),
            "requirements",
            (
                "A1: the requirement “enough complete rows” is not met (waived): fewer complete rows than the plan asks for (found "
                "10, limit 11). Reason given in the plan for waiving it: a pilot. The result stands with this reservation."
            ),
        ),
        (
            replace(QUIET, columns={"u": RISING, "v": "1 1 2 2 3 3 5 4 4 5"}, requirements="most_tied: 0.9"),
            "requirements",
            (
                "A1: the requirement “share of tied rows” is doubtful (waived): more rows share a value than the plan’s limit "
                "(found 100%, limit 90%). Reason given in the plan for waiving it: a pilot. The result stands with this "
                "reservation."
            ),
        ),
        (
            DERIVED,
            "built_in",
            (
                "A1: the requirement “separate origins” is not met (waived): one of the variables was worked out from the other "
                "(value of u), so that an association is built in, and zero is not what the rows would show if nothing else tied "
                "the two. Reason given in the plan for waiving it: a pilot. The result stands with this reservation."
            ),
        ),
    ],
    ids=["rows", "ties", "origins"],
)
def test_the_caveat_of_a_waived_requirement_quotes_the_reason(study: Invented, rule: str, said: str) -> None:
    """The requirement stays not met, the reason is printed as supplied, and the test is given."""
    waived = "waived: {complete rows: a pilot, ties: a pilot, built-in association: a pilot}"
    report = told(replace(study, associations={"A1": association(more=waived)}).analysed())
    assert [sentence.replace("\u00a0", " ") for sentence in report.caveats()[rule]] == [said]
    place = [column.name for column in report.table("requirements-table").columns].index("outcome")
    outcomes = [text_of(row[place]) for row in report.table("requirements-table").rows]
    assert [outcome for outcome in outcomes if "(waived)" in outcome] == [
        "doubtful (waived)" if "doubtful" in said else "not met (waived)"
    ]


def test_words_in_a_reason_for_waiving_are_linted_as_supplied() -> None:
    """They are printed, and the report says that they are no result."""
    waived = "waived: {ties: it was proven elsewhere}"
    (found,) = caveats_of(replace(QUIET, associations={"A1": association(more=waived)}))["supplied_words"]
    assert found.startswith("The words supplied at associations.A1.waived.ties say “proven”.")


def test_supplied_words_are_quoted_wherever_they_stand() -> None:
    """Title, questions, labels, reasons: each place is named, each phrase quoted as supplied."""
    invented = replace(
        QUIET,
        study="title: Load proves it, question: Does load drive creep?, population: all that load causes, "
        "rows_were_fixed_by: a trend towards more",
        variables={"u": "label: effect of load, scale: measured, unit: N"},
        associations={"A1": association().replace("Do u and v rise together?", "Is there no association?")},
        rows=INDEPENDENT
        + ", independent_because: it is guaranteed, leave_out: ["
        + "{where: {v: '10'}, reason: a broken rig}, {where: {v: '9'}, reason: heat led to creep}]",
        inference="alpha: 0.05, several_tests: {adjust: none, reason: it was proven elsewhere}",
    )
    report = told(invented.analysed(), Occasion(reason="The client wants highly significant results"))
    found = "\n".join(report.caveats()["supplied_words"])
    for where, phrase in (
        ("study.title", "proves"),
        ("study.question", "drive"),
        ("variables.u.label", "effect of"),
        ("associations.A1.question", "no association"),
        ("rows.independent_because", "guaranteed"),
        ("the reason for this edition", "highly significant"),
        ("study.population", "causes"),
        ("study.rows_were_fixed_by", "trend towards"),
        ("inference.several_tests.reason", "proven"),
        ("rows.leave_out.2.reason", "led to"),
    ):
        assert f"supplied at {where} say “{phrase}”" in found
    assert "rows.leave_out.1" not in found
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
        inference="alpha: 0.05, several_tests: {among: none, reason: one question}",
    )
    assert caveats_of(outside)["not_estimable"][0].endswith("It keeps its place in every table.")


def test_a_small_sample_without_a_counted_test_promises_none() -> None:
    """Where the test is withheld, or drawn, no p-value is called exact; without an interval nothing is indicative."""
    small = replace(QUIET, columns=SMALL_ORDERED)
    for invented in (
        replace(small, requirements="fewest_complete_rows: 6"),
        replace(small, inference=DRAWN.format(alpha="0.05")),
    ):
        assert caveats_of(invented)["small_sample"] == [
            "A1: with so few rows the data exclude little. Read the interval as indicative."
        ]
    assert caveats_of(replace(small, rows="leave_out: []"))["small_sample"] == []


def test_the_interval_of_four_rows_is_called_uninformative() -> None:
    """One degree of freedom is left to its variance; five rows have two."""
    four, five = (told(replace(QUIET, columns={"u": rows, "v": rows}).analysed()) for rows in ("1 2 3 4", "1 2 3 4 5"))
    words = "A1: an interval from so few rows is uninformative; it is printed so that nothing is missing."
    assert words in four.caveats()["small_sample"]
    assert words not in five.caveats()["small_sample"]


def test_associations_of_one_kind_share_a_caveat_about_small_samples() -> None:
    """Nine rows are few, ten are not; each caveat is about the associations that it names, and no other."""
    nine, ten = "1 2 3 4 5 6 7 8 9 -", RISING
    report = told(
        replace(
            QUIET,
            columns={"u": nine, "v": nine, "w": ten, "z": "1 3 2 5 4 7 6 9 8 10"},
            associations={"A1": association(), "A2": association("v", "w"), "A3": association("w", "z")},
            requirements="fewest_complete_rows: 3, most_missing: 1, most_tied: 1",
        ).analysed()
    )
    (found,) = [found for rule in CAVEATS if rule.key == "small_sample" for found in rule.find(report.story)]
    assert found.about == ("A1", "A2")
    assert text_of(found.prose).startswith("A1 and A2: with so few rows")


def test_perfect_order_without_an_interval_assumes_nothing_for_it() -> None:
    """Dependent rows, three rows, and resamples that are all alike, give no interval."""
    for invented in (
        replace(QUIET, columns={"u": RISING, "v": RISING}, rows="leave_out: []"),
        replace(QUIET, columns={"u": "1 2 3", "v": "1 2 3"}),
        replace(QUIET, columns={"u": RISING, "v": RISING}, inference=RESAMPLED),
    ):
        (sentence,) = caveats_of(invented)["perfect_agreement"]
        assert sentence.endswith("from which an error could be estimated.")


def test_the_limit_at_perfect_order_says_on_what_it_rests() -> None:
    """The share of rows that could have gone unseen only where it sets the limit; else the discordance assumed.

    Five rows: the guard 0.025 to the power 1/5 is 0.478, and the cap’s own limit lies below it (by hand: atanh 0.95 =
    1.8318 less 1.96 times the root of 1.4513 over 2 is 0.1622, whose tanh is 0.161).
    """
    five = replace(QUIET, columns={"u": "1 2 3 4 5", "v": "1 2 3 4 5"})
    for invented, limit in (
        (five, "0.161"),
        (replace(QUIET, columns={"u": RISING, "v": RISING}, inference=f"alpha: 0.05, {BY_BONETT_WRIGHT}"), "0.963"),
    ):
        (sentence,) = caveats_of(invented)["perfect_agreement"]
        assert sentence.endswith(f"Hence the limit {limit}: half of the smallest visible discordance was assumed.")
    opposite = replace(QUIET, columns={"u": RISING, "v": FALLING}, inference="alpha: 0.05, sidedness: one-sided")
    (sentence,) = caveats_of(opposite)["perfect_agreement"]
    assert sentence.endswith("estimated. The bound on the side that the plan expects excludes no value.")
    tau = replace(QUIET, columns={"u": RISING, "v": RISING}, associations=TAU)
    assert caveats_of(tau)["perfect_agreement"][0].endswith("with probability 2.5%; hence the limit 0.620.")


def test_the_open_end_of_a_bound_is_no_limit_beyond_the_ties() -> None:
    """A lower bound of 0.52 ends at 1 whatever the ties allow."""
    bound = replace(QUIET, columns=HALVES, inference="alpha: 0.05, sidedness: one-sided")
    assert caveats_of(bound)["interval_beyond_ties"] == []


def test_what_intervals_rest_on_depends_on_their_rule() -> None:
    """Each rule cites its own work (golden)."""
    works = {
        "guarded jackknife": "Tukey 1958",
        "Bonett-Wright": "Bonett & Wright 2000",
        "influence values": "Croux & Dehon 2010",
        "BCa bootstrap": "Efron 1987",
        "Fieller-Hartley-Pearson": "Fieller et al. 1957",
        "Fisher z": "Fisher 1921",
    }
    for word, work in works.items():
        inference = f"alpha: 0.05, p_value: {{seed: 3}}, interval: {{by: {word}, resamples: 999}}"
        (sentence,) = caveats_of(replace(QUIET, inference=inference))["interval_basis"]
        assert f"({work})" in sentence


def test_a_report_points_from_an_association_to_its_caveats() -> None:
    """The master table and the spread give the numbers under which they stand."""
    report: Told = study_of_every_finding()
    table = report.table("results")
    for row in table.rows:
        name = text_of(row[0])
        numbers = [str(caveat.block.number) for caveat in report.story.caveats_about(name)]
        assert text_of(row[-1]) == (", ".join(numbers) or "–")
    assert EVERY_FINDING.associations.keys() == {text_of(row[0]) for row in table.rows}


LEFT_OUT_OF_ALL = replace(
    EVERY_FINDING, rows=INDEPENDENT + ", leave_out: [{where: {u: '12'}, reason: the rig was broken}]"
)


@pytest.mark.parametrize(
    "invented",
    [EVERY_FINDING, LEFT_OUT_OF_ALL, replace(EVERY_FINDING, rows="leave_out: []"), *SPEAKS.values()],
    ids=["every finding", "rows left out", "dependent rows", *SPEAKS],
)
def test_a_caveat_is_about_every_association_that_it_names(invented: Invented) -> None:
    """From the words of the caveat to the tables and back: each association lists it, and only those."""
    report = told(invented.analysed())
    names = list(report.analysis.results)
    for caveat in report.story.caveats:
        named = {piece.text for piece in caveat.block.prose.pieces if isinstance(piece, Link)} & set(names)
        assert named <= set(caveat.about) <= set(names)
        number = str(caveat.block.number)
        listing = {text_of(row[0]) for row in report.table("results").rows if number in text_of(row[-1]).split(", ")}
        assert listing == set(caveat.about)
        for name in names:
            (note,) = (
                block
                for block in report.section(f"association-{name}").blocks
                if isinstance(block, Paragraph) and "those of the study stand in section" in text_of(block.prose)
            )
            links = {piece.target for piece in note.prose.pieces if isinstance(piece, Link)}
            assert (caveat.block.key in links) == (name in caveat.about)


def test_rows_left_out_concern_every_association_of_their_table() -> None:
    """Whether or not the caveat names them."""
    report = told(LEFT_OUT_OF_ALL.analysed())
    (found,) = [found for rule in CAVEATS if rule.key == "left_out_rows" for found in rule.find(report.story)]
    assert found.about == tuple(EVERY_FINDING.associations)


PAIR = {"A1": association("u", "v"), "A2": association("u", "w"), "A3": association("u", "x")}
FAMILY_OF_THREE = replace(QUIET, columns={"u": RISING, "v": NEAR, "w": MIXED, "x": MIXED}, associations=PAIR)
"""The first p, 0.017, is 0.052 when adjusted; the interval of the association alone excludes 0."""


def test_the_adjusted_p_is_held_against_the_interval() -> None:
    """What adjustment moved over alpha is said to be adjusted, and the interval not to be (golden)."""
    (found,) = caveats_of(FAMILY_OF_THREE)["test_and_interval"]
    assert found.replace("\u00a0", " ") == (
        "A1: test and interval point different ways (adjusted p = 0.052; interval 0.12 to 0.95). The interval is not "
        "adjusted for the number of tests; the test decides about the association, the interval describes its size."
    )
    alone = {"A1": association("u", "v")}
    assert caveats_of(replace(FAMILY_OF_THREE, associations=alone))["test_and_interval"] == []
    unadjusted = "alpha: 0.05, several_tests: {adjust: none, reason: three questions}"
    assert caveats_of(replace(FAMILY_OF_THREE, inference=unadjusted))["test_and_interval"] == []


@pytest.mark.parametrize(
    ("inference", "speaks"),
    [
        ("alpha: 0.05", True),
        ("alpha: 0.05, confidence_level: 0.95", True),
        ("alpha: 0.05, confidence_level: 0.950", True),
        ("alpha: 0.05, confidence_level: 0.99", False),
        ("alpha: 0.050, confidence_level: 0.951", False),
    ],
)
def test_test_and_interval_are_compared_at_one_level_only(inference: str, speaks: bool) -> None:
    """An interval of another level need not agree with alpha, and nothing is said of it."""
    # n=10, sum of squared differences 58: exact p 0.049, while the interval of Bonett & Wright 2000 holds 0.
    found = caveats_of(replace(QUIET, columns={"u": RISING, "v": "3 4 1 9 2 5 6 8 10 7"}, inference=inference))
    assert bool(found["test_and_interval"]) == speaks


def test_a_lopsided_null_is_spoken_of_only_where_it_was_counted() -> None:
    """Between drawn tails the gap may be the draws’ own."""
    counted, from_draws = (
        caveats_of(replace(QUIET, columns=LOPSIDED, inference=inference))["two_sided_rule"]
        for inference in ("alpha: 0.3", DRAWN.format(alpha="0.3"))
    )
    assert len(counted) == 1
    assert from_draws == []


@pytest.mark.parametrize("inference", ["alpha: 0.05", "alpha: 0.05, p_value: {by: permutation, seed: 5}"])
def test_a_sample_that_could_show_nothing_is_said_to_be_one(inference: str) -> None:
    """Four rows: the smallest two-sided p is 1/12; the caveat does not call such a result a reservation."""
    four = replace(QUIET, columns={"u": "1 2 3 4", "v": "1 2 3 4"}, inference=inference)
    (found,) = caveats_of(replace(four, requirements="fewest_complete_rows: 3"))["requirements"]
    assert "no result of this plan with these rows could reach alpha" in found
    assert found.endswith("That nothing was shown could not have come out otherwise.")


def test_a_shared_alpha_that_could_still_be_reached_is_a_reservation() -> None:
    """Four tests of five rows: 1/60 is below 0.05, four times 1/60 is not."""
    five = {"u": "1 2 3 4 5", "v": "1 2 3 4 5"}
    plan = {f"A{place}": association() for place in range(1, 5)}
    found = caveats_of(replace(QUIET, columns=five, associations=plan, requirements="fewest_complete_rows: 3"))
    assert len(found["requirements"]) == 4
    assert all(sentence.endswith("The result stands with this reservation.") for sentence in found["requirements"])


def test_draws_that_decide_clearly_bring_no_caveat() -> None:
    """p far above alpha, and p far below it."""
    for v in (MIXED, "1 3 2 5 4 7 6 9 8 10"):
        drawn = replace(QUIET, columns={"u": RISING, "v": v}, inference=DRAWN.format(alpha="0.05"))
        assert caveats_of(drawn)["undecided"] == []
