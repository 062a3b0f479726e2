"""More than two variables, from a spec on open data to the filed numbers; references are scipy and plain formulas."""

from collections.abc import Mapping
from dataclasses import replace
from math import atanh, sqrt, tanh
from typing import Any

import numpy as np
import pytest
from scipy.stats import norm, rankdata, spearmanr, t

from analysis.invented import INDEPENDENT, MISSING, Invented, association
from analysis.open_data import DAYS, irises, new_york_air
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.screening import screen_study
from rankdocket.document.numbers import look_up

Z95 = float(norm.ppf(0.975))
SEED = "alpha: 0.05, p_value: {seed: 3, permutations: 999, most_draws: 999}"
MONTHS = "label: month, scale: ordered, lowest_to_highest: [May, June, July, August, September]"

AIR = Invented(
    columns={name: " ".join(cells) for name, cells in new_york_air().items()},
    variables={"month": MONTHS},
    associations={
        "A1": association(
            "ozone",
            "wind",
            sign="negative",
            more="covariates: [solar, month], compare_with: A2, groups: {column: month, compared: [May, August]}",
        ),
        "A2": association("ozone", "solar"),
    },
    inference=SEED,
)


def filed(study: Invented, address: str) -> Any:
    return look_up(analysis_to_plain(study.analysed()), f"associations/{address}")


def complete(columns: Mapping[str, list[str]], *names: str) -> list[np.ndarray[Any, Any]]:
    """Return the columns as numbers, of the rows in which none of them is missing."""
    rows = [row for row in zip(*(columns[name] for name in names), strict=True) if MISSING not in row]
    return [np.array([float(cell) for cell in column]) for column in zip(*rows, strict=True)]


def r_of(one: np.ndarray[Any, Any], other: np.ndarray[Any, Any]) -> float:
    return float(spearmanr(one, other).statistic)


def close(text: str, value: float) -> bool:
    return float(text) == pytest.approx(value, rel=1e-9, abs=1e-11)


def limits(r: float, n: int) -> tuple[float, float]:
    """Return the interval of Bonett and Wright 2000."""
    half = Z95 * sqrt((1 + r * r / 2) / (n - 3))
    return tanh(atanh(r) - half), tanh(atanh(r) + half)


def zou(one: float, other: float, n: tuple[int, int], c: float) -> tuple[float, float]:
    """Return the interval for a difference of Zou 2007, formula 15, from the intervals of both."""
    (l1, u1), (l2, u2) = limits(one, n[0]), limits(other, n[1])
    low = one - other - sqrt((one - l1) ** 2 + (u2 - other) ** 2 - 2 * c * (one - l1) * (u2 - other))
    high = one - other + sqrt((u1 - one) ** 2 + (other - l2) ** 2 - 2 * c * (u1 - one) * (other - l2))
    return low, high


def test_a_partial_rank_correlation_comes_from_the_inverse_of_the_matrix_of_ranks() -> None:
    """The file has 111 days complete for all four; rho of the same days stands beside, and p is Student’s t."""
    air = new_york_air()
    air["month"] = [str(list(DAYS).index(month)) for month in air["month"]]
    columns = complete(air, "ozone", "wind", "solar", "month")
    inverse = np.linalg.inv(np.corrcoef([rankdata(column) for column in columns]))
    expected = -inverse[0, 1] / sqrt(inverse[0, 0] * inverse[1, 1])
    n = len(columns[0])
    partial = filed(AIR, "A1/partial")
    assert (partial["n"], partial["df"], partial["covariates"]) == (n, n - 4, ["solar", "month"])
    assert n == 111
    assert close(partial["value"], expected)
    assert close(partial["rho"]["value"], r_of(columns[0], columns[1]))
    statistic = expected * sqrt((n - 4) / (1 - expected**2))
    assert close(partial["test"]["p"], 2 * float(t.sf(abs(statistic), n - 4)))


def test_two_associations_with_one_variable_in_common_are_compared_on_the_same_rows() -> None:
    """Meng, Rosenthal and Rubin 1992 for z and p, Steiger 1980 and Zou 2007 for the interval, worked out here."""
    ozone, wind, solar = complete(new_york_air(), "ozone", "wind", "solar")
    r1, r2, rx, n = r_of(ozone, wind), r_of(ozone, solar), r_of(wind, solar), len(ozone)
    mean_square = (r1**2 + r2**2) / 2
    f = min(1, (1 - rx) / (2 * (1 - mean_square)))
    h = (1 - f * mean_square) / (1 - mean_square)
    z = (atanh(r1) - atanh(r2)) * sqrt((n - 3) / (2 * (1 - rx) * h))
    c = ((rx - r1 * r2 / 2) * (1 - r1**2 - r2**2 - rx**2) + rx**3) / ((1 - r1**2) * (1 - r2**2))
    low, high = zou(r1, r2, (n, n), c)
    found = filed(AIR, "A1/comparison")
    assert (found["n"], found["shared"], found["variables"]) == (n, 1, ["ozone", "wind", "solar"])
    assert close(found["first"]["value"], r1)
    assert close(found["second"]["value"], r2)
    difference = found["difference"]
    assert difference["by"] == "one variable shared"
    assert close(difference["value"], r1 - r2)
    assert close(difference["z"], z)
    assert close(difference["p"], 2 * float(norm.sf(abs(z))))
    assert close(difference["low"], low)
    assert close(difference["high"], high)


def test_two_associations_without_a_common_variable_are_compared() -> None:
    """Dunn and Clark 1969 with the average in the variance, Steiger 1980; the interval by Zou 2007."""
    study = Invented(
        columns={name: " ".join(cells) for name, cells in irises().items()},
        associations={"A1": association("sl", "sw", more="compare_with: A2"), "A2": association("pl", "pw")},
        inference=SEED,
    )
    j, k, h, m = complete(irises(), "sl", "sw", "pl", "pw")
    jk, hm, n = r_of(j, k), r_of(h, m), len(j)
    jh, jm, kh, km = r_of(j, h), r_of(j, m), r_of(k, h), r_of(k, m)

    def covariance(one: float, other: float) -> float:
        return (
            (jh - one * kh) * (km - kh * other)
            + (jm - jh * other) * (kh - one * jh)
            + (jh - jm * other) * (km - one * jm)
            + (jm - one * km) * (kh - km * other)
        ) / 2

    mean = (jk + hm) / 2
    averaged = covariance(mean, mean) / (1 - mean**2) ** 2
    z = (atanh(jk) - atanh(hm)) * sqrt((n - 3) / (2 - 2 * averaged))
    low, high = zou(jk, hm, (n, n), covariance(jk, hm) / ((1 - jk**2) * (1 - hm**2)))
    found = filed(study, "A1/comparison/difference")
    assert found["by"] == "no variable shared"
    assert close(found["z"], z)
    assert close(found["low"], low)
    assert close(found["high"], high)


def test_groups_have_their_own_rows_and_two_of_them_a_difference() -> None:
    """Each month is ranked anew; the difference has k = 1 + r²/2 in both variances and no row in common."""
    ozone, wind, month = (new_york_air()[name] for name in ("ozone", "wind", "month"))
    by_month = {
        label: complete(
            {
                "ozone": [cell for cell, where in zip(ozone, month, strict=True) if where == label],
                "wind": [cell for cell, where in zip(wind, month, strict=True) if where == label],
            },
            "ozone",
            "wind",
        )
        for label in dict.fromkeys(month)
    }
    found = filed(AIR, "A1/subgroups")
    assert [group["label"] for group in found["groups"]] == ["May", "August", "June", "July", "September"]
    assert found["without_group"] == 0
    for group in found["groups"]:
        columns = by_month[group["label"]]
        assert group["n"] == len(columns[0])
        assert close(group["value"], r_of(*columns))
    (r1, n1), (r2, n2) = ((r_of(*by_month[label]), len(by_month[label][0])) for label in ("May", "August"))
    z = (atanh(r1) - atanh(r2)) / sqrt((1 + r1**2 / 2) / (n1 - 3) + (1 + r2**2 / 2) / (n2 - 3))
    low, high = zou(r1, r2, (n1, n2), 0)
    difference = found["difference"]
    assert difference["groups"] == ["May", "August"]
    assert close(difference["value"], r1 - r2)
    assert close(difference["z"], z)
    assert close(difference["p"], 2 * float(norm.sf(abs(z))))
    assert close(difference["low"], low)
    assert close(difference["high"], high)


SMALL = Invented(
    columns={
        "u": "1 2 3 4 5 6 7 8 9 10 11 12",
        "v": "2 1 4 3 6 5 8 7 - 9 12 11",
        "w": "5 5 1 7 3 2 9 8 4 6 - 10",
        "flat": "1 1 1 1 1 1 1 1 1 1 1 2",
        "site": "a a a a a b b b b - c c",
    },
    variables={"site": "label: site, scale: ordered, lowest_to_highest: [a, b, c]"},
    associations={
        "A1": association(more="covariates: [w], compare_with: A2, groups: {column: site, compared: [a, c]}"),
        "A2": association("u", "w"),
    },
)


def test_rows_in_no_group_are_counted_and_small_groups_have_no_coefficient() -> None:
    """A blank or a missing code is no group; below the requirement of the plan stands "too few rows"."""
    study = replace(SMALL, requirements="fewest_complete_rows: 4, most_missing: 1, most_tied: 1")
    found = filed(study, "A1/subgroups")
    assert found["without_group"] == 1
    assert [(group["label"], group["n"], group["state"]) for group in found["groups"]] == [
        ("a", 5, "estimated"),
        ("c", 2, "not estimable"),
        ("b", 3, "not estimable"),
    ]
    assert found["groups"][1]["reason"] == "too few rows"
    assert found["difference"] == {"groups": ["a", "c"], "state": "not estimable", "reason": "too few rows"}


@pytest.mark.parametrize("rows", ["leave_out: []", "repeated_within: site, time_order: not applicable"])
def test_dependent_rows_withhold_every_p_and_interval_and_leave_estimates(rows: str) -> None:
    """The reason is that of the test; a coefficient needs no such thing and stays."""
    plain = filed(replace(SMALL, rows=rows), "A1")
    reason = plain["test"]["reason"]
    assert plain["partial"]["test"] == {"state": "withheld", "reason": reason}
    assert plain["comparison"]["difference"]["reason"] == reason
    assert "p" not in plain["comparison"]["difference"]
    assert plain["subgroups"]["groups"][0]["interval"] == {"state": "none", "reason": reason}
    assert {"value", "first", "second"} <= {*plain["partial"], *plain["comparison"]}
    assert plain["subgroups"]["groups"][0]["state"] == "estimated"


def test_what_the_plan_withholds_of_an_association_is_withheld_here_too() -> None:
    """Too few complete rows under "withhold all": no estimate of any kind, with the reason."""
    study = replace(SMALL, requirements="fewest_complete_rows: 12, most_missing: 1, if_not_met: withhold all")
    plain = filed(study, "A1")
    reason = plain["estimate"]["reason"]
    for part in (plain["partial"], plain["comparison"], plain["subgroups"]["groups"][0]):
        assert (part["state"], part["reason"]) == ("withheld", reason)


def test_a_test_withheld_for_the_association_compared_with_withholds_the_comparison() -> None:
    """The other association lacks too many values; the reason says which of the two is meant."""
    study = replace(
        SMALL,
        columns={**SMALL.columns, "w": "5 - 1 7 - 2 - 8 4 - - 10"},
        requirements="fewest_complete_rows: 3, most_missing: 0.3, most_tied: 1",
    )
    plain = filed(study, "A1")
    assert plain["test"]["state"] == "tested"
    assert plain["comparison"]["difference"]["state"] == "withheld"
    assert plain["comparison"]["difference"]["reason"].endswith("(the association compared with)")


def test_a_covariate_without_variation_gives_a_reason_in_words() -> None:
    """The one row in which it differs is lost to another covariate."""
    study = replace(SMALL, associations={"A1": association(more="covariates: [flat, w]")}, columns={
        **SMALL.columns, "w": "5 5 1 7 3 2 9 8 4 6 3 -"
    })  # fmt: skip
    partial = filed(study, "A1/partial")
    assert (partial["state"], partial["reason"]) == ("not estimable", "a variable held fixed does not vary")


def test_a_screening_shows_nothing_of_it() -> None:
    """Blind, neither a partial coefficient nor a comparison nor a group is looked at, not even its rows counted."""
    plain = screen_study(*SMALL.read()).plain
    for name in ("A1", "A2"):
        shown = look_up(plain, f"associations/{name}")
        assert isinstance(shown, dict)
        assert not {"partial", "comparison", "subgroups"} & set(shown)


def test_findings_and_family_do_not_know_of_it() -> None:
    """The same study with and without these keys decides the same."""
    plainer = replace(SMALL, associations={"A1": association(), "A2": association("u", "w")}, rows=INDEPENDENT)
    with_more, without = SMALL.analysed(), plainer.analysed()
    assert with_more.findings == without.findings
    assert with_more.family == without.family
    assert not {"partial", "comparison", "subgroups"} & set(analysis_to_plain(without)["associations"]["A1"])  # type: ignore[index,arg-type,call-overload]
