"""What the forms refuse, brought back to the place in the file and said in our sentences."""

from dataclasses import dataclass
from typing import Final

from pydantic import BaseModel
from pydantic_core import ErrorDetails

from rankdocket.errors import Fault, Place
from rankdocket.study.form import TRAP_WORDS, SpecForm
from rankdocket.study.homes import homes_of
from rankdocket.study.kinds import REFUSED, MissingCodes, OneOf
from rankdocket.study.messages import Message, fault
from rankdocket.study.nodes import ListNode, MapNode, Node, TextNode
from rankdocket.study.wording import nearest, shown, suggestion

_SHAPES: Final = {
    "model_type": ("keys are expected here.", "Write the keys below this line, indented."),
    "dict_type": ("keys are expected here.", "Write the keys below this line, indented."),
    "tuple_type": ("a list is expected here.", "Write it in square brackets: [first, second]."),
    "too_short": ("the list is too short: {actual} of {wanted}.", "Write the missing entries."),
    "too_long": ("the list is too long: {actual} where {wanted} stand.", "Strike what is too much."),
}


@dataclass(frozen=True, slots=True)
class Part:
    """A part of the spec that one form reads: its address, where its key stands, and its value."""

    address: tuple[str, ...]
    key_place: Place
    value: Node


@dataclass(frozen=True, slots=True)
class _Reached:
    """How far an error's address could be followed in the tree."""

    address: tuple[str, ...]
    key_place: Place
    value: Node


def fault_of(error: ErrorDetails, part: Part, form: type[BaseModel]) -> Fault:
    """Return the fault that a validation error of ``form`` stands for."""
    reached = _follow(part, error["loc"])
    field = ".".join(reached.address)
    kind = error["type"]
    if kind == REFUSED:
        context = error["ctx"]
        return fault(_value_place(reached), field, Message(context["number"]), context["what"], context["remedy"])
    if kind == "extra_forbidden":
        owner = ".".join(reached.address[:-1])
        return unknown_key(reached.key_place, reached.address, keys_of(form, error["loc"]), owner)
    if kind == "missing":
        key = str(error["loc"][-1])
        remedy = _line_of(key, error["loc"], form)
        return fault(reached.key_place, field, Message.KEY_MISSING, f"{key} is missing.", remedy)
    what, remedy = _SHAPES[kind]
    context = error.get("ctx", {})
    wanted = context.get("min_length", context.get("max_length"))
    what = what.format(actual=context.get("actual_length"), wanted=wanted)
    return fault(_value_place(reached), field, Message.WRONG_SHAPE, what, remedy)


def unknown_key(place: Place, address: tuple[str, ...], keys: list[str], owner: str) -> Fault:
    """Return the fault for a key that does not exist, with the nearest that does."""
    key = address[-1]
    if key.lower() in TRAP_WORDS:
        near = nearest(key, keys)
        what = f'"{key}" is a word that YAML reads as true, false or nothing, and not a key of {owner}.'
        return fault(place, ".".join(address), Message.YAML_TRAP, what, f"nearest: {near}." if near else "")
    what = f"{shown(key)} is not a key of {owner}."
    home = homes_of(key)
    if home:
        is_section = key in SpecForm.model_fields
        step = "Write it without indentation." if is_section else "Write it there, indented like the keys beside it."
        return fault(place, ".".join(address), Message.KEY_UNKNOWN, f"{what} It is {home}.", step)
    return fault(place, ".".join(address), Message.KEY_UNKNOWN, what, suggestion(key, keys, "Its keys"))


def keys_of(form: type[BaseModel], address: tuple[int | str, ...]) -> list[str]:
    """Return the keys that may stand where the last part of ``address`` stands."""
    return list(_form_at(form, address).model_fields)


def _form_at(form: type[BaseModel], address: tuple[int | str, ...]) -> type[BaseModel]:
    for step in address[:-1]:
        inner = form.model_fields[step].annotation if step in form.model_fields else None
        for candidate in (inner, *getattr(inner, "__args__", ())):
            if isinstance(candidate, type) and issubclass(candidate, BaseModel):
                form = candidate
    return form


def _line_of(key: str, address: tuple[int | str, ...], form: type[BaseModel]) -> str:
    """Return what to write for a key that is missing, as far as its kind says."""
    for kind in _form_at(form, address).model_fields[key].metadata:
        if isinstance(kind, OneOf):
            return f"Write {key}: and one of: {', '.join(kind.words)}."
        if isinstance(kind, MissingCodes):
            return f'Write {key}: [""] if an empty cell means missing, or {key}: [] when there are no codes.'
    return f"Write {key}: …"


def _follow(part: Part, address: tuple[int | str, ...]) -> _Reached:
    reached = _Reached(part.address, part.key_place, part.value)
    for step in address:
        node = reached.value
        if isinstance(node, MapNode) and isinstance(step, str) and step in node.entries:
            entry = node.entries[step]
            reached = _Reached((*reached.address, step), entry.key_place, entry.value)
        elif isinstance(node, ListNode) and isinstance(step, int) and step < len(node.items):
            item = node.items[step]
            # A person counts the entries of a list from 1.
            reached = _Reached((*reached.address, str(step + 1)), item.place, item)
        else:
            break
    return reached


def _value_place(reached: _Reached) -> Place:
    """Return the place of a text, or of the key above a list or keys."""
    return reached.value.place if isinstance(reached.value, TextNode) else reached.key_place
