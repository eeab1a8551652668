"""Load the invented demo into an empty book."""

from __future__ import annotations

from typing import Any

from django.core.management.base import BaseCommand, CommandError

from reactions.services.demo import load_demo


class Command(BaseCommand):
    """Load the invented demo: two campaigns, about 60 reactions, three people without passwords."""

    help = __doc__

    def handle(self, *args: Any, **options: Any) -> None:
        """Load it, or say why not."""
        try:
            people = load_demo()
        except ValueError as error:
            raise CommandError(str(error)) from error
        names = ", ".join(person.get_username() for person in people)
        self.stdout.write(f"The invented demo is loaded; its people are {names}.")
