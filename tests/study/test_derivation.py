"""What variables were worked out from: names that must exist, no circles, what two of them share."""

from dataclasses import replace

import pytest

from analysis.invented import MIXED, RISING, Invented, read_texts
from rankdocket.study.derivation import shared_origins
from rankdocket.study.plan import plan_of
from rankdocket.study.reader import read_spec
from rankdocket.study.writer import spec_as_used
from study.faults import messages

COLUMNS = dict.fromkeys(("u", "v", "w"), RISING) | {"iron": MIXED}
BASE = Invented(columns=COLUMNS)
MEASURED = "scale: measured, unit: mm"


def derived(**origins: str) -> Invented:
    """Return a study of u, v and w with what some were worked out from."""
    return replace(
        BASE, variables={name: f"label: {name}, {MEASURED}, derived_from: {of}" for name, of in origins.items()}
    )


def text_of(study: Invented) -> str:
    """Return the spec without a variable that reads the column iron."""
    lines = study.spec_text().splitlines()
    return "\n".join(line for line in lines if not line.startswith("  iron:"))


def refused(study: Invented) -> list[str]:
    """Return what the spec alone, or the spec with its data, is refused with."""
    return messages(lambda: read_texts(text_of(study), {"received/trials.csv": study.data_text()}))


@pytest.mark.parametrize(
    ("origins", "shared"),
    [
        ({"u": "[v]"}, ("v",)),
        ({"v": "[u]"}, ("u",)),
        ({"u": "[w]", "v": "[w]"}, ("w",)),
        ({"u": "[iron]", "v": "[iron, w]"}, ("iron",)),
        ({"u": "[w]", "w": "[iron]", "v": "[iron]"}, ("iron",)),
        ({"u": "[w]", "w": "[v]"}, ("v",)),
        ({"u": "[w]", "v": "[w]", "w": "[iron]"}, ("w",)),
        ({"u": "[iron]", "v": "[w]"}, ()),
        ({"u": "[]", "v": "[]"}, ()),
        ({}, ()),
    ],
)
def test_two_variables_share_what_either_was_worked_out_from(origins: dict[str, str], shared: tuple[str, ...]) -> None:
    """At once or by way of others, by variables or by columns; only the nearest is named."""
    assert shared_origins(read_spec(text_of(derived(**origins)), "s"), "u", "v") == shared


def test_a_column_is_the_same_by_its_own_name_and_by_that_of_its_variable() -> None:
    """A variable that reads the column Fe and the name Fe stand for one origin."""
    text = text_of(derived(u="[w]", v="[Fe]")).replace("w: {column: w,", "w: {column: Fe,")
    assert shared_origins(read_spec(text, "s"), "u", "v") == ("w",)


@pytest.mark.parametrize(
    ("origins", "said"),
    [
        ({"u": "[u]"}, ["u would be derived from itself."]),
        ({"u": "[v]", "v": "[u]"}, ['itself by way of "v"', 'itself by way of "u"']),
        ({"u": "[v]", "v": "[w]", "w": "[u]"}, ['way of "v"', 'way of "w"', 'way of "u"']),
        ({"u": "[v, iron]", "v": "[iron, vv]"}, ['"vv" is neither a variable nor a column of trials.']),
    ],
)
def test_circles_and_unknown_names_are_refused(origins: dict[str, str], said: list[str]) -> None:
    """Each variable of a circle has its fault, and one that only leads to a circle has none."""
    found = refused(derived(**origins))
    assert len(found) == len(said)
    assert all(part in message for part, message in zip(said, found, strict=True))


def test_a_variable_that_leads_to_a_circle_is_not_part_of_it() -> None:
    """The fault stands where it can be mended."""
    found = refused(derived(u="[v]", v="[w]", w="[v]"))
    assert ["variables.v" in message or "variables.w" in message for message in found] == [True, True]


def test_an_unknown_name_is_told_with_the_nearest() -> None:
    """Among variables and columns."""
    (found,) = refused(derived(u="[irno]"))
    assert "nearest: iron." in found


def test_an_empty_list_is_an_answer_and_silence_is_none() -> None:
    """Both come through the spec as used; a plan that is silent keeps the digest it had before there was the key."""
    spec = read_spec(text_of(derived(u="[]", v="[iron]")), "s")
    again = read_spec(spec_as_used(spec), "s")
    assert [again.variables[name].derived_from for name in ("u", "v", "w")] == [(), ("iron",), None]
    plan = plan_of(spec)
    assert isinstance(plan, dict)
    variables = plan["variables"]
    assert isinstance(variables, dict)
    assert ["derived_from" in keys for keys in variables.values() if isinstance(keys, dict)] == [True, True, False]
