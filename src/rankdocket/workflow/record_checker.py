"""Checks a record copy without the program that made it: python3 check.py in the folder of the edition.

Needs Python 3.9 or later and nothing else.  It holds every file against SHA256SUMS, ranks the values of rows.csv
anew, recomputes each coefficient in whole numbers, counts all orderings of the rows where there are few, and looks
up every printed number of document.json in analysis.json and in report.html.
"""

import csv
import hashlib
import html
import itertools
import json
import re
import sys
from collections import Counter
from decimal import ROUND_HALF_EVEN, Context, Decimal
from fractions import Fraction
from math import factorial
from pathlib import Path

MOST_ROWS_COUNTED = 8
DIGITS = 12


def main(folder):
    """Check the record copy in ``folder``; return the exit status."""
    problems = []
    files = check_digests(folder, problems)
    analysis = json.loads((folder / "analysis.json").read_text(encoding="utf-8"))
    rows = rows_by_association(folder)
    for name, found in sorted(analysis["associations"].items()):
        check_association(folder, name, found, rows.get(name, []), problems)
    numbers = check_printed(folder, analysis, problems)
    if not problems:
        print(f"Everything agrees ({numbers} numbers, {files} files).")
        return 0
    print(f"{len(problems)} things do not agree ({numbers} numbers, {files} files looked at):")
    for place, problem in enumerate(problems, start=1):
        print(f"  {place}. {problem}")
    return 1


def check_digests(folder, problems):
    """Hold every listed file against its SHA-256."""
    lines = (folder / "SHA256SUMS").read_text(encoding="utf-8").splitlines()
    for line in lines:
        digest, name = line.split("  ", 1)
        path = folder / name
        if not path.is_file():
            problems.append(f"{name} is missing.")
        elif hashlib.sha256(path.read_bytes()).hexdigest() != digest:
            problems.append(f"{name} is not the file that was sealed.")
    return len(lines)


def rows_by_association(folder):
    """Return association name → rows of rows.csv."""
    found = {}
    for row in read_csv(folder / "rows.csv"):
        found.setdefault(row["association"], []).append(row)
    return found


def read_csv(path):
    """Return a CSV file's rows as mappings."""
    with path.open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))


def check_association(folder, name, found, rows, problems):
    """Rank, compute and count one association again."""
    if len(rows) != found["rows"]["complete"]:
        problems.append(f"{name}: rows.csv has {len(rows)} rows, analysis.json says {found['rows']['complete']}.")
        return
    x = doubled_midranks([Fraction(row["x_value"]) for row in rows])
    y = doubled_midranks([Fraction(row["y_value"]) for row in rows])
    for line, (filed, rank_x, rank_y) in enumerate(zip(read_csv(folder / f"ranks-{name}.csv"), x, y), start=2):
        for column, rank in (("rank_x", rank_x), ("rank_y", rank_y)):
            if Fraction(filed[column]) * 2 != rank:
                problems.append(f"ranks-{name}.csv, line {line}: {column} is {filed[column]}, ranked anew {Fraction(rank, 2)}.")
    if found["estimate"]["state"] != "estimated":
        return
    sums = rho_sums(x, y) if found["coefficient"] == "Spearman rho" else tau_sums(x, y)
    for key, value in zip(("numerator", "x_square", "y_square"), sums):
        if int(found["estimate"][key]) != value:
            problems.append(f"{name}: {key} is {found['estimate'][key]} in analysis.json, computed anew {value}.")
    value = coefficient(*sums)
    if Decimal(found["estimate"]["value"]) != value:
        problems.append(f"{name}: the coefficient is {found['estimate']['value']}, computed anew {value}.")
    check_count(name, found, x, y, sums[0], problems)


def check_count(name, found, x, y, numerator, problems):
    """Count all orderings of the rows where there are few enough."""
    test = found["test"]
    if test["state"] != "tested" or not test["method"].startswith("exact") or len(x) > MOST_ROWS_COUNTED:
        return
    sums = rho_sums if found["coefficient"] == "Spearman rho" else tau_sums
    tally = Counter(sums(x, order)[0] for order in itertools.permutations(y))
    extreme = {
        "greater": lambda value: value >= numerator,
        "less": lambda value: value <= numerator,
        "two-sided": lambda value: abs(value) >= abs(numerator),
    }[test["direction"]]
    count = sum(times for value, times in tally.items() if extreme(value))
    if (int(test["count"]), int(test["of"])) != (count, factorial(len(x))):
        problems.append(f"{name}: the count is {test['count']} of {test['of']}, counted anew {count} of {factorial(len(x))}.")


def doubled_midranks(values):
    """Return twice the midrank of every value."""
    ordered = sorted(values)
    first, last = {}, {}
    for place, value in enumerate(ordered, start=1):
        first.setdefault(value, place)
        last[value] = place
    return [first[value] + last[value] for value in values]


def rho_sums(x, y):
    """Return products, squares of x and squares of y of doubled centred midranks."""
    middle = len(x) + 1
    a, b = [value - middle for value in x], [value - middle for value in y]
    return sum(p * q for p, q in zip(a, b)), sum(p * p for p in a), sum(q * q for q in b)


def tau_sums(x, y):
    """Return row pairings in the same less those in opposite order, and pairings not tied in x and in y."""
    sign = lambda one, other: (one > other) - (one < other)
    pairs = list(itertools.combinations(range(len(x)), 2))
    in_x = [sign(x[i], x[j]) for i, j in pairs]
    in_y = [sign(y[i], y[j]) for i, j in pairs]
    return sum(p * q for p, q in zip(in_x, in_y)), sum(map(abs, in_x)), sum(map(abs, in_y))


def coefficient(numerator, x_square, y_square):
    """Return the first over the root of the product of the others, 12 significant digits, half to even."""
    wide = Context(prec=80)
    exact = wide.divide(Decimal(numerator), wide.sqrt(Decimal(x_square * y_square)))
    return Context(prec=DIGITS, rounding=ROUND_HALF_EVEN).plus(exact)


def check_printed(folder, analysis, problems):
    """Look up every printed number of document.json in analysis.json and in report.html."""
    document = json.loads((folder / "document.json").read_text(encoding="utf-8"))
    page = (folder / "report.html").read_text(encoding="utf-8")
    printed = {}
    for key, text in re.findall(r'data-key="([^"]+)"[^>]*>([^<]*)<', page):
        printed.setdefault(html.unescape(key), set()).add(html.unescape(text))
    numbers = 0
    for number in numbers_in(document):
        numbers += 1
        filed = look_up(analysis, number["key"])
        if str(filed) != number["exact"]:
            problems.append(f"document.json: {number['key']} is {number['exact']}, analysis.json has {filed}.")
        if number["text"] not in printed.get(number["key"], ()):
            problems.append(f"report.html does not print {number['key']} as {number['text']}.")
    for key, texts in sorted(printed.items()):
        told = {number["text"] for number in numbers_in(document) if number["key"] == key}
        problems.extend(f"report.html prints {key} as {text}; document.json does not." for text in sorted(texts - told))
    return numbers


def numbers_in(node):
    """Yield every number of a document."""
    if isinstance(node, dict):
        if node.get("is") == "Number":
            yield node
        for value in node.values():
            yield from numbers_in(value)
    elif isinstance(node, list):
        for value in node:
            yield from numbers_in(value)


def look_up(plain, key):
    """Return what stands at an address of analysis.json, or None."""
    for step in key.split("/"):
        try:
            plain = plain[int(step)] if isinstance(plain, list) else plain[step]
        except (KeyError, IndexError, ValueError, TypeError):
            return None
    return plain


if __name__ == "__main__":
    sys.exit(main(Path(__file__).resolve().parent))
