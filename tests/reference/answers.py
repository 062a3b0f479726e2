"""The answers to the reference cases by the public API alone: calls and names, no arithmetic."""

from collections.abc import Mapping
from typing import Any

from rankdocket import (
    adjusted,
    associate,
    bonett_wright_limits,
    critical_value,
    critical_value_approximate,
    critical_value_large_sample,
    null_counts,
)
from rankdocket.vocabulary import Sidedness

SIDES: Mapping[str, Sidedness] = {"one": "one-sided", "two": "two-sided"}


def answer(function: str, inputs: Mapping[str, Any]) -> dict[str, Any] | None:
    """Return the answer under the names of the cases, or None to a function that is not answered."""
    if function in ("spearman", "exact_conditional", "dataset_pair"):
        return _association(inputs["x"], inputs["y"])
    if function == "null_counts":
        table = null_counts(inputs["n"])
        return {"total": table.total, "counts": table.counts}
    if function == "critical_value":
        return _critical_value(inputs["n"], inputs["alpha"], inputs["sides"])
    if function == "critical_value_approximate":
        return _critical_value_approximate(inputs["n"], inputs["alpha"], inputs["sides"])
    if function == "critical_value_large_sample":
        return _critical_value_large_sample(inputs["n"], inputs["alpha"], inputs["sides"])
    if function == "adjusted_p" and inputs["method"] == "holm":
        return {"adjusted": adjusted(inputs["p"], rule="Holm")}
    if function == "ci_bonett_wright":
        limits = bonett_wright_limits(inputs["r"], inputs["n"], level=inputs["conf"])
        return {"se_z": limits.se, "lower": limits.low, "upper": limits.high}
    return None


def _critical_value(n: int, alpha: float, sides: str) -> dict[str, Any]:
    found = critical_value(n, alpha, sidedness=SIDES[sides])
    return {
        "attainable": found.attainable,
        "critical_rs": found.rho,
        "critical_sum_d2": found.sum_d2,
        "attained_p": found.attained_p,
    }


def _critical_value_approximate(n: int, alpha: float, sides: str) -> dict[str, Any]:
    found = critical_value_approximate(n, alpha, sidedness=SIDES[sides])
    return {
        "attainable": found.attainable,
        "critical_rs": found.rho,
        "critical_sum_d2": found.sum_d2,
        "attained_p": found.attained_p,
    }


def _critical_value_large_sample(n: int, alpha: float, sides: str) -> dict[str, Any]:
    rule = critical_value_large_sample(n, alpha, sidedness=SIDES[sides])
    return {"z": rule.z, "critical_rs": rule.value}


def _association(x: list[float | None], y: list[float | None]) -> dict[str, Any]:
    result = associate(x, y, permutations=50_000, seed=1)
    described = {
        "n_rows": result.n_rows,
        "n": result.n,
        "sum_d2": result.sum_squared_differences,
        "rs": result.rho,
        "rs_no_tie_formula": result.short_form,
        "kendall_tau_b": result.tau_b,
        "pearson_r": result.pearson_r,
        "p_t_two_sided": result.p_t,
        "ties_x": result.x_has_ties,
        "ties_y": result.y_has_ties,
        "p_mc_two_sided_abs": result.p,
    }
    exact = result.exact
    if exact is None:
        return described
    return {
        **described,
        "total": exact.of,
        "count_ge": exact.greater,
        "count_le": exact.less,
        "count_abs": exact.two_sided,
        "p_exact_greater": exact.p("greater"),
        "p_exact_less": exact.p("less"),
        "p_exact_two_sided_abs": exact.p("two-sided"),
        "p_exact_two_sided_doubled": exact.doubled,
    }
