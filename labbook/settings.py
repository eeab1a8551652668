"""Settings of the site, all from the environment; without any, the embedded mode.

Embedded: SQLite in write-ahead mode, tasks on threads of the server process, files on disk, all
below ``LABBOOK_DATA``. Server: ``LABBOOK_DATABASE_URL`` (PostgreSQL) and ``LABBOOK_BROKER_URL``
(Redis). README lists every variable.
"""

from __future__ import annotations

import os
from pathlib import Path

from csp.constants import NONE, SELF
from django.core.exceptions import ImproperlyConfigured

from labbook.environment import database_from_url, list_from, secret_key_in, switch

BASE_DIR = Path(__file__).resolve().parent.parent
DATA_DIR = Path(os.environ.get("LABBOOK_DATA", BASE_DIR / ".data"))

DEBUG = switch("LABBOOK_DEBUG", default=False)
SECRET_KEY = os.environ.get("LABBOOK_SECRET_KEY") or secret_key_in(DATA_DIR)
ALLOWED_HOSTS = list_from("LABBOOK_HOSTS", default="localhost,127.0.0.1,[::1]")
CSRF_TRUSTED_ORIGINS = list_from("LABBOOK_ORIGINS", default="")

INSTALLED_APPS = [
    "labbook",
    "reactions",
    "rest_framework",
    "rest_framework.authtoken",
    "drf_spectacular",
    "django_htmx",
    "csp",
    "django.contrib.admin",
    "django.contrib.auth",
    "django.contrib.contenttypes",
    "django.contrib.sessions",
    "django.contrib.messages",
    "whitenoise.runserver_nostatic",
    "django.contrib.staticfiles",
]

MIDDLEWARE = [
    "django.middleware.security.SecurityMiddleware",
    "whitenoise.middleware.WhiteNoiseMiddleware",
    "csp.middleware.CSPMiddleware",
    "django.contrib.sessions.middleware.SessionMiddleware",
    "django.middleware.common.CommonMiddleware",
    "django.middleware.csrf.CsrfViewMiddleware",
    "django.contrib.auth.middleware.AuthenticationMiddleware",
    "django.contrib.auth.middleware.LoginRequiredMiddleware",
    "django.contrib.messages.middleware.MessageMiddleware",
    "django.middleware.clickjacking.XFrameOptionsMiddleware",
    "django_htmx.middleware.HtmxMiddleware",
]

ROOT_URLCONF = "labbook.urls"
WSGI_APPLICATION = "labbook.wsgi.application"
TEMPLATES = [
    {
        "BACKEND": "django.template.backends.django.DjangoTemplates",
        "APP_DIRS": True,
        "OPTIONS": {
            "context_processors": [
                "django.template.context_processors.request",
                "django.contrib.auth.context_processors.auth",
                "django.contrib.messages.context_processors.messages",
            ],
        },
    },
]

DATABASES = {"default": database_from_url(os.environ.get("LABBOOK_DATABASE_URL"), DATA_DIR)}
DEFAULT_AUTO_FIELD = "django.db.models.BigAutoField"

AUTH_PASSWORD_VALIDATORS = [
    {"NAME": f"django.contrib.auth.password_validation.{name}"}
    for name in (
        "UserAttributeSimilarityValidator",
        "MinimumLengthValidator",
        "CommonPasswordValidator",
        "NumericPasswordValidator",
    )
]
LOGIN_URL = "reactions:login"
LOGIN_REDIRECT_URL = "reactions:search"
LOGOUT_REDIRECT_URL = "reactions:login"

LANGUAGE_CODE = "en-gb"
TIME_ZONE = os.environ.get("LABBOOK_TIME_ZONE", "UTC")
USE_I18N = True
USE_TZ = True

STATIC_URL = "static/"
STATIC_ROOT = DATA_DIR / "static"
STORAGES = {
    "default": {"BACKEND": "django.core.files.storage.FileSystemStorage"},
    "staticfiles": {"BACKEND": "django.contrib.staticfiles.storage.StaticFilesStorage"},
}
# Serve straight from the apps, so that a start needs no collection step.
WHITENOISE_USE_FINDERS = True
WHITENOISE_ALLOW_ALL_ORIGINS = False
MEDIA_ROOT = DATA_DIR / "files"

# Without it, what goes wrong on the server outside debugging is written nowhere.
LOGGING = {
    "version": 1,
    "disable_existing_loggers": False,
    "handlers": {"errors": {"class": "logging.StreamHandler", "level": "ERROR"}},
    "loggers": {"django.request": {"handlers": ["errors"]}},
}

# An import of ten thousand rows is a few megabytes of text.
DATA_UPLOAD_MAX_MEMORY_SIZE = 10 * 1024 * 1024
FILE_UPLOAD_MAX_MEMORY_SIZE = 1024 * 1024

HTTPS = switch("LABBOOK_HTTPS", default=False)
SESSION_COOKIE_SECURE = CSRF_COOKIE_SECURE = HTTPS
SESSION_COOKIE_HTTPONLY = True
SECURE_PROXY_SSL_HEADER = ("HTTP_X_FORWARDED_PROTO", "https") if HTTPS else None
SECURE_HSTS_SECONDS = 31_536_000 if HTTPS else 0
SECURE_REFERRER_POLICY = "same-origin"
X_FRAME_OPTIONS = "DENY"
CONTENT_SECURITY_POLICY = {
    "DIRECTIVES": {
        "default-src": [NONE],
        "script-src": [SELF],
        "style-src": [SELF],
        "img-src": [SELF, "data:"],
        "font-src": [SELF],
        "connect-src": [SELF],
        "form-action": [SELF],
        "frame-ancestors": [NONE],
        "base-uri": [NONE],
    },
}

REST_FRAMEWORK = {
    "DEFAULT_AUTHENTICATION_CLASSES": [
        "rest_framework.authentication.SessionAuthentication",
        "rest_framework.authentication.TokenAuthentication",
    ],
    "DEFAULT_PERMISSION_CLASSES": ["rest_framework.permissions.IsAuthenticated"],
    "DEFAULT_SCHEMA_CLASS": "drf_spectacular.openapi.AutoSchema",
}
SPECTACULAR_SETTINGS = {
    "TITLE": "Labbook",
    "VERSION": "1",
    "OAS_VERSION": "3.1.0",
    "SERVE_INCLUDE_SCHEMA": False,
}

CELERY_BROKER_URL = os.environ.get("LABBOOK_BROKER_URL", "memory://")
# Sites that share one Redis each need a queue of their own.
CELERY_TASK_DEFAULT_QUEUE = os.environ.get("LABBOOK_TASK_QUEUE", "labbook")
CELERY_TASK_IGNORE_RESULT = True
CELERY_TASK_ACKS_LATE = True
CELERY_BROKER_CONNECTION_RETRY_ON_STARTUP = True
if CELERY_BROKER_URL.startswith("memory:"):
    # The queue is looked at this often, in seconds; the default of one second is felt.
    CELERY_BROKER_TRANSPORT_OPTIONS = {"polling_interval": 0.1}

if HTTPS and DEBUG:
    raise ImproperlyConfigured("LABBOOK_DEBUG and LABBOOK_HTTPS exclude each other.")
