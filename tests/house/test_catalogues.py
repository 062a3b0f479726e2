"""Each catalogue is an explicit tuple in report order, and holds what its folder holds: nothing less, nothing else."""

import importlib
import pkgutil
from collections.abc import Iterator
from typing import Any

import pytest

from rankdocket.analysis.check import Check
from rankdocket.analysis.checks import CHECKS
from rankdocket.analysis.sensitivity.row_rule import RowRule
from rankdocket.analysis.sensitivity.rows import ROWS
from rankdocket.references import REFERENCES
from rankdocket.render.drawing import Drawing
from rankdocket.render.drawings import DRAWINGS
from rankdocket.stats.adjustment import AdjustmentRule
from rankdocket.stats.adjustments import ADJUSTMENTS
from rankdocket.stats.interval import IntervalMethod
from rankdocket.stats.intervals import INTERVAL_METHODS, planned_method
from rankdocket.vocabulary import ADJUSTMENTS as ADJUSTMENT_WORDS
from rankdocket.vocabulary import COEFFICIENTS, FOR_BOTH, INTERVAL_BY
from rankdocket.writing.caveat import CaveatRule
from rankdocket.writing.caveats import CAVEATS
from rankdocket.writing.section import SectionRule
from rankdocket.writing.sections import APPENDICES, BODY

CATALOGUES: list[tuple[str, type[Any], tuple[Any, ...], str]] = [
    ("rankdocket.analysis.checks", Check, CHECKS, "key"),
    ("rankdocket.analysis.sensitivity.rows", RowRule, ROWS, "key"),
    ("rankdocket.stats.intervals", IntervalMethod, INTERVAL_METHODS, "key"),
    ("rankdocket.stats.adjustments", AdjustmentRule, ADJUSTMENTS, "key"),
    ("rankdocket.writing.caveats", CaveatRule, CAVEATS, "key"),
    ("rankdocket.writing.sections", SectionRule, (*BODY, *APPENDICES), "key"),
    ("rankdocket.render.drawings", Drawing, DRAWINGS, "kind"),
]

FRAMES = {"rankdocket.writing.sections": {"control", "summary"}}
"""Modules of a folder that hold no member: they frame the numbered sections."""


def _specimens(folder: str) -> Iterator[tuple[str, Any]]:
    package = importlib.import_module(folder)
    for found in pkgutil.iter_modules(package.__path__):
        yield found.name, importlib.import_module(f"{folder}.{found.name}")


@pytest.mark.parametrize(("folder", "kind", "catalogue", "key"), CATALOGUES, ids=lambda value: str(value)[:40])
def test_folder_and_catalogue_agree(folder: str, kind: type[Any], catalogue: tuple[Any, ...], key: str) -> None:
    """Every rule of the kind in the folder is in the catalogue once, and every file of the folder has one."""
    found: list[int] = []
    empty = set()
    for name, module in _specimens(folder):
        here = {id(value) for value in vars(module).values() if isinstance(value, kind)}
        found += here
        if not here:
            empty.add(name)
    assert empty == FRAMES.get(folder, set())
    assert sorted(found) == sorted(id(rule) for rule in catalogue)
    keys = [getattr(rule, key) for rule in catalogue]
    assert len(set(keys)) == len(keys)


def test_the_words_for_adjustments_have_their_rules() -> None:
    """The words that a spec may write are the keys of the rules, in the same order, and the one that needs the rows."""
    assert tuple(word for word in ADJUSTMENT_WORDS if word != "step-down maxT") == tuple(
        rule.key for rule in ADJUSTMENTS
    )


def test_intervals_serve_known_coefficients() -> None:
    """An interval rule names coefficients of the vocabulary only."""
    assert {name for method in INTERVAL_METHODS for name in method.coefficients} <= set(COEFFICIENTS)


def test_every_interval_rule_has_one_word_of_a_plan() -> None:
    """Each word means one rule for rho; for tau-b only the words that the vocabulary says; no rule is out of reach."""
    reached = {
        (word, name): method.key
        for word in INTERVAL_BY
        for name in COEFFICIENTS
        if (method := planned_method(word, name)) is not None
    }
    assert {word for word, name in reached if name == "Spearman rho"} == set(INTERVAL_BY)
    assert {word for word, name in reached if name == "Kendall tau-b"} == set(FOR_BOTH)
    assert set(reached.values()) == {method.key for method in INTERVAL_METHODS}


def test_the_bibliography_knows_its_keys() -> None:
    """Every work stands under its own key."""
    assert {key: work.key for key, work in REFERENCES.items()} == {key: key for key in REFERENCES}
