"""Which line of a spec that is no YAML is indented unlike its neighbours, and by how much it was probably meant to be.

A parser notices a wrong indentation where it can go on no longer, which is often the line after, or the next line
of the same depth.  Here each line near that place is tried at other depths; the trial that leaves the fewest odd
lines names the line.
"""

import re
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Final, NamedTuple

_LINE: Final = re.compile(
    r"(?P<indent> *)(?P<dash>- +)?"
    r"(?:(?P<key>\"[^\"]*\"|'[^']*'|[^\s\-?:,\[\]{}#&*!|>%@\"'`].*?) *:(?: +(?P<value>.*))?|(?P<item>.*))"
)
_BLOCK_TEXT: Final = re.compile(r"[|>][-+0-9]*( +#.*)?")
_OPENING, _CLOSING = "[{", "]}"
_QUOTES: Final = ('"', "'")

LINES_AFTER: Final = 60
"""Lines looked at below the one where the parser stopped: more than an entry of a spec has."""

LINES_NEAR: Final = 12
"""Lines on either side of the odd one whose depths are tried."""

MOST_DEPTHS: Final = 12
USUAL_STEP: Final = 2
"""Spaces by which a key stands deeper than the one above it, when nothing in the file says otherwise."""


@dataclass(frozen=True, slots=True)
class Misfit:
    """A line, counted from 1, that stands by ``indent`` spaces and fits by each of ``fitting``."""

    line: int
    indent: int
    fitting: tuple[int, ...]


@dataclass(frozen=True, slots=True)
class _Line:
    """A line that begins with a key or a dash: its number from 1, its spaces, and what stands on it.

    ``dash`` is the width of a dash and the spaces behind it; ``key`` and ``value`` say whether there is one.
    """

    number: int
    indent: int
    dash: int
    key: bool
    value: bool


def misfit_of(lines: Sequence[str], stopped: int) -> Misfit | None:
    """Return the line that is probably indented wrongly; ``None`` when none up to line ``stopped`` is odd."""
    found = _lines_of(lines[: stopped + LINES_AFTER])
    if not found:
        return None
    odd = next((position for position in _walk(found).odd if found[position].number <= stopped), None)
    if odd is None:
        return None
    suspects = _suspects(found, odd)
    near = [*range(max(0, odd - LINES_NEAR), min(len(found), odd + LINES_NEAR)), *suspects]
    depths = sorted({found[position].indent for position in near})[:MOST_DEPTHS]
    trials = [
        _Trial(_score(found, position, depth), odd - position, depth)
        for position in suspects
        for depth in depths
        if depth != found[position].indent
    ]
    best = min(trials, default=None)
    if best is None or best.score.misfits >= len(_walk(found).odd):
        return Misfit(found[odd].number, found[odd].indent, ())
    line = found[odd - best.above]
    equal = {
        trial.depth
        for trial in trials
        if (trial.above, trial.score[:2]) == (best.above, best.score[:2])
        and abs(trial.depth - line.indent) <= abs(best.depth - line.indent)
    }
    return Misfit(line.number, line.indent, tuple(sorted(equal)))


class _Score(NamedTuple):
    """How odd the lines are with one of them moved.

    Misfits come first, then keys with nothing below; then how far the line was moved and how often, among the keys
    of one depth, a key with a value stands beside one without.  Such a pair weighs as much as a step of two spaces.
    """

    misfits: int
    empty: int
    moved_and_mixed: int
    mixed: int
    unusual_steps: int


class _Trial(NamedTuple):
    """A line, ``above`` lines above the odd one, moved to another depth."""

    score: _Score
    above: int
    depth: int


@dataclass(frozen=True, slots=True)
class _Walk:
    """What was met on the way down: positions of odd lines, keys with nothing below, neighbours of two kinds, steps."""

    odd: tuple[int, ...]
    empty: int
    mixed: int
    steps: tuple[int, ...]


@dataclass(slots=True)
class _Open:
    """A depth that is open: whether a dash opened it, and the last line that stood there."""

    indent: int
    is_list: bool
    last: _Line


def _walk(lines: Sequence[_Line]) -> _Walk:
    """Go through the lines and note each that is deeper below a value, or stands where no line above lets it."""
    odd: list[int] = []
    empty = mixed = 0
    steps: list[int] = []
    depths = [_Open(lines[0].indent, lines[0].dash > 0, lines[0])]
    above = lines[0]
    for position, line in enumerate(lines[1:], start=1):
        if line.indent > depths[-1].indent:
            if above.value and line.key:
                odd.append(position)
            if not above.value:
                steps.append(line.indent - depths[-1].indent)
                depths.append(_Open(line.indent, line.dash > 0, line))
        else:
            while len(depths) > 1 and depths[-1].indent > line.indent:
                depths.pop()
            here = depths[-1]
            fits = here.indent == line.indent and _may_follow(here, line, above)
            odd.extend([] if fits else [position])
            mixed += here.last.value != line.value
            empty += not above.value and not line.dash
            here.last = line
        if line.dash and line.key:
            depths.append(_Open(line.indent + line.dash, is_list=False, last=line))
        above = line
    return _Walk(tuple(odd), empty, mixed, tuple(steps))


def _may_follow(here: _Open, line: _Line, above: _Line) -> bool:
    """Say whether a line may stand in an open depth: dashes in a list, keys among keys, a list below its own key."""
    if here.is_list or not line.dash:
        return here.is_list == (line.dash > 0)
    return here.last.dash > 0 or (above is here.last and not above.value)


def _score(lines: Sequence[_Line], position: int, depth: int) -> _Score:
    """Return how odd the lines are when the one at ``position`` is moved to ``depth``."""
    line = lines[position]
    walk = _walk([*lines[:position], replace(line, indent=depth), *lines[position + 1 :]])
    step = Counter(walk.steps).most_common(1)[0][0] if walk.steps else USUAL_STEP
    unusual = sum(found != step for found in walk.steps)
    weight = abs(depth - line.indent) + USUAL_STEP * walk.mixed
    return _Score(len(walk.odd), walk.empty, weight, walk.mixed, unusual)


def _suspects(lines: Sequence[_Line], odd: int) -> list[int]:
    """Return the odd line, the two above it, and the first and last line of each depth still open there."""
    first: dict[int, int] = {}
    last: dict[int, int] = {}
    lowest = max(line.indent for line in lines)
    for position in reversed(range(odd)):
        if lines[position].indent <= lowest:
            lowest = lines[position].indent
            first[lowest] = position
            last.setdefault(lowest, position)
    return sorted({*range(max(0, odd - 2), odd + 1), *first.values(), *last.values()})


def _lines_of(lines: Sequence[str]) -> list[_Line]:
    """Return the lines that begin with a key or a dash; texts and brackets over several lines are passed over."""
    found: list[_Line] = []
    text_depth: int | None = None
    is_first_of_text = False
    depth = 0
    quote = ""
    for number, line in enumerate(lines, start=1):
        spaces = len(line) - len(line.lstrip(" "))
        if not line.strip():
            continue
        if text_depth is not None and spaces >= text_depth:
            text_depth = spaces if is_first_of_text else text_depth
            is_first_of_text = False
            continue
        text_depth = None
        if depth > 0:
            depth += _brackets(line)
            continue
        if quote:
            quote = quote if line.count(quote) % 2 == 0 else ""
            continue
        match = _LINE.fullmatch(line)
        if match is None or line.lstrip().startswith(("#", "---", "%")):
            continue
        key, dash = match["key"] is not None, match["dash"]
        if not key and dash is None:
            continue
        value = (match["value"] if key else match["item"]) or ""
        value = "" if value.startswith("#") else value
        found.append(_Line(number, spaces, len(dash or ""), key, bool(value)))
        if value.startswith(tuple(_OPENING)):
            depth = _brackets(value)
        if value.startswith(_QUOTES) and value.count(value[0]) % 2 == 1:
            quote = value[0]
        if _BLOCK_TEXT.fullmatch(value):
            # The first line of a text says how deep the others stand.
            text_depth, is_first_of_text = spaces + 1, True
    return found


def _brackets(text: str) -> int:
    """Return how many more brackets are opened than closed outside quotation marks."""
    bare = re.sub(r"\"(\\.|[^\"\\])*\"|'[^']*'", "", text)
    return sum((c in _OPENING) - (c in _CLOSING) for c in bare)
