"""Rules of the room: what it imports and what its rules say of themselves."""

import re
import subprocess
import sys

import pytest

from rankdocket.references import REFERENCES, Description
from rankdocket.stats.adjustments import ADJUSTMENTS
from rankdocket.stats.chatterjee import XI, XI_NULL
from rankdocket.stats.differences import TWO_GROUPS
from rankdocket.stats.equivalence import EQUIVALENCE, MINIMUM_EFFECT, NULL_VALUE
from rankdocket.stats.intervals import INTERVAL_METHODS
from rankdocket.stats.isotonic import ISOTONIC
from rankdocket.stats.leave_one_out import LEAVE_ONE_OUT
from rankdocket.stats.null import MONTE_CARLO_INTERVAL, NULL_DESCRIPTIONS, TWO_SIDED
from rankdocket.stats.partial import PARTIAL_RHO
from rankdocket.stats.removals import REMOVALS
from rankdocket.stats.rho import RHO
from rankdocket.stats.same_row_differences import NONE_SHARED, ONE_SHARED
from rankdocket.stats.sequence_tests import RUNS, SUCCESSIVE
from rankdocket.stats.shapiro_wilk import SHAPIRO_WILK
from rankdocket.stats.studentised import STUDENTISED
from rankdocket.stats.tau import TAU_B

DESCRIPTIONS = (
    RHO,
    TAU_B,
    TWO_SIDED,
    MONTE_CARLO_INTERVAL,
    PARTIAL_RHO,
    TWO_GROUPS,
    ONE_SHARED,
    NONE_SHARED,
    NULL_VALUE,
    MINIMUM_EFFECT,
    EQUIVALENCE,
    XI,
    XI_NULL,
    ISOTONIC,
    STUDENTISED,
    RUNS,
    SUCCESSIVE,
    SHAPIRO_WILK,
    LEAVE_ONE_OUT,
    REMOVALS,
    *NULL_DESCRIPTIONS.values(),
    *(method.describe for method in INTERVAL_METHODS),
    *(rule.describe for rule in ADJUSTMENTS),
)


@pytest.mark.parametrize("description", DESCRIPTIONS, ids=lambda description: description.sentence[:40])
def test_a_description_cites_known_works_and_writes_no_number(description: Description) -> None:
    """Numbers stand in slots, sentences end in a full stop, works are in the bibliography."""
    assert description.sentence.endswith(".")
    assert not re.search(r"[0-9]", description.sentence)
    assert set(description.cites) <= set(REFERENCES)


def test_arithmetic_does_not_import_the_slow_part_of_its_library() -> None:
    """Importing everything that associates two arrays leaves the distributions module of scipy alone."""
    command = (
        "import sys, rankdocket; rankdocket.associate; print('scipy.stats' in sys.modules, 'pandas' in sys.modules)"
    )
    found = subprocess.run([sys.executable, "-c", command], check=True, capture_output=True, text=True)
    assert found.stdout.split() == ["False", "False"]


def test_importing_the_package_imports_nothing_heavy() -> None:
    """Public names are imported on first use."""
    command = "import sys, rankdocket; print(any(name in sys.modules for name in ('numpy', 'scipy', 'pandas')))"
    found = subprocess.run([sys.executable, "-c", command], check=True, capture_output=True, text=True)
    assert found.stdout.strip() == "False"
