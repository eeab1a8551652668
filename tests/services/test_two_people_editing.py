import pytest

from reactions.services.errors import EditConflict
from reactions.services.inputs import ConclusionInput, ConditionsInput
from reactions.services.revising import Edit
from reactions.services.run import amend_conclusion, amend_conditions

pytestmark = pytest.mark.django_db


@pytest.fixture
def first_saved(reaction, author):
    """What the second person then meets: the first has set the temperature."""
    seen = reaction.version
    amend_conditions(Edit(author, reaction.pk, seen), ConditionsInput(temperature_c=110))
    return seen


def test_the_second_is_told_what_changed_and_nothing_is_stored(
    reaction, second_author, first_saved
):
    with pytest.raises(EditConflict) as caught:
        amend_conditions(
            Edit(second_author, reaction.pk, first_saved), ConditionsInput(temperature_c=120)
        )
    assert caught.value.changes == [
        {"field": "temperature_c", "before": None, "after": 110, "made_by": "author"}
    ]
    assert "author" in str(caught.value)
    reaction.refresh_from_db()
    assert reaction.temperature_c == 110


def test_saving_again_with_the_new_version_goes_through(reaction, second_author, first_saved):
    with pytest.raises(EditConflict) as caught:
        amend_conditions(
            Edit(second_author, reaction.pk, first_saved), ConditionsInput(temperature_c=120)
        )
    amend_conditions(
        Edit(second_author, reaction.pk, caught.value.version), ConditionsInput(temperature_c=120)
    )
    reaction.refresh_from_db()
    assert reaction.temperature_c == 120


def test_another_section_is_no_conflict(reaction, second_author, first_saved):
    amend_conclusion(
        Edit(second_author, reaction.pk, first_saved), ConclusionInput(conclusion="brown")
    )
    reaction.refresh_from_db()
    assert (reaction.conclusion, reaction.temperature_c) == ("brown", 110)
