import pytest

from reactions.chemistry.families import families

pytestmark = pytest.mark.django_db


def test_opening_a_campaign_makes_its_author(api):
    answer = api.post("/api/campaigns/", {"code": "NEW", "name": "New series"}, format="json")
    assert (answer.status_code, answer.json()["role"]) == (201, "author")


def test_members_come_and_go(api, campaign, outsider):
    address = "/api/campaigns/ACC/members/outsider/"
    given = api.put(address, {"role": "reader"}, format="json").json()
    assert given["members"]["outsider"] == "reader"
    assert "outsider" not in api.delete(address).json()["members"]


def test_a_reader_gives_no_roles(api_of, reader, outsider):
    answer = api_of(reader).put(
        "/api/campaigns/ACC/members/outsider/", {"role": "reader"}, format="json"
    )
    assert answer.status_code == 403


def test_every_family_is_there(api):
    keys = {row["key"] for row in api.get("/api/families/").json()}
    assert keys == set(families())


def test_a_family_that_lacks_something_says_what(api, campaign):
    answer = api.post("/api/families/", {"key": "own"}, format="json")
    assert answer.status_code == 400
    assert "name" in answer.json()["errors"]


def test_the_addends_of_ones_campaigns(api, planned):
    found = api.get("/api/addends/").json()
    assert [row["formula"] for row in found["results"]] == ["C7H10O4"]
    assert (found["count"], found["next"]) == (1, None)


def test_a_family_as_it_is_given_can_be_defined_under_another_key(api, campaign):
    given = next(row for row in api.get("/api/families/").json() if row["key"] == "bingel")
    own = {**given, "key": "own_bingel", "name": "Own cyclopropanation"}
    answer = api.post("/api/families/", own, format="json")
    assert answer.status_code == 201, answer.content
    assert answer.json() == own
    assert own in api.get("/api/families/").json()
    assert list(api.post("/api/families/", own, format="json").json()["errors"]) == ["key"]
