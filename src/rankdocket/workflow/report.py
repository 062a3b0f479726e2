"""A report in memory: computed and set, nothing written."""

import io
from dataclasses import dataclass

import pandas as pd

from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import Analysis
from rankdocket.canonical import readable_bytes, sha256
from rankdocket.document.model import Document
from rankdocket.register.chain import GENESIS
from rankdocket.register.environment import components, program_digest
from rankdocket.render.rendition import html_only, render
from rankdocket.study.writer import spec_as_used
from rankdocket.workflow.moment import now
from rankdocket.workflow.record_tables import record_tables
from rankdocket.workflow.study_folder import open_study
from rankdocket.writing.section import Ingredient, IssueFacts
from rankdocket.writing.write import write


@dataclass(frozen=True, slots=True)
class Report:
    """A study computed and put into words, marked as a draft: an edition is issued and not made here.

    Attributes
    ----------
    analysis
        The truth of the run.
    document
        What is said about it.
    """

    analysis: Analysis
    document: Document

    def html(self) -> str:
        """Return the report as one self-contained page."""
        return html_only(self.document).decode("utf-8")

    def pdf(self) -> bytes:
        """Return the report as PDF; needs the system libraries for text layout."""
        return render(self.document).pdf

    def result_table(self) -> pd.DataFrame:
        """Return one row an association, the columns of results.csv; values as filed, absent ones empty."""
        tables = record_tables(self.analysis, analysis_to_plain(self.analysis))
        return pd.read_csv(io.BytesIO(tables["results.csv"]), dtype=str, keep_default_na=False)

    def _repr_html_(self) -> str:
        return self.html()


def report(path: str) -> Report:
    """Compute the study at ``path`` and put it into words; nothing is written.

    Raises
    ------
    InputError, ComputeError, RenderError
        As :func:`rankdocket.issue`.
    """
    study = open_study(path)
    analysis = analyse(study.spec, study.data)
    plain = analysis_to_plain(analysis)
    moment = now()
    facts = IssueFacts(
        edition="a look, not an edition",
        status="draft",
        date=moment.date,
        created=moment.time,
        time_source=moment.source,
        reason="looked at, not issued",
        replaces=None,
        spec_text=spec_as_used(study.spec),
        spec_digest=study.spec_digest,
        analysis_digest=sha256(readable_bytes(plain)),
        head_before=GENESIS,
        program_digest=program_digest(),
        self_test="not run: nothing was sealed",
        ingredients=tuple(Ingredient(item.name, item.version, item.role) for item in components()),
    )
    return Report(analysis, write(analysis, plain, facts))
