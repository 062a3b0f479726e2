"""Laws of adjusted p-values."""

from fractions import Fraction

from hypothesis import given
from hypothesis import strategies as st

from rankdocket import adjusted
from rankdocket.stats.adjustments import ADJUSTMENTS
from rankdocket.vocabulary import Adjustment

families = st.lists(st.fractions(0, 1, max_denominator=5040), min_size=1, max_size=9)
rules = st.sampled_from([rule.key for rule in ADJUSTMENTS])


@given(families, rules)
def test_adjusted_p_values_are_never_below_the_raw_ones(family: list[Fraction], rule: Adjustment) -> None:
    """Each lies between its raw p-value and 1, and the order of the raw ones is kept."""
    changed = adjusted(family, rule=rule)
    for raw, new in zip(family, changed, strict=True):
        assert raw <= new <= 1
    for one, new_one in zip(family, changed, strict=True):
        for other, new_other in zip(family, changed, strict=True):
            assert one > other or new_one <= new_other


@given(families, st.randoms(use_true_random=False))
def test_adjustment_does_not_depend_on_the_order_of_the_family(family: list[Fraction], shuffler: object) -> None:
    """A family in another order has the same adjusted p-values in that order."""
    order = list(range(len(family)))
    shuffler.shuffle(order)  # type: ignore[attr-defined]
    changed = adjusted(family, rule="Holm")
    assert adjusted([family[place] for place in order], rule="Holm") == tuple(changed[place] for place in order)


@given(families)
def test_an_association_without_p_value_never_lowers_another(family: list[Fraction]) -> None:
    """Entering the family as 1 raises or keeps every adjusted p-value."""
    alone, together = adjusted(family, rule="Holm"), adjusted([*family, 1], rule="Holm")
    assert all(one <= other for one, other in zip(alone, together[:-1], strict=True))
