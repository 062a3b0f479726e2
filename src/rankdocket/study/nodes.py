"""YAML text to a tree of text, lists and keys, each with its place; what a spec does not use is refused.

Nothing is interpreted here: a scalar stays the text that stands in the file, whatever other readers of YAML
would make of ``on``, ``010`` or ``12:30``.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from typing import Final, TypeAlias

import yaml

from rankdocket.errors import Fault, Place
from rankdocket.study.messages import Message, fault
from rankdocket.study.syntax import character_faults, forbidden_in, syntax_fault, tab_faults
from rankdocket.study.wording import shown

LARGEST_TEXT: Final = 1_000_000
"""Bytes of a spec; a spec of a thousand associations has about a third of this."""

MOST_NODES: Final = 200_000
DEEPEST: Final = 20
LONGEST_SCALAR: Final = 20_000

LONGEST_KEY: Final = 100
"""Characters of a key and of a code; YAML itself ends a key that stands before its colon after 1024 bytes."""

NULL_WORDS: Final = ("~", "null", "Null", "NULL")

_Loader: Final = getattr(yaml, "CSafeLoader", yaml.SafeLoader)


@dataclass(frozen=True, slots=True)
class TextNode:
    """A scalar, as text."""

    text: str
    place: Place


@dataclass(frozen=True, slots=True)
class ListNode:
    """A sequence."""

    items: tuple["Node", ...]
    place: Place


@dataclass(frozen=True, slots=True)
class Entry:
    """One key of a mapping: where the key stands, and its value."""

    key_place: Place
    value: "Node"


@dataclass(frozen=True, slots=True)
class MapNode:
    """A mapping, in file order."""

    entries: Mapping[str, Entry]
    place: Place


Node: TypeAlias = TextNode | ListNode | MapNode
PlainTree: TypeAlias = "str | list[PlainTree] | dict[str, PlainTree]"


def read_tree(text: str, path: str) -> tuple[MapNode | None, list[Fault]]:
    """Read YAML text.

    Returns
    -------
    tree, faults
        The tree is ``None`` when the text cannot be read far enough to look at its keys.
    """
    text = text.removeprefix("\ufeff")
    whole = Place(path)
    if len(text) > LARGEST_TEXT or len(text.encode("utf-8", "replace")) > LARGEST_TEXT:
        return None, [fault(whole, "", Message.TOO_LARGE, f"the file is larger than {LARGEST_TEXT} bytes.")]
    unreadable = character_faults(text, path) or tab_faults(text, path)
    if unreadable:
        return None, unreadable
    growth = _Growth(path, yaml.parse(text, Loader=_Loader))
    try:
        root = growth.document()
    except yaml.YAMLError as error:
        found = syntax_fault(error, text, path)
        return None, [*(one for one in growth.faults if not _follows(one, found)), found]
    except _TooLargeError:
        return None, growth.faults
    if isinstance(root, MapNode):
        return root, growth.faults
    if not growth.faults:
        remedy = "Write the keys study, data, rows, variables, associations and inference."
        growth.faults.append(fault(whole, "", Message.NO_KEYS, "no keys stand in the file.", remedy))
    return None, growth.faults


def _follows(one: Fault, found: Fault) -> bool:
    """Say whether a fault is only what a line in disorder made of the key above it or of those below."""
    shaken = one.number in (Message.NOTHING_WRITTEN, Message.KEY_TWICE)
    return shaken and (one.place.line or 0) >= (found.place.line or 0) - 1


def plain_of(node: Node) -> PlainTree:
    """Return the tree without its places."""
    match node:
        case TextNode():
            return node.text
        case ListNode():
            return [plain_of(item) for item in node.items]
        case MapNode():
            return {key: plain_of(entry.value) for key, entry in node.entries.items()}


class _TooLargeError(Exception):
    """The text goes beyond a limit; the fault is already noted."""


@dataclass(slots=True)
class _Growth:
    """A tree while it grows from the parser's events; faults are gathered, not raised.

    ``address`` holds the keys and the positions, counted from 1, on the way to where the growth stands.
    """

    path: str
    events: Iterator[yaml.Event]
    faults: list[Fault] = field(default_factory=list)
    address: list[str] = field(default_factory=list)
    seen: int = 0

    def document(self) -> Node | None:
        root: Node | None = None
        documents = 0
        for event in self.events:
            if isinstance(event, yaml.DocumentStartEvent):
                documents += 1
                if event.version is not None or event.tags:
                    self._refuse(event, Message.FEATURE, "a line that begins with % is not used in a spec.")
                if documents > 1:
                    what = "a second document begins here; a spec is one document."
                    self._refuse(event, Message.SEVERAL_DOCUMENTS, what, "Put each study into a file of its own.")
                    return root
            elif isinstance(event, yaml.NodeEvent):
                root = self._node(event)
        return root

    def _node(self, event: yaml.NodeEvent) -> Node:
        place = self._place(event)
        self.seen += 1
        if self.seen > MOST_NODES:
            self._give_up(event, f"more than {MOST_NODES} values.")
        if len(self.address) > DEEPEST:
            self._give_up(event, f"nested deeper than {DEEPEST} levels.")
        if isinstance(event, yaml.AliasEvent):
            what = f"*{event.anchor} repeats another part of the file; a spec does not use that."
            self._refuse(event, Message.FEATURE, what, "Write the value out.")
            return TextNode("", place)
        if event.anchor is not None:
            what = f"&{event.anchor} names a part of the file; a spec does not use that."
            self._refuse(event, Message.FEATURE, what, "Leave it out and write repeated values out.")
        tag = getattr(event, "tag", None)
        if tag is not None:
            what = f"{shown(str(tag))} gives a value a type by hand; a spec does not use that."
            self._refuse(event, Message.FEATURE, what, "Leave it out: each key has its own type.")
        if isinstance(event, yaml.ScalarEvent):
            return self._scalar(event, place)
        if isinstance(event, yaml.SequenceStartEvent):
            return ListNode(self._items(), place)
        return MapNode(self._entries(), place)

    def _scalar(self, event: yaml.ScalarEvent, place: Place) -> TextNode:
        if len(event.value) > LONGEST_SCALAR:
            self._give_up(event, f"a text longer than {LONGEST_SCALAR} characters.")
        bad = forbidden_in(event.value)
        if bad is not None:
            self._refuse(event, Message.CHARACTER, f"the text holds U+{ord(bad):04X}, which no page can show.")
        return TextNode(event.value, place)

    def _items(self) -> tuple[Node, ...]:
        items: list[Node] = []
        for event in self.events:
            if isinstance(event, yaml.SequenceEndEvent):
                break
            assert isinstance(event, yaml.NodeEvent)
            self.address.append(str(len(items) + 1))
            item = self._node(event)
            if _is_plain(event) and item == TextNode("", item.place):
                what = "nothing is written in this place of the list."
                self._refuse(event, Message.NOTHING_WRITTEN, what, 'Write "" for an empty cell, or strike the place.')
            self.address.pop()
            items.append(item)
        return tuple(items)

    def _entries(self) -> dict[str, Entry]:
        entries: dict[str, Entry] = {}
        for event in self.events:
            if isinstance(event, yaml.MappingEndEvent):
                break
            assert isinstance(event, yaml.NodeEvent)
            self.address.append("")
            key = self._node(event)
            usable = isinstance(key, TextNode) and self._is_key(event, key)
            self.address[-1] = key.text if isinstance(key, TextNode) else ""
            value_event = next(self.events)
            assert isinstance(value_event, yaml.NodeEvent)
            value = self._node(value_event)
            if usable and isinstance(key, TextNode):
                first = entries.setdefault(key.text, Entry(key.place, self._written(key, value_event, value)))
                if first.key_place != key.place:
                    what = f"{shown(key.text)} stands twice, first in line {first.key_place.line}."
                    self._refuse(event, Message.KEY_TWICE, what, "Keep one of them.")
            elif not isinstance(key, TextNode):
                self._refuse(event, Message.KEY_NOT_TEXT, "a key is a word; a list or keys stand here.")
            self.address.pop()
        return entries

    def _is_key(self, event: yaml.NodeEvent, key: TextNode) -> bool:
        """Say whether a text can be used as a key; if not, note why."""
        if isinstance(event, yaml.AliasEvent):
            return False
        if _is_plain(event) and key.text == "<<":
            what = "<< copies keys from another part of the file; a spec does not use that."
            self._refuse(event, Message.FEATURE, what, "Write the keys out.")
            return False
        if _is_plain(event) and not key.text:
            self._refuse(event, Message.KEY_NOT_TEXT, "a key is missing before the colon.")
            return False
        if len(key.text) > LONGEST_KEY:
            self._refuse(event, Message.TOO_LARGE, f"a key longer than {LONGEST_KEY} characters.")
            return False
        return True

    def _written(self, key: TextNode, event: yaml.NodeEvent, value: Node) -> Node:
        """Return the value after a key; note a value that is not written or that others read as nothing."""
        if not _is_plain(event) or not isinstance(value, TextNode):
            return value
        if not value.text:
            what = f"nothing is written after {key.text}."
            remedy = "Write a value, or leave the key out."
            self.faults.append(fault(key.place, self._field(), Message.NOTHING_WRITTEN, what, remedy))
            return TextNode("", key.place)
        if value.text in NULL_WORDS:
            what = f'{value.text} is read as "nothing" by YAML.'
            self._refuse(event, Message.YAML_TRAP, what, f'Write "{value.text}" for the text, or leave the key out.')
        return value

    def _place(self, event: yaml.Event) -> Place:
        mark = event.start_mark
        return Place(self.path) if mark is None else Place(self.path, mark.line + 1, mark.column + 1)

    def _field(self) -> str:
        return ".".join(step for step in self.address if step)

    def _refuse(self, event: yaml.Event, number: Message, what: str, remedy: str = "") -> None:
        self.faults.append(fault(self._place(event), self._field(), number, what, remedy))

    def _give_up(self, event: yaml.Event, what: str) -> None:
        self.faults.append(fault(self._place(event), "", Message.TOO_LARGE, what))
        raise _TooLargeError


def _is_plain(event: yaml.NodeEvent) -> bool:
    """Say whether a scalar stands without quotes; the two loaders write this as '' and None."""
    return isinstance(event, yaml.ScalarEvent) and not event.style
