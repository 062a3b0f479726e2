"""The examples of a built-in association to plain data, where a report quotes them."""

from rankdocket.analysis.checks.built_in import KEY
from rankdocket.analysis.results import AssociationAnalysis
from rankdocket.canonical import Plain
from rankdocket.stats.built_in import CHANGE_AGAINST_BASELINE, ROWS, SHARED_DENOMINATOR, SPREAD


def built_in_to_plain(results: tuple[AssociationAnalysis, ...]) -> dict[str, Plain]:
    """Return the simulated examples; nothing where no association has a common origin declared."""
    outcomes = (outcome for result in results for outcome in result.checks)
    if not any(outcome.key == KEY and outcome.state == "not met" for outcome in outcomes):
        return {}
    return {
        "built_in_examples": {
            "rows": ROWS,
            "spread": str(SPREAD),
            "shared_denominator": str(SHARED_DENOMINATOR.mean_rho),
            "change_against_baseline": str(CHANGE_AGAINST_BASELINE.mean_rho),
        }
    }
