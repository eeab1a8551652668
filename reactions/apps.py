"""The app as Django sees it."""

from __future__ import annotations

from django.apps import AppConfig
from django.db.models.signals import post_migrate


class ReactionsConfig(AppConfig):
    """Fullerene addition reactions."""

    name = "reactions"
    verbose_name = "Reactions"
    default_auto_field = "django.db.models.BigAutoField"

    def ready(self) -> None:
        """Keep the database's own rules and structure search standing after every migration."""
        from reactions.models import guards
        from reactions.search import cartridge

        for part in (guards, cartridge):
            post_migrate.connect(
                part.install_after_migration, sender=self, dispatch_uid=part.__name__
            )
