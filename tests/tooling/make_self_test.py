"""Writes the 20 shipped cases of the self-test from the open reference cases: python tests/tooling/make_self_test.py

Nothing is computed here: x, y, values and counts are those of the cases, with their sources.
"""

import json
from decimal import Context, Decimal
from pathlib import Path

import yaml

ROOT = Path(__file__).resolve().parents[2]
CASES = ROOT / "tests" / "reference" / "open_cases.yaml"
TARGET = ROOT / "src" / "rankdocket" / "workflow" / "self_test.json"
WITH_COUNTS = 16
TAU = 4
MOST_ROWS = 12


def main() -> None:
    cases = yaml.safe_load(CASES.read_text(encoding="utf-8"))["cases"]
    usable = [
        case
        for case in cases
        if case["function"] in ("spearman", "exact_conditional")
        and "count_abs" in case["expected"]
        and case["expected"]["n"] <= MOST_ROWS
        and Decimal(case["expected"]["rs"]) not in (1, -1)
    ]
    published = [case for case in usable if case["function"] == "spearman"]
    enumerated = [case for case in usable if case["function"] != "spearman"]
    chosen = (published + enumerated)[:WITH_COUNTS]
    rows = [rho_case(case) for case in chosen]
    rows += [tau_case(case) for case in published[:TAU]]
    text = json.dumps({"cases": rows}, ensure_ascii=False, indent=1) + "\n"
    TARGET.write_text(text, encoding="utf-8")


def rho_case(case: dict) -> dict:
    expected = case["expected"]
    return {
        "name": f"{case['id']}: Spearman rho and all orderings",
        "coefficient": "Spearman rho",
        **data_of(case),
        "value": twelve(expected["rs"]),
        "count_greater": expected["count_ge"],
        "count_less": expected["count_le"],
        "count_two_sided": expected["count_abs"],
        "of": expected["total"],
    }


def tau_case(case: dict) -> dict:
    return {
        "name": f"{case['id']}: Kendall tau-b",
        "coefficient": "Kendall tau-b",
        **data_of(case),
        "value": twelve(case["expected"]["kendall_tau_b"]),
    }


def data_of(case: dict) -> dict:
    return {
        "source": case["source"],
        "x": [str(value) for value in case["input"]["x"]],
        "y": [str(value) for value in case["input"]["y"]],
    }


def twelve(text: str) -> str:
    return str(Context(prec=12).create_decimal(text))


if __name__ == "__main__":
    main()
