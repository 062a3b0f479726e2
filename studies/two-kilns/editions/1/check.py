"""Checks a record copy without the program that made it: python3 check.py in the folder of the edition.

Needs Python 3.9 or later and nothing else.  It holds every file against SHA256SUMS; ranks the values of rows.csv
anew and holds the worksheets against them; recomputes each coefficient in whole numbers; counts all orderings of
the rows where there are few enough; derives p, adjusted p and finding from the counts; holds results.csv against
analysis.json; computes the approximate tests of size and of null values again; holds waivers against the plan, levels of
intervals against their rule and a coverage against its own counts; computes coefficients of groups, of a comparison and
of a partial correlation again; and looks up every printed number of document.json in analysis.json and in report.html.

It does not read the spec and the data as received, does not recompute limits of intervals, the whole numbers of a partial
correlation, tests beyond two variables, drawn permutations, those of a family by step-down maxT, the bars of a null,
shape, sensitivity and what the rows could have shown, and does not open the PDF.
"""

# ruff: noqa: T201 - it speaks to a person at a terminal

from __future__ import annotations

import csv
import hashlib
import html
import json
import re
import sys
from collections import Counter, defaultdict
from collections.abc import Iterator
from decimal import ROUND_FLOOR, ROUND_HALF_EVEN, Context, Decimal
from fractions import Fraction
from functools import reduce
from math import atanh, comb, erfc, factorial, gcd, isclose, prod, sqrt
from operator import add, mul, sub
from pathlib import Path
from typing import Any

MOST_ROWS_COUNTED = 14  # Up to here counting takes seconds on any machine; more rows are left to the program itself.
DIGITS = 12  # Significant digits of every filed value that is not whole.
FLOAT_DIGITS = 40  # Significant digits of a coefficient before it is taken as a double for the tests of size.
LEAST_P = 1e-300  # A p of the normal law that is smaller is filed as this.
RHO = "Spearman rho"
MAX_T = "step-down maxT"
WAIVED_AS = {
    "enough_rows": "complete rows", "missing_share": "missing values", "tie_share": "ties",
    "built_in": "built-in association",
}  # fmt: skip
RESULT_ADDRESSES = {
    "n": "rows/complete", "value": "estimate/value", "interval_low": "interval/low", "interval_high": "interval/high",
    "interval_level": "interval/level", "interval_by": "interval/by", "p": "test/p", "p_by": "test/method",
    "finding_by": "finding/by", "p_of_finding": "finding/p", "p_adjusted": "finding/p_adjusted",
    "size_verdict": "size/verdict", "finding": "finding/word",
}  # fmt: skip
"""Column of results.csv → where its value stands below an association of analysis.json, if not under its own name."""

NUMBER_ELEMENT = re.compile(r'data-key="([^"]+)"[^>]*>([^<]*)<')


def main(folder: Path) -> int:
    """Check the record copy in ``folder``; return the exit status."""
    problems: list[str] = []
    files = check_digests(folder, problems)
    numbers, left, together = 0, [], []
    try:
        analysis = json.loads((folder / "analysis.json").read_text(encoding="utf-8"))
        left = check_associations(folder, analysis, problems)
        check_waivers(folder, analysis, problems)
        check_sizes(folder, analysis, problems)
        check_intervals(folder, analysis, problems)
        check_more_variables(folder, analysis, problems)
        together = check_findings(folder, analysis, problems)
        check_results(folder, analysis, problems)
        numbers = check_printed(folder, analysis, problems)
    except (OSError, ValueError, KeyError, TypeError, ArithmeticError) as error:
        problems.append(f"the record cannot be read to its end: {type(error).__name__}, {error}.")
    if problems:
        things = "1 thing does" if len(problems) == 1 else f"{len(problems)} things do"
        print(f"{things} not agree ({numbers} numbers, {files} files looked at):")
        for place, problem in enumerate(problems, start=1):
            print(f"  {place}. {problem}")
    else:
        print(f"Everything agrees ({numbers} numbers, {files} files).")
    if left:
        print(f"Not counted anew (p is no count, or more than {MOST_ROWS_COUNTED} rows): {', '.join(left)}.")
    if together:
        print(f"Not made anew by {MAX_T}, only held against its own count: the adjusted p of {', '.join(together)}.")
    return 1 if problems else 0


def hold(what: str, filed: object, anew: object, problems: list[str]) -> None:
    """Note a value that is not what it is when made anew."""
    if filed != anew:
        problems.append(f"{what} is {filed}, made anew {anew}.")


def hold_p(what: str, filed: str, value: Fraction, problems: list[str]) -> None:
    """Note a p that is not the one made anew: to 12 digits, or to as many more as keep it on its side of alpha."""
    digits = Context(prec=max(DIGITS, len(Decimal(filed).as_tuple().digits)), rounding=ROUND_HALF_EVEN)
    anew = Fraction(digits.divide(Decimal(value.numerator), Decimal(value.denominator)))
    if Fraction(filed) != anew:
        problems.append(f"{what} is {filed}, made anew {decimal_text(anew)}.")


def check_digests(folder: Path, problems: list[str]) -> int:
    """Hold every listed file against its SHA-256, and look for files that are not listed; return how many are."""
    listed = {}
    for line in (folder / "SHA256SUMS").read_text(encoding="utf-8").splitlines():
        digest, _, name = line.partition("  ")
        listed[name] = digest
    present = {path.relative_to(folder).as_posix() for path in folder.rglob("*") if path.is_file()}
    for name, digest in sorted(listed.items()):
        if name not in present:
            problems.append(f"{name} is missing.")
        elif hashlib.sha256((folder / name).read_bytes()).hexdigest() != digest:
            problems.append(f"{name} is not the file that was sealed.")
    problems.extend(f"{name} is not listed in SHA256SUMS." for name in sorted(present - listed.keys() - {"SHA256SUMS"}))
    return len(listed)


def check_associations(folder: Path, analysis: Any, problems: list[str]) -> list[str]:
    """Rank, compute and count every association again; return the names of those not counted."""
    rows: dict[str, list[dict[str, str]]] = {}
    for row in read_csv(folder / "rows.csv"):
        rows.setdefault(row["association"], []).append(row)
    problems.extend(
        f"rows.csv: there is no association {name}." for name in sorted(rows.keys() - analysis["associations"].keys())
    )
    left, alpha = [], Fraction(analysis["inference"]["alpha"])
    for name, found in sorted(analysis["associations"].items()):
        its_rows = rows.get(name, [])
        if len(its_rows) != found["rows"]["complete"]:
            said = found["rows"]["complete"]
            problems.append(f"{name}: rows.csv has {len(its_rows)} rows, analysis.json says {said}.")
            continue
        x = doubled_midranks([Fraction(row["x_value"]) for row in its_rows])
        y = doubled_midranks([Fraction(row["y_value"]) for row in its_rows])
        check_worksheet(folder, name, (its_rows, x, y), problems)
        if found["estimate"]["state"] == "estimated":
            check_coefficient(name, found["estimate"], sums_of(found["coefficient"], x, y), problems)
        if found["test"]["state"] == "tested" and not check_test(name, found, (x, y), alpha, problems):
            left.append(name)
    return left


def read_csv(path: Path) -> list[dict[str, str]]:
    """Return a CSV file's rows as mappings."""
    with path.open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))


def check_worksheet(
    folder: Path, name: str, rows: tuple[list[dict[str, str]], list[int], list[int]], problems: list[str]
) -> None:
    """Hold the ranks, their differences and the squares against ranks made anew."""
    file = f"ranks-{name}.csv"
    filed = read_csv(folder / file)
    used, x, y = rows
    if len(filed) != len(used):
        problems.append(f"{file} has {len(filed)} rows, rows.csv {len(used)}.")
        return
    for place, row in enumerate(filed):
        rank_x, rank_y = Fraction(x[place], 2), Fraction(y[place], 2)
        anew = {"rank_x": rank_x, "rank_y": rank_y, "difference": rank_x - rank_y, "squared": (rank_x - rank_y) ** 2}
        for column, value in anew.items():
            hold(f"{file}, line {place + 2}: {column}", row[column], decimal_text(value), problems)
        for column in ("row", "x", "y"):
            hold(f"{file}, line {place + 2}: {column}", row[column], used[place][column], problems)


def check_coefficient(what: str, filed: Any, sums: tuple[int, int, int], problems: list[str]) -> None:
    """Hold a coefficient and its whole numbers against those made anew."""
    for key, anew in zip(("numerator", "x_square", "y_square"), sums):  # noqa: B905
        hold(f"{what}: {key}", filed[key], str(anew), problems)
    hold(f"{what}: the coefficient", Decimal(filed["value"]), coefficient(*sums), problems)


def check_test(name: str, found: Any, ranks: tuple[list[int], list[int]], alpha: Fraction, problems: list[str]) -> bool:
    """Derive p from its count, and count all orderings where there are few enough; return whether it was done."""
    test = found["test"]
    if test["count"] is None:
        return False
    for key, counted in (("p", "count"), ("p_greater", "count_greater"), ("p_less", "count_less")):
        hold_p(f"{name}: {key}", test[key], p_of(test, int(test[counted])), problems)
    if "draws" in test:
        last = test["draws"]["looks"][-1]
        hold(f"{name}: the last look", (last["draws"], last["count"]), (int(test["of"]), int(test["count"])), problems)
    if not test["method"].startswith("exact") or len(ranks[0]) > MOST_ROWS_COUNTED:
        return False
    tally = orderings(*ranks, found["coefficient"])
    numerator, *squares = sums_of(found["coefficient"], *ranks)
    for key, side in (("count", test["direction"]), ("count_greater", "greater"), ("count_less", "less")):
        count = sum(times for size, times in sizes(tally, side) if size >= turned(numerator, side))
        hold(f"{name}: {key}", test[key], str(count), problems)
    of = factorial(len(ranks[0]))
    hold(f"{name}: the number of orderings", test["of"], str(of), problems)
    most_extreme = Fraction(sizes(tally, test["direction"])[0][1], of)
    hold_p(f"{name}: the smallest attainable p", found["smallest_attainable_p"], most_extreme, problems)
    for side, filed in found["null"]["critical"].items() if "method" in found["null"] else ():
        end, count = critical(sizes(tally, side), alpha * of)
        what = f"{name}: critical value, {side}"
        hold(f"{what}: state", filed["state"], "given" if count else "none", problems)
        if count and filed["state"] == "given":
            hold(f"{what}: numerator", turned(int(filed["numerator"]), side), end, problems)
            hold(what, turned(Decimal(filed["value"]), side), coefficient(end, *squares), problems)
            if "count" in filed:
                hold(f"{what}: count", (filed["count"], filed["of"]), (str(count), str(of)), problems)
                hold_p(f"{what}: p", filed["p"], Fraction(count, of), problems)
    return True


def turned(value: Any, side: str) -> Any:
    """Return how far a value lies toward a side: the same, the opposite, or its size."""
    return abs(value) if side == "two-sided" else -value if side == "less" else value


def sizes(tally: dict[int, int], side: str) -> list[tuple[int, int]]:
    """Return how many orderings lie how far toward a side, the farthest first."""
    found: Counter[int] = Counter()
    for value, times in tally.items():
        found[turned(value, side)] += times
    return sorted(found.items(), reverse=True)


def critical(farthest_first: list[tuple[int, int]], most: Fraction) -> tuple[int, int]:
    """Return the value nearest to 0 that at most so many orderings reach, and how many do; 0 of none."""
    nearest, tail = (0, 0), 0
    for size, times in farthest_first:
        tail += times
        if size <= 0 or tail > most:
            break
        nearest = size, tail
    return nearest


def p_of(test: Any, count: int) -> Fraction:
    """Return p: a share of all orderings, or of the drawn ones together with the observed one."""
    drawn = 0 if test["method"].startswith("exact") else 1
    return Fraction(count + drawn, int(test["of"]) + drawn)


def check_sizes(folder: Path, analysis: Any, problems: list[str]) -> None:
    """Compute the tests of size and of null values again, and take the verdicts again."""
    plan = json.loads((folder / "plan.json").read_text(encoding="utf-8"))
    rows = read_csv(folder / "rows.csv")
    for name, found in sorted(analysis["associations"].items()):
        hypothesis, size = plan["associations"][name]["hypothesis"], found.get("size", {"state": "none"})
        asked = hypothesis.get("null_value") is not None or hypothesis["smallest_of_interest"] is not None
        hold(f"{name}: size", "size" in found, asked and found["test"]["state"] == "tested", problems)
        if size["state"] != "tested":
            continue
        its_rows = [row for row in rows if row["association"] == name]
        x, y = (doubled_midranks([Fraction(row[key]) for row in its_rows]) for key in ("x_value", "y_value"))
        r = capped_rho(x, y)
        hold_near(f"{name}: the coefficient of its tests of size", size["coefficient"], r, problems)
        what, direction = f"{name}: size", found["test"]["direction"]
        if hypothesis.get("null_value") is not None:
            z = z_against(r, len(x), hypothesis["null_value"])
            hold(f"{what}: null value", Fraction(size["value"]["null"]), Fraction(hypothesis["null_value"]), problems)
            hold_near(f"{what}: z of the null value", size["value"]["z"], z, problems)
            hold_near(f"{what}: p of the null value", size["value"]["p"], value_p(z, direction), problems, z * z)
        if hypothesis["smallest_of_interest"] is not None:
            check_verdict(what, found, (r, len(x), hypothesis["smallest_of_interest"]), problems)
            family = analysis["inference"]["family"]
            shared = name in family and plan["inference"]["several_tests"]["adjust"] != "none"
            level = Fraction(plan["inference"]["alpha"]) / (len(family) if shared else 1)
            hold(f"{what}: verdict", size["verdict"], verdict(found, level), problems)


def check_verdict(what: str, found: Any, tested: tuple[float, int, str], problems: list[str]) -> None:
    """Compute both tests of a smallest size of interest again."""
    size, (r, n, delta) = found["size"], tested
    hold(f"{what}: delta", Fraction(size["delta"]), Fraction(delta), problems)
    upper, lower = z_against(r, n, delta), z_against(r, n, f"-{delta}")
    above = above_p(upper, lower, found["test"]["direction"])
    anew = {"z_upper": upper, "z_lower": lower, "p_above": above, "p_within": max(tail(lower), tail(-upper))}
    for key, value in anew.items():
        hold_near(f"{what}: {key}", size[key], value, problems, max(upper * upper, lower * lower))


def verdict(found: Any, level: Fraction) -> str:
    """Return the first of the four verdicts about size that applies."""
    size, test = found["size"], found["test"]
    independence = Fraction(test["p"]) if test["count"] is None else p_of(test, int(test["count"]))
    if Fraction(size["p_above"]) <= level:
        return "size above delta shown"
    if Fraction(size["p_within"]) <= level:
        return "size below delta shown"
    return "independence rejected, size above delta not shown" if independence <= level else "undecided"


def capped_rho(x: list[int], y: list[int]) -> float:
    """Return rho, or the cap that the widest tie steps set where it lies beyond."""
    numerator, x_square, y_square = rho_sums(x, y)
    steps = [max(high - low for low, high in zip(places, places[1:])) for places in (sorted({*x}), sorted({*y}))]  # noqa: B905, RUF007 - Python 3.9
    cap = 1 - steps[0] * steps[1] / (2 * sqrt(x_square) * sqrt(y_square))
    return min(max(float(coefficient(numerator, x_square, y_square, FLOAT_DIGITS)), -cap), cap)


def z_against(r: float, n: int, null: str) -> float:
    """Return z of a coefficient against a null value, with the variance (1 + null²/2)/(n − 3) of atanh r."""
    value = float(null)
    return (atanh(r) - atanh(value)) * sqrt((n - 3) / (1 + value * value / 2))


def value_p(z: float, side: str) -> float:
    """Return p of the z of a null value."""
    return min(1.0, 2 * tail(abs(z))) if side == "two-sided" else tail(z if side == "greater" else -z)


def above_p(upper: float, lower: float, side: str) -> float:
    """Return p of a size no larger than the one of interest from z against it and against its negative."""
    if side == "two-sided":
        return tail(max(upper, -lower)) + tail(max(-upper, lower))
    return tail(upper) if side == "greater" else tail(-lower)


def tail(z: float) -> float:
    """Return the probability that a standard normal value is z or more."""
    return erfc(z / sqrt(2)) / 2


def hold_near(what: str, filed: str, anew: float, problems: list[str], z_square: float = 0.0) -> None:
    """Note a double that is not the filed one to its digits; a p is as many times less sharp as its z is large."""
    anew = max(anew, LEAST_P) if ": p" in what else anew
    if not isclose(float(filed), anew, rel_tol=1e-11 * (1 + z_square), abs_tol=0 if ": p" in what else 1e-11):
        problems.append(f"{what} is {filed}, made anew {anew:.12g}.")


def check_waivers(folder: Path, analysis: Any, problems: list[str]) -> None:
    """Hold the reasons of waived requirements against the plan; what is waived withholds nothing."""
    plan = json.loads((folder / "plan.json").read_text(encoding="utf-8"))
    for name, found in sorted(analysis["associations"].items()):
        reasons = plan["associations"][name].get("waived", {})
        for key, outcome in sorted(found["checks"].items()):
            reason = reasons.get(WAIVED_AS.get(key)) if outcome["state"] in ("not met", "doubtful") else None
            hold(f"{name}: {key}: why it is waived", outcome.get("waived"), reason, problems)
            if reason is not None:
                hold(f"{name}: {key}: what it withholds", outcome["withholds"], "nothing", problems)


def check_intervals(folder: Path, analysis: Any, problems: list[str]) -> None:
    """Compute the level of adjusted intervals again, and hold each interval against it or the plan's."""
    plan = json.loads((folder / "plan.json").read_text(encoding="utf-8"))["inference"]
    adjusted, alone, level = plan["interval"]["adjusted"], Decimal(plan["confidence_level"]), None
    family, filed = analysis["inference"]["family"], analysis["inference"]["interval"]
    shown = [name for name in family if analysis["associations"][name]["finding"]["word"].startswith("shown")]
    selected = len(shown) if adjusted == "after selection" else None
    members = {"simultaneous": family, "after selection": shown}.get(adjusted, [])
    if members:
        error = (1 if selected is None else selected) * (1 - alone)
        level = 1 - Context(prec=DIGITS, rounding=ROUND_FLOOR).divide(error, Decimal(len(family)))
    hold("inference: how intervals are adjusted", filed["adjusted"], adjusted, problems)
    hold("inference: how many are selected", filed.get("selected"), selected, problems)
    hold("inference: adjusted level", Decimal(filed["level"]) if "level" in filed else None, level, problems)
    for name, found in sorted(analysis["associations"].items()):
        is_member, has_two = name in members, "interval_alone" in found
        if has_two or found["interval"]["state"] == "given":
            hold(f"{name}: a second interval", has_two, is_member, problems)
        for which, is_adjusted in (("interval", is_member), ("interval_alone", False)):
            interval, what = found.get(which, {"state": "none"}), f"{name}: {which}"
            if interval["state"] == "given":
                hold(f"{what}: level", Decimal(interval["level"]), level if is_adjusted else alone, problems)
                hold(f"{what}: holds", interval["holds"], adjusted if is_adjusted else "alone", problems)
                if not Decimal(interval["low"]) < Decimal(interval["high"]):
                    problems.append(f"{what}: {interval['low']} is not below {interval['high']}.")
        if found["interval"].get("coverage", {}).get("state") == "simulated":
            check_coverage(name, found["interval"]["coverage"], Fraction(found["interval"]["level"]), problems)


def check_coverage(name: str, coverage: Any, level: Fraction, problems: list[str]) -> None:
    """Judge a simulated coverage again by its misses over those that the level allows."""
    lowest = coverage["lowest"]
    for what, row in (("coverage", coverage), ("lowest coverage", lowest)):
        hold(f"{name}: {what}: samples", row["samples"], int(row["share"].split("/")[1]), problems)
    if Fraction(lowest["share"]) > Fraction(coverage["share"]):
        problems.append(f"{name}: the lowest coverage {lowest['share']} is above the nearest {coverage['share']}.")
    misses = (1 - Fraction(coverage["share"])) / (1 - level)
    judged = "too low" if misses > Fraction(7, 5) else "wide" if misses < Fraction(3, 5) else "near"
    hold(f"{name}: coverage: judged", coverage["judged"], judged, problems)


def check_more_variables(folder: Path, analysis: Any, problems: list[str]) -> None:
    """Rank again what a partial coefficient, a comparison and groups of rows rest on."""
    plan = json.loads((folder / "plan.json").read_text(encoding="utf-8"))["associations"]
    cells: Any = defaultdict(lambda: defaultdict(dict))
    for row in read_csv(folder / "rows.csv"):
        for axis in "xy":
            cells[row["association"], ""][axis][row["row"]] = row[f"{axis}_value"]
    for row in read_csv(folder / "more_rows.csv") if (folder / "more_rows.csv").exists() else ():
        cells[row["association"], row["used_for"]][row["variable"]][row["row"]] = row["value"]
    for name, found in sorted(analysis["associations"].items()):
        for key, asked in (("partial", "covariates"), ("comparison", "compare_with"), ("subgroups", "groups")):
            hold(f"{name}: {key}", key in found, asked in plan[name], problems)
        pair, own = (found["x"], found["y"]), {found[axis]: cells[name, ""][axis] for axis in "xy"}
        for key in sorted({"partial", "comparison"} & found.keys()):
            filed, what, columns = found[key], f"{name}: {key}", {**cells[name, key], **own}
            used = filed["variables"] if key == "comparison" else filed["covariates"]
            lines = [line for line in own[pair[0]] if all(line in columns.get(variable, ()) for variable in used)]
            hold(f"{what}: rows", filed["n"], len(lines), problems)
            if filed["state"] == "estimated" and key == "partial":
                check_coefficient(f"{what}: rho", filed["rho"], ranked(columns, pair, lines, RHO), problems)
                whole = (int(filed[part]) for part in ("numerator", "x_square", "y_square"))
                hold(f"{what}: the coefficient", Decimal(filed["value"]), coefficient(*whole), problems)
            elif filed["state"] == "estimated":
                other = analysis["associations"][filed["with"]]
                for which, two in (("first", pair), ("second", (other["x"], other["y"]))):
                    check_coefficient(f"{what}: {which}", filed[which], ranked(columns, two, lines, RHO), problems)
        if "subgroups" in found:
            check_groups(name, found, own, next(iter(cells[name, "groups"].values()), {}), problems)


def check_groups(name: str, found: Any, own: Any, label_of: dict[str, str], problems: list[str]) -> None:
    """Rank each group of rows again; a spreadsheet's apostrophe before a name, or its minus, is not of the name."""
    hold(f"{name}: rows looked at for groups", len(label_of), len(own[found["x"]]), problems)
    without = sum(not label for label in label_of.values())
    hold(f"{name}: rows without a group", found["subgroups"]["without_group"], without, problems)
    for group in found["subgroups"]["groups"]:
        label, what = group["label"], f"{name}: group {group['label']}"
        lines = [row for row, text in label_of.items() if text in (label, f"'{label}", label.replace("\u2212", "-"))]
        hold(f"{what}: rows", group["n"], len(lines), problems)
        if group.get("state") == "estimated":
            sums = ranked(own, (found["x"], found["y"]), lines, found["coefficient"])
            check_coefficient(what, group, sums, problems)


def ranked(columns: Any, pair: tuple[str, str], lines: list[str], name: str) -> tuple[int, int, int]:
    """Return the whole numbers of a coefficient of these rows, ranked among themselves."""
    return sums_of(name, *(doubled_midranks([Fraction(columns[one][line]) for line in lines]) for one in pair))


def check_findings(folder: Path, analysis: Any, problems: list[str]) -> list[str]:
    """Adjust every p again and decide again by the plan; return whose adjusted p rests on filed counts."""
    plan = json.loads((folder / "plan.json").read_text(encoding="utf-8"))
    family, alpha = analysis["inference"]["family"], Fraction(plan["inference"]["alpha"])
    p_values = {
        name: Fraction(test["p"]) if (test := found["test"])["count"] is None else p_of(test, int(test["count"]))
        for name, found in analysis["associations"].items()
        if found["test"]["state"] == "tested"
    }
    for name, found in sorted(analysis["associations"].items()):
        check_deciding(name, found, plan["associations"][name]["hypothesis"], p_values, problems)
    everybody = {name: p_values.get(name, Fraction(1)) for name in family}
    rule = plan["inference"]["several_tests"]["adjust"]
    hold("inference: adjust", analysis["inference"]["adjust"], rule, problems)
    hold("inference: error_rate", analysis["inference"]["error_rate"], error_rate(rule, family), problems)
    together = sorted(p_values.keys() & set(family)) if rule == MAX_T and len(family) > 1 else []
    adjusted = everybody if rule == MAX_T else adjust(rule, everybody)
    for name in together:
        adjusted[name] = p_together(name, analysis, p_values[name], problems)
    for name, found in sorted(analysis["associations"].items()):
        finding = found["finding"]
        if "p_adjusted" in finding:
            hold_p(f"{name}: p_adjusted", finding["p_adjusted"], adjusted[name], problems)
        if found["test"]["state"] != "tested" or finding["basis"] == "outside the family":
            continue
        word = "not shown"
        if (adjusted[name] if finding["basis"] == "family" else p_values.get(name, Fraction(1))) <= alpha:
            by = finding["by"]
            above = float(found["size"]["value"]["z"]) if by == "null value" else int(found["estimate"]["numerator"])
            sign = "positive" if above > 0 else "negative"
            expected = plan["associations"][name]["hypothesis"]["expected_sign"]
            word = "shown" if by == "within" or expected in ("either", sign) else "shown, opposite sign"
        hold(f"{name}: the finding", finding["word"], word, problems)
    return together


def check_deciding(name: str, found: Any, hypothesis: Any, p_values: dict[str, Fraction], problems: list[str]) -> None:
    """Put the p that decides a claim in the place of that of independence, and hold the filed one against it."""
    claim = "null value" if hypothesis.get("null_value") is not None else hypothesis.get("claim", "any")
    hold(f"{name}: what decided", found["finding"]["by"], "rank test" if claim == "any" else claim, problems)
    if claim != "any" and name in p_values:
        size = found["size"]
        if size["state"] == "tested":
            filed = size["value"]["p"] if claim == "null value" else size[f"p_{claim}"]
            p_values[name] = Fraction(filed)
        else:
            del p_values[name]
    if name in p_values:
        hold_p(f"{name}: p of the finding", found["finding"]["p"], p_values[name], problems)


def error_rate(rule: str, family: list[str]) -> str:
    """Return what alpha bounds."""
    if not family or rule == "none":
        return "each test alone"
    return "share of false findings" if rule.startswith("Benjamini") else "any false finding"


def adjust(rule: str, p_values: dict[str, Fraction]) -> dict[str, Fraction]:
    """Adjust by the rule of the plan.

    Each rule multiplies the smallest, second smallest, ... p by a factor of its own.  Stepping down, an adjusted p is
    the largest product so far; stepping up, the smallest from there on; never more than 1.
    """
    names = sorted(p_values, key=lambda name: p_values[name])
    products = [factor * p_values[name] for factor, name in zip(factors(rule, len(names)), names)]  # noqa: B905
    one = Fraction(1)
    adjusted = {}
    for place, name in enumerate(names):
        so_far, from_here = products[: place + 1], products[place:]
        if rule in ("Hochberg", "Benjamini-Hochberg", "Benjamini-Yekutieli"):
            adjusted[name] = min(one, *from_here)
        elif rule == "Holm":
            adjusted[name] = min(one, max(so_far))
        else:
            adjusted[name] = min(one, products[place])
    return adjusted


def factors(rule: str, size: int) -> list[Fraction]:
    """Return the factors of a rule, that of the smallest p first."""
    places = range(1, size + 1)
    harmonic = sum((Fraction(1, place) for place in places), Fraction(0))
    return {
        "Holm": [Fraction(size - place + 1) for place in places],
        "Hochberg": [Fraction(size - place + 1) for place in places],
        "Bonferroni": [Fraction(size)] * size,
        "Benjamini-Hochberg": [Fraction(size, place) for place in places],
        "Benjamini-Yekutieli": [harmonic * Fraction(size, place) for place in places],
        "none": [Fraction(1)] * size,
    }[rule]


def p_together(name: str, analysis: Any, own: Fraction, problems: list[str]) -> Fraction:
    """Return the adjusted p of a family's permutations from its filed count, never below the association's own p."""
    filed, family = analysis["associations"][name]["finding"]["max_t"], analysis["inference"]["max_t"]
    hold(f"{name}: permutations of the family", filed["of"], family["of"], problems)
    hits, own_hits, of = int(filed["count"]), int(filed["own_count"]), int(filed["of"])
    if not own_hits <= hits <= of:
        problems.append(f"{name}: the counts {own_hits}, {hits} and {of} of the family do not rise.")
    drawn = 0 if family["method"] == "all permutations" else 1
    share = Fraction(hits + drawn, of + drawn)
    hold_p(f"{name}: share of the family", filed["share"], share, problems)
    hold(f"{name}: below its own p", filed["below_own_p"], share < own, problems)
    return max(share, own)


def check_results(folder: Path, analysis: Any, problems: list[str]) -> None:
    """Hold every cell of results.csv against analysis.json."""
    rows = read_csv(folder / "results.csv")
    names = [row["association"] for row in rows]
    if sorted(names) != sorted(analysis["associations"]):
        problems.append(f"results.csv has the associations {', '.join(names)}, analysis.json others.")
        return
    for line, row in enumerate(rows, start=2):
        found, sidedness = analysis["associations"][row["association"]], analysis["inference"]["sidedness"]
        its_own = {**found, "association": row["association"], "sidedness": sidedness}
        for column, cell in row.items():
            filed = look_up(its_own, RESULT_ADDRESSES.get(column, column))
            if cell != ("" if filed is None else str(filed)):
                has = f"{column} is {cell or 'blank'}, analysis.json has {filed or 'nothing'}"
                problems.append(f"results.csv, line {line}: {has}.")


def doubled_midranks(values: list[Fraction]) -> list[int]:
    """Return twice the midrank of every value."""
    first: dict[Fraction, int] = {}
    last: dict[Fraction, int] = {}
    for place, value in enumerate(sorted(values), start=1):
        first.setdefault(value, place)
        last[value] = place
    return [first[value] + last[value] for value in values]


def sums_of(name: str, x: list[int], y: list[int]) -> tuple[int, int, int]:
    """Return the three whole numbers that make a coefficient."""
    return rho_sums(x, y) if name == RHO else tau_sums(x, y)


def rho_sums(x: list[int], y: list[int]) -> tuple[int, int, int]:
    """Return products, squares of x and squares of y of doubled centred midranks."""
    middle = len(x) + 1
    a, b = [value - middle for value in x], [value - middle for value in y]
    products = sum(value * b[place] for place, value in enumerate(a))
    return products, sum(value * value for value in a), sum(value * value for value in b)


def tau_sums(x: list[int], y: list[int]) -> tuple[int, int, int]:
    """Return row pairings in the same less those in opposite order, and pairings not tied in x and in y."""
    numerator, in_x, in_y = 0, 0, 0
    for i in range(len(x)):
        for j in range(i):
            sign_x, sign_y = (x[i] > x[j]) - (x[i] < x[j]), (y[i] > y[j]) - (y[i] < y[j])
            numerator, in_x, in_y = numerator + sign_x * sign_y, in_x + abs(sign_x), in_y + abs(sign_y)
    return numerator, in_x, in_y


def coefficient(numerator: int, x_square: int, y_square: int, digits: int = DIGITS) -> Decimal:
    """Return the first over the root of the product of the others, to so many significant digits, half to even."""
    wide = Context(prec=80)
    exact = wide.divide(Decimal(numerator), wide.sqrt(Decimal(x_square * y_square)))
    return Context(prec=digits, rounding=ROUND_HALF_EVEN).plus(exact)


def decimal_text(value: Fraction) -> str:
    """Return a fraction whose decimal form ends in full."""
    text = f"{Context(prec=200).divide(Decimal(value.numerator), Decimal(value.denominator)):f}"
    return text.rstrip("0").rstrip(".") if "." in text else text


def orderings(x: list[int], y: list[int], name: str) -> dict[int, int]:
    """Return numerator → number of the n! orderings of y against x that have it.

    x is gone through from its smallest value; what is remembered is how many rows of each y value are used up, and
    for each such state the counts of all sums so far, packed into one long whole number: a shift adds to a sum.
    """
    values, times = zip(*sorted(Counter(y).items()))  # noqa: B905 - Python 3.9 has no strict
    low_x, low_y = min(x), min(y)
    unit_x = reduce(gcd, (value - low_x for value in x)) or 1
    unit_y = reduce(gcd, (value - low_y for value in y)) or 1
    width = factorial(len(x)).bit_length()
    scale, shift = 1, 0
    if name == RHO:
        scale, shift = unit_x * unit_y, -len(x) * (len(x) + 1 - low_x) * (len(x) + 1 - low_y)
    layer: dict[tuple[int, ...], int] = {(0,) * len(values): 1}
    for value, size in sorted(Counter(x).items()):
        following: dict[tuple[int, ...], int] = defaultdict(int)
        before = sum(next(iter(layer)))
        if name != RHO:
            shift -= size * before
        for used, packed in layer.items():
            if name == RHO:
                least, weights = 0, [(value - low_x) // unit_x * ((other - low_y) // unit_y) for other in values]
            else:
                least = size * before
                weights = [sum(used[:place]) - sum(used[place + 1 :]) for place in range(len(values))]
            room = list(map(sub, times, used))
            for taken in choices(room, size):
                ways = factorial(size) * prod(map(comb, room, taken))
                gain = least + sum(map(mul, weights, taken))
                following[tuple(map(add, used, taken))] += (packed * ways) << (width * gain)
        layer = following
    [packed] = layer.values()
    tally, mask, place = {}, (1 << width) - 1, 0
    while packed:
        if packed & mask:
            tally[place * scale + shift] = packed & mask
        packed >>= width
        place += 1
    return tally


def choices(room: list[int], size: int) -> Iterator[tuple[int, ...]]:
    """Yield every way of taking ``size`` rows from groups that have ``room``."""
    if len(room) == 1:
        if size <= room[0]:
            yield (size,)
        return
    most_later = sum(room[1:])
    for number in range(max(0, size - most_later), min(room[0], size) + 1):
        for rest in choices(room[1:], size - number):
            yield (number, *rest)


def check_printed(folder: Path, analysis: Any, problems: list[str]) -> int:
    """Look up every printed number of document.json in analysis.json and in report.html; return how many there are."""
    numbers = list(numbers_in(json.loads((folder / "document.json").read_text(encoding="utf-8"))))
    shown = Counter(
        (html.unescape(key), html.unescape(text))
        for key, text in NUMBER_ELEMENT.findall((folder / "report.html").read_text(encoding="utf-8"))
    )
    told = Counter((number["key"], number["text"]) for number in numbers)
    for key, exact in sorted({(number["key"], number["exact"]) for number in numbers}):
        if str(look_up(analysis, key)) != exact:
            problems.append(f"document.json: {key} is {exact}, analysis.json has {look_up(analysis, key)}.")
    for key, text in sorted(told.keys() | shown.keys()):
        in_words, on_page = told[key, text], shown[key, text]
        if in_words > on_page:
            problems.append(f"document.json prints {key} as {text}, {in_words} times; report.html {on_page} times.")
        elif in_words < on_page:
            problems.append(f"report.html prints {key} as {text}, {on_page} times; document.json {in_words} times.")
    for name, found in sorted(analysis["associations"].items()):
        key = f"associations/{name}/interval/level"
        if "interval_alone" in found and look_up(analysis, key) and not any(number["key"] == key for number in numbers):
            problems.append(f"document.json does not print {key}.")
    return len(numbers)


def numbers_in(node: Any) -> Iterator[dict[str, str]]:
    """Yield every number of a document."""
    if isinstance(node, dict):
        if node.get("is") == "Number":
            yield node
        for value in node.values():
            yield from numbers_in(value)
    elif isinstance(node, list):
        for value in node:
            yield from numbers_in(value)


def look_up(plain: Any, key: str) -> Any:
    """Return what stands at an address of analysis.json, or None."""
    for step in key.split("/"):
        try:
            plain = plain[int(step)] if isinstance(plain, list) else plain[step]
        except (KeyError, IndexError, ValueError, TypeError):
            return None
    return plain


if __name__ == "__main__":
    sys.exit(main(Path(__file__).resolve().parent))
