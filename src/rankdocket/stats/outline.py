"""A null laid out whole: which numerators occur, and how many of all orderings give each."""

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from typing import Final, TypeAlias

from rankdocket.errors import ComputeError
from rankdocket.stats.null import ExactNull, NullMethod
from rankdocket.stats.ranks import Codes, lattice_step

MOST_BARS: Final = 60
"""Up to here every place of the lattice gets a bar of its own; above, neighbours share one."""

FEWEST_BARS: Final = 30
"""With fewer places a bar is as narrow as if there were so many."""

UNSEEN: Final = Fraction(1, 100_000)
"""Values at an end that hold no more than this share of all orderings together are too rare to be drawn."""

Weight: TypeAlias = int | float


@dataclass(frozen=True, slots=True, eq=False)
class NullOutline:
    """The null of a numerator as weights on its values.

    Attributes
    ----------
    method
        Where the weights come from.
    statistics
        Values of the numerator that occur, increasing, shape (k,), k at least 1.
    weights
        Permutations, drawn permutations or shares that give each of them, shape (k,).
    of
        What the weights sum to: n!, the number of draws, or 1.
    """

    method: NullMethod
    statistics: Codes
    weights: tuple[Weight, ...]
    of: int

    def __post_init__(self) -> None:
        if not 0 < len(self.weights) == len(self.statistics):
            raise ComputeError("An outline needs values, and a weight for each of them.")

    def p(self, weight: Weight) -> Fraction:
        """Return the p-value of a tail with this weight: its share, or (b + 1)/(B + 1) of drawn permutations."""
        if self.method == "drawn permutations":
            return Fraction(int(weight) + 1, self.of + 1)
        return Fraction(weight) / self.of

    def is_within(self, weight: Weight, level: Fraction) -> bool:
        """Return whether :meth:`p` of a tail is ``level`` or less, without reducing a fraction of long numbers."""
        if isinstance(weight, float):
            return Fraction(weight) <= level * self.of
        one_more = self.method == "drawn permutations"
        return (weight + one_more) * level.denominator <= level.numerator * (self.of + one_more)


@dataclass(frozen=True, slots=True)
class Bar:
    """Neighbouring values of the numerator, and the share of all orderings that gives one of them.

    Attributes
    ----------
    low, high
        Its ends in the unit of the numerator, half a step of the lattice outside of its first and last place.
    share
        0 to 1.
    """

    low: Fraction
    high: Fraction
    share: Fraction


@dataclass(frozen=True, slots=True)
class Lattice:
    """Places of bars: ``bars`` of them, each of ``each`` places that lie ``step`` apart, the first place at ``first``."""

    first: int
    step: int
    each: int
    bars: int

    @property
    def half(self) -> Fraction:
        """How far a bar reaches beyond its first and last place.

        Half a step, so that bars touch; less where there are few places, whose bars would reach past the ends.
        """
        narrow = Fraction(self.bars * self.step, 2 * FEWEST_BARS)
        return min(Fraction(self.step, 2), narrow) if self.each == 1 else Fraction(self.step, 2)

    def start(self, bar: int) -> int:
        """Return the first place of a bar."""
        return self.first + bar * self.each * self.step

    def bar_of(self, statistic: int) -> int:
        """Return the bar that holds a value."""
        return (statistic - self.first) // (self.step * self.each)

    def bar(self, bar: int, share: Fraction) -> Bar:
        """Return a bar with its share."""
        return Bar(self.start(bar) - self.half, self.start(bar + 1) - self.step + self.half, share)


def outline_of(null: ExactNull) -> NullOutline:
    """Return a counted null as an outline."""
    return NullOutline(null.method, null.statistics, null.counts, null.of)


def lattice_between(low: int, high: int, step: int) -> Lattice:
    """Return the bars for values from ``low`` to ``high``, MOST_BARS at most, about as much too wide on either side."""
    places = (high - low) // step + 1
    each = -(-places // MOST_BARS)
    bars = -(-places // each)
    return Lattice(low - (bars * each - places) // 2 * step, step, each, bars)


@dataclass(frozen=True, slots=True)
class Picture:
    """A null laid out in bars.

    Attributes
    ----------
    bars
        From the lowest to the highest value that can be seen; those without any ordering are left out.
    half
        How far a bar reaches beyond its first and last value, above 0.
    """

    bars: tuple[Bar, ...]
    half: Fraction


def picture_of(outline: NullOutline) -> Picture:
    """Return bars of one width, each with equally many places of the lattice on which the numerators lie.

    So no unevenness comes from the binning itself.
    """
    statistics = outline.statistics.tolist()
    first = _first_seen(outline.weights.__getitem__, len(statistics), outline.of)
    last = len(statistics) - 1 - _first_seen(lambda place: outline.weights[-1 - place], len(statistics), outline.of)
    lattice = lattice_between(statistics[first], statistics[last], lattice_step(statistics))
    weights: list[Weight] = [0] * lattice.bars
    for place in range(first, last + 1):
        weights[lattice.bar_of(statistics[place])] += outline.weights[place]
    bars = tuple(lattice.bar(bar, Fraction(weight) / outline.of) for bar, weight in enumerate(weights) if weight)
    return Picture(bars, lattice.half)


def _first_seen(weight_at: Callable[[int], Weight], length: int, of: int) -> int:
    """Return the first place from one end beyond which enough weight has come together to be drawn."""
    met: Weight = 0
    for place in range(length):
        met += weight_at(place)
        if met * UNSEEN.denominator > UNSEEN.numerator * of:
            return place
    return length - 1
