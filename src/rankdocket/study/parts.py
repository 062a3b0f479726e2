"""The parts of a spec as far as each could be read alone."""

from collections.abc import Mapping
from dataclasses import dataclass

from rankdocket.errors import Place
from rankdocket.study.form import (
    AssociationForm,
    DataForm,
    InferenceForm,
    ReportForm,
    RequirementsForm,
    RowsForm,
    StudyForm,
    VariableForm,
)
from rankdocket.study.homes import is_misplaced
from rankdocket.study.nodes import ListNode, MapNode, Node, TextNode


@dataclass(frozen=True, slots=True)
class Parts:
    """Forms by section.

    A part with faulty keys stands here with stand-ins for them, so that its other keys can still be compared;
    ``faulty`` names those keys by the part's address.  A part that is missing, or holds no keys, is ``None`` or
    not in its mapping.
    """

    tree: MapNode
    whole: Place
    study: StudyForm | None
    data: Mapping[str, DataForm]
    rows: RowsForm | None
    variables: Mapping[str, VariableForm]
    associations: Mapping[str, AssociationForm]
    inference: InferenceForm | None
    requirements: RequirementsForm
    report: ReportForm
    faulty: Mapping[tuple[str, ...], frozenset[str]]

    def sound(self, address: tuple[str, ...], *keys: str) -> bool:
        """Say whether all these keys of the part at ``address`` were read without a fault."""
        return self.faulty.get(address, frozenset()).isdisjoint(keys)

    def names(self, section: str) -> list[str]:
        """Return the names written in a section, those with faults included, keys that strayed among them not."""
        entry = self.tree.entries.get(section)
        if entry is None or not isinstance(entry.value, MapNode):
            return []
        return [name for name, found in entry.value.entries.items() if not is_misplaced(section, name, found.value)]

    def key_place(self, *address: str | int) -> Place:
        """Return where the key at ``address`` stands, or the nearest key above it."""
        return self._reach(address)[0]

    def value_place(self, *address: str | int) -> Place:
        """Return where the text at ``address`` stands, or its key when it is no text."""
        place, node = self._reach(address)
        return node.place if isinstance(node, TextNode) else place

    def _reach(self, address: tuple[str | int, ...]) -> tuple[Place, Node]:
        place, node = self.whole, self._root()
        for step in address:
            if isinstance(node, MapNode) and isinstance(step, str) and step in node.entries:
                place, node = node.entries[step].key_place, node.entries[step].value
            elif isinstance(node, ListNode) and isinstance(step, int):
                place, node = node.items[step].place, node.items[step]
            else:
                break
        return place, node

    def _root(self) -> Node:
        return self.tree


def table_of(parts: Parts, variable: VariableForm) -> str | None:
    """Return the table of a variable; ``None`` when it is not named and there are several."""
    if variable.column.table is not None:
        return variable.column.table
    names = parts.names("data")
    return names[0] if len(names) == 1 else None
