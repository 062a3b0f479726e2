"""Writes the invented data of the demonstration studies from stated seeds: python tests/tooling/make_studies.py [FOLDER]

Every value is drawn here; nothing was measured, and no person or firm stands behind a row.
"""

import csv
import io
import math
import random
import sys
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]

FIRST_LOOK_SEED = 1203
WELD_SMOKE_SEED = 4207
TWO_KILNS_SEED = 6118

GASKET_CREEP = ((310, 4), (340, 6), (355, 5), (355, 9), (410, 8), (460, 12), (520, 11))
"""Clamp load in N and creep in µm: fixed values with two equal loads, whose null is small enough to be counted by hand."""

TRADES = (("welder", 19), ("fitter", 15), ("store", 8))
GRADES = ("none", "seldom", "weekly", "daily")
COLOURS = ("straw", "salmon", "red", "plum")
BLOOMS = ("none", "trace", "patches", "coat")


def main(folder: Path) -> None:
    for name, text in studies().items():
        path = folder / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_text(text, encoding="utf-8", newline="\n")


def studies() -> dict[str, str]:
    """Return path below studies/ → text of each data file."""
    return {
        "first-look/received/rising_trial.csv": first_look(),
        "gasket-creep/received/2026-02-16/creep_tests.csv": gasket_creep(),
        "weld-smoke/received/2026-03-02/shift_samples.csv": weld_smoke(),
        "two-kilns/received/2026-04-13/brick_tests.csv": two_kilns(),
    }


def first_look() -> str:
    """Return 12 trial doughs: rising time in minutes, loaf volume in millilitres."""
    draw = random.Random(FIRST_LOOK_SEED)
    times = sorted(draw.sample(range(35, 130), 12))
    rows = [
        (f"D{place:02d}", time, round(1450 + 5.5 * time + draw.gauss(0, 90))) for place, time in enumerate(times, 1)
    ]
    draw.shuffle(rows)
    return text_of(("dough", "rising_min", "volume_ml"), rows, ",")


def gasket_creep() -> str:
    """Return the seven tests in the order in which they were run."""
    order = (3, 0, 6, 1, 5, 2, 4)
    rows = [(f"G{place}", *GASKET_CREEP[row], "KT" if row % 2 else "BW") for place, row in enumerate(order, 1)]
    return text_of(("item", "clamp_load", "creep", "operator"), [("", "N", "µm", ""), *rows], ",")


def weld_smoke() -> str:
    """Return 42 workers: two kinds of missing sample, a code in creatinine, labels in two spellings, rare second samples."""
    draw = random.Random(WELD_SMOKE_SEED)
    rows = []
    workers = [trade for trade, count in TRADES for _ in range(count)]
    for place, trade in enumerate(workers, 1):
        level = {"welder": 0.5, "fitter": -0.1, "store": -0.9}[trade]
        latent = draw.gauss(0, 1)
        air = math.exp(-2.2 + level + 0.75 * latent)
        urine = math.exp(0.35 + 0.28 * level + 0.45 * latent + draw.gauss(0, 0.45))
        creatinine = math.exp(draw.gauss(0.2, 0.35))
        hours = draw.choice((8, 8, 8, 8.5, 9, 10, 10, 12))
        cough = GRADES[min(3, max(0, round(1.1 + 0.4 * latent + draw.gauss(0, 0.9))))]
        second = f"{urine * math.exp(draw.gauss(0, 0.25)):.2f}" if place % 6 == 0 else ""
        rows.append(
            [
                f"W{place:02d}", trade, f"{hours:g}", f"{air:.3f}", f"{urine:.2f}", f"{creatinine:.1f}",
                "Weekly" if cough == "weekly" and place % 5 == 0 else cough, second, "passed",
            ]
        )  # fmt: skip
    for place in (4, 22, 31):
        rows[place][3] = ""
    for place in (9, 27):
        rows[place][4] = "n/a"
    rows[13][4] = ""
    for place in (6, 18, 37):
        rows[place][5] = "-9"
    rows[20][6] = ""
    draw.shuffle(rows)
    head = ("worker", "trade", "shift_h", "mn_air", "mn_urine", "creatinine", "cough", "mn_urine_second", "fit_test")
    units = ("", "", "h", "mg/m³", "µg/g", "g/L", "", "µg/g", "")
    decimal_comma = [[cell.replace(".", ",") for cell in row] for row in rows]
    return text_of(head, [units, *decimal_comma], ";")


def two_kilns() -> str:
    """Return 66 bricks of two kilns: one cracked before the test, one under a jammed press, three whose bloom was not graded."""
    draw = random.Random(TWO_KILNS_SEED)
    rows = []
    for place in range(1, 67):
        kiln = "Long" if place % 2 else "Round"
        soak = draw.gauss(1042 if kiln == "Long" else 1031, 14)
        burnt = (soak - 1036) / 15
        # The long kiln burns evenly, so that its absorption follows the soak more closely.
        absorption = 13.5 - 1.5 * burnt + draw.gauss(0, 1.0 if kiln == "Long" else 2.2)
        density = 1790 - 3 * (absorption - 13.5) + draw.gauss(0, 24)
        strength = math.exp(3.45 - 0.085 * (absorption - 13.5) + 0.05 * burnt + draw.gauss(0, 0.13))
        colour = COLOURS[min(3, max(0, round(1.5 + 0.9 * burnt + draw.gauss(0, 0.5))))]
        bloom = BLOOMS[min(3, max(0, round(0.9 + 0.18 * (absorption - 13.5) + draw.gauss(0, 0.8))))]
        rows.append(
            [f"B{place:02d}", kiln, draw.randint(1, 14), f"{soak:.0f}", f"{absorption:.1f}", f"{density:.0f}",
             f"{strength:.1f}", f"{1000 * strength / density:.2f}", colour, bloom, ""]
        )  # fmt: skip
    for place in (11, 34, 58):
        rows[place][9] = "?"
    rows[28][10] = "cracked"
    rows[28][6] = "9.8"
    rows[28][7] = f"{1000 * 9.8 / float(rows[28][5]):.2f}"
    rows[45][10] = "platen jammed"
    rows[45][6] = "58.3"
    rows[45][7] = f"{1000 * 58.3 / float(rows[45][5]):.2f}"
    draw.shuffle(rows)
    head = ("brick", "kiln", "course", "soak_c", "absorption", "density", "strength", "specific", "colour", "bloom", "note")  # fmt: skip
    units = ("", "", "", "°C", "%", "kg/m³", "MPa", "kJ/kg", "", "", "")
    return text_of(head, [units, *rows], ",")


def text_of(head: tuple[str, ...], rows: list, separator: str) -> str:
    out = io.StringIO()
    writer = csv.writer(out, delimiter=separator, lineterminator="\n")
    writer.writerow(head)
    writer.writerows(rows)
    return out.getvalue()


if __name__ == "__main__":
    main(Path(sys.argv[1]) if len(sys.argv) > 1 else ROOT / "studies")
