"""Bodies that no client should send are refused in words, and nothing of them is stored."""

import pytest
from django.core.cache import cache

from reactions.models import Campaign, Reaction

pytestmark = pytest.mark.django_db

MOLAR_MASS = "/api/compute/molar_mass/"
WRITES = [
    ("post", "/api/reactions/"),
    ("put", "/api/reactions/ACC-1/lines/"),
    ("put", "/api/reactions/ACC-1/conditions/"),
    ("put", "/api/reactions/ACC-1/isolation/"),
    ("put", "/api/reactions/ACC-1/conclusion/"),
    ("post", "/api/reactions/ACC-1/observations/"),
    ("post", "/api/reactions/ACC-1/readings/"),
    ("post", "/api/reactions/ACC-1/state/"),
    ("post", "/api/reactions/ACC-1/signature/"),
    ("post", "/api/campaigns/"),
    ("put", "/api/campaigns/ACC/members/reader/"),
    ("post", "/api/families/"),
    ("post", "/api/token/"),
    ("post", "/api/compute/distribution/"),
    ("post", "/api/compute/plan/"),
    ("post", "/api/compute/curve/"),
    ("post", "/api/compute/amounts/"),
    ("post", "/api/compute/cautions/"),
    ("post", "/api/compute/molar_mass/"),
]
BODIES = {
    "deep arrays": b"[" * 900 + b"]" * 900,
    "deep objects": b'{"a":' * 980 + b"1" + b"}" * 980,
    "endless arrays": b"[" * 100_000,
    "endless objects": b'{"a":' * 100_000,
    "half a character": b'{"title": "\\ud800", "campaign": "ACC", "family_key": "bingel"}',
    "half a character in a name": b'{"\\ud800": 1}',
    "NUL": b'{"title": "a\\u0000", "campaign": "ACC", "family_key": "bingel", "text": "\\u0000"}',
    "NUL in a name": b'{"\\u0000": 1}',
    "no UTF-8": b'{"title": "\xff\xfe"}',
    "not a number": b'{"at_min": NaN, "text": "x"}',
    "infinity": b'{"objective": {"a": 1e999}, "title": "x", "campaign": "ACC", "family_key": "x"}',
    "an infinite attenuation": b'{"title": "x", "campaign": "ACC", "family_key": "bingel",'
    b' "composition_model": {"attenuation": 1e999}}',
    "many digits": b'{"seen_version": ' + b"1" * 5000 + b"}",
    "a field twice": b'{"code": "NEW", "code": "NEU", "name": "x"}',
    "a number": b"3",
    "an array of nothing": b"[null, [], 3]",
    "nothing": b"null",
    "text": b'"C60"',
}  # fmt: skip


@pytest.fixture
def book(planned, reader):
    cache.clear()  # nobody has tried a password yet
    return {"reactions": Reaction.objects.count(), "campaigns": Campaign.objects.count()}


@pytest.mark.parametrize("body", BODIES.values(), ids=BODIES)
def test_it_is_refused_in_words(api, book, body):
    for method, address in WRITES:
        answer = api.generic(method.upper(), address, body, content_type="application/json")
        assert answer.status_code in {400, 428}, (address, answer.status_code, answer.content)
        refusal = answer.json()
        texts = [text for field in refusal.get("errors", {}).values() for text in field]
        assert all([*texts, refusal.get("detail", "x")])
    assert Reaction.objects.count() == book["reactions"]
    assert Campaign.objects.count() == book["campaigns"]


def test_a_body_longer_than_the_site_takes_is_refused(api, settings, campaign):
    body = '{"smiles": "C"}' + " " * 1000
    for longest, status in ((len(body) - 1, 413), (len(body), 200), (None, 200)):
        settings.DATA_UPLOAD_MAX_MEMORY_SIZE = longest
        answer = api.generic("POST", MOLAR_MASS, body, content_type="application/json")
        assert answer.status_code == status
        assert ("detail" in answer.json()) == (status == 413)


def test_another_kind_of_body_is_not_read(api, campaign):
    answer = api.post("/api/campaigns/", {"code": "NEW", "name": "x"}, format="multipart")
    assert answer.status_code == 415


def test_a_field_is_named_within_its_list(api, planned):
    body = '{"seen_version": 1, "lines": [{"role": "base", "name": "DBU", "purity": NaN}]}'
    answer = api.generic(
        "PUT", "/api/reactions/ACC-1/lines/", body, content_type="application/json"
    )
    assert list(answer.json()["errors"]) == ["lines.0.purity"]
