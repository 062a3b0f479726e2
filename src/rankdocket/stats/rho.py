"""Spearman rho: the product-moment correlation of midranks, ties and all, in integers."""

from dataclasses import dataclass
from fractions import Fraction
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.coefficient import FILED_DIGITS, Coefficient, root_ratio_text
from rankdocket.stats.ranks import Codes, TieGroups, centred_ranks, doubled_midranks, exact_dot, tie_groups

RHO: Final = Description(
    "Spearman rho was computed as the product-moment correlation of the midranks; tied values shared the mean of "
    "the ranks they would have held.",
    ("spearman1904", "student1921", "kendall1945"),
)


def rho(x_codes: Codes, y_codes: Codes) -> Coefficient:
    """Return Spearman rho of two equally long code arrays (spearman1904; ties: kendall1945)."""
    x, y = centred_ranks(x_codes), centred_ranks(y_codes)
    return Coefficient("Spearman rho", len(x), exact_dot(x, y), exact_dot(x, x), exact_dot(y, y))


def squared_differences(x_codes: Codes, y_codes: Codes) -> Fraction:
    """Return the sum of squared differences between the midranks of x and y, a multiple of one quarter."""
    gaps = doubled_midranks(x_codes) - doubled_midranks(y_codes)
    return Fraction(exact_dot(gaps, gaps), 4)


@dataclass(frozen=True, slots=True)
class TieCorrectedForm:
    """The form in which rho can be checked by hand when there are ties (kendall1945).

    rho = (x_term + y_term − squared_differences) / (2 √(x_term · y_term)).

    Attributes
    ----------
    x_term, y_term
        (n³ − n)/12 − Σ(t³ − t)/12 over the tie groups of the variable.
    squared_differences
        Sum of squared differences between the midranks.
    """

    x_term: Fraction
    y_term: Fraction
    squared_differences: Fraction

    @property
    def numerator(self) -> Fraction:
        """The numerator of the form."""
        return self.x_term + self.y_term - self.squared_differences

    @property
    def decimal_text(self) -> str:
        """The form’s value with twelve significant digits, half to even; both terms must be above 0."""
        return root_ratio_text(self.numerator, 4 * self.x_term * self.y_term, FILED_DIGITS)


def tie_corrected_rho(x_codes: Codes, y_codes: Codes) -> TieCorrectedForm:
    """Return the parts of the tie-corrected form."""
    return TieCorrectedForm(
        _tie_term(tie_groups(x_codes)), _tie_term(tie_groups(y_codes)), squared_differences(x_codes, y_codes)
    )


def short_form(n: int, sum_of_squared_differences: Fraction) -> Fraction:
    """Return 1 − 6 Σd²/(n(n² − 1)), which is rho only without ties; for comparison. ``n`` at least 2."""
    return 1 - 6 * sum_of_squared_differences / (n * (n * n - 1))


def _tie_term(groups: TieGroups) -> Fraction:
    return Fraction(groups.n**3 - groups.n - groups.cube_sum, 12)
