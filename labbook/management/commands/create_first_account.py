"""``manage.py create_first_account``: the account that administers a new book."""

from __future__ import annotations

from typing import Any

from django.conf import settings
from django.core.exceptions import ValidationError
from django.core.management.base import BaseCommand, CommandError, CommandParser

from labbook.accounts.asking import make_first_account
from labbook.accounts.first_accounts import has_accounts
from labbook.accounts.log_ins import FILE_NAME


class Command(BaseCommand):
    """Create the first account of an empty book."""

    help = (
        "Create the first account of an empty book. Name and password come from --account, "
        "LABBOOK_FIRST_ACCOUNT and LABBOOK_FIRST_PASSWORD, else from questions at the terminal, "
        "else they are generated."
    )

    def add_arguments(self, parser: CommandParser) -> None:
        """Take the user name."""
        parser.add_argument("--account", metavar="NAME", help="user name of the account")

    def handle(self, *args: Any, **options: Any) -> None:
        """Create it, unless the book has accounts already."""
        if has_accounts():
            raise CommandError("This book has accounts already; its administrator adds others.")
        try:
            account = make_first_account(settings.DATA_DIR, options["account"])
        except ValidationError as error:
            raise CommandError(" ".join(error.messages)) from error
        if account.generated:
            self.stdout.write(f"{account.name}  {account.generated}")
            self.stdout.write(f"Kept in {settings.DATA_DIR / FILE_NAME}, readable by you only.")
        else:
            self.stdout.write(f"Created the account {account.name}.")
