"""The task queue of the site; its broker comes from the settings."""

from __future__ import annotations

import os

from celery import Celery

os.environ.setdefault("DJANGO_SETTINGS_MODULE", "labbook.settings")

application = Celery("labbook")
application.config_from_object("django.conf:settings", namespace="CELERY")
application.autodiscover_tasks()
