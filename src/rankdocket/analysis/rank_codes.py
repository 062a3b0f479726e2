"""The ranks of an association as the arrays that the arithmetic takes."""

import numpy as np

from rankdocket.analysis.results import Screened
from rankdocket.stats.ranks import Codes


def rank_codes(screened: Screened) -> tuple[Codes, Codes]:
    """Return the doubled midranks of x and of y, each of shape (n,), in the order of the rows."""
    x = np.array([row.x_doubled_rank for row in screened.rows], dtype=np.int64)
    y = np.array([row.y_doubled_rank for row in screened.rows], dtype=np.int64)
    return x, y
