"""A document with every kind of block and of piece, for tests that must forget none."""

from dataclasses import replace

from rankdocket.document.model import (
    Block,
    CaveatBlock,
    Citation,
    Column,
    Document,
    Emphasis,
    FieldList,
    FigureBlock,
    Furniture,
    Items,
    Link,
    Number,
    Paragraph,
    Prose,
    Section,
    SignatureBlock,
    SignatureLine,
    Supplied,
    TableBlock,
    Verbatim,
)
from rankdocket.document.prose import only, prose

SEVEN = Number("associations/A1/rows/complete", "7", "7")
RHO = Number("associations/A1/estimate/value", "0.846881160829", "0.85")

MIXED = prose(
    "{n} is {rows}, rho {rho} for {label} {cite}; see {link}.",
    n=Emphasis("n", "italic"),
    rows=SEVEN,
    rho=RHO,
    label=Supplied("what causes “creep” & <more>"),
    cite=Citation("kendall1945", "Kendall 1945"),
    link=Link("data", "2"),
)

BLOCKS: tuple[Block, ...] = (
    Paragraph(MIXED, "answer"),
    Items((only("One."), Prose((SEVEN,)), Prose(())), numbered=True),
    TableBlock(
        key="results",
        number="5",
        caption=only("Results"),
        columns=(
            Column(only("Association"), "association"),
            Column(Prose((Emphasis("p", "italic"),)), "p", "decimal", 3),
        ),
        rows=((only(Link("association-A1", "A1")), Prose((RHO,))),),
        foot=((only("Sum"), only("–")),),
        notes=(only("A note."),),
        landscape=True,
    ),
    FieldList((("Rows", Prose((SEVEN,))), ("Empty", Prose(())))),
    FieldList((("Rows", only("none")),), key="rows", caption=only("Facts")),
    FigureBlock(
        key="A1-raw",
        number="A1a",
        kind="raw-plot",
        caption=only("Raw plot."),
        alternative="Seven points.",
        data={"points": ({"x": "1.5", "y": "2", "count": 1},), "unit": None, "ticks": (), "flat": False},
        width="full",
    ),
    CaveatBlock("caveat-1", 1, only("Mind the ties.")),
    Verbatim("study:\n  number: 7\n", caption=only("The spec")),
    Verbatim("as it stands"),
    SignatureBlock((SignatureLine("prepared", "A. Name", "", "not signed"),)),
)

EVERY_BLOCK = Document(
    language="en-GB",
    furniture=Furniture(
        "IN-1", "A title", "A title", "", "edition 1", "draft", "2026-01-02", "2026-01-02T00:00:00Z", ""
    ),
    control=(BLOCKS[0],),
    summary=Section("summary", "", only("Summary"), BLOCKS, opens="page"),
    sections=(
        Section(
            "data",
            "2",
            MIXED,
            BLOCKS[:3],
            (Section("flow", "2.1", only("Flow"), BLOCKS[3:], (Section("deep", "2.1.1", only("Deep"), ()),)),),
        ),
    ),
    end_mark="End of report IN-1, edition 1",
    references={"kendall1945": "Kendall MG (1945)."},
)


def with_words(block: Block) -> Document:
    """Return a document that holds nothing but one block."""
    return replace(EVERY_BLOCK, control=(), summary=Section("summary", "", only("Summary"), (block,)), sections=())
