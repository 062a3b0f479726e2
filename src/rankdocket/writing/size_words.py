"""What both kinds of plan say alike: what was asked, rows to collect, the table of neighbours."""

from collections.abc import Mapping
from dataclasses import dataclass

from rankdocket.analysis.sizing import ShowQuestion, SizeAnswer
from rankdocket.canonical import Plain
from rankdocket.document.model import Column, Number, Prose, TableBlock
from rankdocket.document.numbers import Numbers, look_up
from rankdocket.document.prose import joined, only, prose


@dataclass(frozen=True, slots=True)
class Told:
    """An answer, its plain form, and what makes numbers of it."""

    answer: SizeAnswer
    plain: Mapping[str, Plain]
    numbers: Numbers

    def has(self, key: str) -> bool:
        """Return whether a number stands at ``key``, not the reason why there is none."""
        return not isinstance(look_up(self.plain, key), Mapping)

    def reason(self, key: str) -> str:
        """Return why there is no number at ``key``."""
        return str(look_up(self.plain, f"{key}/reason"))

    def rho(self, key: str) -> Number:
        """Return a rho as it was asked for, or as a neighbour of that."""
        return self.numbers.level(key)

    @property
    def lines(self) -> range:
        """Positions of the table’s lines."""
        found = look_up(self.plain, "table/lines")
        return range(len(found) if isinstance(found, (list, tuple)) else 0)


def circumstances(story: Told) -> tuple[tuple[str, Prose], ...]:
    """Return what was asked, one fact a line."""
    numbers, question = story.numbers, story.answer.question
    rows: list[tuple[str, Prose]] = []
    if isinstance(question, ShowQuestion):
        rows = [
            (
                "Rho to be shown",
                prose(
                    "{rho}, with power {power}", rho=story.rho("question/rho"), power=numbers.level("question/power")
                ),
            ),
            (
                "Test",
                prose(
                    "alpha {alpha}, {sides}; questions decided together: {questions}",
                    alpha=numbers.level("question/alpha"),
                    sides=question.sidedness,
                    questions=numbers.whole("question/questions"),
                ),
            ),
            ("Interval", prose("{level}, two-sided", level=numbers.percent("question/level"))),
        ]
    else:
        rows = [
            ("Rho expected", only(story.rho("question/rho"))),
            (
                "Interval",
                prose(
                    "{level}, two-sided, {width} wide on average",
                    level=numbers.percent("question/level"),
                    width=numbers.level("question/width"),
                ),
            ),
        ]
    rows.append(("Expected ties", _ties(story)))
    rows.append(("Rows expected to be lost", only(numbers.percent("question/missing"))))
    return tuple(rows)


def _ties(story: Told) -> Prose:
    first = _shares(story, 0)
    second = _shares(story, 1)
    if first is None:
        return only("none")
    if second is None:
        return prose("one variable with values in shares of {first}", first=first)
    return prose("values in shares of {first}, and of {second}", first=first, second=second)


def _shares(story: Told, position: int) -> Prose | None:
    rows = story.answer.question.rows
    shares = (rows.first, rows.second)[position]
    if shares is None:
        return None
    keys = (f"question/expected_classes/{position}/{i}" for i in range(len(shares)))
    return joined(tuple(only(story.numbers.level(key)) for key in keys), " : ")


def to_collect(story: Told) -> Prose:
    """Return the sentence about rows that will be lost; empty where none are."""
    if not story.answer.question.rows.missing:
        return only("")
    return prose(
        "With {missing} of the rows lacking a value, {collect} rows have to be collected.",
        missing=story.numbers.percent("question/missing"),
        collect=story.numbers.whole("rows_to_collect"),
    )


def what_ties_leave(story: Told) -> Prose:
    """Return the sentence about ties; empty where none are expected."""
    if not story.answer.question.rows.has_ties:
        return only("")
    return joined(
        (
            prose(
                "The expected ties ({classes}) bring that rho {way} {left}, and the rows are reckoned for it.",
                classes=_ties(story),
                way="down to" if story.answer.left > 0 else "nearer to zero, to",
                left=story.numbers.coefficient("rho_left", 3),
            ),
            *_rescaled(story),
        )
    )


def _rescaled(story: Told) -> tuple[Prose, ...]:
    """Return that shares were rescaled, where those given add up neither to a hundred nor to one."""
    rows = story.answer.question.rows
    if all(shares is None or sum(shares) in (1, 100) for shares in (rows.first, rows.second)):
        return ()
    return (only("Shares that do not add up to a hundred percent were rescaled to do so."),)


def rows_table(story: Told, heads: tuple[tuple[Prose, str], ...], caption: Prose) -> TableBlock:
    """Return the table of neighbouring targets: a line a rho, a column for each of ``heads`` (words, name in a file)."""
    has_ties = story.answer.question.rows.has_ties
    columns = [Column(only("Rho"), "rho", "decimal")]
    if has_ties:
        columns.append(Column(only("Left by the ties"), "rho_left", "decimal"))
    columns += [Column(head, name, "decimal") for head, name in heads]
    reasons: dict[str, None] = {}
    rows = []
    for i in story.lines:
        base = f"table/lines/{i}"
        cells = [only(story.rho(f"{base}/rho"))]
        if has_ties:
            cells.append(only(story.numbers.coefficient(f"{base}/rho_left", 3)))
        for j in range(len(heads)):
            key = f"{base}/rows/{j}"
            if story.has(key):
                cells.append(only(story.numbers.whole(key)))
            else:
                reasons[story.reason(key)] = None
                cells.append(only("–"))
        rows.append(tuple(cells))
    notes = tuple(prose("–: {reason}.", reason=reason) for reason in reasons)
    return TableBlock("rows", "1", caption, tuple(columns), tuple(rows), notes=notes)
