"""Which planned keys two plans hold with other values."""

from rankdocket.study.plan_changes import PlanChange, plan_changes


def test_every_key_that_differs_is_named_with_both_values() -> None:
    """Of mappings by dots, of lists with parts by place; what one plan lacks has no value there."""
    old = {
        "inference": {"alpha": "0.05", "seed": None},
        "rows": {"leave_out": []},
        "associations": {"A9": {"role": "x"}},
    }
    new = {
        "inference": {"alpha": "0.01", "seed": None},
        "rows": {"leave_out": [{"where": {"line": "3"}, "reason": "spilt"}]},
        "associations": {},
    }
    assert plan_changes(old, new) == (
        PlanChange("inference.alpha", '"0.05"', '"0.01"'),
        PlanChange("rows.leave_out.1.where.line", None, '"3"'),
        PlanChange("rows.leave_out.1.reason", None, '"spilt"'),
        PlanChange("associations", None, "{}"),
        PlanChange("rows.leave_out", "[]", None),
        PlanChange("associations.A9.role", '"x"', None),
    )


def test_the_same_plan_has_no_changed_key() -> None:
    """Whatever the order of its keys."""
    assert plan_changes({"a": [1, 2], "b": {}}, {"b": {}, "a": (1, 2)}) == ()
