"""The people and the campaign that most tests need."""

import pytest
from django.contrib.auth import get_user_model

from reactions.models import Campaign, Membership, Role


def pytest_configure():
    """Hash passwords cheaply: a test makes many people and guards no secret."""
    from django.conf import settings

    settings.PASSWORD_HASHERS = ["django.contrib.auth.hashers.MD5PasswordHasher"]


@pytest.fixture(autouse=True)
def _guards_step_aside_for_the_flush(request):
    """Let a transactional test's clean-up empty the tables; migrating lays the triggers anew."""
    marker = request.node.get_closest_marker("django_db")
    is_transactional = "transactional_db" in request.fixturenames or (
        marker is not None and marker.kwargs.get("transaction", False)
    )
    if not is_transactional:
        yield
        return
    request.getfixturevalue("transactional_db")
    yield
    from django.db import connection

    from reactions.models.guards import remove_guards

    remove_guards(connection)


def _person(name):
    return get_user_model().objects.create_user(username=name, password=f"{name}-wears-gloves")


@pytest.fixture
def author(db):
    return _person("author")


@pytest.fixture
def second_author(db, campaign):
    person = _person("second")
    Membership.objects.create(campaign=campaign, user=person, role=Role.AUTHOR)
    return person


@pytest.fixture
def reviewer(db, campaign):
    person = _person("reviewer")
    Membership.objects.create(campaign=campaign, user=person, role=Role.REVIEWER)
    return person


@pytest.fixture
def reader(db, campaign):
    person = _person("reader")
    Membership.objects.create(campaign=campaign, user=person, role=Role.READER)
    return person


@pytest.fixture
def outsider(db):
    return _person("outsider")


@pytest.fixture
def campaign(author):
    row = Campaign.objects.create(code="ACC", name="Interlayer acceptors")
    Membership.objects.create(campaign=row, user=author, role=Role.AUTHOR)
    return row
