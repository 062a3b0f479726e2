"""The shipped cases that are recomputed before an edition is sealed: evidence that this machine computes rightly.

The cases are published examples and enumerated counts from outside the program; each carries its source.
"""

import json
from dataclasses import dataclass
from decimal import Decimal
from importlib.resources import files
from typing import Any, Final

from rankdocket.canonical import Plain
from rankdocket.errors import ComputeError
from rankdocket.stats.choose_null import exact_null_of
from rankdocket.stats.ranks import dense_codes, tie_groups
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b

CASES_FILE: Final = "self_test.json"


@dataclass(frozen=True, slots=True)
class CaseOutcome:
    """One case: what it is, where its values come from, and whether all of them came out."""

    name: str
    source: str
    agrees: bool


def run_self_test() -> tuple[CaseOutcome, ...]:
    """Recompute every shipped case; integers must be equal, coefficients equal to the digits of their source."""
    cases = json.loads(files("rankdocket.workflow").joinpath(CASES_FILE).read_text(encoding="utf-8"))["cases"]
    return tuple(CaseOutcome(case["name"], case["source"], _agrees(case)) for case in cases)


def require_agreement(outcomes: tuple[CaseOutcome, ...]) -> None:
    """Refuse to seal anything when a case does not come out.

    Raises
    ------
    ComputeError
        Naming every case that failed.
    """
    failed = [outcome.name for outcome in outcomes if not outcome.agrees]
    if failed:
        do = "does" if len(failed) == 1 else "do"
        raise ComputeError(
            f"{len(failed)} of {len(outcomes)} shipped cases {do} not come out on this machine: {', '.join(failed)}. "
            "Nothing was sealed; do not rely on a result of this installation."
        )


def sentence(outcomes: tuple[CaseOutcome, ...]) -> str:
    """Return the outcome as it stands in the record."""
    agreed = sum(outcome.agrees for outcome in outcomes)
    return f"{agreed} of {len(outcomes)} shipped cases came out as their sources say, before this edition was sealed"


def outcomes_to_plain(outcomes: tuple[CaseOutcome, ...]) -> Plain:
    """Return the outcomes as plain data."""
    return [{"case": item.name, "source": item.source, "agrees": item.agrees} for item in outcomes]


def _agrees(case: dict[str, Any]) -> bool:
    x = dense_codes([Decimal(text) for text in case["x"]])
    y = dense_codes([Decimal(text) for text in case["y"]])
    coefficient = rho(x, y) if case["coefficient"] == "Spearman rho" else tau_b(x, y)
    expected = Decimal(case["value"])
    printed = Decimal(1).scaleb(int(expected.as_tuple().exponent))
    if abs(Decimal(coefficient.decimal_text()) - expected) > printed / 2:
        return False
    if "count_two_sided" not in case:
        return True
    tails = exact_null_of(coefficient.name, tie_groups(x), tie_groups(y)).tails(coefficient.numerator)
    return (tails.greater, tails.less, tails.two_sided, tails.of) == (
        case["count_greater"],
        case["count_less"],
        case["count_two_sided"],
        case["of"],
    )
