"""The spec as used: every default written, and nothing that could be read in another way."""

import dataclasses
from typing import Any

import yaml
from hypothesis import given
from hypothesis import strategies as st

from rankdocket import vocabulary
from rankdocket.errors import Place
from rankdocket.study import form
from rankdocket.study.reader import read_spec
from rankdocket.study.spec import StudySpec
from rankdocket.study.wording import composed
from rankdocket.study.writer import spec_as_used
from study.specs import PANEL, PLANKTON


def without_places(value: Any) -> Any:
    """Return a spec as plain tuples in which no place stands."""
    if isinstance(value, Place):
        return None
    if dataclasses.is_dataclass(value):
        return tuple(without_places(getattr(value, field.name)) for field in dataclasses.fields(value))
    if isinstance(value, dict):
        return [(key, without_places(entry)) for key, entry in value.items()]
    if isinstance(value, tuple):
        return tuple(without_places(entry) for entry in value)
    return value


def read_back(spec: StudySpec) -> StudySpec:
    return read_spec(spec_as_used(spec), "used.yaml")


def test_the_example_specs_come_back_equal() -> None:
    """What was read, written and read again is the same spec, in the same order."""
    for text in (PLANKTON, PANEL):
        spec = read_spec(text, "s.yaml")
        assert without_places(read_back(spec)) == without_places(spec)
        assert spec_as_used(read_back(spec)) == spec_as_used(spec)


def test_every_default_is_written() -> None:
    """A key that the user left out stands in the spec as used with what was taken for it."""
    written = spec_as_used(read_spec(PLANKTON, "s.yaml"))
    for line in (
        '    separator: ","',
        '    decimal_mark: "."',
        "    first_data_row: 2",
        "    coefficient: Spearman rho",
        "  sidedness: two-sided",
        "  confidence_level: 0.95",
        "    by: guarded jackknife",
        "    adjusted: none",
        "    resamples: 9999",
        "    permutations: 99999",
        "    most_draws: 999990",
        "      seconds: 10",
        '      memory: "1 GiB"',
        "  most_tied: 0.50",
        "  readers: [client, reviewer]",
        "  signatures: [prepared, checked, released]",
    ):
        assert f"{line}\n" in written


def test_an_ordinary_reader_of_yaml_finds_the_same_texts() -> None:
    """A reader that guesses types finds our texts as texts: nothing can be taken for a number or for true."""
    found = yaml.safe_load(spec_as_used(read_spec(PANEL, "s.yaml")))
    assert found["rows"]["leave_out"][0]["where"] == {"taster": "007", "booth": "NO"}
    assert found["data"]["tasting"]["missing_codes"] == {"": "not asked", "NA": "refused", "-9": "lost"}
    assert found["variables"]["local"]["lowest_to_highest"] == ["no", "yes"]
    assert found["variables"]["colour"]["unit"] == "1"
    assert found["data"]["tasting"]["received_on"] == "2026-03-02"


TEXT = st.text(
    st.characters(exclude_categories=("Cc", "Cs", "Cn", "Zl", "Zp"), include_characters="\n\t"), min_size=1, max_size=40
).filter(lambda text: text.strip() != "")
SHORT = st.text(st.characters(exclude_categories=("Cc", "Cs", "Cn", "Zl", "Zp")), max_size=15)
NAME = st.from_regex(form.NAME_PATTERN, fullmatch=True).filter(lambda name: name.lower() not in form.TRAP_WORDS)
SHARE = st.decimals(0, 1, places=3, allow_nan=False, allow_infinity=False)


def yaml_text(value: object) -> str:
    """Return JSON, which every reader of YAML understands, of plain data."""
    return yaml.safe_dump(value, allow_unicode=True, default_style='"', sort_keys=False, width=10_000)


@st.composite
def spec_texts(draw: st.DrawFn) -> str:
    """Draw the text of a sound spec with arbitrary words in it."""
    columns = draw(st.lists(TEXT, min_size=4, max_size=4, unique_by=composed))
    role = draw(st.sampled_from(vocabulary.ROLES))
    # A family without any association is refused.
    families = [family for family in vocabulary.FAMILIES if family in ("all", "none") or role in family]
    names = draw(st.lists(NAME, min_size=2, max_size=4, unique_by=str.casefold))
    table = draw(NAME)
    codes = draw(st.dictionaries(SHORT.map(str.strip), TEXT, max_size=4))
    variables: dict[str, object] = {}
    for name, column in zip(names, columns, strict=False):
        variables[name] = {
            "column": {"table": table, "name": column},
            "label": draw(TEXT),
            "unit": draw(TEXT),
            "scale": draw(st.sampled_from([s for s in vocabulary.SCALES if s != "ordered"])),
        }
    data: dict[str, object] = {
        "file": "received/" + draw(st.sampled_from(["a.csv", "Zink µ.csv", "x y.txt"])),
        "separator": draw(st.sampled_from([*form.SEPARATORS, "tab"])),
        "decimal_mark": ".",
        "thousands_mark": draw(st.sampled_from([m for m in form.THOUSANDS_MARKS if m != "."])),
        "missing_codes": codes,
        "column_names_in_row": str(draw(st.integers(1, 50))),
    }
    spec = {
        "study": {key: draw(TEXT) for key in ("number", "title", "client", "question", "population")},
        "data": {table: data},
        "rows": {
            "one_row_is": draw(TEXT),
            "time_order": draw(TEXT),
            "leave_out": draw(
                st.lists(
                    st.fixed_dictionaries(
                        {"where": st.dictionaries(SHORT, SHORT, min_size=1, max_size=3), "reason": TEXT}
                    ),
                    max_size=2,
                )
            ),
        },
        "variables": variables,
        "associations": {
            "A1": {
                "between": names[:2],
                "question": draw(TEXT),
                "role": role,
                "hypothesis": {"expected_sign": draw(st.sampled_from(vocabulary.EXPECTED_SIGNS))},
            }
        },
        "inference": {
            "alpha": "0.01",
            "p_value": {"seed": str(draw(st.integers(0, form.LARGEST_SEED)))},
            "several_tests": {"adjust": "none", "among": draw(st.sampled_from(families)), "reason": draw(TEXT)},
        },
        "requirements": {"most_missing": str(draw(SHARE)), "most_tied": str(draw(SHARE))},
        "report": {"distribution": draw(st.lists(TEXT.map(str.strip), max_size=3, unique=True))},
    }
    return yaml_text(spec)


@given(spec_texts())
def test_any_sound_spec_comes_back_equal(text: str) -> None:
    """Whatever words a spec holds, writing it out and reading it back changes nothing but places."""
    spec = read_spec(text, "s.yaml")
    assert without_places(read_back(spec)) == without_places(spec)
