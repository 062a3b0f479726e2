"""The names that a spec gives to its tables, variables and associations."""

import re

from rankdocket.errors import Fault
from rankdocket.study.form import NAME_PATTERN, TRAP_WORDS
from rankdocket.study.messages import Message, fault
from rankdocket.study.nodes import MapNode
from rankdocket.study.wording import shown


def name_faults(section: str, node: MapNode) -> list[Fault]:
    """Return a fault for each key of ``node`` that cannot be a name, and for two that differ by case alone.

    Names become parts of file names, and there are file systems that do not tell A1 from a1.
    """
    faults: list[Fault] = []
    folded: dict[str, str] = {}
    for name, entry in node.entries.items():
        field = f"{section}.{name}"
        if name.lower() in TRAP_WORDS:
            what = f'"{name}" is a word that YAML reads as true, false or nothing.'
            faults.append(fault(entry.key_place, field, Message.YAML_TRAP, what, "Use another name."))
        elif re.fullmatch(NAME_PATTERN, name) is None:
            remedy = "Write letters a to z, digits, _ and -, and begin with a letter."
            faults.append(fault(entry.key_place, section, Message.NAME, f"{shown(name)} cannot be a name.", remedy))
        elif folded.setdefault(name.casefold(), name) != name:
            what = f"{name} differs from {folded[name.casefold()]} by capital letters alone."
            faults.append(fault(entry.key_place, field, Message.ENTRY_TWICE, what, "Use another name."))
    return faults
