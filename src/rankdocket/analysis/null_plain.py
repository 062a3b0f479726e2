"""A test and its null to plain data: counts or shares, their error, the draws, critical values, the picture's bars."""

from decimal import Decimal
from fractions import Fraction
from typing import Final

from rankdocket.analysis.filing import DIGITS, filed, filed_beside
from rankdocket.analysis.results import AssociationAnalysis, RankTest
from rankdocket.canonical import Plain
from rankdocket.stats.choose_null import NANOSECONDS
from rankdocket.stats.coefficient import Coefficient, root_ratio_text
from rankdocket.stats.critical import Critical
from rankdocket.stats.forecast import Forecast
from rankdocket.stats.null import TailCounts
from rankdocket.stats.null_result import NullResult
from rankdocket.stats.nulls.series import SADDLEPOINT_BOUNDS, SERIES_ABSOLUTE, SERIES_BOUNDS, SWITCH
from rankdocket.stats.nulls.untied import reach
from rankdocket.vocabulary import Direction

DIRECTIONS: Final[tuple[Direction, ...]] = ("two-sided", "greater", "less")

EDGE_DIGITS: Final = 6
"""Digits of the edges of bars: a picture shows no more."""

UNREACHED: Final = "no coefficient of these rows and ties has a p-value of alpha or less"
UNPLACED: Final = "these draws are too few to place it"
UNKNOWN: Final = "the whole null, from which they are read, would have taken more than the budget"
"""Why there is no critical value."""


def rank_test_to_plain(test: RankTest, alpha: Decimal) -> dict[str, Plain]:
    """Return a test; where permutations were neither counted one and all nor drawn, its count is null."""
    tails = test.tails
    plain: dict[str, Plain] = {
        "state": "tested",
        "method": tails.method,
        "why": test.choice.reason,
        "direction": test.direction,
    }
    if isinstance(tails, TailCounts):
        plain |= {
            "count": str(tails.count(test.direction)),
            "of": str(tails.of),
            "count_greater": str(tails.greater),
            "count_less": str(tails.less),
        }
    else:
        digits: dict[str, Plain] = {"digits": DIGITS} if tails.method == "exact algorithm, 12 digits" else {}
        plain |= {"count": None, **digits, "error": filed(tails.share(test.direction).error)}
    plain |= {
        "p": filed_beside(test.p, alpha),
        "p_greater": filed_beside(tails.p("greater"), alpha),
        "p_less": filed_beside(tails.p("less"), alpha),
    }
    if test.p_interval is not None:
        plain |= {"p_low": filed(test.p_interval[0]), "p_high": filed(test.p_interval[1])}
    if test.choice.exceeded is not None:
        plain["exact_count"] = _forecast(test.choice.exceeded)
    if test.stream:
        plain["draws"] = _draws(test)
    return plain


def null_to_plain(test: RankTest, observed: Coefficient, alpha: Decimal) -> dict[str, Plain]:
    """Return the null laid out: bars, critical values at alpha, and the large-sample rule with its true size."""
    null = test.null
    plain: dict[str, Plain] = {}
    if null.critical is None:
        plain["critical"] = {direction: {"state": "none", "reason": UNKNOWN} for direction in DIRECTIONS}
    else:
        of: dict[str, Plain] = {} if null.critical.of is None else {"of": str(null.critical.of)}
        plain["method"] = null.critical.method
        plain["critical"] = {
            direction: _critical(null.critical.toward(direction), observed, alpha, drawn=test.choice.needs_draws)
            | of
            | _edge(null, direction, observed)
            for direction in DIRECTIONS
        }
    if null.picture is not None:
        bars = null.picture.bars
        plain["bars"] = {
            "low": [_in_coefficients(bar.low, observed) for bar in bars],
            "high": [_in_coefficients(bar.high, observed) for bar in bars],
            "share": [filed(bar.share) for bar in bars],
        }
    if null.large_sample is not None:
        rule = null.large_sample
        plain["large_sample"] = {"z": filed(rule.z), "value": filed(rule.value), "size": filed(rule.size)}
    return plain


def series_to_plain(results: tuple[AssociationAnalysis, ...]) -> dict[str, Plain]:
    """Return the bounds that the methods text states of series and saddlepoint; nothing where neither was used."""
    if not any(isinstance(result.test, RankTest) and result.test.choice.route == "series" for result in results):
        return {}
    return {
        "series_bounds": {
            "rows": reach(),
            "least_p": filed(SWITCH),
            "absolute": filed(SERIES_ABSOLUTE),
            "relative": filed(max(band.relative for band in SERIES_BOUNDS)),
            "saddlepoint": [
                {"least_p": filed(band.least), "relative": filed(band.relative)} for band in SADDLEPOINT_BOUNDS
            ],
        }
    }


def _forecast(forecast: Forecast) -> dict[str, Plain]:
    return {
        "seconds": filed(Fraction(forecast.nanoseconds, NANOSECONDS)),
        "memory": str(forecast.bytes),
        "states": str(forecast.states),
    }


def _draws(test: RankTest) -> dict[str, Plain]:
    plain: dict[str, Plain] = {
        "stream": list(test.stream),
        "looks": [
            {"draws": look.draws, "count": look.hits, "p_low": filed(look.low), "p_high": filed(look.high)}
            for look in test.null.looks
        ],
        "looks_taken": len(test.null.looks),
        "look_level": str(test.null.look_level),
    }
    if test.null.saddlepoint is not None and test.p_interval is not None:
        low, high = test.p_interval
        plain["saddlepoint_p"] = filed(test.null.saddlepoint)
        plain["saddlepoint_lies_in_the_interval"] = low <= test.null.saddlepoint <= high
    return plain


def _critical(critical: Critical | None, observed: Coefficient, alpha: Decimal, *, drawn: bool) -> dict[str, Plain]:
    if critical is None:
        return {"state": "none", "reason": UNPLACED if drawn else UNREACHED}
    count: dict[str, Plain] = {} if critical.count is None else {"count": str(critical.count)}
    error: dict[str, Plain] = {} if critical.error == 0 else {"p_error": filed(critical.error)}
    square = Fraction(observed.x_square * observed.y_square)
    return {
        "state": "given",
        "numerator": str(critical.numerator),
        "value": root_ratio_text(Fraction(critical.numerator), square, DIGITS),
        "p": filed_beside(critical.p, alpha),
        **count,
        **error,
    }


def _edge(null: NullResult, direction: Direction, observed: Coefficient) -> dict[str, Plain]:
    """Return where rejection regions begin in the picture: at the bar of the critical value, that of its opposite too."""
    critical = None if null.critical is None else null.critical.toward(direction)
    if critical is None or null.picture is None:
        return {}
    half = null.picture.half
    edge = critical.numerator + half if direction == "less" else critical.numerator - half
    opposite: dict[str, Plain] = {}
    if critical.opposite is not None:
        opposite = {"opposite_edge": _in_coefficients(critical.opposite + half, observed)}
    return {"edge": _in_coefficients(edge, observed), **opposite}


def _in_coefficients(numerator: Fraction, observed: Coefficient) -> str:
    return root_ratio_text(numerator, Fraction(observed.x_square * observed.y_square), EDGE_DIGITS)
