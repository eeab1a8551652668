import pytest

from reactions.calculators import CALCULATORS

pytestmark = pytest.mark.django_db


def test_every_calculator_is_listed_with_its_schemas(api):
    listed = api.get("/api/compute/").json()
    assert list(listed) == list(CALCULATORS)
    assert "mole_fraction" in listed["distribution"]["result"]["properties"]


def test_a_request_gives_a_result_and_an_array_an_array(api):
    request = {"model": "independent_sites", "sites": 30, "uptake": 1.0}
    one = api.post("/api/compute/distribution/", request, format="json").json()
    assert one["mole_fraction"][1] == pytest.approx((29 / 30) ** 29)  # derived
    many = api.post("/api/compute/distribution/", [request, request], format="json").json()
    assert many == [one, one]


def test_errors_name_the_field_and_in_an_array_the_place(api):
    bad = {"model": "independent_sites", "uptake": -1}
    answer = api.post("/api/compute/distribution/", [{**bad, "uptake": 1}, bad], format="json")
    assert (answer.status_code, list(answer.json()["errors"])) == (400, ["1.uptake"])


def test_an_unknown_calculator_is_named_with_those_there_are(api):
    answer = api.post("/api/compute/distibution/", {}, format="json")
    assert answer.status_code == 404
    assert "distribution" in answer.json()["detail"]


def test_too_many_requests_at_once_are_refused(api):
    answer = api.post("/api/compute/molar_mass/", [{}] * 1001, format="json")
    assert answer.status_code == 400


@pytest.mark.parametrize("text", ["NaN", "Infinity", "[", '"', "null", "3", '{"a": 1e999}'])
def test_what_is_no_request_is_refused_in_words(api, text):
    answer = api.generic("POST", "/api/compute/plan/", text, content_type="application/json")
    assert answer.status_code == 400
