"""What variables were worked out from: names that must exist, no circles, and what two of them have in common.

An origin is a column of a table.  A name in ``derived_from`` stands for the column of the variable that carries it or,
without such a variable, for the column of that name in the table of the one that is derived.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import TypeAlias

from rankdocket.errors import Fault
from rankdocket.study.messages import Message, fault
from rankdocket.study.parts import Parts, table_of
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import Table
from rankdocket.study.tables import cells_of
from rankdocket.study.wording import composed, shown, suggestion

Origin: TypeAlias = tuple[str, str]
"""Table and column."""


@dataclass(frozen=True, slots=True)
class _Derived:
    """A variable as far as its origin goes."""

    origin: Origin
    names: tuple[str, ...]


def shared_origins(spec: StudySpec, x: str, y: str) -> tuple[str, ...]:
    """Return what two variables have in common, by name: one of them, or whatever both were worked out from.

    Only the nearest are named: an origin from which another common one was worked out adds nothing.
    """
    derived = {
        name: _Derived((variable.table, composed(variable.column)), variable.derived_from or ())
        for name, variable in spec.variables.items()
    }
    above = _parents(derived)
    shared = _line(derived[x].origin, above) & _line(derived[y].origin, above)
    farther = {origin for one in shared for origin in _line(one, above) if origin != one}
    names = {found.origin: name for name, found in reversed(derived.items())}
    names |= {derived[name].origin: name for name in (x, y)}
    return tuple(names.get(origin, origin[1]) for origin in sorted(shared - farther))


def circle_faults(parts: Parts) -> Iterator[Fault]:
    """Yield a fault for each variable that is derived from itself, at once or by way of others."""
    derived: dict[str, _Derived] = {}
    for name, form in parts.variables.items():
        table = table_of(parts, form)
        if parts.sound(("variables", name), "column", "derived_from") and table is not None:
            derived[name] = _Derived((table, composed(form.column.name)), form.derived_from or ())
    above = _parents(derived)
    for name, found in derived.items():
        for position, written in enumerate(found.names):
            parent = _origin(written, found, derived)
            if found.origin in _line(parent, above):
                place = parts.value_place("variables", name, "derived_from", position)
                way = "" if parent == found.origin else f" by way of {shown(written)}"
                what = f"{name} would be derived from itself{way}."
                remedy = "Name what it was worked out from, in one direction only."
                yield fault(place, f"variables.{name}.derived_from", Message.DERIVED_IN_A_CIRCLE, what, remedy)


def origin_faults(spec: StudySpec, tables: Mapping[str, Table]) -> Iterator[Fault]:
    """Yield a fault for each name in ``derived_from`` that neither a variable nor a column of the table carries."""
    for name, variable in spec.variables.items():
        table = tables[variable.table]
        for written in variable.derived_from or ():
            if written in spec.variables or cells_of(table, written) is not None:
                continue
            what = f"{shown(written)} is neither a variable nor a column of {variable.table}."
            remedy = suggestion(written, [*spec.variables, *table.columns], "Variables and columns")
            yield fault(variable.place, f"variables.{name}.derived_from", Message.NAME_UNKNOWN, what, remedy)


def _origin(written: str, found: _Derived, derived: Mapping[str, _Derived]) -> Origin:
    return derived[written].origin if written in derived else (found.origin[0], composed(written))


def _parents(derived: Mapping[str, _Derived]) -> dict[Origin, set[Origin]]:
    """Return what each origin was worked out from; two variables that read one column share its origins."""
    above: dict[Origin, set[Origin]] = {}
    for found in derived.values():
        above.setdefault(found.origin, set()).update(_origin(written, found, derived) for written in found.names)
    return above


def _line(origin: Origin, above: Mapping[Origin, set[Origin]]) -> set[Origin]:
    """Return an origin with everything from which it was worked out, however far back."""
    line: set[Origin] = set()
    waiting = [origin]
    while waiting:
        one = waiting.pop()
        if one not in line:
            line.add(one)
            waiting += above.get(one, ())
    return line
