"""The catalogue of drawings."""

from typing import Final

from rankdocket.render.drawings.interval_strip import INTERVAL_STRIP
from rankdocket.render.drawings.null_picture import NULL_PICTURE
from rankdocket.render.drawings.rank_plot import RANK_PLOT
from rankdocket.render.drawings.raw_plot import RAW_PLOT
from rankdocket.render.drawings.rows_curve import ROWS_CURVE

DRAWINGS: Final = (RAW_PLOT, RANK_PLOT, INTERVAL_STRIP, NULL_PICTURE, ROWS_CURVE)
