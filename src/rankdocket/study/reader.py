"""A spec from its text: every fault of the file at once, or the frozen values."""

from collections.abc import Mapping
from typing import Final, TypeVar

from pydantic import ValidationError

from rankdocket.errors import Fault, InputError, Place
from rankdocket.study.consistency import consistency_faults
from rankdocket.study.conversion import spec_of
from rankdocket.study.form import (
    AssociationForm,
    DataForm,
    Form,
    InferenceForm,
    ReportForm,
    RequirementsForm,
    RowsForm,
    SpecForm,
    StudyForm,
    VariableForm,
)
from rankdocket.study.homes import is_misplaced
from rankdocket.study.messages import Message, fault, in_file_order
from rankdocket.study.names import name_faults
from rankdocket.study.nodes import MapNode, Node, PlainTree, plain_of, read_tree
from rankdocket.study.parts import Parts
from rankdocket.study.refusals import Part, fault_of, unknown_key
from rankdocket.study.spec import StudySpec

F = TypeVar("F", bound=Form)

_STAND_INS: Final[Mapping[type[Form], dict[str, PlainTree]]] = {
    DataForm: {"file": "stand-in", "missing_codes": []},
    RowsForm: {"one_row_is": "stand-in"},
    VariableForm: {"column": "stand-in", "label": "stand-in", "scale": "already ranked"},
    AssociationForm: {
        "between": ["stand-in", "stand-in"],
        "question": "stand-in",
        "role": "primary",
        "hypothesis": {"expected_sign": "positive"},
    },
    InferenceForm: {"alpha": "0.05"},
}
"""Required keys of the parts whose keys are compared with one another; never compared themselves."""


def read_spec(text: str, path: str) -> StudySpec:
    """Read a spec.

    Parameters
    ----------
    text
        The YAML text.
    path
        The file as its user wrote it; it is only named in messages.

    Raises
    ------
    InputError
        With every fault of the file, in file order.
    """
    tree, faults = read_tree(text, path)
    if tree is None:
        raise InputError(in_file_order(faults))
    refused = {found.place for found in faults}
    reading = _Reading(tree, Place(path))
    parts = reading.parts()
    # What is refused as YAML has no value, so its place can only give follow-on faults.
    faults += [found for found in reading.faults if found.place not in refused]
    faults += [found for found in consistency_faults(parts) if found.place not in refused]
    if faults:
        raise InputError(in_file_order(faults))
    return spec_of(parts)


class _Reading:
    """A walk over the parts of a spec; faults are gathered."""

    def __init__(self, tree: MapNode, whole: Place) -> None:
        self.tree = tree
        self.whole = whole
        self.faults: list[Fault] = []
        self.faulty: dict[tuple[str, ...], frozenset[str]] = {}

    def parts(self) -> Parts:
        """Read each part by its own form, so that a fault in one hides nothing in another."""
        self._check_sections()
        return Parts(
            tree=self.tree,
            whole=self.whole,
            study=self._section("study", StudyForm),
            data=self._entries("data", DataForm),
            rows=self._section("rows", RowsForm),
            variables=self._entries("variables", VariableForm),
            associations=self._entries("associations", AssociationForm),
            inference=self._section("inference", InferenceForm),
            requirements=self._section("requirements", RequirementsForm) or RequirementsForm(),
            report=self._section("report", ReportForm) or ReportForm(),
            faulty=self.faulty,
        )

    def _check_sections(self) -> None:
        sections = SpecForm.model_fields
        for key, entry in self.tree.entries.items():
            if key not in sections:
                self.faults.append(unknown_key(entry.key_place, (key,), list(sections), "a spec"))
        for key, section in sections.items():
            if section.is_required() and key not in self.tree.entries:
                what = f"{key} is missing."
                self.faults.append(fault(self.whole, key, Message.KEY_MISSING, what, f"Write {key}: and its keys."))

    def _section(self, name: str, form: type[F]) -> F | None:
        entry = self.tree.entries.get(name)
        return None if entry is None else self._read(Part((name,), entry.key_place, entry.value), form)

    def _entries(self, name: str, form: type[F]) -> dict[str, F]:
        entry = self.tree.entries.get(name)
        if entry is None:
            return {}
        node: Node = entry.value
        if not isinstance(node, MapNode) or not node.entries:
            what = "no entry stands here." if isinstance(node, MapNode) else "keys are expected here."
            number = Message.KEY_MISSING if isinstance(node, MapNode) else Message.WRONG_SHAPE
            remedy = "Write at least one name below this line, indented, and its keys."
            self.faults.append(fault(entry.key_place, name, number, what, remedy))
            return {}
        self.faults.extend(name_faults(name, node))
        entries = {key: entry for key, entry in node.entries.items() if not is_misplaced(name, key, entry.value)}
        for key in node.entries.keys() - entries.keys():
            what = f"{key} stands beside the entries of {name} and is a key of an entry."
            remedy = "Indent it like the other keys of its entry."
            place = node.entries[key].key_place
            self.faults.append(fault(place, f"{name}.{key}", Message.WRONG_SHAPE, what, remedy))
        read = {key: self._read(Part((name, key), e.key_place, e.value), form) for key, e in entries.items()}
        return {key: found for key, found in read.items() if found is not None}

    def _read(self, part: Part, form: type[F]) -> F | None:
        plain = plain_of(part.value)
        try:
            return form.model_validate(plain)
        except ValidationError as error:
            found = error.errors(include_url=False)
        self.faults.extend(fault_of(one, part, form) for one in found)
        if form not in _STAND_INS or not isinstance(plain, dict):
            return None
        keys = frozenset(str(one["loc"][0]) for one in found)
        self.faulty[part.address] = keys
        sound = {key: value for key, value in plain.items() if key not in keys}
        return form.model_validate({**_STAND_INS[form], **sound})
