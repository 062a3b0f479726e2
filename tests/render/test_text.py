"""Plain text and CSV: what people copy out."""

import csv
import io
from dataclasses import replace

import pytest

from rankdocket.document.model import Column, Items, Supplied, TableBlock, Verbatim
from rankdocket.render.anchors import all_blocks
from rankdocket.render.rendition import Rendition
from rankdocket.render.text import block_text, csv_bytes, section_text, table_text
from render.sample import (
    CaveatBlock,
    SignatureBlock,
    SignatureLine,
    control,
    interval_strip,
    number,
    prose,
    results_table,
    sample,
    summary,
)


def one_cell(*pieces: object) -> str:
    """The second cell of a CSV line of a table whose cell holds these pieces."""
    columns = (Column(prose("Name"), "name"), Column(prose("Value"), "value"))
    table = TableBlock("t", "1", prose("c"), columns, ((prose("a"), prose(*pieces)),))  # type: ignore[arg-type]
    return list(csv.reader(io.StringIO(csv_bytes(table).decode("utf-8"), newline="")))[1][1]


def test_a_cell_that_is_one_number_is_written_by_its_exact_value() -> None:
    assert one_cell(number("k", "\u22120.24", "-0.241379310345")) == "-0.241379310345"


def test_a_cell_of_several_pieces_is_written_by_its_text_with_its_true_minus() -> None:
    """A true minus begins no formula, so that an interval needs no apostrophe before it."""
    assert one_cell("from ", number("k", "\u22120.24"), " up") == "from \u22120.24 up"
    assert one_cell(number("k", "\u22120.4"), " to ", number("l", "0.1")) == "\u22120.4 to 0.1"


@pytest.mark.parametrize("text", ["=1+1", "+a", "@sum", "-a", "\tx", "\rx", " =1", "\u00a0=1", "＝1"])
def test_a_text_that_a_spreadsheet_would_compute_begins_with_an_apostrophe(text: str) -> None:
    assert one_cell(Supplied(text)) == "'" + text


@pytest.mark.parametrize("text", ["-0.5", "\u22120.5", "+3", "-1e-7", ".5", "a=b", "", "–"])
def test_a_number_written_as_text_and_harmless_text_stay_as_they_are(text: str) -> None:
    assert one_cell(text) == text.replace("\u2212", "-")


@pytest.mark.parametrize("text", ['say "yes"', "a,b", "two\nlines", "carriage\rreturn"])
def test_quotes_separators_and_line_breaks_come_back_from_a_reader(text: str) -> None:
    assert one_cell(text) == text


def test_a_csv_file_has_names_rows_and_sums_and_ends_its_lines_with_a_line_feed() -> None:
    document = sample()
    table = next(block for block in all_blocks(document) if isinstance(block, TableBlock) and block.key == "rows")
    assert csv_bytes(table) == (
        b"step,rows\nRead from beds.csv,64\nLeft out: label lost,-2\nLeft out: not complete,-1\nUsed,61\n"
    )


def test_a_rendition_has_a_csv_file_for_each_table(rendition: Rendition) -> None:
    keys = {block.key for block in all_blocks(sample()) if isinstance(block, TableBlock)}
    assert set(rendition.tables) == keys == {"rows", "variables", "requirements", "results", "worksheet-A1"}


def test_the_extracts_are_summary_and_methods_with_their_origin(rendition: Rendition) -> None:
    assert set(rendition.extracts) == {"summary.txt", "methods.txt"}
    assert rendition.extracts["summary.txt"].decode().startswith("Summary\n\nDo seedlings")
    assert rendition.extracts["summary.txt"].endswith(b"\n\nHF-0231, edition 2, summary\n")
    assert (
        b"4 Methods\n\nComplete rows were selected first and ranked second, ties by midranks (Kendall 1945)."
        in (rendition.extracts["methods.txt"])
    )


def test_a_section_as_text_holds_its_blocks_in_order() -> None:
    text = section_text(summary())
    assert (
        text.index("Do seedlings")
        < text.index("ρ = 0.61 (95% interval 0.38 to 0.77; n = 61)")
        < text.index("Caveat 1.")
    )
    assert "Caveat 2. The rows of A3 stand in time order; its test was withheld (see 6.3)." in text


def test_a_table_as_text_sets_its_columns_by_blanks() -> None:
    lines = table_text(results_table()).splitlines()
    assert lines[0] == "Table 5. One line an association, in the order of the plan"
    assert len({line.index("Spearman’s ρ") for line in lines if "Spearman’s ρ" in line}) == 1
    assert lines[-1] == "Caveats are given by their numbers."


def test_every_kind_of_block_has_a_text() -> None:
    texts = [block_text(block) for block in all_blocks(sample())]
    assert all(texts)
    assert block_text(interval_strip()).startswith("Figure 4. Estimates")
    assert block_text(Items((prose("a"), prose("b")), numbered=True)) == "1. a\n2. b"
    assert block_text(Items((prose("a"),))) == "– a"
    assert block_text(Verbatim("x\n  y\n", prose("As used"))) == "As used\nx\n  y"
    assert block_text(CaveatBlock("k", 4, prose("So."))) == "Caveat 4. So."
    assert "Distribution: Dr E. Lindqvist; Nursery archive, copy 1" in block_text(control()[0])


def test_an_empty_signature_stays_empty() -> None:
    block = SignatureBlock((SignatureLine("Checked", "", "", ""), SignatureLine("Released", "A. B.", "", "by letter")))
    assert block_text(block) == "Checked:\nReleased: A. B., by letter"


def test_a_cell_with_a_line_break_keeps_its_line_in_the_text_table() -> None:
    table = replace(results_table(), rows=results_table().rows[:1])
    table = replace(table, rows=((prose("A\nB"), *table.rows[0][1:]),))
    assert len(table_text(table).splitlines()) == 6
