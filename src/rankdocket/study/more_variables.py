"""The keys of an association about more than two variables, held against the rest of the spec."""

from collections.abc import Iterator

from rankdocket.errors import Fault
from rankdocket.study.form import AssociationForm
from rankdocket.study.messages import Message, fault
from rankdocket.study.parts import Parts, table_of
from rankdocket.study.wording import composed, shown, suggestion

RHO_ONLY = "Write coefficient: Spearman rho, or leave it out."


def more_variables_faults(parts: Parts, name: str, association: AssociationForm) -> Iterator[Fault]:
    """Yield every fault of ``covariates``, ``compare_with`` and ``groups`` of an association."""
    at = ("associations", name)
    if association.covariates and parts.sound(at, "covariates"):
        yield from _covariate_faults(parts, name, association)
    if association.compare_with is not None and parts.sound(at, "compare_with"):
        yield from _comparison_faults(parts, name, association, association.compare_with)
    if association.groups is not None and parts.sound(at, "groups"):
        yield from _group_faults(parts, name, association)


def _covariate_faults(parts: Parts, name: str, association: AssociationForm) -> Iterator[Fault]:
    at = ("associations", name, "covariates")
    if association.coefficient != "Spearman rho" and parts.sound(at[:2], "coefficient"):
        what = f"a partial rank correlation is offered for Spearman rho, not for {association.coefficient}."
        yield fault(parts.key_place(*at), ".".join(at), Message.DOES_NOT_APPLY, what, RHO_ONLY)
    names = parts.names("variables")
    seen = list(association.between)
    for position, covariate in enumerate(association.covariates):
        place = parts.value_place(*at, position)
        if covariate not in names:
            what = f"{shown(covariate)} is not an entry of variables."
            remedy = suggestion(covariate, names, "Variables")
            yield fault(place, ".".join(at), Message.NAME_UNKNOWN, what, remedy)
        elif covariate in association.between:
            what = f"{covariate} is one of the two variables of {name} itself."
            remedy = "Write variables other than those of between."
            yield fault(place, ".".join(at), Message.SAME_VARIABLE, what, remedy)
        elif covariate in seen:
            yield fault(place, ".".join(at), Message.ENTRY_TWICE, f"{covariate} stands twice.", "Keep one of them.")
        elif (other := _same_column(parts, covariate, seen)) is not None:
            what = f"{covariate} and {other} both read one column."
            remedy = "Write variables of different columns."
            yield fault(place, ".".join(at), Message.SAME_VARIABLE, what, remedy)
        elif _other_table(parts, covariate, association.between[0]):
            what = f"{covariate} stands in another table than {association.between[0]}."
            remedy = "Write variables of one table; join the files before the study."
            yield fault(place, ".".join(at), Message.TWO_TABLES, what, remedy)
        seen.append(covariate)


def _comparison_faults(parts: Parts, name: str, association: AssociationForm, other: str) -> Iterator[Fault]:
    at = ("associations", name, "compare_with")
    place, field = parts.value_place(*at), ".".join(at)
    names = parts.names("associations")
    if other == name:
        what = f"{name} would be compared with itself."
        yield fault(place, field, Message.CONTRADICTION, what, "Write another association.")
        return
    if other not in names:
        what = f"{shown(other)} is not an entry of associations."
        yield fault(
            place,
            field,
            Message.NAME_UNKNOWN,
            what,
            suggestion(other, [one for one in names if one != name], "Associations"),
        )
        return
    for compared, form in ((name, association), (other, parts.associations.get(other))):
        sound = form is not None and parts.sound(("associations", compared), "coefficient")
        if sound and form is not None and form.coefficient != "Spearman rho":
            what = f"the coefficient of {compared} is {form.coefficient}; a comparison is offered for Spearman rho."
            remedy = "Write coefficient: Spearman rho there, or leave compare_with out."
            yield fault(place, field, Message.DOES_NOT_APPLY, what, remedy)
    second = parts.associations.get(other)
    if second is None or not parts.sound(("associations", other), "between"):
        return
    apart = [variable for variable in second.between if variable not in association.between]
    twin = next((one for one in apart if _same_column(parts, one, association.between) is not None), None)
    if set(second.between) == set(association.between):
        what = f"{name} and {other} have the same two variables."
        remedy = "Write an association that shares one variable or none."
        yield fault(place, field, Message.SAME_VARIABLE, what, remedy)
    elif twin is not None:
        what = f"{twin} and {_same_column(parts, twin, association.between)} both read one column."
        remedy = "Write the same variable in both associations, or variables of different columns."
        yield fault(place, field, Message.SAME_VARIABLE, what, remedy)
    elif _other_table(parts, second.between[0], association.between[0]):
        what = f"{other} stands in another table than {name}."
        remedy = "Write associations of one table; join the files before the study."
        yield fault(place, field, Message.TWO_TABLES, what, remedy)


def _group_faults(parts: Parts, name: str, association: AssociationForm) -> Iterator[Fault]:
    groups, at = association.groups, ("associations", name, "groups")
    assert groups is not None
    reader = next((one for one in association.between if _reads(parts, one) == composed(groups.column)), None)
    if reader is not None:
        place = parts.value_place(*at, "column")
        what = f"{shown(groups.column)} is the column of {reader}, a variable of {name} itself."
        remedy = "Write a column that is not of between."
        yield fault(place, ".".join((*at, "column")), Message.SAME_VARIABLE, what, remedy)
    if not groups.compared:
        return
    place, field = parts.value_place(*at, "compared", 1), ".".join((*at, "compared"))
    if composed(groups.compared[0]) == composed(groups.compared[1]):
        what = f"{shown(groups.compared[1])} stands twice."
        yield fault(place, field, Message.ENTRY_TWICE, what, "Write two groups.")
    if association.coefficient != "Spearman rho" and parts.sound(at[:2], "coefficient"):
        what = f"a difference of two groups is offered for Spearman rho, not for {association.coefficient}."
        remedy = "Leave compared out, or write coefficient: Spearman rho."
        yield fault(parts.key_place(*at, "compared"), field, Message.DOES_NOT_APPLY, what, remedy)


def _reads(parts: Parts, variable: str) -> str | None:
    """Return the column of a variable that was read without a fault."""
    form = parts.variables.get(variable)
    if form is None or not parts.sound(("variables", variable), "column"):
        return None
    return composed(form.column.name)


def _table(parts: Parts, variable: str) -> str | None:
    form = parts.variables.get(variable)
    if form is None or not parts.sound(("variables", variable), "column"):
        return None
    found = table_of(parts, form)
    return found if found in parts.names("data") else None


def _same_column(parts: Parts, variable: str, others: list[str] | tuple[str, ...]) -> str | None:
    """Return the first of ``others`` that reads the column of ``variable``."""
    column, table = _reads(parts, variable), _table(parts, variable)
    if column is None or table is None:
        return None
    return next((one for one in others if (_reads(parts, one), _table(parts, one)) == (column, table)), None)


def _other_table(parts: Parts, variable: str, first: str) -> bool:
    tables = {_table(parts, variable), _table(parts, first)}
    return None not in tables and len(tables) > 1
