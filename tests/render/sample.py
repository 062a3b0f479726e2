"""An invented report with every kind of block: a nursery's seedlings, three associations, one withheld."""

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
    Piece,
    Prose,
    Section,
    SignatureBlock,
    SignatureLine,
    Supplied,
    TableBlock,
    Verbatim,
)

ROWS = 61
"""Rows of the worksheet: enough for a table that runs over a page."""


def prose(*pieces: Piece) -> Prose:
    return Prose(pieces)


def number(key: str, text: str, exact: str | None = None) -> Number:
    return Number(key, exact if exact is not None else text.replace("\u2212", "-"), text)


def paragraph(*pieces: Piece) -> Paragraph:
    return Paragraph(prose(*pieces))


FURNITURE = Furniture(
    study_number="HF-0231",
    title="Shade, watering and the vigour of oak seedlings at the Hallfield nursery",
    short_title="Vigour of oak seedlings",
    marking="Confidential to the client",
    edition="edition 2",
    status="issued",
    date="2026-03-09",
    created="2026-03-09T10:15:00+00:00",
    author="M. Okonjo",
)

RHO = number("associations/A1/coefficient/rho", "0.61", "0.612345679012")
LOW = number("associations/A1/interval/low", "0.38", "0.381234567891")
HIGH = number("associations/A1/interval/high", "0.77", "0.768123456789")
TAU = number("associations/A2/coefficient/tau", "\u22120.24", "-0.241379310345")
P = number("associations/A1/test/p", "< 0.001", "0.000012345679")
N = number("associations/A1/n", "61")


def control() -> tuple[Block, ...]:
    return (
        FieldList(
            (
                ("Study", prose(Supplied("HF-0231"))),
                ("Client", prose(Supplied("Hallfield Forest Nursery, Ltd & Sons"))),
                ("Edition", prose("edition 2, issued 2026-03-09")),
                ("Replaces", prose("edition 1 of 2026-02-11, which is superseded")),
                ("Plan", prose("locked on 2026-01-19, digest ", Emphasis("7f3a9c1e5b20d846" * 4, "code"))),
                ("Distribution", prose(Supplied("Dr E. Lindqvist"), "; ", Supplied("Nursery archive, copy 1"))),
            ),
            key="control",
        ),
        SignatureBlock(
            (
                SignatureLine("Prepared", "M. Okonjo", "statistician", ""),
                SignatureLine("Checked", "", "", "not checked"),
                SignatureLine("Released", "E. Lindqvist", "head of nursery", "signed elsewhere"),
            )
        ),
    )


def summary() -> Section:
    return Section(
        "summary",
        "",
        prose("Summary"),
        (
            Paragraph(
                prose("Do seedlings under denser shade grow with more vigour, and does watering go with it?"), "body"
            ),
            Paragraph(
                prose(
                    "A positive association between shade and vigour was shown: Spearman’s ",
                    Emphasis("ρ", "italic"),
                    " = ",
                    RHO,
                    " (95% interval ",
                    LOW,
                    " to ",
                    HIGH,
                    "; ",
                    Emphasis("n", "italic"),
                    " = ",
                    N,
                    "). For watering the plan’s question could not be answered from these rows.",
                ),
                "answer",
            ),
            caveat(1, "ties", "Vigour was scored in five steps, so that many rows share a rank."),
            caveat(
                2, "order", "The rows of A3 stand in time order; its test was withheld (see ", Link("A3", "6.3"), ")."
            ),
            Paragraph(
                prose("Since edition 1 two rows were corrected; see ", Link("changes", "section 7"), "."), "note"
            ),
        ),
    )


def caveat(count: int, key: str, *pieces: Piece) -> CaveatBlock:
    return CaveatBlock(key, count, prose(*pieces))


def question() -> Section:
    return Section(
        "question",
        "1",
        prose("Instructions and question"),
        (
            paragraph("The client asked: ", Supplied("“Is it worth the cost to shade & water the beds?”")),
            Items(
                (
                    prose(
                        Emphasis("A1", "strong"), " shade (percent of full sun kept off) and vigour, positive expected"
                    ),
                    prose(Emphasis("A2", "strong"), " watering and vigour, either sign"),
                    prose(Emphasis("A3", "strong"), " row order and vigour, exploratory"),
                ),
                numbered=True,
            ),
            paragraph("Nothing was asked about cost, survival or species other than the two in the beds."),
            Items((prose("Not examined: growth beyond the first year."), prose("Not examined: soil."))),
        ),
        opens="page",
    )


def variables_table() -> TableBlock:
    heads = (
        "Variable",
        "n",
        "Missing",
        "Below limit",
        "Largest tie group",
        "Distinct values",
        "Smallest",
        "Lower quartile",
        "Median",
        "Upper quartile",
        "Largest",
        "Unit",
    )
    aligns = ("left", *("right",) * 5, *("decimal",) * 5, "left")
    values = {
        "Shade": ("61", "0", "0", "3", "44", "5.0", "22.5", "41.25", "60", "88.5", "%"),
        "Watering": ("59", "2", "1", "4", "27", "0.5", "1.75", "2.5", "3.25", "6", "litres a week"),
        "Vigour": ("61", "0", "0", "17", "5", "1", "2", "3", "4", "5", "step"),
        "Height": ("61", "0", "0", "1", "61", "103.25", "140.5", "155", "171.125", "212.5", "mm"),
    }
    rows = tuple(
        (
            prose(Supplied(name)),
            *(prose(number(f"variables/{name}/{heads[i + 1]}", text)) for i, text in enumerate(cells[:-1])),
            prose(cells[-1]),
        )
        for name, cells in values.items()
    )
    columns = tuple(
        Column(prose(Emphasis("n", "italic")) if head == "n" else prose(head), head.lower().replace(" ", "_"), align)  # type: ignore[arg-type]
        for head, align in zip(heads, aligns, strict=True)
    )
    return TableBlock(
        "variables",
        "3",
        prose("Four variables as read, each alone"),
        columns,
        rows,
        notes=(prose("Quartiles are values of the sorted rows, interpolated between neighbours."),),
        landscape=True,
    )


def data_section() -> Section:
    flow = TableBlock(
        "rows",
        "1",
        prose("From 64 rows read to 61 rows used"),
        (Column(prose("Step"), "step", share=3), Column(prose("Rows"), "rows", "right")),
        (
            (prose("Read from ", Emphasis("beds.csv", "code")), prose(number("rows/read", "64"))),
            (prose("Left out: label lost"), prose(number("rows/left_out/0", "\u22122"))),
            (prose("Left out: not complete"), prose(number("rows/left_out/1", "\u22121"))),
        ),
        foot=((prose("Used"), prose(number("rows/used", "61"))),),
    )
    return Section(
        "data",
        "2",
        prose("Data"),
        (
            paragraph(
                "One row is one seedling. The file was received on 2026-01-12 from ",
                Supplied("E. Lindqvist"),
                " and has 64 rows; ",
                Link("rows", "Table 1"),
                " accounts for them.",
            ),
            flow,
        ),
    )


def methods() -> Section:
    return Section(
        "methods",
        "4",
        prose("Methods"),
        (
            paragraph(
                "Complete rows were selected first and ranked second, ties by midranks (",
                Citation("kendall1945", "Kendall 1945"),
                "). The coefficient was Spearman’s ",
                Emphasis("ρ", "italic"),
                " (",
                Citation("spearman1904", "Spearman 1904"),
                "), and its ",
                Emphasis("p", "italic"),
                " came from ",
                number("associations/A1/test/draws", "99,999"),
                " permutations of the rows, drawn with seed ",
                number("inference/seed", "20260119"),
                ".",
            ),
            Paragraph(prose("Random streams are named by study, association and purpose."), "note"),
        ),
        (Section("deviations", "4.1", prose("Deviations from the plan"), (paragraph("None."),)),),
    )


def requirements_table() -> TableBlock:
    line = ("Requirement", "Limit in plan", "Found", "Outcome", "Consequence")
    return TableBlock(
        "requirements",
        "4",
        prose("What the method needs, and what was found"),
        tuple(Column(prose(head), head.lower(), share=3 if i in {0, 4} else 2) for i, head in enumerate(line)),
        (
            (
                prose("Enough complete rows"),
                prose("at least ", number("requirements/fewest", "12")),
                prose(number("requirements/A1/rows", "61")),
                prose("met"),
                prose("none"),
            ),
            (
                prose("Few tied rows"),
                prose("at most ", number("requirements/most_tied", "30%", "0.3")),
                prose(number("requirements/A1/tied", "37%", "0.369565217391")),
                prose("not met, waived"),
                prose("tested under the null for ties; ", Link("ties", "caveat 1")),
            ),
            (
                prose("Rows independent"),
                prose("declared"),
                prose("time order declared for A3"),
                prose("not met"),
                prose("estimate given, test withheld"),
            ),
            (
                prose("Values not limited"),
                prose("–"),
                prose("one value below the limit"),
                prose("not examined"),
                prose("none"),
            ),
        ),
        notes=(prose("A requirement that was not met keeps its caveat, waived or not."),),
    )


def results_table() -> TableBlock:
    heads = (
        "Association",
        "x",
        "y",
        "n",
        "Coefficient",
        "Estimate",
        "95% interval",
        "p, two-sided",
        "p, adjusted (Holm)",
        "Finding",
        "Caveats",
    )
    aligns = ("left", "left", "left", "right", "left", "decimal", "left", "decimal", "decimal", "left", "left")
    return TableBlock(
        "results",
        "5",
        prose("One line an association, in the order of the plan"),
        tuple(
            Column(prose(head), name, align)
            for head, name, align in zip(
                heads,
                (
                    "association",
                    "x",
                    "y",
                    "n",
                    "coefficient",
                    "value",
                    "interval",
                    "p",
                    "p_adjusted",
                    "finding",
                    "caveats",
                ),
                aligns,
                strict=True,
            )
        ),  # type: ignore[arg-type]
        (
            (
                prose("A1"),
                prose("Shade"),
                prose("Vigour"),
                prose(N),
                prose("Spearman’s ρ"),
                prose(RHO),
                prose(LOW, " to ", HIGH),
                prose(P),
                prose(number("associations/A1/test/p_adjusted", "< 0.001", "0.000024691358")),
                prose("shown"),
                prose("1"),
            ),
            (
                prose("A2"),
                prose("Watering"),
                prose("Vigour"),
                prose(number("associations/A2/n", "59")),
                prose("Kendall’s τ-b"),
                prose(TAU),
                prose(
                    number("associations/A2/interval/low", "\u22120.46", "-0.459"),
                    " to ",
                    number("associations/A2/interval/high", "0.00", "0.0004"),
                ),
                prose(number("associations/A2/test/p", "0.0496", "0.04961234")),
                prose(number("associations/A2/test/p_adjusted", "0.099", "0.09922468")),
                prose("not shown"),
                prose("1, 3"),
            ),
            (
                prose("A3"),
                prose("Row order"),
                prose("Vigour"),
                prose(number("associations/A3/n", "61")),
                prose("Spearman’s ρ"),
                prose("withheld"),
                prose("withheld"),
                prose("withheld"),
                prose("–"),
                prose("withheld"),
                prose("2"),
            ),
        ),
        notes=(prose("Caveats are given by their numbers."),),
    )


def raw_plot() -> FigureBlock:
    points = [
        {"x": f"{5 + (i * 37 % 84)}.5", "y": str(1 + (i * 7 + i * i) % 5), "count": 1 + (i % 9 == 0) * 3}
        for i in range(ROWS)
    ]
    labels = ("Very weak", "Weak", "Neither weak nor strong", "Strong", "Very strong")
    return FigureBlock(
        "A1-raw",
        "1",
        "raw-plot",
        prose("Shade and vigour as received, 61 seedlings; area grows with the rows at a place."),
        "Raw plot of shade against vigour: 61 rows, vigour in five steps.",
        {
            "x": {"label": "Shade, part of full sun kept off", "unit": "%", "ticks": []},
            "y": {
                "label": "Vigour",
                "unit": "",
                "ticks": [{"at": str(i), "label": text} for i, text in enumerate(labels, 1)],
            },
            "points": points,
        },
    )


def rank_plot() -> FigureBlock:
    points = [
        {"x": str(i + 1), "y": str(1 + (i * 7) % 31 * 2) + ".5", "count": 1 + (i % 11 == 0) * 2} for i in range(ROWS)
    ]
    return FigureBlock(
        "A1-rank",
        "2",
        "rank-plot",
        prose("Midranks of shade and vigour; tied rows stand in lines."),
        "Rank plot: midranks of 61 rows; Spearman’s ρ is 0.61.",
        {"x_label": "Midrank of shade", "y_label": "Midrank of vigour", "n": ROWS, "points": points},
    )


def ordered_plot() -> FigureBlock:
    labels = (
        "Not watered at all",
        "Once a fortnight",
        "Weekly",
        "Twice a week",
        "Every second day",
        "Daily or more often",
    )
    return FigureBlock(
        "A2-raw",
        "3",
        "raw-plot",
        prose("Watering and height; a $ in a label is no formula."),
        "Raw plot of watering against height.",
        {
            "x": {
                "label": "Watering",
                "unit": "",
                "ticks": [{"at": str(i), "label": text} for i, text in enumerate(labels, 1)],
            },
            "y": {"label": "Height & cost, $ per $", "unit": "mm", "ticks": []},
            "points": [{"x": str(1 + i % 6), "y": f"{103.25 + i * 2.5}", "count": 1} for i in range(59)],
        },
    )


def interval_strip() -> FigureBlock:
    return FigureBlock(
        "intervals",
        "4",
        "interval-strip",
        prose(
            "Estimates with 95% intervals in the order of the plan; short upright strokes mark the size of interest."
        ),
        "A1: 0.61 (0.38 to 0.77). A2: −0.24 (−0.46 to 0.00). A3: withheld.",
        {
            "axis_label": "Coefficient",
            "lines": [
                {
                    "name": "A1",
                    "label": "Shade and vigour",
                    "estimate": "0.6123",
                    "low": "0.3812",
                    "high": "0.7681",
                    "text": "0.61 (0.38 to 0.77)",
                    "interest": "0.30",
                    "reason": "",
                },
                {
                    "name": "A2",
                    "label": "Watering, as poured from the can, and vigour",
                    "estimate": "-0.2414",
                    "low": "-0.459",
                    "high": "0.0004",
                    "text": "−0.24 (−0.46 to 0.00)",
                    "interest": "0.30",
                    "reason": "",
                },
                {
                    "name": "A3",
                    "label": "Row order and vigour",
                    "estimate": None,
                    "low": None,
                    "high": None,
                    "text": "",
                    "interest": None,
                    "reason": "withheld: the rows stand in time order",
                },
            ],
        },
        "full",
    )


def results() -> Section:
    return Section(
        "results",
        "6",
        prose("Results"),
        (
            paragraph(
                Link("table-results", "Table 5"),
                " has one line an association; ",
                Link("intervals", "Figure 4"),
                " shows the intervals.",
            ),
            results_table(),
            interval_strip(),
        ),
        (
            Section(
                "A1",
                "6.1",
                prose("A1, ", Supplied("shade and vigour")),
                (
                    raw_plot(),
                    rank_plot(),
                    paragraph(
                        "Seedlings under denser shade had the higher vigour: ρ = ",
                        RHO,
                        ", ",
                        Emphasis("p", "italic"),
                        " ",
                        P,
                        ".",
                    ),
                    caveat(1, "ties", "Vigour was scored in five steps, so that many rows share a rank."),
                ),
                opens="page",
            ),
            Section(
                "A2",
                "6.2",
                prose("A2, watering and vigour"),
                (
                    ordered_plot(),
                    paragraph("Kendall’s τ-b was ", TAU, "."),
                    caveat(3, "limit", "One value below the limit took the lowest rank."),
                ),
            ),
            Section(
                "A3",
                "6.3",
                prose("A3, row order and vigour"),
                (paragraph("withheld, because the rows stand in time order."),),
            ),
        ),
    )


def worksheet() -> Section:
    rows = tuple(
        (
            prose(number(f"ranks/A1/{i}/row", str(i + 2))),
            prose(number(f"ranks/A1/{i}/x", f"{5 + (i * 37 % 84)}.5")),
            prose(number(f"ranks/A1/{i}/rank_x", f"{i + 1}" if i % 3 else f"{i + 1}.5")),
            prose(number(f"ranks/A1/{i}/rank_y", f"{ROWS - i}" if i % 2 else f"{ROWS - i}.5")),
            prose(
                number(
                    f"ranks/A1/{i}/product",
                    f"{-((2 * i - 60) ** 2):,}".replace("-", "\u2212"),
                    str(-((2 * i - 60) ** 2)),
                )
            ),
        )
        for i in range(ROWS)
    )
    heads = ("Row", "Shade", "Rank of shade", "Rank of vigour", "Product of doubled centred ranks")
    table = TableBlock(
        "worksheet-A1",
        "A.1",
        prose("Working of A1, row by row"),
        tuple(
            Column(prose(head), name, align)
            for head, name, align in zip(
                heads,
                ("row", "shade", "rank_x", "rank_y", "product"),
                ("right", "decimal", "decimal", "decimal", "right"),
                strict=True,
            )
        ),  # type: ignore[arg-type]
        rows,
        foot=(
            (
                prose("Sum"),
                prose(""),
                prose(number("ranks/A1/sum_x", "1891")),
                prose(number("ranks/A1/sum_y", "1891")),
                prose(number("ranks/A1/A", "\u221275,640", "-75640")),
            ),
        ),
        notes=(prose("Rows are numbered as in the file, the head line counted as row 1."),),
    )
    return Section("worksheets", "A", prose("Rank worksheets"), (table, paragraph("The sums are exact.")), opens="page")


def record() -> Section:
    spec = "\n".join(
        ["study:", "  number: HF-0231", "  title: Vigour of oak seedlings", "associations:"]
        + [
            f"  A{i}:\n    between: [shade, vigour]\n    question: Is there an association?   # number {i}"
            for i in range(1, 12)
        ]
    )
    return Section(
        "record",
        "B",
        prose("Record"),
        (
            Verbatim(spec, prose("The spec as used")),
            Verbatim("a line that is very long " * 8 + "\n\tindented <with> & signs"),
            FieldList(
                (("Seed", prose(number("inference/seed", "20260119"))), ("Σd", prose("χ², ≤ ≥ − × 10⁻⁵ ½ ±"))),
                caption=prose("Streams and signs"),
            ),
        ),
        opens="page",
    )


def sample() -> Document:
    return Document(
        language="en-GB",
        furniture=FURNITURE,
        control=control(),
        summary=summary(),
        sections=(
            question(),
            data_section(),
            Section(
                "screening",
                "3",
                prose("Screening"),
                (paragraph("Each variable was looked at alone."), variables_table()),
            ),
            methods(),
            Section("requirements", "5", prose("Requirements and caveats"), (requirements_table(),)),
            results(),
            Section("changes", "7", prose("Changes since edition 1"), (paragraph("Two rows were corrected."),)),
            Section("references", "", prose("References"), ()),
            worksheet(),
            record(),
        ),
        end_mark="End of report HF-0231, edition 2",
        references={
            "kendall1945": "Kendall MG (1945). The treatment of ties in ranking problems. Biometrika 33: 239–251.",
            "spearman1904": "Spearman C (1904). The proof and measurement of association between two things. American "
            "Journal of Psychology 15: 72–101.",
        },
    )


def draft() -> Document:
    document = sample()
    return replace(document, furniture=replace(FURNITURE, edition="draft 1A", status="draft"))
