"""A change says which version it was made on, and runs over nobody's."""

import pytest

pytestmark = pytest.mark.django_db

RECORD = "/api/reactions/ACC-1/"
PUTS = {
    "lines": {"lines": []},
    "conditions": {"temperature_c": 60},
    "isolation": {"steps": []},
    "conclusion": {"conclusion": "brown"},
}


@pytest.fixture
def completed(api, planned):
    for state in ("running", "completed"):
        answer = api.post(f"{RECORD}state/", {"state": state}, format="json")
    return answer.json()


@pytest.mark.parametrize(("part", "content"), PUTS.items(), ids=PUTS)
def test_every_part_needs_it(api, planned, part, content):
    answer = api.put(f"{RECORD}{part}/", content, format="json")
    assert (answer.status_code, list(answer.json())) == (428, ["detail"])
    in_field = api.put(f"{RECORD}{part}/", {**content, "seen_version": 1}, format="json")
    assert in_field.status_code == 200


def test_the_etag_of_a_reading_is_what_a_change_sends(api, planned):
    seen = api.get(RECORD)["ETag"]
    answer = api.put(
        f"{RECORD}conditions/", PUTS["conditions"], format="json", headers={"If-Match": seen}
    )
    assert (answer.status_code, answer["ETag"]) == (200, '"2"')
    assert answer.json()["version"] == 2


@pytest.mark.parametrize("seen", ["2", "0", "-1", '"x"', "*", "1" * 12])
def test_what_is_no_version_of_the_record_is_refused(api, planned, seen):
    answer = api.put(
        f"{RECORD}conditions/", PUTS["conditions"], format="json", headers={"If-Match": seen}
    )
    assert (answer.status_code, list(answer.json()["errors"])) == (400, ["If-Match"])


@pytest.mark.parametrize("seen", [2, 0, -1, "1", 1.5, True, [1], 10**17])
def test_the_same_holds_for_the_field(api, planned, seen):
    answer = api.put(
        f"{RECORD}conditions/", {"temperature_c": 60, "seen_version": seen}, format="json"
    )
    assert (answer.status_code, list(answer.json()["errors"])) == (400, ["seen_version"])


def test_changes_of_different_parts_do_not_meet(api, api_of, second_author, planned):
    api.put(f"{RECORD}conditions/", {"temperature_c": 60, "seen_version": 1}, format="json")
    other = api_of(second_author)
    answer = other.put(
        f"{RECORD}conclusion/", {"conclusion": "x", "seen_version": 1}, format="json"
    )
    assert answer.status_code == 200


def test_a_conflict_gives_the_version_to_go_on_from(api, api_of, second_author, planned):
    changed = {"temperature_c": 60, "seen_version": 1}
    api.put(f"{RECORD}conditions/", changed, format="json")
    other = api_of(second_author)
    mine = {"temperature_c": 80}
    conflict = other.put(f"{RECORD}conditions/", {**mine, "seen_version": 1}, format="json").json()
    again = {**mine, "seen_version": conflict["conflict"]["version"]}
    answer = other.put(f"{RECORD}conditions/", again, format="json")
    assert (answer.status_code, answer.json()["temperature_c"]) == (200, 80)


def test_a_signature_says_what_was_seen(api, completed):
    assert api.post(f"{RECORD}signature/").status_code == 428
    answer = api.post(f"{RECORD}signature/", headers={"If-Match": f'"{completed["version"]}"'})
    assert answer.json()["state"] == "signed"


def test_nobody_signs_what_a_colleague_has_changed_meanwhile(api, api_of, second_author, completed):
    seen = completed["version"]
    changed = {"conclusion": "another", "seen_version": seen}
    api_of(second_author).put(f"{RECORD}conclusion/", changed, format="json")
    answer = api.post(f"{RECORD}signature/", {"seen_version": seen}, format="json")
    assert answer.status_code == 409
    assert answer.json()["conflict"]["changes"][0]["after"] == "another"
    assert api.get(RECORD).json()["signatures"] == []


def test_a_move_minds_a_version_where_one_is_said(api, api_of, second_author, planned):
    changed = {"temperature_c": 60, "seen_version": 1}
    api_of(second_author).put(f"{RECORD}conditions/", changed, format="json")
    move = {"state": "running", "seen_version": 1}
    assert api.post(f"{RECORD}state/", move, format="json").status_code == 409
    assert api.post(f"{RECORD}state/", {"state": "running"}, format="json").status_code == 200
