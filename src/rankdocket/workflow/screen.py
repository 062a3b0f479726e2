"""Screen: read a study and look at it before anything joint is known."""

from rankdocket.analysis.screening import Screening, screen_study
from rankdocket.workflow.study_folder import open_study


def screen(path: str) -> Screening:
    """Read the study at ``path`` and look at its data and requirements; no joint result is computed.

    Raises
    ------
    InputError
        With every fault of the spec or of the data.
    """
    study = open_study(path)
    return screen_study(study.spec, study.data)
