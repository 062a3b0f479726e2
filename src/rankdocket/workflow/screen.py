"""Screen: what arrived, how it was read, each variable alone, requirements; no joint result."""

from collections.abc import Mapping
from dataclasses import dataclass

from rankdocket.analysis.analyse import null_choice
from rankdocket.analysis.checks import CHECKS
from rankdocket.analysis.plain import data_to_plain, screened_to_plain
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.analysis.screen import screen_all
from rankdocket.canonical import Plain
from rankdocket.workflow.study_folder import Study, open_study

BLIND_CHECKS = tuple(check for check in CHECKS if not check.joint)
"""The checks that look at one variable at a time, or at counts that show no direction."""


@dataclass(frozen=True, slots=True)
class Screening:
    """What may be shown before anything joint is known.

    Attributes
    ----------
    outcomes
        Association → outcomes of the checks that show nothing joint.
    plain
        The same as plain data, with each variable alone.
    """

    study: Study
    screened: Mapping[str, Screened]
    outcomes: Mapping[str, tuple[CheckOutcome, ...]]
    plain: Mapping[str, Plain]

    @property
    def all_met(self) -> bool:
        """True when no requirement is not met."""
        return all(outcome.state != "not met" for outcomes in self.outcomes.values() for outcome in outcomes)


def screen(path: str) -> Screening:
    """Read a study and look at its data and requirements.

    Raises
    ------
    InputError
        With every fault of the spec or of the data.
    """
    study = open_study(path)
    screened = screen_all(study.spec, study.data)
    outcomes = {
        name: tuple(check.examine(rows, study.spec) for check in BLIND_CHECKS) for name, rows in screened.items()
    }
    associations: dict[str, Plain] = {}
    for name, rows in screened.items():
        associations[name] = screened_to_plain(rows, outcomes[name])
        if min(rows.x_ties.distinct, rows.y_ties.distinct) > 1:
            associations[name] = {
                **screened_to_plain(rows, outcomes[name]),
                "null": null_choice(rows, study.spec).method,
            }
    plain: dict[str, Plain] = {
        "schema": "urn:rankdocket:screening:1",
        **data_to_plain(study.spec, study.data),
        "associations": associations,
    }
    return Screening(study, screened, outcomes, plain)
