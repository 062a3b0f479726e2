"""The catalogue of message numbers."""

import ast
from pathlib import Path

import rankdocket.study.messages as catalogue
from rankdocket.errors import Place
from rankdocket.study.messages import MEANINGS, Message, fault, in_file_order

ROOM = Path(catalogue.__file__).parent


def test_every_number_has_one_meaning() -> None:
    """Each number of the catalogue has a meaning, and no meaning stands for two numbers."""
    assert set(MEANINGS) == set(Message)
    assert len(set(MEANINGS.values())) == len(Message)
    assert sorted(Message) == list(range(1, len(Message) + 1))


def test_the_first_sixteen_keep_their_meanings() -> None:
    """Numbers that offices already know are never given away again."""
    names = [Message(number).name for number in range(1, 17)]
    assert names == [
        "NUMBER_NOT_READABLE",
        "NUMBER_AMBIGUOUS",
        "LIMIT_NOT_GIVEN",
        "LABEL_UNKNOWN",
        "ORDER_MISSING",
        "COLUMN_NOT_FOUND",
        "JOIN_GREW",
        "JOIN_LOST_ROWS",
        "CONSTANT",
        "TOO_FEW",
        "REPEATS_UNDECLARED",
        "TIME_UNDECLARED",
        "LOCKED",
        "DATA_CHANGED",
        "KEY_UNKNOWN",
        "YAML_TRAP",
    ]


def test_faults_are_made_in_one_place_only() -> None:
    """No module of the room makes a fault beside the function that takes its number from the catalogue."""
    makers = set()
    for file in ROOM.glob("*.py"):
        for node in ast.walk(ast.parse(file.read_text(encoding="utf-8"))):
            if isinstance(node, ast.Call) and isinstance(node.func, ast.Name) and node.func.id == "Fault":
                makers.add(file.name)
    assert makers == {"messages.py"}


def test_faults_come_in_file_order_and_once() -> None:
    """Faults are sorted by line and column within a file, and a fault found twice is told once."""
    late = fault(Place("s.yaml", 9, 1), "", Message.NAME, "late")
    early = fault(Place("s.yaml", 2, 5), "", Message.NAME, "early")
    whole = fault(Place("s.yaml"), "", Message.NAME, "whole")
    other = fault(Place("a.csv", 1), "", Message.NAME, "other")
    assert in_file_order([late, early, other, whole, late]) == (whole, early, late, other)


def test_no_message_says_what_the_command_line_says() -> None:
    """That nothing was computed is said once, behind the last message, and never by a message of this room."""
    assert [file.name for file in ROOM.glob("*.py") if "nothing was computed" in file.read_text("utf-8").lower()] == []
