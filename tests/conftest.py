"""The people and the campaign that most tests need, and the database and folders all run in."""

import os

import hypothesis
import pytest
from django.contrib.auth import get_user_model

from labbook.celery import application as celery_application
from labbook.embedded_worker import EmbeddedWorker
from reactions.models import Campaign, Membership, Role

pytest_plugins = ["tests.running_server"]


def pytest_addoption(parser):
    parser.addoption("--slow", action="store_true", help="also run the long versions")


def pytest_collection_modifyitems(config, items):
    """Leave the long versions of properties to ``--slow``."""
    if config.getoption("--slow"):
        return
    slow = [item for item in items if item.get_closest_marker("slow")]
    config.hook.pytest_deselected(items=slow)
    items[:] = [item for item in items if item not in slow]


# How long an example takes says more about what else the machine is doing.
hypothesis.settings.register_profile("untimed", deadline=None)
hypothesis.settings.load_profile("untimed")


def pytest_configure():
    """Leave out what costs time in every test and guards or serves nobody there."""
    from django.conf import settings

    settings.PASSWORD_HASHERS = ["django.contrib.auth.hashers.MD5PasswordHasher"]
    # Look up static files when asked for, not all of them for every test client.
    settings.WHITENOISE_AUTOREFRESH = True
    # Test processes share one Redis; each has a database of its own, so each needs its own queue.
    process = os.environ.get("PYTEST_XDIST_WORKER", "only")
    celery_application.conf.task_default_queue = f"tests-{process}"


@pytest.fixture(scope="session")
def django_db_modify_db_settings(django_db_modify_db_settings_parallel_suffix, tmp_path_factory):
    """Put an SQLite test database in a file, as the site has it, so that threads can share it."""
    from django.conf import settings

    database = settings.DATABASES["default"]
    if database["ENGINE"].endswith("sqlite3"):
        database["TEST"]["NAME"] = tmp_path_factory.mktemp("database") / "test.sqlite3"


@pytest.fixture(scope="session", autouse=True)
def _files_in_a_temporary_folder(tmp_path_factory):
    from django.conf import settings

    settings.MEDIA_ROOT = tmp_path_factory.mktemp("files")


@pytest.fixture
def task_worker(transactional_db):
    """A real worker on threads of this process, taking tasks from the real broker."""
    worker = EmbeddedWorker(celery_application)
    worker.start()
    assert worker.wait_until_ready(20)
    yield worker
    assert worker.stop()


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
