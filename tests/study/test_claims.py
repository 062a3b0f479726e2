"""Claims of the plan: what each needs, what it excludes, and how they come back."""

import jsonschema
import pytest
import yaml

from rankdocket.canonical import digest_of
from rankdocket.study.json_schema import json_schema
from rankdocket.study.plan import plan_of
from rankdocket.study.reader import read_spec
from rankdocket.study.spec import HypothesisSpec
from rankdocket.study.writer import spec_as_used
from study.faults import changed, spec_messages
from study.specs import PANEL, PLANKTON

RHO = changed(PANEL, ("coefficient: Kendall tau-b", "coefficient: Spearman rho"))
WRITTEN = "{expected_sign: positive, smallest_of_interest: 0.30}"


def with_keys(text: str, keys: str) -> str:
    """Return the spec with further keys in the hypothesis of A1."""
    return changed(text, (WRITTEN, f"{WRITTEN[:-1]}, {keys}}}"))


def hypothesis(text: str) -> HypothesisSpec:
    return read_spec(text, "s.yaml").associations["A1"].hypothesis


def test_the_usual_claim_is_any_association() -> None:
    """A plan that says nothing of claims asks for an association alone, and its power is four in five."""
    spec = read_spec(RHO, "s.yaml")
    found = spec.associations["A1"].hypothesis
    assert (found.claim, found.null_value) == ("any", None)
    assert str(spec.inference.planned_power) == "0.80"


@pytest.mark.parametrize(
    ("written", "read"),
    [("0.2", "0.2"), ("-0.35", "-0.35"), ("\u22120.35", "-0.35"), ('"-.5"', "-0.5"), ("0.00001", "0.00001")],
)
def test_a_null_value_may_have_a_sign(written: str, read: str) -> None:
    """It is a place on the scale of the coefficient, not a size."""
    assert str(hypothesis(with_keys(RHO, f"null_value: {written}")).null_value) == read


@pytest.mark.parametrize(
    ("written", "told"),
    [
        ("1", "1 is not possible here. Write a number more than -1 and less than 1. (message 31)"),
        ("-1", "-1 is not possible here. Write a number more than -1 and less than 1. (message 31)"),
        ("-2.5", "-2.5 is not possible here. Write a number more than -1 and less than 1. (message 31)"),
        (
            "0",
            "0 is not possible here: the rank test is of that. Leave null_value out; the rank test then decides. (message 31)",
        ),
        (
            "-0.0",
            "0 is not possible here: the rank test is of that. Leave null_value out; the rank test then decides. (message 31)",
        ),
        ("some", '"some" is not a number. Write a number more than -1 and less than 1. (message 30)'),
        ('"0,2"', '"0,2" is not a number. Write 0.2. (message 30)'),
    ],
)
def test_an_impossible_null_value_is_refused(written: str, told: str) -> None:
    """With the range, or with the number that was meant."""
    assert spec_messages(with_keys(RHO, f"null_value: {written}")) == [
        f"s.yaml:66:83: associations.A1.hypothesis.null_value: {told}"
    ]


@pytest.mark.parametrize("claim", ["above", "within"])
def test_a_claim_about_size_needs_the_size(claim: str) -> None:
    """Nothing else says above or within what."""
    text = changed(RHO, (WRITTEN, f"{{expected_sign: positive, claim: {claim}}}"))
    assert spec_messages(text) == [
        (
            f"s.yaml:66:50: associations.A1.hypothesis.claim: smallest_of_interest is missing; claim: {claim} is about it. "
            "Write smallest_of_interest: and a size fixed before the data are seen, or claim: any. (message 41)"
        )
    ]
    assert hypothesis(with_keys(RHO, f"claim: {claim}")).claim == claim


def test_an_association_makes_one_claim() -> None:
    """A value and a size together would leave open what the finding is about."""
    assert spec_messages(with_keys(RHO, "claim: above, null_value: 0.1")) == [
        (
            "s.yaml:66:97: associations.A1.hypothesis.null_value: null_value and claim: above are two claims, and an "
            "association has one finding. Leave null_value out, or write claim: any. (message 40)"
        )
    ]


@pytest.mark.parametrize(("key", "place"), [("claim: above", 78), ("claim: within", 78), ("null_value: 0.1", 83)])
def test_claims_are_for_rho(key: str, place: int) -> None:
    """The tests of size rest on a variance of rho; tau-b has none here."""
    name = key.split(":", maxsplit=1)[0]
    assert spec_messages(with_keys(PANEL, key)) == [
        (
            f"s.yaml:66:{place}: associations.A1.hypothesis.{name}: {name} is tested for Spearman rho alone; this association "
            f"has Kendall tau-b. Write coefficient: Spearman rho, or leave {name} out. (message 42)"
        )
    ]


@pytest.mark.parametrize("power", ["0.5", "1", "1.2", "0.3"])
def test_a_planned_power_lies_between_one_half_and_one(power: str) -> None:
    """A study is not planned to miss more often than to find, and none finds surely."""
    (message,) = spec_messages(changed(PLANKTON, ("alpha: 0.05", f"alpha: 0.05\n  planned_power: {power}")))
    assert "inference.planned_power: " in message
    assert "Write a number more than 0.5 and less than 1." in message


@pytest.mark.parametrize(
    "text",
    [
        with_keys(RHO, "claim: within"),
        with_keys(RHO, "null_value: -0.20"),
        changed(RHO, ("alpha: 0.050", "alpha: 0.050\n  planned_power: 0.9")),
    ],
)
def test_a_claim_is_part_of_the_plan_and_comes_back(text: str) -> None:
    """Written out, read again, accepted by the schema, and another plan than the one without it."""
    spec = read_spec(text, "s.yaml")
    again = read_spec(spec_as_used(spec), "used.yaml")
    assert (again.associations["A1"].hypothesis, again.inference.planned_power) == (
        spec.associations["A1"].hypothesis,
        spec.inference.planned_power,
    )
    assert digest_of(plan_of(again)) == digest_of(plan_of(spec)) != digest_of(plan_of(read_spec(RHO, "s.yaml")))
    assert jsonschema.Draft202012Validator(json_schema()).is_valid(yaml.safe_load(spec_as_used(spec)))


@pytest.mark.parametrize(("key", "place"), [("claim: above", 78), ("null_value: 0.1", 83)])
def test_a_family_by_step_down_max_t_makes_no_claims(key: str, place: int) -> None:
    """Its permutations are those of independence; a claim has a test of its own."""
    adjusted = changed(with_keys(RHO, key), ("adjust: none, among: all", "adjust: step-down maxT, among: all"))
    told = [message for message in spec_messages(adjusted) if "permutes under independence" in message]
    name = key.split(":", maxsplit=1)[0]
    assert told == [
        (
            f"s.yaml:66:{place}: associations.A1.hypothesis.{name}: step-down maxT permutes under independence, and {name} of A1 "
            f"is decided by a test of its own. Leave {name} out, or write another adjust, such as Holm. (message 40)"
        )
    ]
