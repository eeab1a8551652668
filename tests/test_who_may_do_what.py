"""All routes, times all methods, times all roles.

The routes come from the URL configuration itself, so that one without a declared expectation fails
the walk. Over and above the status: whoever is turned away has changed nothing, and no answer to an
outsider says a word of the record.
"""

import json
import re

import pytest
from django.apps import apps
from django.core.cache import cache
from django.test import Client
from django.urls import URLPattern, URLResolver, get_resolver, reverse

from reactions.models import (
    Addend,
    HistoryImport,
    Observation,
    Reaction,
    Reading,
    ReadingLevel,
)

pytestmark = pytest.mark.django_db

ROLES = ("nobody", "outsider", "reader", "author", "reviewer")
METHODS = ("get", "post", "put", "patch", "delete")
LOG_IN, NO_TOKEN, HIDDEN, REFUSED = "log in", "no token", "hidden", "refused"
# Questioned: the role may, but what is sent has to be put right first.
ALLOWED, QUESTIONED = "allowed", "questioned"
TURNED_AWAY = {LOG_IN, NO_TOKEN, HIDDEN, REFUSED, "no such method", "too often"}
SECRET = "Violet-4711"
# The character NUL, a half of a character, a number that no column holds.
ODD_WORDS = ("%00", "ACC%00", "%25", "%C3%A9", "%ED%B2%80", "9" * 18, "ACC-" + "9" * 40)
_MET = {
    400: QUESTIONED, 401: NO_TOKEN, 403: REFUSED, 404: HIDDEN, 405: "no such method",
    409: QUESTIONED, 422: QUESTIONED, 429: "too often",
}  # fmt: skip


def questioned(expected):
    """Return an expectation in which whoever may is asked to put something right."""
    return tuple(QUESTIONED if met == ALLOWED else met for met in expected)


# What each role meets, in the order of ROLES.
EVERYONE = (ALLOWED,) * 5
PERSON = (LOG_IN, *(ALLOWED,) * 4)
MEMBER = (LOG_IN, HIDDEN, ALLOWED, ALLOWED, ALLOWED)
AUTHOR = (LOG_IN, HIDDEN, REFUSED, ALLOWED, REFUSED)
API_PERSON = (NO_TOKEN, *(ALLOWED,) * 4)
API_MEMBER = (NO_TOKEN, HIDDEN, ALLOWED, ALLOWED, ALLOWED)
API_AUTHOR = (NO_TOKEN, HIDDEN, REFUSED, ALLOWED, REFUSED)
API_REVIEWER = (NO_TOKEN, HIDDEN, REFUSED, REFUSED, ALLOWED)
API_AUTHOR_OF_ANY = (NO_TOKEN, REFUSED, REFUSED, ALLOWED, REFUSED)
SEEN = {"seen_version": 1}
OBSERVATION = {"at_min": 1, "text": "brown"}
READING = {"method": "hplc", "mole_fraction_by_level": {"1": 0.5}}
PLAN = {"campaign": "ACC", "title": "x", "family_key": "bingel"}
DISTRIBUTION = {"model": "independent_sites", "uptake": 1}

# Route: {method: (what each role meets, body)}.
EXPECTED = {
    "health": {"get": (EVERYONE, None), "post": (EVERYONE, None)},
    "login": {"get": (EVERYONE, None), "post": (EVERYONE, {"username": "x", "password": "x"})},
    "logout": {"post": (PERSON, {})},
    "search": {"get": (PERSON, None)},
    "search-csv": {"get": (PERSON, None)},
    "search-json": {"get": (PERSON, None)},
    "structure": {"post": (PERSON, {"structure": "*C"})},
    "addend-picture": {"get": (MEMBER, None)},
    "campaigns": {"get": (PERSON, None), "post": (PERSON, {"code": "NEW", "name": "x"})},
    "campaign": {"get": (MEMBER, None)},
    "set-member": {"post": (AUTHOR, {"username": "reader", "role": "reader"})},
    "remove-member": {"post": (AUTHOR, {"username": "reader"})},
    "sheet": {"get": (MEMBER, None)},
    "print": {"get": (MEMBER, None)},
    "state": {"post": (AUTHOR, {"state": "running"})},
    "preview-lines": {"post": (AUTHOR, {})},
    "preview-reading": {"post": (AUTHOR, {})},
    "part": {"get": (MEMBER, None), "post": (AUTHOR, {**SEEN, "conclusion-title": "x"})},
    "remove-row": {"post": (AUTHOR, SEEN)},
    "planner": {"get": (PERSON, None), "post": (PERSON, {})},
    "families": {"get": (PERSON, None), "post": (questioned(PERSON), {})},
    "history": {"get": (PERSON, None), "post": (PERSON, {})},
    "history-import": {"get": (MEMBER, None), "post": (AUTHOR, {})},
    "history-cancel": {"post": (AUTHOR, {})},
    "api-docs": {"get": (PERSON, None)},
    "api-schema": {"get": (API_PERSON, None)},
    "api-token": {"post": (questioned(EVERYONE), {"username": "x", "password": "x"})},
    "api-campaigns": {
        "get": (API_PERSON, None),
        "post": (API_PERSON, {"code": "NEW", "name": "x"}),
    },
    "api-campaign": {"get": (API_MEMBER, None)},
    "api-member": {"put": (API_AUTHOR, {"role": "reader"}), "delete": (API_AUTHOR, None)},
    "api-families": {
        "get": (API_PERSON, None),
        "post": (questioned(API_AUTHOR_OF_ANY), {"key": "x"}),
    },
    "api-addends": {"get": (API_PERSON, None)},
    "api-reactions": {
        "get": (API_PERSON, None),
        "post": ((NO_TOKEN, QUESTIONED, REFUSED, ALLOWED, REFUSED), PLAN),
    },
    "api-reaction": {"get": (API_MEMBER, None)},
    "api-lines": {"put": (API_AUTHOR, {**SEEN, "lines": []})},
    "api-conditions": {"put": (API_AUTHOR, {**SEEN, "temperature_c": 20})},
    "api-isolation": {"put": (API_AUTHOR, {**SEEN, "steps": []})},
    "api-conclusion": {"put": (API_AUTHOR, {**SEEN, "conclusion": "x"})},
    "api-observations": {"post": (API_AUTHOR, OBSERVATION)},
    "api-observation": {"delete": (API_AUTHOR, None)},
    "api-readings": {"post": (API_AUTHOR, READING)},
    "api-reading": {"delete": (API_AUTHOR, None)},
    "api-state": {"post": (API_AUTHOR, {"state": "running"})},
    "api-signature": {"post": (questioned(API_AUTHOR), SEEN)},
    "api-countersignature": {"post": (questioned(API_REVIEWER), None)},
    "api-compute-list": {"get": (API_PERSON, None)},
    "api-compute-distribution": {"post": (API_PERSON, DISTRIBUTION)},
    "api-compute-plan": {"post": (questioned(API_PERSON), {})},
    "api-compute-curve": {"post": (API_PERSON, {"model": "poisson"})},
    "api-compute-amounts": {"post": (API_PERSON, {"cage_mass_mg": 5})},
    "api-compute-cautions": {"post": (API_PERSON, {"substances": []})},
    "api-compute-molar_mass": {"post": (API_PERSON, {"smiles": "C"})},
    "api-compute": {"post": ((NO_TOKEN, *(HIDDEN,) * 4), {})},
}


def routes(resolver=None, prefix=""):
    """Return every pattern of the site apart from the admin's, as (name, pattern text)."""
    for pattern in (resolver or get_resolver()).url_patterns:
        path = prefix + str(pattern.pattern)
        if isinstance(pattern, URLResolver):
            yield from routes(pattern, path)
        elif isinstance(pattern, URLPattern) and not path.startswith("admin/"):
            yield pattern.name, path


def odd_paths(name, book):
    """Yield the address of a route with one of its words replaced by an odd one, each in turn."""
    words = {**book["words"], **book["words_of"].get(name, {})}
    parts = re.split(r"(<\w+:\w+>)", dict(routes())[name])
    filled = [str(words[part[1:-1].split(":")[1]]) if "<" in part else part for part in parts]
    for place in range(1, len(parts), 2):
        for odd in ODD_WORDS:
            yield "/" + "".join([*filled[:place], odd, *filled[place + 1 :]])


@pytest.fixture
def book(campaign, author, reader, reviewer, outsider):
    """One reaction with a row of everything, and an import; nobody has tried a password yet."""
    cache.clear()
    campaign.name = campaign.purpose = f"Campaign {SECRET}"
    campaign.save()
    addend = Addend.objects.create(
        name=f"Addend {SECRET}",
        smiles="*C",
        search_smiles="*C(*)(*)C",
        attachment_points=1,
        formula="CH3",
        mass_g_per_mol=15,
    )
    reaction = Reaction.objects.create(
        campaign=campaign,
        number=1,
        title=f"Reaction {SECRET}",
        conclusion=SECRET,
        family_key="bingel",
        created_by=author,
        addend=addend,
    )
    observation = Observation.objects.create(
        reaction=reaction, at_min=1, text=SECRET, recorded_by=author
    )
    reading = Reading.objects.create(
        reaction=reaction, method="hplc", note=SECRET, recorded_by=author
    )
    ReadingLevel.objects.create(reading=reading, level=1, mole_fraction=0.5)
    job = HistoryImport.objects.create(
        campaign=campaign, uploaded_by=author, file_name=f"{SECRET}.csv",
        content=f"a\n{SECRET}\n", row_count=1,
    )  # fmt: skip
    return {
        "people": dict(zip(ROLES[1:], (outsider, reader, author, reviewer), strict=True)),
        "words": {
            "code": "ACC", "number": 1, "label": "ACC-1", "username": "reader",
            "key": addend.pk, "pk": job.pk,
        },
        "words_of": {
            "remove-row": {"name": "readings", "pk": reading.pk},
            "part": {"name": "conclusion"},
            "api-observation": {"pk": observation.pk},
            "api-reading": {"pk": reading.pk},
            "api-compute": {"name": "alchemy"},
        },
    }  # fmt: skip


def address_of(name, book):
    path = dict(routes())[name]
    words = {**book["words"], **book["words_of"].get(name, {})}
    needed = {key: value for key, value in words.items() if f":{key}>" in path}
    return reverse(name if name == "health" else f"reactions:{name}", kwargs=needed)


def answer_to(role, method, address, body, book, *, is_api):
    """Return the answer that one role gets at one address."""
    client = Client(raise_request_exception=True)
    if role != "nobody":
        client.force_login(book["people"][role])
    options = {}
    if body is not None:
        options = {"data": json.dumps(body), "content_type": "application/json"}
        if not is_api:
            options = {"data": body}
    return getattr(client, method)(address, **options)


def met_in(answer):
    """Return what the person meets in an answer."""
    if answer.status_code == 302 and "/log-in/?" in answer["Location"]:
        return LOG_IN
    return ALLOWED if answer.status_code < 400 else _MET.get(answer.status_code, "fault")


def stored():
    """Return all that the app and the tokens keep."""
    models = [*apps.get_app_config("reactions").get_models(), apps.get_model("authtoken.Token")]
    return {model.__name__: list(model.objects.order_by("pk").values()) for model in models}


def content_of(answer):
    text = b"".join(answer) if answer.streaming else answer.content
    return text.decode(errors="replace") + str(answer.headers)


CASES = [
    (name, method, role, meets, body)
    for name, methods in EXPECTED.items()
    for method, (expected, body) in methods.items()
    for role, meets in zip(ROLES, expected, strict=True)
]


def test_every_route_has_its_name_and_its_expectation():
    names = [name for name, _ in routes()]
    assert sorted(names, key=str) == sorted(EXPECTED)


@pytest.mark.parametrize(("name", "method", "role", "meets", "body"), CASES)
def test_the_role_meets_what_is_declared(book, name, method, role, meets, body):
    address, is_api = address_of(name, book), name.startswith("api")
    before = stored()
    answer = answer_to(role, method, address, body, book, is_api=is_api)
    assert met_in(answer) == meets
    if meets in TURNED_AWAY:
        assert stored() == before
    if role in {"nobody", "outsider"}:
        assert SECRET not in content_of(answer)


@pytest.mark.parametrize("name", EXPECTED)
def test_no_other_method_is_answered(book, name):
    before = stored()
    for method in METHODS:
        if method not in EXPECTED[name] and name != "health":
            address = address_of(name, book)
            # The log-in page sends on whoever is logged in, whatever the method.
            for role in ROLES[:1] if name == "login" else ROLES:
                answer = answer_to(role, method, address, None, book, is_api=True)
                assert met_in(answer) in TURNED_AWAY, (method, role)
    assert stored() == before


@pytest.mark.parametrize("name", ["search", "search-csv", "search-json", "api-reactions"])
@pytest.mark.parametrize("question", [f"text={SECRET}", "campaign=ACC", "text=ACC-1", "addend={}"])
def test_no_question_brings_another_campaign_to_light(book, name, question):
    asked = question.format(book["words"]["key"])
    address = f"{address_of(name, book)}?{asked}"
    for role, is_found in (("outsider", False), ("reader", True)):
        answer = answer_to(role, "get", address, None, book, is_api=True)
        text = content_of(answer).replace(f"text={SECRET}", "").replace(f'value="{SECRET}"', "")
        assert (f"Reaction {SECRET}" in text) == is_found


@pytest.mark.parametrize("name", [name for name, path in routes() if "<" in path])
def test_an_odd_word_in_an_address_leads_nowhere(book, name):
    for path in odd_paths(name, book):
        for method in EXPECTED[name]:
            body = None if method == "get" else {}
            answer = answer_to("author", method, path, body, book, is_api=True)
            assert met_in(answer) in {HIDDEN, QUESTIONED}, (method, path)


@pytest.mark.parametrize("role", ROLES)
def test_the_admin_is_closed_to_all_but_staff(book, role):
    client = Client()
    if role != "nobody":
        client.force_login(book["people"][role])
    for address in ("/admin/", "/admin/auth/user/", "/admin/auth/user/1/change/"):
        answer = client.get(address)
        assert answer.status_code in {302, 404}
        assert answer.status_code == 404 or "log" in answer["Location"].split("?")[0]
