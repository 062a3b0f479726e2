"""Keys that stand too far to the left or to the right without breaking the form of the file."""

import pytest

from rankdocket.study.reader import read_spec
from study.faults import changed, spec_messages
from study.specs import PANEL, PLANKTON

STRAYED = (
    (
        PLANKTON,
        "    missing_codes:",
        "  missing_codes:",
        [
            (
                's.yaml:7:3: data.survey: missing_codes is missing. Write missing_codes: [""] if an empty cell means missing, or '
                "missing_codes: [] when there are no codes. (message 27)"
            ),
            (
                "s.yaml:9:3: data.missing_codes: missing_codes stands beside the entries of data and is a key of an entry. "
                "Indent it like the other keys of its entry. (message 28)"
            ),
        ],
    ),
    (
        PLANKTON,
        "    hypothesis:",
        "  hypothesis:",
        [
            "s.yaml:26:3: associations.A1: hypothesis is missing. Write hypothesis: … (message 27)",
            (
                "s.yaml:30:3: associations.hypothesis: hypothesis stands beside the entries of associations and is a key of an "
                "entry. Indent it like the other keys of its entry. (message 28)"
            ),
        ],
    ),
    (
        PLANKTON,
        "  time_order:",
        "time_order:",
        [
            (
                's.yaml:13:1: time_order: "time_order" is not a key of a spec. It is a key of rows. Write it there, indented '
                "like the keys beside it. (message 15)"
            )
        ],
    ),
    (
        PANEL,
        "    coefficient: Kendall tau-b",
        "    distribution: [x]",
        [
            (
                's.yaml:67:5: associations.A1.distribution: "distribution" is not a key of associations.A1. It is a key of '
                "report. Write it there, indented like the keys beside it. (message 15)"
            )
        ],
    ),
    (
        PANEL,
        "  if_not_met: withhold all\nreport:",
        "  report: {marking: x}\nreport:",
        [
            (
                's.yaml:83:3: requirements.report: "report" is not a key of requirements. It is a section of the spec. Write it '
                "without indentation. (message 15)"
            )
        ],
    ),
    (
        PANEL,
        "expected_sign: either",
        "expected_sign: either, coefficient: Kendall tau-b",
        [
            (
                's.yaml:72:41: associations.A2.hypothesis.coefficient: "coefficient" is not a key of associations.A2.hypothesis. '
                "It is a key of an entry of associations or of report.decimals. Write it there, indented like the keys beside "
                "it. (message 15)"
            )
        ],
    ),
)


@pytest.mark.parametrize(("spec", "old", "new", "expected"), STRAYED)
def test_a_key_that_belongs_elsewhere_is_told_where(spec: str, old: str, new: str, expected: list[str]) -> None:
    """A key of another part is told as one, and is not taken for an entry with everything missing."""
    assert spec_messages(changed(spec, (old, new))) == expected


def test_an_entry_may_have_the_name_of_a_key() -> None:
    """A variable may be called unit or scale: what stands below it shows that it is an entry."""
    text = changed(PLANKTON, ("  clarity:", "  scale:"), ("[chlorophyll, clarity]", "[chlorophyll, scale]"))
    assert list(read_spec(text, "s.yaml").variables) == ["chlorophyll", "scale"]
