import pytest

from reactions.models import State
from reactions.services.errors import EditConflict, NotAllowed, RecordClosed
from reactions.services.inputs import ConditionsInput
from reactions.services.revising import Edit
from reactions.services.run import amend_conditions
from reactions.services.states import countersign, digest_of, move, sign

pytestmark = pytest.mark.django_db


@pytest.fixture
def edit(author, reaction):
    return Edit(author, reaction.pk)


@pytest.fixture
def signed(edit, reaction):
    move(edit, State.RUNNING)
    move(edit, State.COMPLETED)
    sign(edit)
    reaction.refresh_from_db()
    return reaction


def test_a_draft_is_not_signed(edit):
    with pytest.raises(RecordClosed, match="complete it"):
        sign(edit)


def test_states_are_not_skipped(edit):
    with pytest.raises(RecordClosed):
        move(edit, State.COMPLETED)
    with pytest.raises(RecordClosed):
        move(edit, State.SIGNED)


def test_starting_dates_the_run(edit, reaction):
    move(edit, State.RUNNING)
    reaction.refresh_from_db()
    assert reaction.performed_on is not None


def test_a_completed_one_can_be_reopened_and_completed_again(edit, reaction):
    for state in (State.RUNNING, State.COMPLETED, State.RUNNING, State.COMPLETED):
        move(edit, state)
    reaction.refresh_from_db()
    assert reaction.state == State.COMPLETED


def test_a_signed_one_takes_no_change(signed, edit):
    with pytest.raises(RecordClosed, match="signed"):
        amend_conditions(edit, ConditionsInput(temperature_c=20))


def test_a_reviewer_countersigns_the_same_words(signed, reviewer):
    countersign(Edit(reviewer, signed.pk))
    first, second = signed.signatures.all()
    assert first.digest == second.digest == digest_of(signed)
    assert (second.role, signed.revisions.last().action) == ("reviewer", "countersigned")


def test_an_author_does_not_countersign(signed, edit):
    with pytest.raises(NotAllowed):
        countersign(edit)


def test_nobody_countersigns_twice(signed, reviewer):
    countersign(Edit(reviewer, signed.pk))
    with pytest.raises(RecordClosed):
        countersign(Edit(reviewer, signed.pk))


def test_the_digest_changes_with_the_record(reaction, edit):
    before = digest_of(reaction)
    amend_conditions(edit, ConditionsInput(temperature_c=20))
    reaction.refresh_from_db()
    assert digest_of(reaction) != before


def test_nobody_signs_what_they_have_not_seen(edit, author, reaction):
    move(edit, State.RUNNING)
    move(edit, State.COMPLETED)
    reaction.refresh_from_db()
    seen = reaction.version
    amend_conditions(edit, ConditionsInput(temperature_c=20))
    with pytest.raises(EditConflict):
        sign(Edit(author, reaction.pk, seen))
    assert sign(Edit(author, reaction.pk, seen + 1)).signed_by == author
