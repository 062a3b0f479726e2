"""Simulated coverage to plain data: the row of the table that was used, and the lowest at that number of rows."""

from rankdocket.analysis.coverage import coverage_of, judged
from rankdocket.analysis.results import AssociationAnalysis
from rankdocket.canonical import Plain
from rankdocket.stats.coverage.lookup import NotSimulated
from rankdocket.stats.coverage.table import SEED, CoverageRow


def coverage_to_plain(result: AssociationAnalysis) -> dict[str, Plain]:
    """Return the key ``coverage`` of an association’s interval; nothing where it has no interval."""
    found = coverage_of(result)
    if found is None:
        return {}
    if isinstance(found, NotSimulated):
        return {"coverage": {"state": "not simulated", "reason": found.reason}}
    return {
        "coverage": {
            "state": "simulated",
            "judged": judged(found),
            "seed": SEED,
            **_row(found.nearest),
            "lowest": _row(found.lowest),
        }
    }


def _row(row: CoverageRow) -> dict[str, Plain]:
    return {
        "share": f"{row.covered}/{row.given}",
        "samples": row.given,
        "drawn": row.drawn,
        "n": row.n,
        "value": str(row.truth),
        "tie_pattern": row.family.pattern,
        "family": row.family.words,
        "mean_width": str(row.width),
    }
