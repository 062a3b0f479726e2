"""What the sensitivity tables cost: ten associations at n = 200, untied, rounded and in five levels.

Run with ``PYTHONPATH=src:tests python tests/benchmarks/sensitivity.py``; prints CPU seconds of one process.
"""

import sys
from time import process_time

import numpy as np

from analysis.invented import Invented, association
from rankdocket.analysis.analyse import adjustment_of, analyse
from rankdocket.analysis.sensitivity.make import sensitivity_of

N = 200
PAIRS = 10
SEEDED = "alpha: 0.05, p_value: {by: exact when possible, permutations: 9999, seed: 417}, several_tests: {among: all}"
KINDS = ("untied", "rounded", "five levels", "mixed")


def column(rng: np.random.Generator, kind: str, base: np.ndarray, slope: float) -> str:
    """Return one column as text: related to ``base`` by ``slope``."""
    values = slope * base + rng.normal(size=N)
    match kind:
        case "untied":
            cells = [f"{value:.9f}" for value in values]
        case "rounded":
            cells = [f"{value:.1f}" for value in values]
        case _:
            cells = [str(level) for level in np.searchsorted([-1.2, -0.4, 0.4, 1.2], values)]
    return " ".join(cells)


def study(kind: str, coefficient: str = "Spearman rho") -> Invented:
    """Return a study of ten associations, from none to a clear one."""
    rng = np.random.default_rng(5)
    columns, associations = {}, {}
    for place in range(PAIRS):
        own = kind if kind != "mixed" else KINDS[place % 3]
        base = rng.normal(size=N)
        columns[f"u{place}"] = column(rng, own, base, 1.0)
        columns[f"v{place}"] = column(rng, own, base, 0.08 * place)
        associations[f"A{place}"] = association(
            f"u{place}", f"v{place}", sign="either", more=f"coefficient: {coefficient}"
        )
    return Invented(columns=columns, associations=associations, inference=SEEDED)


def main() -> None:
    """Print CPU seconds for each kind of data."""
    for coefficient in ("Spearman rho", "Kendall tau-b"):
        for kind in KINDS:
            spec, data = study(kind, coefficient).read()
            found = analyse(spec, data)
            begun = process_time()
            tables = sensitivity_of(found.results, found.findings, (spec, data), adjustment_of(spec))
            spent = process_time() - begun
            rows = sum(len(getattr(table, "rows", ())) for table in tables.values())
            sys.stdout.write(f"{coefficient}, {kind}: {rows} rows of {len(tables)} tables in {spent:.2f} s CPU\n")


if __name__ == "__main__":
    main()
