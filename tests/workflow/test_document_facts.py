"""What counts as a fact of a document."""

import pytest

from rankdocket.document.prose import only
from rankdocket.workflow.document_facts import facts_of


@pytest.mark.parametrize(
    ("words", "outcomes"),
    [
        ("not met", ["not met"]),
        ("not met (waived)", ["not met (waived)"]),
        ("is doubtful (waived): few", ["doubtful (waived)"]),
        ("shown, opposite sign", ["shown, opposite sign"]),
        ("metal", []),
    ],
)
def test_a_waived_outcome_is_another_fact_than_one_that_is_not(words: str, outcomes: list[str]) -> None:
    """A waiver taken out of a filed document shows."""
    assert [fact[1] for fact in facts_of(only(words))] == outcomes
