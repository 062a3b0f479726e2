"""Covariates, a second association and groups in a spec: what is refused, and what a plan without them looks like."""

import pytest

from analysis.invented import MIXED, RISING, Invented, association
from rankdocket.study.plan import plan_of
from rankdocket.study.reader import read_spec
from rankdocket.study.writer import spec_as_used
from study.faults import messages

COLUMNS = {"u": RISING, "v": MIXED, "w": RISING, "z": MIXED, "site": "a b " * 5}
SITE = {"site": "label: site, scale: two-valued, lowest_to_highest: [a, b]"}
TAU = "coefficient: Kendall tau-b"


def plan(more: str, **others: str) -> Invented:
    """Return a study whose first association has these keys more."""
    return Invented(columns=COLUMNS, variables=SITE, associations={"A1": association(more=more), **others})


def refusals(study: Invented) -> list[str]:
    """Return what the spec and, when it is right, the data are refused with, without places."""
    return [message.split(": ", 1)[1] for message in messages(study.read)]


@pytest.mark.parametrize(
    ("study", "expected"),
    [
        (
            plan("covariates: [weight]"),
            'associations.A1.covariates: "weight" is not an entry of variables. Variables: u, v, w, z, site. (message 36)',
        ),
        (
            plan("covariates: [w, v]"),
            (
                "associations.A1.covariates: v is one of the two variables of A1 itself. Write variables other than those of "
                "between. (message 37)"
            ),
        ),
        (
            plan("covariates: [w, w]"),
            "associations.A1.covariates: w stands twice. Keep one of them. (message 35)",
        ),
        (
            plan(f"covariates: [w], {TAU}"),
            (
                "associations.A1.covariates: a partial rank correlation is offered for Spearman rho, not for Kendall tau-b. "
                "Write coefficient: Spearman rho, or leave it out. (message 42)"
            ),
        ),
        (
            plan("compare_with: A1"),
            "associations.A1.compare_with: A1 would be compared with itself. Write another association. (message 40)",
        ),
        (
            plan("compare_with: B2", A2=association("u", "w")),
            'associations.A1.compare_with: "B2" is not an entry of associations. Associations: A2. (message 36)',
        ),
        (
            plan("compare_with: A2", A2=association("v", "u")),
            (
                "associations.A1.compare_with: A1 and A2 have the same two variables. Write an association that shares one "
                "variable or none. (message 37)"
            ),
        ),
        (
            plan("compare_with: A2", A2=association("u", "w", more=TAU)),
            (
                "associations.A1.compare_with: the coefficient of A2 is Kendall tau-b; a comparison is offered for Spearman "
                "rho. Write coefficient: Spearman rho there, or leave compare_with out. (message 42)"
            ),
        ),
        (
            plan("groups: {column: v}"),
            (
                'associations.A1.groups.column: "v" is the column of v, a variable of A1 itself. Write a column that is not of '
                "between. (message 37)"
            ),
        ),
        (
            plan("groups: {column: site, compared: [a, a]}"),
            'associations.A1.groups.compared: "a" stands twice. Write two groups. (message 35)',
        ),
        (
            plan(f"groups: {{column: site, compared: [a, b]}}, {TAU}"),
            (
                "associations.A1.groups.compared: a difference of two groups is offered for Spearman rho, not for Kendall "
                "tau-b. Leave compared out, or write coefficient: Spearman rho. (message 42)"
            ),
        ),
        (
            plan("groups: {column: station}"),
            (
                'associations.A1.groups.column: no column "station"; columns: u, v, w, z, site. Names are read from row 1 of '
                "received/trials.csv; if they are in another row write column_names_in_row. (message 6)"
            ),
        ),
        (
            plan("groups: {column: site, compared: [a, C]}"),
            'associations.A1.groups.compared: "C" is not a text of the column "site". Groups: "a", "b". (message 4)',
        ),
    ],
    ids=lambda value: "" if isinstance(value, Invented) else value[:50],
)
def test_a_wrong_use_is_refused(study: Invented, expected: str) -> None:
    """One fault, with the place, what is wrong and what to write."""
    assert refusals(study) == [expected]


def test_a_column_with_a_text_for_each_row_makes_no_groups() -> None:
    """A measurement is no grouping: more than twenty texts are refused."""
    many = " ".join(str(value) for value in range(21))
    study = Invented(
        columns={"u": many, "v": many, "w": many}, associations={"A1": association(more="groups: {column: w}")}
    )
    (refusal,) = refusals(study)
    assert 'the column "w" holds 21 different texts' in refusal
    assert refusal.endswith("Write a column with up to 20 groups. (message 42)")


@pytest.mark.parametrize(
    ("more", "expected"),
    [
        ("covariates: [g]", "g stands in another table than u."),
        ("covariates: [twin]", "twin and v both read one column."),
        ("compare_with: A2", "A2 stands in another table than A1."),
        ("compare_with: A3", "twin and v both read one column."),
    ],
)
def test_variables_of_other_tables_and_the_same_column_twice_are_refused(more: str, expected: str) -> None:
    """A row belongs to one table, and a column is one variable."""
    text = "\n".join(
        (
            'study: {number: "1", title: t, client: c, question: q}',
            "data:",
            "  one: {file: received/one.csv, missing_codes: []}",
            "  two: {file: received/two.csv, missing_codes: []}",
            "rows: {one_row_is: a row, repeated_within: not applicable, time_order: not applicable}",
            "variables:",
            *(
                f'  {name}: {{column: {table} / {column}, label: l, scale: measured, unit: "1"}}'
                for name, table, column in (
                    ("u", "one", "u"), ("v", "one", "v"), ("w", "one", "w"), ("twin", "one", "v"), ("g", "two", "g"),
                    ("h", "two", "h"),
                )
            ),
            "associations:",
            f"  A1: {association(more=more)}",
            f"  A2: {association('g', 'h')}",
            f"  A3: {association('u', 'twin')}",
            "inference: {alpha: 0.05}",
        )
    )  # fmt: skip
    (refusal,) = messages(lambda: read_spec(text, "s.yaml"))
    assert expected in refusal


def test_the_spec_as_used_keeps_what_is_asked() -> None:
    """Written out and read again, covariates, second association and groups are the same."""
    study = plan(
        "covariates: [z, w], compare_with: A2, groups: {column: site, compared: [b, a]}", A2=association("u", "w")
    )
    spec = study.read()[0]
    again = read_spec(spec_as_used(spec), "used.yaml").associations["A1"]
    assert (again.covariates, again.compare_with) == (("z", "w"), "A2")
    assert again.groups is not None
    assert (again.groups.column, again.groups.compared) == ("site", ("b", "a"))


def test_what_is_asked_is_planned_and_what_is_not_leaves_no_trace() -> None:
    """Each key makes another plan; a plan without them is the same plain data as before there were such keys."""
    plain = plan_of(plan("coefficient: Spearman rho").read()[0])
    assert isinstance(plain, dict)
    without = plain["associations"]["A1"]
    assert set(without) == {"between", "question", "role", "hypothesis", "coefficient"}
    plans = [
        plan_of(plan(more, A2=association("u", "w")).read()[0])
        for more in (
            "covariates: [w]",
            "covariates: [w, z]",
            "compare_with: A2",
            "groups: {column: site}",
            "groups: {column: site, compared: [a, b]}",
            "groups: {column: site, compared: [b, a]}",
        )
    ]
    assert all(one != other for place, one in enumerate(plans) for other in plans[:place])
