"""The methods text is gathered from the rules that ran: what did not run is neither described nor cited."""

import re
from dataclasses import replace

import pytest

from analysis.invented import MIXED, RISING, Invented, association, read_texts
from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.checks import CHECKS
from rankdocket.document.model import Citation
from rankdocket.document.prose import text_of
from rankdocket.references import Description
from rankdocket.stats.adjustments.holm import HOLM
from rankdocket.stats.chatterjee import XI, XI_NULL
from rankdocket.stats.critical import CRITICAL_VALUES
from rankdocket.stats.intervals.bonett_wright import BONETT_WRIGHT
from rankdocket.stats.intervals.jackknife import JACKKNIFE
from rankdocket.stats.intervals.tau_jackknife import TAU_JACKKNIFE
from rankdocket.stats.isotonic import ISOTONIC
from rankdocket.stats.null import MONTE_CARLO_INTERVAL, MONTE_CARLO_LOOKS, NULL_DESCRIPTIONS, TWO_SIDED
from rankdocket.stats.nulls.tau_exact import TAU_NULL_DESCRIPTIONS
from rankdocket.stats.ranks import TieGroups
from rankdocket.stats.rho import RHO
from rankdocket.stats.tau import TAU_B
from rankdocket.writing.sections.methods import method_paragraphs
from stats.asked import only_doubles
from writing.reports import Told, demonstration_report, study_of_every_finding, told

BASE = Invented(columns={"u": RISING, "v": MIXED})
TAU = {"A1": association(more="coefficient: Kendall tau-b")}
FAMILY = {"A1": association(), "A2": association("v", "u")}
DRAWN = "alpha: 0.05, p_value: {by: permutation, permutations: 999, most_draws: 999, seed: 20260402}"
FORTY = " ".join(map(str, range(1, 41)))
TWELVE_DIGITS = (("u", TieGroups((4, 5, 6, 7, 8)), 1), ("v", TieGroups((3, 6, 6, 7, 8)), -1))
TWENTY = {"u": " ".join(map(str, range(1, 21))), "v": " ".join(str(7 * place % 23) for place in range(1, 21))}


def text(report: Told) -> str:
    return "\n".join(text_of(paragraph) for paragraph in method_paragraphs(report.story)).replace("\u00a0", " ")


def words_of(description: Description) -> str:
    """Return the longest run of words of a description between two slots, without the full stop."""
    return max(re.split(r"{\w+}", description.sentence.removesuffix(".")), key=len)


RULES: dict[str, Description] = {
    **NULL_DESCRIPTIONS,
    **{f"tau: {method}": description for method, description in TAU_NULL_DESCRIPTIONS.items()},
    "rho": RHO,
    "tau-b": TAU_B,
    "two-sided": TWO_SIDED,
    "interval of a drawn p": MONTE_CARLO_INTERVAL,
    "looks": MONTE_CARLO_LOOKS,
    "critical values": CRITICAL_VALUES,
    "Holm": HOLM.describe,
    "interval": JACKKNIFE.describe,
    "interval of tau-b": TAU_JACKKNIFE.describe,
    "Bonett-Wright": BONETT_WRIGHT.describe,
    "step curve": ISOTONIC,
    "xi": XI,
    "null of xi": XI_NULL,
    **{check.key: check.demand for check in CHECKS},
}

OF_EVERY_ESTIMATE = {"step curve", "xi"}
OF_EVERY_TEST = {"null of xi"}
ALL_CHECKS_BUT_SHAPE = {check.key for check in CHECKS if check.key not in ("shape", "built_in")}
"""Checks examined in each of these studies; none of them says from what its variables were worked out."""

RAN: dict[str, tuple[Invented, set[str]]] = {
    "exact": (
        replace(BASE, associations=FAMILY),
        {"critical values", "exact, no ties", "rho", "two-sided", "Holm", "interval", *ALL_CHECKS_BUT_SHAPE},
    ),
    "origins declared": (
        replace(BASE, variables={"v": "label: the ratio, scale: measured, unit: mm, derived_from: []"}),
        {"critical values", "exact, no ties", "rho", "two-sided", "interval", *ALL_CHECKS_BUT_SHAPE, "built_in"},
    ),
    # One test has nothing to be adjusted for.
    "family of one": (
        BASE,
        {"critical values", "exact, no ties", "rho", "two-sided", "interval", *ALL_CHECKS_BUT_SHAPE},
    ),
    "ties": (
        replace(BASE, columns={"u": RISING, "v": "1 1 2 3 4 5 6 7 8 9"}),
        {"critical values", "exact, conditional on the ties", "rho", "two-sided", "interval", *ALL_CHECKS_BUT_SHAPE},
    ),
    "drawn": (
        replace(BASE, inference=DRAWN),
        {
            "critical values",
            "drawn permutations",
            "interval of a drawn p",
            "rho",
            "two-sided",
            "interval",
            *ALL_CHECKS_BUT_SHAPE,
        },
    ),
    "tau-b": (
        replace(BASE, associations=TAU),
        {"critical values", "tau: exact, no ties", "tau-b", "interval of tau-b", "two-sided", *ALL_CHECKS_BUT_SHAPE},
    ),
    "tau-b with ties": (
        replace(BASE, columns={"u": RISING, "v": "1 1 2 3 4 5 6 7 8 9"}, associations=TAU),
        {
            "critical values",
            "tau: exact, conditional on the ties",
            "tau-b",
            "interval of tau-b",
            "two-sided",
            *ALL_CHECKS_BUT_SHAPE,
        },
    ),
    "one-sided": (
        replace(BASE, inference="alpha: 0.05, sidedness: one-sided"),
        {"critical values", "exact, no ties", "rho", "interval", *ALL_CHECKS_BUT_SHAPE},
    ),
    "Bonett-Wright": (
        replace(BASE, inference="alpha: 0.05, interval: {by: Bonett-Wright}"),
        {"critical values", "exact, no ties", "rho", "two-sided", "Bonett-Wright", *ALL_CHECKS_BUT_SHAPE},
    ),
    "not adjusted": (
        replace(BASE, inference="alpha: 0.05, several_tests: {adjust: none, reason: one question}"),
        {"critical values", "exact, no ties", "rho", "two-sided", "interval", *ALL_CHECKS_BUT_SHAPE},
    ),
    "no family": (
        replace(BASE, associations=FAMILY, inference="alpha: 0.05, several_tests: {among: none, reason: one question}"),
        {"critical values", "exact, no ties", "rho", "two-sided", "interval", *ALL_CHECKS_BUT_SHAPE},
    ),
    "dependent rows": (replace(BASE, associations=FAMILY, rows="leave_out: []"), {"rho", *ALL_CHECKS_BUT_SHAPE}),
    "test withheld": (
        replace(BASE, associations=FAMILY, requirements="fewest_complete_rows: 11"),
        {"rho", "interval", *ALL_CHECKS_BUT_SHAPE},
    ),
    "not estimable": (
        replace(BASE, columns={"u": RISING, "v": "5 " * 10}, associations=FAMILY),
        ALL_CHECKS_BUT_SHAPE - {"attainable_p"},
    ),
    "twenty rows": (
        replace(BASE, columns=TWENTY, inference=DRAWN),
        {
            "critical values",
            "drawn permutations",
            "interval of a drawn p",
            "rho",
            "two-sided",
            "interval",
            *ALL_CHECKS_BUT_SHAPE,
            "shape",
        },
    ),
    "looks": (
        replace(BASE, inference=DRAWN.replace("most_draws: 999", "most_draws: 1999")),
        {"critical values", "drawn permutations", "looks", "rho", "two-sided", "interval", *ALL_CHECKS_BUT_SHAPE},
    ),
    "above the table": (
        replace(BASE, columns={"u": FORTY, "v": " ".join(str(7 * place % 41) for place in range(1, 41))}),
        {"critical values", "Edgeworth series", "rho", "two-sided", "interval", *ALL_CHECKS_BUT_SHAPE, "shape"},
    ),
    "far above the table": (
        replace(BASE, columns={"u": FORTY, "v": " ".join(map(str, [*range(3, 41), 1, 2]))}),
        {"critical values", "saddlepoint", "rho", "two-sided", "interval", *ALL_CHECKS_BUT_SHAPE, "shape"},
    ),
    "twelve digits": (
        replace(
            BASE,
            columns={name: " ".join(map(str, codes.codes()[::step])) for name, codes, step in TWELVE_DIGITS},
            inference=f"alpha: 0.05, p_value: {{budget: {{seconds: {only_doubles(TWELVE_DIGITS[0][1], TWELVE_DIGITS[1][1])}}}}}",
        ),
        {
            "exact algorithm, 12 digits",
            "rho",
            "two-sided",
            "interval",
            *ALL_CHECKS_BUT_SHAPE,
            "shape",
        },
    ),
}


@pytest.mark.parametrize("name", list(RAN))
def test_what_ran_is_described_and_nothing_else(name: str) -> None:
    """Rule by rule, and the works of no other rule are listed."""
    invented, ran = RAN[name]
    ran = ran | (OF_EVERY_ESTIMATE if ran & {"rho", "tau-b"} else set())
    ran = ran | (OF_EVERY_TEST if "two-sided" in ran or name == "one-sided" else set())
    report = told(invented.analysed())
    found = text(report)
    assert {key for key, description in RULES.items() if words_of(description) in found} == ran
    of_rules = {work for key in ran for work in RULES[key].cites}
    of_others = {work for key in RULES.keys() - ran for work in RULES[key].cites} - of_rules
    # Caveats and worksheets cite works of their own; the rules that did not run bring none.
    by_caveats = {"bonett2000", "diciccio2017", "student1921", "kendall1945"}
    # So does the paragraph on the sensitivity tables, whose rules other tests hold to account.
    by_tables = {
        piece.key
        for paragraph in method_paragraphs(report.story)
        if text_of(paragraph).startswith("What other methods")
        for piece in paragraph.pieces
        if isinstance(piece, Citation)
    }
    assert of_rules <= set(report.document.references)
    assert not (of_others - by_caveats - by_tables) & set(report.document.references)


def test_every_rule_runs_in_one_of_the_studies() -> None:
    """No description is left untested."""
    assert set().union(OF_EVERY_ESTIMATE, OF_EVERY_TEST, *(ran for _, ran in RAN.values())) == set(RULES)


def test_exact_and_drawn_are_told_apart() -> None:
    """A study counted exactly says nothing of draws or seeds, and cites nobody for them."""
    exact, drawn = told(BASE.analysed()), told(replace(BASE, inference=DRAWN).analysed())
    assert "drawn at random" not in text(exact)
    assert "error of drawing" not in text(exact)
    assert "seed" not in text(exact)
    assert "permutations drawn at random from seed 20260402, 999 to begin with" in text(drawn)
    assert "every order in which" not in text(drawn)
    works = {"dwass1957", "phipson2010", "clopper1934"}
    assert not works & set(exact.document.references)
    assert works <= set(drawn.document.references)


def test_a_description_ends_in_its_works() -> None:
    """Before the full stop, in brackets, short."""
    assert (
        "Holm’s step-down rule, which keeps the chance of any false finding in the family at or below alpha (Holm 1979)."
        in text(told(replace(BASE, associations=FAMILY).analysed()))
    )


@pytest.mark.parametrize("codes", ["", "missing_codes: [x]"])
def test_missing_cells_are_spoken_of_where_a_code_is_declared(codes: str) -> None:
    """For a table or for one variable alone."""
    keys = f"label: load, scale: measured, unit: N{', ' if codes else ''}{codes}"
    spec_text = replace(BASE, variables={"u": keys}).spec_text().replace('{"-": not measured}', "[]")
    report = told(analyse(*read_texts(spec_text, {"received/trials.csv": BASE.data_text()})))
    assert ("no cell was missing" in text(report)) == (not codes)


def test_the_family_is_described_as_it_is() -> None:
    """Who is in it, what happens to members without a p, and for whom a finding is stated (golden)."""
    assert (
        "The family (primary and secondary) holds A1, A2, A3, A4 and A5; an association that is not estimable or whose "
        "test is withheld stays in it. A finding is stated for its members only. The p-values of the 5 associations of "
        "the family were adjusted by Holm’s step-down rule" in text(study_of_every_finding())
    )
    alone = told(replace(BASE, inference="alpha: 0.05, several_tests: {among: none, reason: it was asked}").analysed())
    assert (
        "By the plan there is no family: each primary and secondary association is its own decision. Reason given: it "
        "was asked." in text(alone)
    )


@pytest.mark.parametrize(
    ("reason", "printed"),
    [
        ("it was asked", "Reason given: it was asked. The p-values"),
        ("It was asked.", "Reason given: It was asked. The p-values"),
        ("Who knows?", "Reason given: Who knows? The p-values"),
    ],
)
def test_a_supplied_reason_closes_with_one_stop(reason: str, printed: str) -> None:
    """A full stop is set where the words bring none, and never twice."""
    inference = f"alpha: 0.05, several_tests: {{adjust: none, reason: {reason}}}"
    assert printed in text(told(replace(BASE, inference=inference).analysed()))


NOT_ADJUSTED = "Intervals were not adjusted for the number of tests: each holds for its association alone."


def test_intervals_are_said_to_be_unadjusted_where_there_are_any() -> None:
    """Whatever was done to the p-values; without an interval there is nothing to say."""
    unadjusted = "alpha: 0.05, several_tests: {adjust: none, reason: one question}"
    for invented in (BASE, replace(BASE, inference=unadjusted)):
        assert NOT_ADJUSTED in text(told(invented.analysed()))
    for invented in (replace(BASE, rows="leave_out: []"), replace(BASE, columns={"u": "1 2 3", "v": "1 3 2"})):
        assert "ntervals" not in text(told(invented.analysed()))


def test_a_one_sided_bound_is_described_where_it_was_made() -> None:
    """And only there."""
    words = "For a one-sided test it is the bound on the side that the plan expects, at the same level."
    assert words in text(told(RAN["one-sided"][0].analysed()))
    assert words not in text(told(BASE.analysed()))


@pytest.mark.parametrize("name", ["first-look", "gasket-creep", "weld-smoke"])
def test_the_methods_of_the_demonstrations_have_no_empty_paragraph(name: str) -> None:
    """Each paragraph says something."""
    assert all(text_of(paragraph).strip() for paragraph in method_paragraphs(demonstration_report(name).story))


def test_withheld_tests_leave_no_empty_paragraph() -> None:
    """What is not said takes no room."""
    report = told(replace(BASE, rows="leave_out: []").analysed())
    assert all(text_of(paragraph).strip() for paragraph in method_paragraphs(report.story))
    assert "Alpha was" not in text(report)
