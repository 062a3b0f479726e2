"""From the forms of a faultless spec to its frozen values."""

from rankdocket.study.form import (
    MOST_PERMUTATIONS,
    AssociationForm,
    DataForm,
    HypothesisForm,
    InferenceForm,
    PersonForm,
    PValueForm,
    RowsForm,
    StudyForm,
    VariableForm,
)
from rankdocket.study.parts import Parts, table_of
from rankdocket.study.spec import (
    AssociationSpec,
    BudgetSpec,
    DataSpec,
    GroupsSpec,
    HypothesisSpec,
    InferenceSpec,
    IntervalSpec,
    LeaveOutSpec,
    Person,
    PValueSpec,
    ReportSpec,
    RequirementsSpec,
    RowsSpec,
    SeveralTestsSpec,
    StudySection,
    StudySpec,
    VariableSpec,
)
from rankdocket.study.waivers import waivers_of


def spec_of(parts: Parts) -> StudySpec:
    """Return the spec whose parts were all read without a fault."""
    assert parts.study is not None
    assert parts.rows is not None
    assert parts.inference is not None
    return StudySpec(
        study=_study(parts, parts.study),
        data={name: _data(parts, name, form) for name, form in parts.data.items()},
        rows=_rows(parts, parts.rows),
        variables={name: _variable(parts, name, form) for name, form in parts.variables.items()},
        associations={name: _association(parts, name, form) for name, form in parts.associations.items()},
        inference=_inference(parts, parts.inference),
        requirements=_requirements(parts),
        report=_report(parts),
    )


def _person(form: PersonForm | None) -> Person | None:
    return None if form is None else Person(form.name, form.role)


def _study(parts: Parts, form: StudyForm) -> StudySection:
    return StudySection(
        number=form.number,
        title=form.title,
        client=form.client,
        question=form.question,
        population=form.population,
        rows_were_fixed_by=form.rows_were_fixed_by,
        prepared_by=_person(form.prepared_by),
        checked_by=_person(form.checked_by),
        released_by=_person(form.released_by),
        place=parts.key_place("study"),
    )


def _data(parts: Parts, name: str, form: DataForm) -> DataSpec:
    first = form.first_data_row
    return DataSpec(
        name=name,
        file=form.file,
        separator=form.separator,
        decimal_mark=form.decimal_mark,
        thousands_mark=form.thousands_mark,
        text_encoding=form.text_encoding,
        comment_mark=form.comment_mark,
        column_names_in_row=form.column_names_in_row,
        units_in_row=form.units_in_row,
        first_data_row=max(form.column_names_in_row, form.units_in_row or 0) + 1 if first is None else first,
        last_data_row=form.last_data_row,
        missing_codes=form.missing_codes,
        received_on=form.received_on,
        received_from=form.received_from,
        place=parts.key_place("data", name),
    )


def _rows(parts: Parts, form: RowsForm) -> RowsSpec:
    left_out = tuple(
        LeaveOutSpec(item.where, item.reason, parts.key_place("rows", "leave_out", position))
        for position, item in enumerate(form.leave_out)
    )
    suspicious = tuple(
        LeaveOutSpec(item.where, item.reason, parts.key_place("rows", "suspicious", position))
        for position, item in enumerate(form.suspicious)
    )
    return RowsSpec(
        one_row_is=form.one_row_is,
        repeated_within=form.repeated_within,
        time_order=form.time_order,
        independent_because=form.independent_because,
        leave_out=left_out,
        place=parts.key_place("rows"),
        suspicious=suspicious,
    )


def _variable(parts: Parts, name: str, form: VariableForm) -> VariableSpec:
    table = table_of(parts, form)
    assert table is not None
    return VariableSpec(
        name=name,
        table=table,
        column=form.column.name,
        label=form.label,
        unit=form.unit,
        scale=form.scale,
        lowest_to_highest=form.lowest_to_highest,
        other_spellings=form.other_spellings,
        missing_codes=form.missing_codes,
        derived_from=form.derived_from,
        place=parts.key_place("variables", name),
    )


def _association(parts: Parts, name: str, form: AssociationForm) -> AssociationSpec:
    x, y = form.between
    return AssociationSpec(
        name=name,
        x=x,
        y=y,
        question=form.question,
        role=form.role,
        hypothesis=_hypothesis(form.hypothesis),
        coefficient=form.coefficient,
        waived=waivers_of(form.waived),
        place=parts.key_place("associations", name),
        covariates=form.covariates,
        compare_with=form.compare_with,
        groups=_groups(parts, name, form),
    )


def _groups(parts: Parts, name: str, form: AssociationForm) -> GroupsSpec | None:
    if form.groups is None:
        return None
    return GroupsSpec(form.groups.column, form.groups.compared, parts.key_place("associations", name, "groups"))


def _hypothesis(form: HypothesisForm) -> HypothesisSpec:
    return HypothesisSpec(form.expected_sign, form.smallest_of_interest, form.claim, form.null_value)


def _inference(parts: Parts, form: InferenceForm) -> InferenceSpec:
    several, p_value = form.several_tests, form.p_value
    return InferenceSpec(
        alpha=form.alpha,
        sidedness=form.sidedness,
        confidence_level=form.confidence_level,
        planned_power=form.planned_power,
        interval=IntervalSpec(form.interval.by, form.interval.adjusted, form.interval.resamples),
        several_tests=SeveralTestsSpec(several.adjust, several.among, several.reason),
        p_value=PValueSpec(
            p_value.by,
            p_value.permutations,
            _most_draws(p_value),
            p_value.seed,
            BudgetSpec(p_value.budget.seconds, p_value.budget.memory),
        ),
        place=parts.key_place("inference"),
    )


def _most_draws(form: PValueForm) -> int:
    """Return the ceiling of draws: as written, or ten times the first ones."""
    return form.most_draws or min(10 * form.permutations, MOST_PERMUTATIONS)


def _requirements(parts: Parts) -> RequirementsSpec:
    form = parts.requirements
    return RequirementsSpec(
        fewest_complete_rows=form.fewest_complete_rows,
        most_missing=form.most_missing,
        most_tied=form.most_tied,
        if_not_met=form.if_not_met,
        place=parts.key_place("requirements"),
    )


def _report(parts: Parts) -> ReportSpec:
    form = parts.report
    return ReportSpec(
        readers=form.readers,
        coefficient_decimals=form.decimals.coefficient,
        p_value_decimals=form.decimals.p_value,
        number_style=form.number_style,
        marking=form.marking,
        distribution=form.distribution,
        signatures=form.signatures,
        place=parts.key_place("report"),
    )
