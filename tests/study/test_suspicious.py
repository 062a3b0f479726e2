"""Rows that the plan calls suspicious: read, written, planned, and refused like rows left out."""

import pytest

from rankdocket.errors import InputError
from rankdocket.study.plan import plan_of
from rankdocket.study.reader import read_spec
from rankdocket.study.writer import spec_as_used
from study.faults import changed
from study.specs import PANEL

LATE = '      reason: Tasted twice\n  suspicious:\n    - where: {taster: "013"}\n      reason: came late\n'
SUSPECT = changed(PANEL, ("      reason: Tasted twice\n", LATE))


def test_the_key_is_read_and_written() -> None:
    """Column, cell text and reason come back; without the key there are none."""
    (entry,) = read_spec(SUSPECT, "s").rows.suspicious
    assert (dict(entry.where), entry.reason) == ({"taster": "013"}, "came late")
    written = spec_as_used(read_spec(SUSPECT, "s"))
    assert [(item.where, item.reason) for item in read_spec(written, "w").rows.suspicious] == [
        (entry.where, entry.reason)
    ]
    assert read_spec(PANEL, "s").rows.suspicious == ()
    assert "  suspicious: []\n" in spec_as_used(read_spec(PANEL, "s"))


def test_suspicion_is_planned_and_its_absence_changes_no_plan() -> None:
    """A plan from before there was the key has the digest that it had."""
    plan, without = plan_of(read_spec(SUSPECT, "s")), plan_of(read_spec(PANEL, "s"))
    assert isinstance(plan, dict)
    assert isinstance(without, dict)
    rows, rows_without = plan["rows"], without["rows"]
    assert isinstance(rows, dict)
    assert isinstance(rows_without, dict)
    assert rows["suspicious"] == [{"where": {"taster": "013"}, "reason": "came late"}]
    assert "suspicious" not in rows_without


def test_an_entry_without_columns_is_refused() -> None:
    """It would mean every row."""
    with pytest.raises(InputError) as refused:
        read_spec(changed(SUSPECT, ('{taster: "013"}', "{}")), "s")
    assert "rows.suspicious.1.where" in {fault.field for fault in refused.value.faults}
