"""A coefficient without each of many small sets of rows, all at once: what a search of all sets needs.

Leaving out row i adds sign(x_i − x_j) to the centred doubled midrank of row j, whatever else is left out, and takes the
pairs of row i out of every count of pairs.
"""

import numpy as np

from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.influence import WithoutEach, rho_without_each, tau_without_each
from rankdocket.stats.ranks import Codes, centred_ranks
from rankdocket.vocabulary import CoefficientName


def coefficients_without(name: CoefficientName, x_codes: Codes, y_codes: Codes, sets: Codes) -> WithoutEach:
    """Return the coefficient of the remaining rows, ranked anew, without each set in turn, as integers.

    Memory grows as sets times rows for sets of two and more: they are meant for few rows.

    Parameters
    ----------
    name
        The coefficient.
    x_codes, y_codes
        Shape (n,).
    sets
        Shape (sets, size): places of different rows, size at least 1.

    Returns
    -------
    WithoutEach
        Its arrays have shape (sets,).
    """
    if sets.shape[1] == 1:
        each = (rho_without_each if name == "Spearman rho" else tau_without_each)(x_codes, y_codes)
        only = sets[:, 0]
        return WithoutEach(each.numerator[only], each.x_square[only], each.y_square[only])
    match name:
        case "Spearman rho":
            a, b = _centred_without(x_codes, sets), _centred_without(y_codes, sets)
            return WithoutEach(np.sum(a * b, axis=1), np.sum(a * a, axis=1), np.sum(b * b, axis=1))
        case "Kendall tau-b":
            x, y = _signs(x_codes), _signs(y_codes)
            return WithoutEach(*(_pairs_without(table, sets) for table in (x * y, x * x, y * y)))


def coefficient_at(without: WithoutEach, place: int, name: CoefficientName, n: int) -> Coefficient:
    """Return one of the coefficients; ``n`` rows remain."""
    return Coefficient(
        name, n, int(without.numerator[place]), int(without.x_square[place]), int(without.y_square[place])
    )


def _signs(codes: Codes) -> Codes:
    signs: Codes = np.sign(codes[:, np.newaxis] - codes)
    return signs


def _centred_without(codes: Codes, sets: Codes) -> Codes:
    """Return the centred doubled midranks that the rows have without each set, 0 for the rows of the set itself."""
    centred: Codes = centred_ranks(codes) + _signs(codes)[sets].sum(axis=1)
    np.put_along_axis(centred, sets, 0, axis=1)
    return centred


def _pairs_without(table: Codes, sets: Codes) -> Codes:
    """Return half the sum of a symmetric table over the rows that remain."""
    inside = sum(table[sets[:, [one]], sets].sum(axis=1) for one in range(sets.shape[1]))
    pairs: Codes = (table.sum() - 2 * table.sum(axis=1)[sets].sum(axis=1) + inside) // 2
    return pairs
