import json

import pytest
from django.urls import reverse

pytestmark = pytest.mark.django_db


@pytest.fixture
def three(api, campaign, plan):
    for title, solvent in (("first", "toluene"), ("second", "toluene"), ("third", "chlorobenzene")):
        row = {**plan, "title": title, "conditions": {"solvent": solvent}}
        assert api.post("/api/reactions/", row, format="json").status_code == 201


def test_the_parameters_are_those_of_the_page(api, three):
    answer = api.get("/api/reactions/", {"solvent": "chlorobenzene"}).json()
    assert [row["title"] for row in answer["results"]] == ["third"]
    found = api.get("/api/reactions/", {"substructure": "CCOC(=O)C"}).json()
    assert found["count"] == 3
    assert api.get("/api/reactions/", {"family": "prato"}).json()["count"] == 0


@pytest.mark.parametrize(
    "question",
    [
        "family=bingel",
        "family=Cyclopropanation",
        "family=prato&family=bingel",
        "substructure=CCOC(%3DO)C",
        "substructure=c1ccccc1",
        "solvent=TOLUENE",
        "cage=C70",
        "state=planned&sort=-label",
        "text=second",
        "text=ACC-3",
        "campaign=ACC&temperature_c_lowest=20",
        "level_lowest=1",
        "yield_percent_highest=40",
        "performed_from=2026-01-01",
        "sort=label",
    ],
)
def test_the_api_finds_what_the_page_downloads(api, client, author, three, question):
    client.force_login(author)
    downloaded = client.get(f"{reverse('reactions:search-json')}?{question}")
    page_says = json.loads(downloaded.getvalue())
    found = api.get(f"/api/reactions/?{question}").json()
    assert [row["label"] for row in found["results"]] == [row["label"] for row in page_says]


def test_hits_come_in_pages(api, three):
    answer = api.get("/api/reactions/", {"page_size": 2, "sort": "label"}).json()
    assert [row["label"] for row in answer["results"]] == ["ACC-1", "ACC-2"]
    assert "page=2" in answer["next"]
    assert api.get("/api/reactions/", {"page": 99}).status_code == 404


def test_a_bad_parameter_is_an_error_at_its_field(api, campaign):
    answer = api.get("/api/reactions/", {"temperature_c_lowest": "warm"})
    assert (answer.status_code, list(answer.json()["errors"])) == (400, ["temperature_c_lowest"])


def test_nothing_of_another_campaign_is_found(api_of, outsider, three):
    assert api_of(outsider).get("/api/reactions/").json()["count"] == 0
    assert api_of(outsider).get("/api/addends/").json()["count"] == 0
    assert api_of(outsider).get("/api/reactions/ACC-1/").status_code == 404


def test_a_page_of_hits_takes_few_queries(api, three, django_assert_max_num_queries):
    with django_assert_max_num_queries(8):
        api.get("/api/reactions/")
