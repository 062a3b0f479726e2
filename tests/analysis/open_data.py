"""Open data sets of more than two columns, put together from the files of pairs, as invented studies read them."""

import csv
from pathlib import Path

from analysis.invented import MISSING

FOLDER = Path(__file__).resolve().parents[1] / "reference" / "data_open"
DAYS = {"May": 31, "June": 30, "July": 31, "August": 31, "September": 30}
"""The days of New York’s air, 1 May to 30 September 1973 (Chambers, Cleveland, Kleiner and Tukey 1983), in order."""


def pair(file: str) -> tuple[list[str], list[str]]:
    """Return the two columns of a file, a blank cell as the missing code of invented studies."""
    with (FOLDER / file).open(encoding="utf-8", newline="") as lines:
        rows = list(csv.reader(lines))[1:]
    return [row[0] or MISSING for row in rows], [row[1] or MISSING for row in rows]


def new_york_air() -> dict[str, list[str]]:
    """Return ozone, solar radiation, wind and month of 153 days; 42 of them lack ozone or radiation."""
    ozone, solar = pair("data_04_airquality_Ozone_Solar_R.csv")
    again, wind = pair("data_05_airquality_Ozone_Wind.csv")
    assert ozone == again
    months = [month for month, days in DAYS.items() for _ in range(days)]
    return {"ozone": ozone, "solar": solar, "wind": wind, "month": months}


def irises() -> dict[str, list[str]]:
    """Return sepal length and width, petal length and width of 150 flowers (Fisher 1936)."""
    sepals = pair("data_17_iris_sepal_length_cm_sepal_width_cm.csv")
    petals = pair("data_18_iris_petal_length_cm_petal_width_cm.csv")
    return {"sl": sepals[0], "sw": sepals[1], "pl": petals[0], "pw": petals[1]}
