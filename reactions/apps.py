"""The app as Django sees it."""

from __future__ import annotations

from django.apps import AppConfig


class ReactionsConfig(AppConfig):
    """Fullerene addition reactions."""

    name = "reactions"
    verbose_name = "Reactions"
    default_auto_field = "django.db.models.BigAutoField"
