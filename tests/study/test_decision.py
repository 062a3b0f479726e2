"""The decision rule against the associations: a family has members, an association two columns, a size no sign."""

import pytest

from rankdocket.study.reader import read_spec
from study.faults import changed, spec_messages
from study.specs import PANEL, PLANKTON

EMPTY = (
    (
        "secondary",
        "",
        (
            "31:1: inference: the family is among: primary, and no association has the role primary; roles found: secondary. "
            "Give an association the role primary, or write several_tests: {among: primary and secondary}, or several_tests: "
            "{among: all}, or several_tests: {among: none, reason: …}."
        ),
    ),
    (
        "exploratory",
        "\n  several_tests: {adjust: Holm}",
        (
            "33:3: inference.several_tests: the family is among: primary, and no association has the role primary; roles "
            "found: exploratory. Give an association the role primary, or write among: all, or among: none and a reason."
        ),
    ),
    (
        "exploratory",
        "\n  several_tests: {among: primary and secondary}",
        (
            "33:3: inference.several_tests: the family is among: primary and secondary, and no association has the role "
            "primary or secondary; roles found: exploratory. Give an association the role primary or secondary, or write "
            "among: all, or among: none and a reason."
        ),
    ),
)


@pytest.mark.parametrize(("role", "several", "expected"), EMPTY)
def test_a_family_without_an_association_is_refused(role: str, several: str, expected: str) -> None:
    """A family, also the one that is meant by silence, whose roles no association has is refused with the choices."""
    text = changed(PLANKTON, ("role: primary", f"role: {role}"), ("alpha: 0.05", f"alpha: 0.05{several}"))
    assert spec_messages(text) == [f"s.yaml:{expected} (message 57)"]


@pytest.mark.parametrize(
    ("role", "among"),
    [("secondary", "primary and secondary"), ("exploratory", "all"), ("exploratory", "none"), ("primary", "primary")],
)
def test_a_family_with_one_association_or_none_declared_is_sound(role: str, among: str) -> None:
    """One association with one of the roles is a family; no family at all needs none."""
    several = f"alpha: 0.05\n  several_tests: {{among: {among}, reason: as agreed}}"
    text = changed(PLANKTON, ("role: primary", f"role: {role}"), ("alpha: 0.05", several))
    assert read_spec(text, "s.yaml").inference.several_tests.among == among


def test_a_role_that_cannot_be_read_says_nothing_about_the_family() -> None:
    """A misspelt role, or associations that are missing, give their own message alone."""
    assert len(spec_messages(changed(PLANKTON, ("role: primary", "role: main")))) == 1
    (message,) = spec_messages(PLANKTON.split("associations:")[0] + "associations: {}\ninference:\n  alpha: 0.05\n")
    assert message.startswith("s.yaml:25:1: associations: no entry stands here.")


@pytest.mark.parametrize("column", ["chl_a", "survey / chl_a", "{table: survey, name: ' chl_a'}"])
def test_two_variables_that_read_one_column_are_refused(column: str) -> None:
    """One column under two names has no association with itself, however the column is written."""
    assert spec_messages(changed(PLANKTON, ("column: secchi", f"column: {column}"))) == [
        (
            's.yaml:27:28: associations.A1.between: chlorophyll and clarity both read the column "chl_a" of survey. Write two '
            "variables of different columns. (message 37)"
        )
    ]


def test_one_column_name_in_two_tables_is_two_columns() -> None:
    """Columns of one name in different tables are told as two tables."""
    text = changed(PANEL, ("column: tasting / visits", "column: loaves / Liking"))
    assert [message[-12:] for message in spec_messages(text)] == ["(message 38)"]


SIZES = (
    ("-0.3", '"-0.3" has a sign; a size is written without its sign. Write 0.3.'),
    ("+.30", '"+.30" has a sign; a size is written without its sign. Write .30.'),
    ("\u22120.3", '"\u22120.3" has a sign; a size is written without its sign. Write 0.3.'),
    ('"-0,3"', '"-0,3" has a sign; a size is written without its sign. Write 0.3.'),
    ("-3", '"-3" has a sign; a size is written without its sign. Write a number more than 0 and less than 1.'),
)


@pytest.mark.parametrize(("written", "expected"), SIZES)
def test_a_size_with_a_sign_is_told_without_it(written: str, expected: str) -> None:
    """The smallest size of interest has no sign; the expected one stands in its own key."""
    text = changed(PANEL, ("smallest_of_interest: 0.30", f"smallest_of_interest: {written}"))
    assert spec_messages(text) == [
        f"s.yaml:66:65: associations.A1.hypothesis.smallest_of_interest: {expected} (message 31)"
    ]


NUMBERS = (
    ("most_missing: 0.1", "most_missing: 95", "81:17", "95", "at least 0 and at most 1. 95 percent is 0.95."),
    ("most_missing: 0.1", "most_missing: 1.5", "81:17", "1.5", "at least 0 and at most 1. 1.5 percent is 0.015."),
    ("most_missing: 0.1", "most_missing: 200", "81:17", "200", "at least 0 and at most 1."),
    (
        "confidence_level: 0.9\n",
        "confidence_level: 95\n",
        "76:21",
        "95",
        "at least 0.5 and less than 1. 95 percent is 0.95.",
    ),
    ("confidence_level: 0.9\n", "confidence_level: 1.5\n", "76:21", "1.5", "at least 0.5 and less than 1."),
    ("alpha: 0.050", "alpha: 95", "74:10", "95", "more than 0 and at most 0.5."),
)


@pytest.mark.parametrize(("old", "new", "place", "found", "expected"), NUMBERS)
def test_a_number_in_percent_is_told_as_the_share_it_would_be(
    old: str, new: str, place: str, found: str, expected: str
) -> None:
    """The value that was found, and no other, is told as a share; where that is impossible too, nothing is told."""
    (message,) = spec_messages(changed(PANEL, (old, new)))
    assert message.startswith(f"s.yaml:{place}: ")
    assert message.endswith(f": {found} is not possible here. Write a number {expected} (message 31)")


def test_a_percent_sign_is_not_turned_into_an_impossible_share() -> None:
    """95% as alpha is 0.95, which is no alpha: the range is told instead."""
    assert spec_messages(changed(PLANKTON, ("alpha: 0.05", "alpha: 95%"))) == [
        's.yaml:32:10: inference.alpha: "95%" is not a number. Write a number more than 0 and at most 0.5. (message 30)'
    ]


def test_a_negative_number_is_out_of_range() -> None:
    """A number below 0 is a number, and outside its range."""
    assert spec_messages(changed(PLANKTON, ("alpha: 0.05", "alpha: -0.05"))) == [
        (
            's.yaml:32:10: inference.alpha: "-0.05" is below what is possible. Write a number more than 0 and at most 0.5. '
            "(message 31)"
        )
    ]


TAU = ("hypothesis: {expected_sign: negative}", "hypothesis: {expected_sign: negative}\n    coefficient: Kendall tau-b")
ASKED = (
    (
        "interval: {by: BCa bootstrap}",
        (),
        (
            "33:18: inference.interval.by: by: BCa bootstrap draws at random, and inference.p_value states no seed. Add a "
            "number of your own, as in p_value: {seed: 417}. (message 41)"
        ),
    ),
    (
        "interval: {by: Fisher z}",
        (TAU,),
        (
            "34:18: inference.interval.by: Fisher z makes no interval for Kendall tau-b, and no association has another "
            "coefficient. Write guarded jackknife or Fieller-Hartley-Pearson. (message 42)"
        ),
    ),
    (
        "interval: {adjusted: after selection}",
        (),
        (
            "33:24: inference.interval.adjusted: after selection needs an adjustment that selects by a share of false "
            "findings; adjust is Holm. Write adjust: Benjamini-Hochberg or Benjamini-Yekutieli, or adjusted: simultaneous. "
            "(message 40)"
        ),
    ),
    (
        "several_tests: {among: none, reason: as agreed}\n  interval: {adjusted: simultaneous}",
        (),
        (
            "34:24: inference.interval.adjusted: simultaneous adjusts the intervals of a family, and several_tests has "
            "among: none. Name a family, or write adjusted: none. (message 40)"
        ),
    ),
    (
        "interval: {by: bootstrap}",
        (),
        (
            '33:18: inference.interval.by: "bootstrap" is not in the list. Write one of: guarded jackknife, Bonett-Wright, '
            "influence values, BCa bootstrap, Fieller-Hartley-Pearson, Fisher z. (message 29)"
        ),
    ),
)


@pytest.mark.parametrize(("written", "changes", "expected"), ASKED)
def test_an_interval_that_the_plan_cannot_have_is_refused(
    written: str, changes: tuple[tuple[str, str], ...], expected: str
) -> None:
    """A seed, a family, a selection or a coefficient that the interval needs is asked for by name."""
    text = changed(PLANKTON, ("alpha: 0.05", f"alpha: 0.05\n  {written}"), *changes)
    assert spec_messages(text) == [f"s.yaml:{expected}"]


def test_an_interval_that_one_association_can_have_is_sound() -> None:
    """Where others are without, the report says so; the plan stands."""
    text = changed(PANEL, ("alpha: 0.050", "alpha: 0.050\n  interval: {by: BCa bootstrap, resamples: 4999}"))
    rule = read_spec(text, "s.yaml").inference.interval
    assert (rule.by, rule.adjusted, rule.resamples) == ("BCa bootstrap", "none", 4_999)
