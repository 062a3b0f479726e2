"""A screening: everything that may be shown before anything joint is known."""

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final

from rankdocket.analysis.analyse import without_seed
from rankdocket.analysis.check import Check
from rankdocket.analysis.checks import CHECKS
from rankdocket.analysis.family_max_t import unlike_rows
from rankdocket.analysis.nulls import null_choice
from rankdocket.analysis.plain import data_to_plain, screened_to_plain
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.analysis.screen import screen_all
from rankdocket.analysis.size_plain import could_show_to_plain
from rankdocket.canonical import Plain
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import StudyData

SCHEMA: Final = "urn:rankdocket:screening:1"

BLIND_CHECKS: Final[tuple[Check, ...]] = tuple(check for check in CHECKS if not check.joint)
"""The checks that look at one variable at a time, or at counts that show no direction."""


@dataclass(frozen=True, slots=True)
class Screening:
    """What may be shown before anything joint is known.

    Attributes
    ----------
    outcomes
        Association → outcomes of the checks that show nothing joint.
    seedless
        Associations whose test needs drawn permutations although the plan states no seed: issuing would be refused.
    unlike
        Members of a family to be adjusted together whose complete rows are not those of the first: it would be too.
    plain
        The same as plain data, with each variable alone.
    """

    spec: StudySpec
    data: StudyData
    screened: Mapping[str, Screened]
    outcomes: Mapping[str, tuple[CheckOutcome, ...]]
    seedless: tuple[str, ...]
    unlike: tuple[str, ...]
    plain: Mapping[str, Plain]

    @property
    def all_met(self) -> bool:
        """True when every requirement that is not met is waived and the plan could be run."""
        return not (self.seedless or self.unlike) and all(
            outcome.state != "not met" or outcome.waived is not None
            for outcomes in self.outcomes.values()
            for outcome in outcomes
        )


def screen_study(spec: StudySpec, data: StudyData) -> Screening:
    """Look at the data and the requirements of a study."""
    screened = screen_all(spec, data)
    outcomes = {name: tuple(check.outcome(rows, spec) for check in BLIND_CHECKS) for name, rows in screened.items()}
    plain: dict[str, Plain] = {
        "schema": SCHEMA,
        "without_seed": list(without_seed(spec, screened)),
        "unlike_rows": list(unlike_rows(spec, screened)),
        **data_to_plain(spec, data),
        "associations": {name: _association(rows, outcomes[name], spec) for name, rows in screened.items()},
        **could_show_to_plain(screened, outcomes, spec),
    }
    return Screening(spec, data, screened, outcomes, without_seed(spec, screened), unlike_rows(spec, screened), plain)


def _association(rows: Screened, outcomes: tuple[CheckOutcome, ...], spec: StudySpec) -> dict[str, Plain]:
    plain = screened_to_plain(rows, outcomes)
    if min(rows.x_ties.distinct, rows.y_ties.distinct) > 1:
        plain["null"] = null_choice(rows, spec).method
    return plain
