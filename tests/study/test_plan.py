"""The plan: what a digest of it must and must not notice."""

import pytest

from rankdocket.canonical import canonical_bytes, digest_of
from rankdocket.study.plan import plan_of
from rankdocket.study.reader import read_spec
from rankdocket.study.writer import spec_as_used
from study.faults import changed
from study.specs import PANEL


def digest(text: str) -> str:
    return digest_of(plan_of(read_spec(text, "s.yaml")))


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("J. Okafor", "K. Okafor"),
        ("received/loaves.csv", "received/again/loaves.csv"),
        ("received_on: 2026-03-02", "received_on: 2026-03-03"),
        ("title: Crust colour", "title: Colour of the crust"),
        ("readers: [client, court]", "readers: [client]"),
        ("distribution: [Brookfield Bakers, file copy]", "distribution: [file copy]"),
        ("alpha: 0.050", "alpha: 0.05"),
        ("most_missing: 0.1\n", "most_missing: 0.10\n"),
        ("  A1:", "  # a comment\n  A1:"),
    ],
)
def test_what_is_not_planned_leaves_the_plan_alone(old: str, new: str) -> None:
    """People, paths, dates of receipt, the report and another way of writing a number are outside the plan."""
    assert digest(changed(PANEL, (old, new))) == digest(PANEL)


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("alpha: 0.050", "alpha: 0.051"),
        ("NA: refused", "NA: lost"),
        ("Withdrew consent", "Left"),
        ("[Poor, Fair, Good]", "[Fair, Poor, Good]"),
        ("[colour, liking]", "[liking, colour]"),
        ("seed: 9223372036854775807", "seed: 9223372036854775806"),
        ("permutations: 20000", "permutations: 20000, most_draws: 20000"),
        ("permutations: 20000", "permutations: 20000, budget: {seconds: 11}"),
        ("permutations: 20000", "permutations: 20000, budget: {memory: 512 MiB}"),
        ('decimal_mark: ","\n    thousands_mark: "."', 'decimal_mark: "."'),
        ("alpha: 0.050", "alpha: 0.050\n  interval: {by: Bonett-Wright}"),
        ("alpha: 0.050", "alpha: 0.050\n  interval: {adjusted: simultaneous}"),
        ("alpha: 0.050", "alpha: 0.050\n  interval: {resamples: 1999}"),
        ("most_tied: 0.6", "most_tied: 0.61"),
        ("repeated_within: booth", "repeated_within: table"),
    ],
)
def test_what_is_planned_changes_the_plan(old: str, new: str) -> None:
    """A changed rule, order, code, reason or seed is another plan."""
    assert digest(changed(PANEL, (old, new))) != digest(PANEL)


def test_the_plan_has_a_canonical_form() -> None:
    """The plan of a spec and of the same spec as used are equal bytes, a seed beyond 2**53 included."""
    spec = read_spec(PANEL, "s.yaml")
    assert canonical_bytes(plan_of(spec)) == canonical_bytes(plan_of(read_spec(spec_as_used(spec), "used.yaml")))
