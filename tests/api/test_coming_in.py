import pytest
from rest_framework.test import APIClient

pytestmark = pytest.mark.django_db


def test_a_token_opens_the_api(author, campaign):
    login = {"username": "author", "password": "author-wears-gloves"}
    token = APIClient().post("/api/token/", login, format="json").json()["token"]
    client = APIClient(HTTP_AUTHORIZATION=f"Token {token}")
    assert [row["code"] for row in client.get("/api/campaigns/").json()] == ["ACC"]


def test_a_wrong_password_gives_no_token(author):
    login = {"username": "author", "password": "guess"}
    answer = APIClient().post("/api/token/", login, format="json")
    assert (answer.status_code, "token" in answer.json()) == (400, False)


def test_nobody_comes_in_without(db):
    for address in ("/api/reactions/", "/api/compute/", "/api/schema/"):
        assert APIClient().get(address).status_code in {401, 403}


def test_a_session_needs_its_csrf_token(author, campaign):
    client = APIClient(enforce_csrf_checks=True)
    client.force_login(author)
    answer = client.post("/api/campaigns/", {"code": "NEW", "name": "x"}, format="json")
    assert answer.status_code == 403


def test_the_schema_describes_every_address(api):
    schema = api.get("/api/schema/", headers={"Accept": "application/vnd.oai.openapi+json"}).json()
    assert "/api/reactions/{label}/lines/" in schema["paths"]
    assert "/api/compute/plan/" in schema["paths"]
