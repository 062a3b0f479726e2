"""Printed numbers and what is filed cannot part, and no number stands in the program’s own words."""

import re
from collections.abc import Callable
from dataclasses import replace
from decimal import Decimal

import pytest

from analysis.invented import DEMONSTRATIONS, Invented
from rankdocket.analysis.results import Estimate
from rankdocket.document.model import Citation, FieldList, Link, Number, SignatureBlock, TableBlock
from rankdocket.document.numbers import MINUS, look_up
from rankdocket.document.prose import all_prose, lint_document, numbers_of
from rankdocket.references import REFERENCES
from writing.reports import (
    EVERY_FINDING,
    Told,
    demonstration_report,
    replacing,
    sections_of,
    study_of_every_finding,
    told,
)

DRAWN = "alpha: 0.05, p_value: {by: permutation, permutations: 999, most_draws: 999, seed: 5}"
ONE_SIDED = "alpha: 0.05, sidedness: one-sided"
ROUNDED_DOWN = ("/unseen/share", "interval/level")
"""Addresses of bounds, which are not rounded to the nearest."""
SIGNED = {name: entry.replace("either", "negative") for name, entry in EVERY_FINDING.associations.items()}
REPORTS: dict[str, Callable[[], Told]] = {
    **{name: lambda name=name: demonstration_report(name) for name in DEMONSTRATIONS},  # type: ignore[misc]
    "every finding": study_of_every_finding,
    "drawn": lambda: told(replace(EVERY_FINDING, inference=DRAWN).analysed(), replacing(EVERY_FINDING.analysed())),
    "draft": lambda: told(EVERY_FINDING.analysed(), replacing(Invented().analysed(), plan_changed=True, is_draft=True)),
    "withheld": lambda: told(replace(EVERY_FINDING, rows="leave_out: []").analysed()),
    "one-sided": lambda: told(replace(EVERY_FINDING, inference=ONE_SIDED, associations=SIGNED).analysed()),
    "simultaneous": lambda: told(
        replace(EVERY_FINDING, inference="alpha: 0.05, interval: {adjusted: simultaneous}").analysed()
    ),
    "resampled": lambda: told(
        replace(
            EVERY_FINDING,
            inference="alpha: 0.05, p_value: {seed: 5}, interval: {by: BCa bootstrap, resamples: 999}",
        ).analysed()
    ),
    "nothing left": lambda: told(replace(Invented(), columns={"u": "- -", "v": "- -"}).analysed()),
}


@pytest.fixture(params=list(REPORTS))
def report(request: pytest.FixtureRequest) -> Told:
    return REPORTS[request.param]()


def test_every_printed_number_stands_at_its_address(report: Told) -> None:
    """The address resolves in the plain analysis and holds the exact value."""
    numbers = list(numbers_of(report.document))
    assert numbers
    for number in numbers:
        assert str(look_up(report.plain, number.key)) == number.exact


def test_every_printed_number_is_one_of_its_printed_forms(report: Told) -> None:
    """Read back, a printed number lies within half a unit of its last digit of the filed one."""
    for number in numbers_of(report.document):
        if re.search(r"[a-z]", number.text.removesuffix(" (exactly)"), re.IGNORECASE):
            continue  # a duration or an amount of memory, in a unit of its own
        text = number.text.replace(MINUS, "-").replace(",", "").removesuffix(" (exactly)")
        if text.startswith("<"):
            assert Decimal(number.exact) < Decimal(text[2:])
            continue
        if text.startswith(">"):
            assert Decimal(text[2:]) < Decimal(number.exact) < 1
            continue
        printed = Decimal(text.removesuffix("%"))
        numerator, _, denominator = number.exact.partition("/")
        exact = Decimal(numerator) / Decimal(denominator or 1) * (100 if text.endswith("%") else 1)
        if number.key.endswith(ROUNDED_DOWN):
            assert 0 <= exact - printed < Decimal(1).scaleb(int(printed.as_tuple().exponent))
            continue
        assert abs(printed - exact) <= Decimal(5).scaleb(int(printed.as_tuple().exponent) - 1)
        assert not text.startswith("-0") or any(digit in text for digit in "123456789")


def test_no_number_stands_in_the_programs_own_words(report: Told) -> None:
    """A digit in generated text is an unfiled number; the name of the digest rule of FIPS 180-4 is none."""
    for content in all_prose(report.document):
        for piece in content.pieces:
            if isinstance(piece, str):
                assert not any(character.isdigit() for character in piece.replace("SHA-256", "")), piece


def test_the_programs_own_words_keep_the_wording_rules(report: Told) -> None:
    """Whatever the study supplies."""
    assert lint_document(report.document) == ()


def test_every_pointer_has_a_target(report: Told) -> None:
    """A link names a section or a block of the same report."""
    sections = list(sections_of(report.document))
    keys = {section.key for section in sections}
    for section in sections:
        keys |= {str(getattr(block, "key", None)) for block in section.blocks}
    links = {
        piece.target for content in all_prose(report.document) for piece in content.pieces if isinstance(piece, Link)
    }
    assert links <= keys


def test_the_two_forms_of_a_worksheet_have_addresses_of_their_own(report: Told) -> None:
    """However alike they look: each form of the worksheet points to the value that it leads to."""
    for name, result in report.analysis.results.items():
        if not isinstance(result.estimate, Estimate) or result.estimate.corrected is None:
            continue
        forms = report.block(f"forms-{name}")
        assert isinstance(forms, FieldList)
        rows = {
            head: [piece.key for piece in content.pieces if isinstance(piece, Number)] for head, content in forms.rows
        }
        at = f"associations/{name}"
        assert rows["Midrank form"] == [f"{at}/estimate/value"]
        assert rows["Difference form"] == [f"{at}/estimate/squared_differences", f"{at}/estimate/corrected_form"]
        assert rows["Tie terms"] == [f"{at}/ties_x/cube_sum", f"{at}/ties_y/cube_sum"]
        assert rows["Terms of x and y"] == [f"{at}/estimate/x_term", f"{at}/estimate/y_term"]


def test_what_is_cited_is_listed_and_nothing_else(report: Told) -> None:
    """In alphabetical order, in full."""
    cited = {
        piece.key for content in all_prose(report.document) for piece in content.pieces if isinstance(piece, Citation)
    }
    assert set(report.document.references) == cited
    assert dict(report.document.references) == {key: REFERENCES[key].full for key in cited}
    assert list(report.document.references.values()) == sorted(report.document.references.values())


def test_no_piece_is_stray_and_no_sentence_trails(report: Told) -> None:
    """No paragraph is empty, ends in a blank, or holds two blanks together."""
    for section in sections_of(report.document):
        for block in section.blocks:
            content = getattr(block, "prose", None)
            if content is None:
                continue
            text = "".join(piece if isinstance(piece, str) else piece.text for piece in content.pieces)
            assert text.strip()
            assert text == text.rstrip()
            assert "  " not in text


def test_keys_of_sections_and_blocks_are_unique(report: Told) -> None:
    """A key names one file of the edition and one target of a link."""
    keys = [section.key for section in sections_of(report.document)]
    for section in sections_of(report.document):
        keys += [str(block.key) for block in section.blocks if getattr(block, "key", None) is not None]  # type: ignore[union-attr]
    assert len(keys) == len(set(keys))


def test_every_row_of_a_table_has_a_cell_a_column(report: Told) -> None:
    """Also below the line."""
    for section in sections_of(report.document):
        for block in section.blocks:
            if isinstance(block, TableBlock):
                assert {len(row) for row in (*block.rows, *block.foot)} <= {len(block.columns)}
                assert len({column.name for column in block.columns}) == len(block.columns)


def test_the_control_page_files_who_stands_for_the_report(report: Told) -> None:
    """Nobody is filled in: a missing name is said to be missing."""
    facts, signatures, _ = report.document.control
    assert isinstance(facts, FieldList)
    assert isinstance(signatures, SignatureBlock)
    study = report.analysis.spec.study
    for line in signatures.lines:
        person = {"prepared": study.prepared_by, "checked": study.checked_by, "released": study.released_by}[line.act]
        expected = (person.name, person.role or "", "not signed") if person else ("", "", f"not {line.act}")
        assert (line.name, line.role, line.note) == expected


def test_numbers_of_one_value_are_printed_alike(report: Told) -> None:
    """A filed value has one printed form wherever it stands, its decimals apart where an interval lends them."""
    forms: dict[str, set[str]] = {}
    for number in numbers_of(report.document):
        if number.key.endswith("/test/p"):
            forms.setdefault(number.key, set()).add(number.text)
    assert all(len(texts) == 1 for texts in forms.values())
