import pytest

from reactions.models import State
from reactions.services.revising import Edit
from reactions.services.states import move, sign

pytestmark = pytest.mark.django_db


@pytest.fixture
def completed(planned, author):
    for state in (State.RUNNING, State.COMPLETED):
        move(Edit(author, planned.pk), state)
    planned.refresh_from_db()
    return planned


@pytest.fixture
def signed(completed, author):
    sign(Edit(author, completed.pk))
    completed.refresh_from_db()
    return completed


@pytest.fixture
def change(signed_in, sheet_of):
    def change(person, reaction, state, **others):
        data = {"state": state, "seen_version": str(reaction.version), **others}
        return signed_in(person).post(sheet_of(reaction, name="state"), data)

    return change


def test_a_run_is_started_completed_and_signed(
    change, author, planned, stored_again, signed_in, sheet_of
):
    for state in ("running", "completed"):
        assert change(author, stored_again(planned), state).status_code == 302
        assert stored_again(planned).state == state
    response = change(author, stored_again(planned), "signed", is_true="on")
    assert response.status_code == 302
    (signature,) = planned.signatures.all()
    page = signed_in(author).get(sheet_of(planned)).content.decode()
    assert signature.digest in page


@pytest.mark.parametrize(("back", "state"), [("running", "completed"), ("planned", "running")])
def test_a_step_can_be_taken_back_until_signing(change, author, planned, stored_again, back, state):
    move(Edit(author, planned.pk), State.RUNNING)
    if state == "completed":
        move(Edit(author, planned.pk), State.COMPLETED)
    change(author, stored_again(planned), back)
    assert stored_again(planned).state == back


def test_a_signature_needs_the_tick(change, author, completed, stored_again):
    response = change(author, completed, "signed")
    assert response.status_code == 422
    assert "Tick this first" in response.content.decode()
    assert stored_again(completed).state == "completed"


def test_a_draft_is_not_signed(change, author, planned, stored_again):
    response = change(author, planned, "signed", is_true="on")
    assert response.status_code == 409
    assert "complete it before you sign" in response.content.decode()
    assert not planned.signatures.exists()


def test_one_signs_what_one_has_read(
    change, author, second_author, completed, signed_in, sheet_of, stored_again
):
    signed_in(second_author).post(
        sheet_of(completed, "conclusion"),
        {
            "seen_version": str(completed.version),
            "conclusion-conclusion": "It failed.",
            "conclusion-title": completed.title,
        },
    )
    response = change(author, completed, "signed", is_true="on")
    assert response.status_code == 409
    assert "second changed this record" in response.content.decode()
    assert stored_again(completed).state == "completed"
    assert change(author, stored_again(completed), "signed", is_true="on").status_code == 302


def test_a_reviewer_countersigns_what_is_signed(change, reviewer, signed):
    assert change(reviewer, signed, "countersigned", is_true="on").status_code == 302
    assert [row.role for row in signed.signatures.all()] == ["author", "reviewer"]
    assert len({row.digest for row in signed.signatures.all()}) == 1


def test_a_reviewer_sees_the_form_to_countersign_once(
    change, reviewer, signed, signed_in, sheet_of
):
    client = signed_in(reviewer)
    assert "Countersign as reviewer" in client.get(sheet_of(signed)).content.decode()
    change(reviewer, signed, "countersigned", is_true="on")
    assert "Countersign as reviewer" not in client.get(sheet_of(signed)).content.decode()


def test_nobody_countersigns_a_draft_or_twice(change, reviewer, completed, author):
    assert change(reviewer, completed, "countersigned", is_true="on").status_code == 409
    sign(Edit(author, completed.pk))
    completed.refresh_from_db()
    change(reviewer, completed, "countersigned", is_true="on")
    completed.refresh_from_db()
    assert change(reviewer, completed, "countersigned", is_true="on").status_code == 409


@pytest.mark.parametrize(
    ("who", "state"),
    [
        ("reader", "running"),
        ("reviewer", "running"),
        ("reader", "signed"),
        ("reviewer", "signed"),
        ("reader", "countersigned"),
        ("author", "countersigned"),
    ],
)
def test_roles_bound_who_moves_and_signs(request, change, completed, stored_again, who, state):
    person = request.getfixturevalue(who)
    assert change(person, completed, state, is_true="on").status_code == 403
    assert stored_again(completed).state == "completed"


def test_a_signed_record_goes_nowhere(change, author, signed, stored_again):
    for state in ("running", "completed", "planned"):
        assert change(author, signed, state).status_code == 409
    assert stored_again(signed).state == "signed"


def test_a_state_that_is_none_is_refused(change, author, planned):
    assert change(author, planned, "burnt").status_code == 422


def test_the_conclusion_and_the_title_are_amended(
    signed_in, author, planned, sheet_of, stored_again
):
    signed_in(author).post(
        sheet_of(planned, "conclusion"),
        {
            "seen_version": "1",
            "conclusion-conclusion": "Repeat at 0.9 eq.",
            "conclusion-recovered_cage_mg": "12 mg",
            "conclusion-title": "Second try",
        },
    )
    again = stored_again(planned)
    assert (again.conclusion, again.recovered_cage_mg, again.title) == (
        "Repeat at 0.9 eq.",
        12,
        "Second try",
    )
