"""Who is let in, and by which key."""

import pytest
from django.core.cache import cache
from rest_framework.test import APIClient

pytestmark = pytest.mark.django_db


@pytest.fixture(autouse=True)
def _nobody_has_tried_a_password_yet():
    cache.clear()


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


def test_a_password_is_taken_as_it_is(author):
    author.set_password("  gloves off ")
    author.save()
    for typed, status in (("  gloves off ", 200), ("gloves off", 400)):
        login = {"username": "author", "password": typed}
        assert APIClient().post("/api/token/", login, format="json").status_code == status


def test_a_closed_account_gets_no_token_and_its_token_opens_nothing(author):
    login = {"username": "author", "password": "author-wears-gloves"}
    token = APIClient().post("/api/token/", login, format="json").json()["token"]
    author.is_active = False
    author.save()
    assert APIClient().post("/api/token/", login, format="json").status_code == 400
    client = APIClient(HTTP_AUTHORIZATION=f"Token {token}")
    assert client.get("/api/campaigns/").status_code == 401


@pytest.mark.parametrize("header", ["Token", "Token x", "Token x y", "Token é", "Basic eDp5"])
def test_a_wrong_token_opens_nothing(author, header):
    assert APIClient(HTTP_AUTHORIZATION=header).get("/api/campaigns/").status_code == 401


def test_passwords_cannot_be_tried_one_after_another(author):
    login = {"username": "author", "password": "guess"}
    met = [APIClient().post("/api/token/", login, format="json").status_code for _ in range(12)]
    assert met == [400] * 10 + [429] * 2
