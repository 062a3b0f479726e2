"""The answers to the reference cases by the public API alone: calls and names, no arithmetic."""

from collections.abc import Mapping
from typing import Any

from rankdocket import (
    GroupCoefficient,
    NoneShared,
    OneShared,
    PlannedTest,
    adjusted,
    associate,
    bonett_wright_limits,
    chatterjee_xi,
    critical_value,
    critical_value_approximate,
    critical_value_large_sample,
    difference_no_variable_shared,
    difference_one_variable_shared,
    difference_two_groups,
    fieller_limits,
    fisher_limits,
    null_counts,
    partial_spearman,
    runs_test_median,
    sample_size,
    shapiro_wilk,
    tost_z,
    von_neumann,
)
from rankdocket.stats.adjustment import AdjustmentName
from rankdocket.stats.z_interval import ZLimits
from rankdocket.stats.z_scale import EstimateVariance, NullVariance
from rankdocket.vocabulary import Sidedness

SIDES: Mapping[str, Sidedness] = {"one": "one-sided", "two": "two-sided"}
NUMBER_OF_SIDES: Mapping[int, Sidedness] = {1: "one-sided", 2: "two-sided"}
RULES: Mapping[str, AdjustmentName] = {
    "holm": "Holm",
    "hochberg": "Hochberg",
    "bonferroni": "Bonferroni",
    "bh": "Benjamini-Hochberg",
    "by": "Benjamini-Yekutieli",
}
VARIANCES: Mapping[str, EstimateVariance] = {"fisher": "Fisher", "fieller": "Fieller"}
NULL_VARIANCES: Mapping[str, NullVariance] = {
    "fieller": "Fieller",
    "bonett_wright_at_estimate": "Bonett-Wright at the estimate",
    "bonett_wright_at_null": "Bonett-Wright at the null",
}


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
    if function == "adjusted_p":
        return {"adjusted": adjusted(inputs["p"], rule=RULES[inputs["method"]])}
    if function == "sample_size":
        return _sample_size(inputs["rho"], inputs["power"], inputs["alpha"], inputs["sides"])
    if function == "ci_bonett_wright":
        return _limits(bonett_wright_limits(inputs["r"], inputs["n"], level=inputs["conf"]))
    if function == "ci_fieller":
        return _limits(fieller_limits(inputs["r"], inputs["n"], level=inputs["conf"]))
    if function == "ci_fisher":
        return _limits(fisher_limits(inputs["r"], inputs["n"], level=inputs["conf"]))
    if function == "partial_spearman":
        return _partial(inputs["x"], inputs["y"], inputs["controls"])
    if function == "difference_two_groups":
        return _two_groups(inputs)
    if function == "difference_one_variable_shared":
        return _one_shared(inputs)
    if function == "difference_no_variable_shared":
        return _none_shared(inputs)
    if function == "tost_z":
        return _equivalence(inputs["r"], inputs["n"], inputs["delta"], inputs["variance"])
    if function == "chatterjee_xi":
        return {"xi": chatterjee_xi(inputs["x"], inputs["y"]).coefficient}
    if function == "runs_test_median":
        return _runs(inputs["x"])
    if function == "von_neumann":
        return _successive(inputs["x"])
    if function == "shapiro_wilk":
        found = shapiro_wilk(inputs["x"])
        return {"W": found.w, "p": found.p_value}
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


def _sample_size(rho: float, power: float, alpha: float, sides: int) -> dict[str, Any]:
    found = sample_size(rho, power, PlannedTest(alpha, NUMBER_OF_SIDES[sides]))
    return {
        "n_raw_fisher": found.fisher.raw,
        "n_fisher": found.fisher.rows,
        "n_raw_fieller": found.fieller.raw,
        "n_fieller": found.fieller.rows,
        "n_raw_bonett_wright": found.bonett_wright.raw,
        "n_bonett_wright": found.bonett_wright.rows,
        "n_raw_two_variances": found.two_variances.raw,
        "n_two_variances": found.two_variances.rows,
    }


def _limits(limits: ZLimits) -> dict[str, Any]:
    return {"se_z": limits.se, "se_r": limits.se_of_r, "lower": limits.low, "upper": limits.high}


def _partial(x: list[float], y: list[float], controls: list[list[float]]) -> dict[str, Any]:
    found = partial_spearman(x, y, controls=controls)
    return {
        "partial_rs": found.value,
        "df": found.df,
        "t": found.t,
        "p_t_two_sided": found.p("two-sided"),
        "rs_xy": found.plain.value,
    }


def _two_groups(inputs: Mapping[str, Any]) -> dict[str, Any]:
    first = GroupCoefficient(inputs["r1"], inputs["n1"])
    second = GroupCoefficient(inputs["r2"], inputs["n2"])
    found = difference_two_groups(first, second, variance=VARIANCES[inputs["variance"]], level="0.95")
    return {"z": found.test.z, "p_two_sided": found.p("two-sided")}


def _one_shared(inputs: Mapping[str, Any]) -> dict[str, Any]:
    given = OneShared(inputs["r12"], inputs["r13"], inputs["r23"])
    found = difference_one_variable_shared(given, inputs["n"], variance="Fisher", level="0.95")
    return {
        "t_williams": found.t_williams,
        "df_williams": found.df_williams,
        "p_williams": found.p_williams,
        "z_steiger": found.steiger.z,
        "p_steiger": found.steiger.p("two-sided"),
        "z_meng": found.meng.z,
        "p_meng": found.meng.p("two-sided"),
    }


def _none_shared(inputs: Mapping[str, Any]) -> dict[str, Any]:
    given = NoneShared(
        jk=inputs["r_jk"],
        hm=inputs["r_hm"],
        jh=inputs["r_jh"],
        jm=inputs["r_jm"],
        kh=inputs["r_kh"],
        km=inputs["r_km"],
    )
    found = difference_no_variable_shared(given, inputs["n"], variance="Fisher", level="0.95")
    return {
        "z_dunn_clark": found.dunn_clark.z,
        "p_dunn_clark": found.dunn_clark.p("two-sided"),
        "z_steiger": found.steiger.z,
        "p_steiger": found.steiger.p("two-sided"),
    }


def _equivalence(r: float, n: int, delta: float, variance: str) -> dict[str, Any]:
    found = tost_z(r, n, delta, variance=NULL_VARIANCES[variance])
    return {
        "z_lower": found.lower.z,
        "z_upper": found.upper.z,
        "p_lower": found.p_lower,
        "p_upper": found.p_upper,
        "p_tost": found.p,
    }


def _runs(values: list[float]) -> dict[str, Any]:
    found = runs_test_median(values)
    return {
        "n1": found.above,
        "n2": found.below,
        "runs": found.runs,
        "z": found.test.z,
        "p_two_sided": found.test.p("two-sided"),
        "z_abs_continuity": found.corrected.z,
        "p_two_sided_continuity": found.corrected.p("two-sided"),
    }


def _successive(values: list[float]) -> dict[str, Any]:
    found = von_neumann(values)
    return {
        "von_neumann_ratio": found.ratio,
        "rank_von_neumann_ratio": found.rank_ratio,
        "z_bartels": found.test.z,
        "p_normal_two_sided": found.test.p("two-sided"),
        "p_normal_trend": found.test.p("less"),
    }


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
