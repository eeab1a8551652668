import pytest
from django.urls import reverse

pytestmark = pytest.mark.django_db


def typed(at="40 min", text="wine red", kind="observation", **others):
    return {
        "time-line-at_min": at,
        "time-line-kind": kind,
        "time-line-text": text,
        **others,
    }


def remove(planned, row):
    return reverse("reactions:remove-row", args=["ACC", planned.number, "time-line", row.pk])


def test_an_observation_is_added_with_its_time(signed_in, author, planned, sheet_of):
    response = signed_in(author).post(sheet_of(planned, "time-line"), typed("1.5 h"))
    assert response.url == f"{sheet_of(planned)}#time-line"
    (row,) = planned.observations.all()
    assert (row.at_min, row.text, row.recorded_by) == (90, "wine red", author)


def test_two_people_add_at_once_without_conflict(
    signed_in, author, second_author, planned, sheet_of
):
    for person in (author, second_author):
        signed_in(person).post(sheet_of(planned, "time-line"), typed(seen_version="1"))
    assert planned.observations.count() == 2


@pytest.mark.parametrize(
    ("field", "data"),
    [
        ("at_min", typed(at="")),
        ("at_min", typed(at="40")),
        ("text", typed(text="")),
        ("kind", typed(kind="miracle")),
    ],
)
def test_what_is_missing_is_said_at_its_field(signed_in, author, planned, sheet_of, field, data):
    response = signed_in(author).post(sheet_of(planned, "time-line"), data)
    assert response.status_code == 422
    assert field in response.context["parts"]["time_line"].form.errors
    assert not planned.observations.exists()


def test_a_line_is_removed_and_the_history_keeps_what_it_said(
    signed_in, author, planned, sheet_of, stored_again
):
    client = signed_in(author)
    client.post(sheet_of(planned, "time-line"), typed())
    row = planned.observations.get()
    client.post(remove(planned, row), {"seen_version": "2"})
    assert not planned.observations.exists()
    assert "wine red" in str(stored_again(planned).revisions.last().changes)


def test_removing_a_line_leaves_a_half_typed_one_alone(signed_in, author, planned, sheet_of):
    client = signed_in(author, enhanced=True)
    client.post(sheet_of(planned, "time-line"), typed())
    page = client.post(
        remove(planned, planned.observations.get()), {"seen_version": "2"}
    ).content.decode()
    assert page.lstrip().startswith('<div id="time-line-rows"')
    assert "<textarea" not in page


def test_a_line_added_meanwhile_stops_a_removal_until_it_was_seen(
    signed_in, author, second_author, planned, sheet_of
):
    client = signed_in(author)
    client.post(sheet_of(planned, "time-line"), typed())
    row = planned.observations.get()
    signed_in(second_author).post(sheet_of(planned, "time-line"), typed(text="precipitate"))
    response = client.post(remove(planned, row), {"seen_version": "2"})
    assert response.status_code == 409
    assert "second changed this section" in response.content.decode()
    assert planned.observations.count() == 2


def test_a_line_that_is_gone_already_is_said_so(signed_in, author, planned, sheet_of):
    client = signed_in(author)
    client.post(sheet_of(planned, "time-line"), typed())
    row = planned.observations.get()
    client.post(remove(planned, row), {"seen_version": "2"})
    response = client.post(remove(planned, row), {"seen_version": "3"})
    assert response.status_code == 409
    assert "already gone" in response.content.decode()


def test_rows_of_other_parts_are_not_removed_this_way(signed_in, author, planned):
    address = reverse("reactions:remove-row", args=["ACC", planned.number, "lines", 1])
    assert signed_in(author).post(address).status_code == 404


@pytest.mark.parametrize("who", ["reader", "reviewer"])
def test_only_authors_write(request, signed_in, author, planned, sheet_of, who):
    signed_in(author).post(sheet_of(planned, "time-line"), typed())
    client = signed_in(request.getfixturevalue(who))
    assert client.post(sheet_of(planned, "time-line"), typed()).status_code == 403
    response = client.post(remove(planned, planned.observations.get()), {"seen_version": "2"})
    assert response.status_code == 403
    assert planned.observations.count() == 1
