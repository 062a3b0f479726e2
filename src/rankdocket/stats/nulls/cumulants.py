"""Exact cumulants of half the sum of squared rank differences without ties, for every n.

The even central moments of s are polynomials in n.  ``cumulant_polys.json`` holds, for r = 1 to 6, the coefficients of

    μ_2r(s) = n^(2+e) (n + 1)^(2+e) (n − 1) Σ_k poly[k] n^k,    e = "extra".

They were fitted to the moments of the exact counts; "checked" says how many n were left over on which each was
then confirmed.  The odd moments vanish, since the null is symmetric.
"""

import json
from collections.abc import Mapping
from fractions import Fraction
from functools import cache
from importlib.resources import files
from math import comb
from types import MappingProxyType
from typing import Final

POLYNOMIALS: Final = "cumulant_polys.json"

HIGHEST_ORDER: Final = 12
"""Order of the highest cumulant known."""


@cache
def central_moment(n: int, order: int) -> Fraction:
    """Return the central moment of s of an even ``order`` from 2 to 12 for ``n`` of at least 2 rows."""
    extra, polynomial = _polynomials()[order // 2]
    total = Fraction(0)
    for coefficient in reversed(polynomial):
        total = total * n + coefficient
    factors: int = (n * (n + 1)) ** (2 + extra) * (n - 1)
    return total * factors


@cache
def cumulants(n: int) -> Mapping[int, Fraction]:
    """Return the even cumulants of s, by order from 2 to 12, for ``n`` of at least 2 rows.

    s is half the sum of squared rank differences and moves in steps of 1; rho’s numerator moves by −4 with each step.
    """
    found: dict[int, Fraction] = {}
    for order in range(2, HIGHEST_ORDER + 1, 2):
        # μ_m = Σ C(m − 1, j − 1) κ_j μ_(m − j), solved for the term j = m.
        found[order] = central_moment(n, order) - sum(
            (
                comb(order - 1, lower - 1) * found[lower] * central_moment(n, order - lower)
                for lower in range(2, order, 2)
            ),
            start=Fraction(0),
        )
    return MappingProxyType(found)


@cache
def _polynomials() -> dict[int, tuple[int, tuple[Fraction, ...]]]:
    """Return, by r, the extra power and the coefficients from the constant up."""
    held = json.loads(files(__package__).joinpath(POLYNOMIALS).read_text(encoding="utf-8"))
    return {
        int(r): (entry["extra"], tuple(Fraction(coefficient) for coefficient in entry["poly"]))
        for r, entry in held.items()
    }
