"""Reads the reference cases and compares an answer with them: nothing here computes statistics."""

import csv
from collections.abc import Mapping
from fractions import Fraction
from pathlib import Path
from typing import Any, TypeAlias

import yaml

Case: TypeAlias = Mapping[str, Any]

FOLDER = Path(__file__).parent


def reference_cases() -> tuple[Case, ...]:
    """Return all cases, each with its tolerances filled in."""
    document = yaml.safe_load((FOLDER / "open_cases.yaml").read_text(encoding="utf-8"))
    default = document["default_tolerance"]
    return tuple(
        {**case, "tolerance": {key: case.get("tolerance", {}).get(key, default) for key in case["expected"]}}
        for case in document["cases"]
    )


def inputs_of(case: Case) -> dict[str, Any]:
    """Return the inputs of a case: columns read from its file if it has one, numbers kept as text made numbers."""
    inputs = {key: _plain(value) for key, value in case["input"].items()}
    if "file" in inputs:
        with (FOLDER / inputs["file"]).open(newline="", encoding="utf-8") as file:
            rows = list(csv.DictReader(file))
        inputs["x"] = [None if row["x"] == "" else float(row["x"]) for row in rows]
        inputs["y"] = [None if row["y"] == "" else float(row["y"]) for row in rows]
    return inputs


def disagreements(case: Case, got: Mapping[str, Any]) -> list[str]:
    """Return a line for every expected value that is absent or differs."""
    lines = []
    for key, want in case["expected"].items():
        if key not in got:
            lines.append(f"{key}: not answered, {want!r} expected")
        elif not _agrees(got[key], want, case["tolerance"][key]):
            lines.append(f"{key}: {got[key]!r}, {want!r} expected")
    return lines


def misprints(case: Case, got: Mapping[str, Any]) -> list[str]:
    """Return a line for every printed value that was found to be right and that the answer does not round to."""
    lines = []
    for entry in case.get("published", ()):
        key, printed = entry["quantity"], str(entry["printed"])
        if entry["reproduced"] is True and key in got:
            decimals = len(printed.partition(".")[2])
            if printed == "-" or got[key] is None:
                if printed != "-" or got[key] is not None:
                    lines.append(f"{key}: {got[key]!r}, printed as {printed}")
            elif abs(Fraction(got[key]) - Fraction(printed)) > Fraction(1, 2 * 10**decimals):
                lines.append(f"{key}: {got[key]!r}, printed as {printed}")
    return lines


def _plain(value: Any) -> Any:
    try:
        return float(value) if isinstance(value, str) else value
    except ValueError:
        return value


def _agrees(got: Any, want: Any, tolerance: Mapping[str, float]) -> bool:
    if want is None or isinstance(want, bool):
        return got is want
    if isinstance(want, list):
        return (
            isinstance(got, (list, tuple))
            and len(got) == len(want)
            and all(_agrees(one, other, tolerance) for one, other in zip(got, want, strict=True))
        )
    if got is None or isinstance(got, (bool, str)):
        return False
    if isinstance(want, int):
        return bool(got == want)
    target = Fraction(want)
    allowed = max(Fraction(tolerance.get("abs", 0)), Fraction(tolerance.get("rel", 0)) * abs(target))
    return abs(Fraction(got) - target) <= allowed
