"""Requirements that a plan waives, each with its written reason."""

import pytest

from rankdocket.study.plan import plan_of
from rankdocket.study.reader import read_spec
from rankdocket.study.writer import spec_as_used
from rankdocket.vocabulary import WAIVABLE_CHECKS
from study.faults import changed, spec_messages
from study.specs import PLANKTON


def waiving(keys: str) -> str:
    """Return a spec whose association waives requirements."""
    return changed(PLANKTON, ("    role: primary\n", f"    role: primary\n    waived: {{{keys}}}\n"))


def test_every_requirement_of_the_list_can_be_waived() -> None:
    """In whatever order they are written, they come through the spec as used in report order."""
    spec = read_spec(waiving(", ".join(f"{word}: for {word}" for word in reversed(WAIVABLE_CHECKS))), "s")
    again = read_spec(spec_as_used(spec), "s")
    for found in (spec, again):
        assert list(found.associations["A1"].waived.items()) == [(word, f"for {word}") for word in WAIVABLE_CHECKS]


def test_a_waiver_is_part_of_the_plan() -> None:
    """And a plan without one keeps the digest it had before there was the key."""
    assert "for ties" in str(plan_of(read_spec(waiving("ties: for ties"), "s")))
    assert "waived" not in str(plan_of(read_spec(PLANKTON, "s")))


@pytest.mark.parametrize(
    ("keys", "said"),
    [
        ("tie: few labels", '"tie" is not a requirement that can be waived.'),
        ("shape: it is curved", "Those that can: complete rows, missing values, ties, built-in association."),
        ("mising values: all known", "nearest: missing values."),
        ("independent rows: they are", "independence of rows cannot be waived"),
        ("independence: they are", "write rows.independent_because and the reason"),
        ('ties: " "', "the text is blank."),
        ("ties: [few]", "a list stands here"),
    ],
)
def test_what_cannot_be_waived_is_refused(keys: str, said: str) -> None:
    """One fault, with what to write instead."""
    (found,) = spec_messages(waiving(keys))
    assert said in found
    assert "associations.A1.waived" in found
