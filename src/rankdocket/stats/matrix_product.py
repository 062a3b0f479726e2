"""The product of float matrices, without a false alarm of the linear algebra library."""

import numpy as np
import numpy.typing as npt

__all__ = ["product"]


def product(left: npt.NDArray[np.floating], right: npt.NDArray[np.floating]) -> npt.NDArray[np.floating]:
    """Return ``left @ right``.

    Vectorised kernels of the linear algebra library compute on what lies beside short rows in memory and throw it away;
    where that happens to be no number they raise the processor's "invalid" flag, although every entry of the result is
    right (numpy issue 24067, OpenBLAS issue 1924). The flag says nothing about the result, so it is not listened to.
    A result that is no number still shows where it is next used.
    """
    with np.errstate(invalid="ignore"):
        return np.asarray(left @ right)
