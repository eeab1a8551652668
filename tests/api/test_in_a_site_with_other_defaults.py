"""Nothing of the API rests on the settings of the site that mounts it.

A process of its own, with a site whose defaults would let anybody in, speak another language,
demand versions, and answer errors in its own way; without tokens and without drf_spectacular.
"""

import json
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]

SITE = """
SECRET_KEY = "of-a-test"
ALLOWED_HOSTS = ["testserver"]
INSTALLED_APPS = [
    "django.contrib.auth", "django.contrib.contenttypes", "django.contrib.sessions",
    "django.contrib.messages", "django.contrib.staticfiles", "rest_framework", "reactions",
]
MIDDLEWARE = [
    "django.contrib.sessions.middleware.SessionMiddleware",
    "django.middleware.csrf.CsrfViewMiddleware",
    "django.contrib.auth.middleware.AuthenticationMiddleware",
    "django.contrib.messages.middleware.MessageMiddleware",
]
TEMPLATES = [{
    "BACKEND": "django.template.backends.django.DjangoTemplates", "APP_DIRS": True,
    "OPTIONS": {"context_processors": [
        "django.template.context_processors.request",
        "django.contrib.auth.context_processors.auth",
        "django.contrib.messages.context_processors.messages",
    ]},
}]
DATABASES = {"default": {"ENGINE": "django.db.backends.sqlite3", "NAME": "site.sqlite3"}}
ROOT_URLCONF = "site_urls"
STATIC_URL = "static/"
LOGIN_URL = "reactions:login"
REST_FRAMEWORK = {
    "DEFAULT_PERMISSION_CLASSES": ["rest_framework.permissions.AllowAny"],
    "DEFAULT_AUTHENTICATION_CLASSES": ["rest_framework.authentication.BasicAuthentication"],
    "DEFAULT_RENDERER_CLASSES": ["rest_framework.renderers.StaticHTMLRenderer"],
    "DEFAULT_PARSER_CLASSES": ["rest_framework.parsers.FormParser"],
    "DEFAULT_VERSIONING_CLASS": "rest_framework.versioning.NamespaceVersioning",
    "ALLOWED_VERSIONS": ["v9"],
    "DEFAULT_PAGINATION_CLASS": "rest_framework.pagination.CursorPagination",
    "DEFAULT_THROTTLE_CLASSES": ["rest_framework.throttling.UserRateThrottle"],
    "DEFAULT_THROTTLE_RATES": {"user": "0/day"},
    "EXCEPTION_HANDLER": "site_urls.swallow",
    "PAGE_SIZE": 1,
}
"""
ADDRESSES = """
from django.urls import include, path
from rest_framework.response import Response

def swallow(exc, context):
    return Response("all is well", status=200)

urlpatterns = [path("deep/lab/", include("reactions.urls"))]
"""
VISIT = """
import json
import django
django.setup()
from django.contrib.auth.models import User
from django.core.management import call_command
from django.test import Client

call_command("migrate", verbosity=0)
person = User.objects.create_user("person")
nobody, visitor = Client(), Client()
visitor.force_login(person)
api = "/deep/lab/api/"
plan = {"campaign": "ACC", "title": "x", "family_key": "bingel"}

def send(client, path, data, method="post"):
    return getattr(client, method)(api + path, json.dumps(data), content_type="application/json")

answers = {
    "nobody": [nobody.get(api + path).status_code for path in
               ("reactions/", "campaigns/", "compute/", "schema/", "reactions/ACC-1/")],
    "nobody posts": send(nobody, "compute/distribution/", {}).status_code,
    "opened": send(visitor, "campaigns/", {"code": "ACC", "name": "x"}).status_code,
    "planned": [send(visitor, "reactions/", plan).status_code for _ in range(3)],
    "found": visitor.get(api + "reactions/").json(),
    "missing": visitor.get(api + "reactions/ACC-9/").status_code,
    "bad": send(visitor, "reactions/", {}).json(),
    "unseen": send(visitor, "reactions/ACC-1/conditions/", {}, "put").status_code,
    "token": send(nobody, "token/", {}).status_code,
    "schema": sorted(visitor.get(api + "schema/?format=json").json()["paths"]),
    "page": visitor.get(api).status_code,
    "nobody's page": nobody.get(api).headers["Location"],
}
print(json.dumps(answers))
"""


@pytest.fixture(scope="module")
def answers(tmp_path_factory):
    folder = tmp_path_factory.mktemp("site")
    (folder / "site_settings.py").write_text(SITE, encoding="utf-8")
    (folder / "site_urls.py").write_text(ADDRESSES, encoding="utf-8")
    done = subprocess.run(
        [sys.executable, "-c", VISIT],
        cwd=folder,
        env={
            "DJANGO_SETTINGS_MODULE": "site_settings",
            "PYTHONPATH": f"{folder}:{ROOT}",
            "PATH": "/usr/bin:/bin",
        },
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 0, done.stderr
    return json.loads(done.stdout.splitlines()[-1])


def test_nobody_comes_in(answers):
    assert set(answers["nobody"]) | {answers["nobody posts"]} <= {401, 403}
    assert "log-in" in answers["nobody's page"]


def test_a_person_plans_and_finds(answers):
    assert answers["opened"] == 201
    assert answers["planned"] == [201, 201, 201]
    assert [answers["found"]["count"], len(answers["found"]["results"])] == [3, 3]


def test_errors_keep_their_shape(answers):
    assert answers["missing"] == 404
    assert "title" in answers["bad"]["errors"]
    assert answers["unseen"] == 428


def test_without_tokens_there_is_no_address_for_them(answers):
    assert answers["token"] == 404


def test_the_description_is_whole(answers):
    assert "/deep/lab/api/reactions/{label}/lines/" in answers["schema"]
    assert "/deep/lab/api/compute/plan/" in answers["schema"]
    assert answers["page"] == 200
