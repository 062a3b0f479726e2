"""How a p-value from drawn permutations is printed."""

from decimal import Decimal

from rankdocket.document.numbers import Numbers


def test_only_a_counted_p_equal_to_alpha_is_called_exact() -> None:
    """A p from drawn permutations that equals alpha is printed as it is."""
    texts = {}
    for method in ("exact, no ties", "drawn permutations"):
        plain = {"associations": {"A1": {"test": {"p": "0.05", "method": method}, "finding": {"p_adjusted": "0.05"}}}}
        made = Numbers(plain, 2, 3, "leading zero", Decimal("0.05"))
        texts[method] = [made.p_value(f"associations/A1/{part}").text for part in ("test/p", "finding/p_adjusted")]
    assert texts == {"exact, no ties": ["0.05 (exactly)"] * 2, "drawn permutations": ["0.05"] * 2}
