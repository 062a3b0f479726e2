"""One variable against many: permutations of one variable, the largest coefficient of each, stepping down."""

from dataclasses import replace
from fractions import Fraction
from itertools import permutations
from math import sqrt

import numpy as np
import numpy.typing as npt
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from properties.oracles import surpluses
from rankdocket.document.prose import lint
from rankdocket.references import REFERENCES
from rankdocket.stats.max_t import (
    COUNTED_MOST_ROWS,
    MAX_T_DESCRIPTIONS,
    MaxT,
    MaxTQuestion,
    counted_max_t,
    drawn_max_t,
)
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes
from rankdocket.vocabulary import Direction

DIRECTIONS: tuple[Direction, ...] = ("greater", "less", "two-sided")


def _codes(values: object) -> Codes:
    return np.asarray(values, dtype=np.int64)


def _question(x: object, others: object, direction: Direction = "two-sided") -> MaxTQuestion:
    return MaxTQuestion(_codes(x), tuple(_codes(each) for each in others), direction)  # type: ignore[attr-defined]


def _counted(question: MaxTQuestion) -> MaxT:
    found = counted_max_t(question)
    assert isinstance(found, MaxT)
    return found


def _drawn(question: MaxTQuestion, draws: int, seed: int) -> MaxT:
    found = drawn_max_t(question, draws, np.random.default_rng(seed))
    assert isinstance(found, MaxT)
    return found


def _signed_square(x: list[int], y: list[int], direction: Direction) -> Fraction:
    """Return the extremeness of a pair, with the square of its coefficient in the place of the coefficient."""
    numerator = sum(a * b for a, b in zip(x, y, strict=True))
    size = Fraction(numerator**2, sum(a * a for a in x) * sum(b * b for b in y))
    match direction:
        case "two-sided":
            return size
        case "greater":
            return size if numerator > 0 else -size
        case "less":
            return size if numerator < 0 else -size


def _by_the_definition(question: MaxTQuestion) -> tuple[Fraction | None, ...]:
    """Return the adjusted p-values by going through every permutation, every pair and every step with fractions."""
    x = surpluses(question.x_codes.tolist())
    others = [surpluses(codes.tolist()) for codes in question.other_codes]
    defined = [place for place, y in enumerate(others) if any(y)]
    observed = {place: _signed_square(x, others[place], question.direction) for place in defined}
    steps = sorted(defined, key=lambda place: -observed[place])
    shares = {}
    for rank, place in enumerate(steps):
        hits = total = 0
        for order in permutations(x):
            total += 1
            hits += any(
                _signed_square(list(order), others[other], question.direction) >= observed[place]
                for other in steps[rank:]
            )
        shares[place] = Fraction(hits, total)
    adjusted: dict[int, Fraction] = {}
    largest = Fraction(0)
    for place in steps:
        largest = max(largest, shares[place])
        adjusted[place] = largest
    return tuple(adjusted.get(place) for place in range(len(others)))


def test_a_case_worked_elsewhere() -> None:
    """Five rows, two variables, each 1/12 alone: together 2/15, less than Bonferroni's 1/6 (methods 3.11)."""
    found = _counted(_question([1, 2, 3, 4, 5], [[1, 2, 3, 5, 4], [2, 1, 3, 4, 5]]))
    assert found.p == (Fraction(1, 12), Fraction(1, 12))
    assert found.adjusted_p == (Fraction(2, 15), Fraction(2, 15))


def test_a_variable_twice_is_adjusted_to_its_own_p_value() -> None:
    """Copies and mirror images of one variable add nothing to look at, so nothing is paid for them."""
    x, y = [0, 2, 1, 3, 4, 5], [0, 1, 1, 2, 4, 3]
    found = _counted(_question(x, [y, y, [-value for value in y]]))
    assert found.adjusted_p == found.p
    assert len(set(found.p)) == 1


rows = st.integers(3, 5)


@st.composite
def questions(draw: st.DrawFn) -> MaxTQuestion:
    """Return few rows, many ties, up to four other variables; constants occur among these."""
    n = draw(rows)
    column = st.lists(st.integers(0, 3), min_size=n, max_size=n)
    x = draw(column.filter(lambda values: len(set(values)) > 1))
    others = draw(
        st.lists(column, min_size=1, max_size=4).filter(lambda columns: any(len(set(each)) > 1 for each in columns))
    )
    return _question(x, others, draw(st.sampled_from(DIRECTIONS)))


@settings(max_examples=60, deadline=None)
@given(questions())
def test_whole_numbers_decide_as_fractions_do(question: MaxTQuestion) -> None:
    """Counting with whole thresholds agrees with the definition, ties, constants and equal coefficients included."""
    assert _counted(question).adjusted_p == _by_the_definition(question)


def test_six_rows_agree_with_the_definition() -> None:
    """All 720 orders of six rows, tied and not, for every direction."""
    x = [0, 1, 2, 3, 4, 5]
    others = [[0, 0, 1, 1, 2, 2], [1, 0, 3, 2, 5, 4], [5, 3, 4, 1, 2, 0]]
    for direction in DIRECTIONS:
        question = _question(x, others, direction)
        assert _counted(question).adjusted_p == _by_the_definition(question)


@settings(max_examples=30, deadline=None)
@given(questions())
def test_adjusted_is_between_alone_and_the_sum(question: MaxTQuestion) -> None:
    """No adjusted p-value is below the pair's own or above the sum of those of all pairs."""
    found = _counted(question)
    together = sum(p for p in found.p if p is not None)
    for p, new in zip(found.p, found.adjusted_p, strict=True):
        assert (p is None) == (new is None)
        assert p is None or new is None or p <= new <= min(1, together)


def test_the_other_direction_is_the_mirror_image() -> None:
    """Turning every other variable round exchanges "greater" and "less" and leaves "two-sided"."""
    x, others = [0, 3, 1, 2, 4], [[0, 1, 2, 2, 3], [4, 1, 0, 3, 2]]
    turned = [[-value for value in each] for each in others]
    assert _counted(_question(x, others, "less")).hits == _counted(_question(x, turned, "greater")).hits
    assert _counted(_question(x, others)).hits == _counted(_question(x, turned)).hits


@pytest.mark.parametrize("n", [4, 5])
def test_no_finding_is_false_more_often_than_alpha(n: int) -> None:
    """If every order of x is equally likely, the smallest adjusted p is at or below each level at most so often, exactly."""
    others = [[0, 1, 2, 3, 4][:n], [0, 0, 1, 1, 1][:n], [1, 0, 3, 2, 4][:n], [2, 2, 0, 1, 1][:n]]
    smallest = []
    for order in permutations(range(n)):
        adjusted = [p for p in _counted(_question(order, others)).adjusted_p if p is not None]
        smallest.append(min(adjusted))
    for level in sorted(set(smallest)):
        assert Fraction(sum(p <= level for p in smallest), len(smallest)) <= level


def test_draws_tend_to_the_count() -> None:
    """20,000 draws come within five standard errors of all 40,320 permutations of eight rows."""
    question = _question(range(8), [[1, 0, 2, 4, 3, 5, 7, 6], [0, 0, 1, 1, 0, 1, 1, 1], [3, 1, 2, 0, 7, 4, 6, 5]])
    counted, drawn = _counted(question), _drawn(question, 20_000, seed=5)
    assert (drawn.of, drawn.method) == (20_000, "drawn permutations")
    for exact, near in zip((*counted.p, *counted.adjusted_p), (*drawn.p, *drawn.adjusted_p), strict=True):
        assert exact is not None
        assert near is not None
        assert abs(float(near - exact)) < 5 * sqrt(float(exact * (1 - exact)) / 20_000) + 1 / 20_000


def test_the_data_count_as_one_more_permutation() -> None:
    """A drawn p is (b + 1)/(B + 1): never 0, and 1/(B + 1) when no draw is as extreme."""
    question = _question(range(30), [range(30), [*range(15), *range(15)]])
    found = _drawn(question, 99, seed=1)
    assert found.hits[0] == 0
    assert found.adjusted_p[0] == Fraction(1, 100)


def test_equal_seeds_give_equal_draws_whatever_the_order_of_rows() -> None:
    """The draws belong to the seed and the values, not to the places of the rows."""
    rng = np.random.default_rng(11)
    x, others = rng.integers(0, 6, 25), rng.integers(0, 5, (4, 25))
    order = rng.permutation(25)
    first = _drawn(_question(x, others), 500, seed=2)
    assert first == _drawn(_question(x[order], others[:, order]), 500, seed=2)
    assert first != _drawn(_question(x, others), 500, seed=3)


def test_adjusted_p_values_keep_the_order_of_the_coefficients() -> None:
    """A more extreme coefficient never has a larger adjusted p-value, drawn or not."""
    rng = np.random.default_rng(4)
    x = rng.integers(0, 9, 40)
    found = _drawn(_question(x, [np.clip(x + rng.integers(-9, 9, 40), 0, 12) for _ in range(30)]), 400, seed=8)
    by_size = sorted(zip(found.coefficients, found.hits, strict=True), key=lambda pair: -abs(pair[0].value))
    hits = [hit for _, hit in by_size if hit is not None]
    assert len(hits) == 30
    assert hits == sorted(hits)


def test_a_variable_that_does_not_vary_has_no_p_and_changes_no_other() -> None:
    """A constant among the others is answered with nothing, beside the same answer for the rest."""
    x, y = [0, 1, 2, 3, 4], [0, 2, 1, 3, 4]
    alone, beside = _counted(_question(x, [y])), _counted(_question(x, [[7] * 5, y]))
    assert beside.adjusted_p == (None, *alone.adjusted_p)
    assert beside.p == (None, *alone.p)
    assert not beside.coefficients[0].is_defined


@pytest.mark.parametrize(
    ("x", "others", "why"),
    [([1, 1, 1], [[0, 1, 2]], "variable itself"), ([0, 1, 2], [[1, 1, 1], [2, 2, 2]], "none of the other")],
)
def test_nothing_to_adjust_is_said(x: list[int], others: list[list[int]], why: str) -> None:
    """Without variation there is a reason instead of an answer, counted or drawn."""
    for found in (
        counted_max_t(_question(x, others)),
        drawn_max_t(_question(x, others), 10, np.random.default_rng(1)),
    ):
        assert isinstance(found, NoAnswer)
        assert why in found.reason


@pytest.mark.parametrize("direction", DIRECTIONS)
def test_who_is_held_back_stands_in_every_maximum(direction: Direction) -> None:
    """Whatever its own coefficient: every permutation is gone through, and it is not answered itself."""
    x, far, near, tied = [0, 1, 2, 3, 4, 5], [0, 1, 2, 3, 5, 4], [1, 0, 3, 2, 5, 4], [0, 0, 1, 1, 0, 1]
    question = replace(_question(x, [far, near, tied], direction), held_back=frozenset({0}))
    others = [surpluses(codes) for codes in (far, near, tied)]
    observed = [_signed_square(surpluses(x), other, direction) for other in others]
    steps = sorted((1, 2), key=lambda place: -observed[place])
    hits = {
        place: sum(
            any(
                _signed_square(list(order), others[other], direction) >= observed[place] for other in (*steps[rank:], 0)
            )
            for order in permutations(surpluses(x))
        )
        for rank, place in enumerate(steps)
    }
    found = _counted(question)
    stepped = {steps[0]: hits[steps[0]], steps[1]: max(hits.values())}
    assert found.hits == (None, stepped[1], stepped[2])
    assert found.own_hits[0] is None
    assert found.own_hits[1:] == _counted(_question(x, [far, near, tied], direction)).own_hits[1:]


def test_misuse_is_refused() -> None:
    """No other variable, unequal lengths, no draw, and too many rows to go through all orders are mistakes."""
    with pytest.raises(ValueError, match="at least one other"):
        _question([0, 1], [])
    with pytest.raises(ValueError, match="equally many rows"):
        _question([0, 1, 2], [[0, 1]])
    with pytest.raises(ValueError, match="at least one permutation"):
        drawn_max_t(_question([0, 1], [[0, 1]]), 0, np.random.default_rng(1))
    long = range(COUNTED_MOST_ROWS + 1)
    with pytest.raises(ValueError, match="at most 8 rows, not 9"):
        counted_max_t(_question(long, [long]))


def test_the_rule_says_its_condition() -> None:
    """Both descriptions name subset pivotality and known works, and keep to the wording rules."""
    for description in MAX_T_DESCRIPTIONS.values():
        assert "subset pivotality" in description.sentence
        assert set(description.cites) <= set(REFERENCES)
        assert lint(description.sentence) == ()
        assert not any(character.isdigit() for character in description.sentence)


def _tied(values: npt.NDArray[np.float64], levels: int) -> Codes:
    return np.clip(np.floor(levels / 2 + values), 0, levels - 1).astype(np.int64)


@pytest.mark.simulation
@pytest.mark.parametrize("direction", DIRECTIONS)
def test_the_family_keeps_its_level_by_simulation(direction: Direction) -> None:
    """With dependent others, some of them tied, the family is found falsely at most in 5 % of 4,000 samples.

    Three standard errors are allowed.  Half of the samples have no association at all; in the other half the first
    two variables follow x, and the others are independent of x taken together, though not of those two.
    """
    samples, draws, n = 4_000, 199, 20
    rng = np.random.default_rng(20_260)
    for associated in (0, 2):
        false = 0
        for _ in range(samples):
            x = rng.standard_normal(n)
            shared = rng.standard_normal(n)
            others = [0.8 * shared + 0.6 * rng.standard_normal(n) for _ in range(8)]
            for place in range(associated):
                others[place] = others[place] + x
            codes = [_tied(y, 5) if place % 2 else np.argsort(np.argsort(y)) for place, y in enumerate(others)]
            question = MaxTQuestion(np.argsort(np.argsort(x)), tuple(codes), direction)
            found = drawn_max_t(question, draws, rng)
            assert isinstance(found, MaxT)
            true_nulls = found.adjusted_p[associated:]
            false += any(p is not None and p <= Fraction(1, 20) for p in true_nulls)
        assert false / samples <= 0.05 + 3 * sqrt(0.05 * 0.95 / samples)
