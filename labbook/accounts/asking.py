"""Where the name and the password of the first account come from.

In order: the ``--account`` option and ``LABBOOK_FIRST_ACCOUNT`` / ``LABBOOK_FIRST_PASSWORD``; a
question to the person at the terminal, when there is one; else the name ``owner`` and a generated
password. A password is never taken from the command line, where other users of the machine see it.
"""

from __future__ import annotations

import getpass
import os
import sys
from dataclasses import dataclass
from pathlib import Path

from django.core.exceptions import ValidationError

from labbook.accounts.first_accounts import create_first_account
from labbook.accounts.log_ins import generated_password, keep_log_ins

_DEFAULT_NAME = "owner"


@dataclass(frozen=True)
class FirstAccount:
    """The account that was made; ``generated`` holds its password when nobody chose one."""

    name: str
    generated: str | None


def make_first_account(folder: Path, name: str | None = None) -> FirstAccount:
    """Create the first account and keep a generated password in ``folder``.

    Raises ``ValidationError`` when a name or password from the options or the environment is not
    acceptable; a person at the terminal is asked again instead.
    """
    name = name or os.environ.get("LABBOOK_FIRST_ACCOUNT")
    password = os.environ.get("LABBOOK_FIRST_PASSWORD")
    if not password and sys.stdin.isatty():
        return _ask(name)
    account = FirstAccount(name or _DEFAULT_NAME, None if password else generated_password())
    create_first_account(account.name, password or account.generated or "")
    if account.generated:
        keep_log_ins(folder, {account.name: account.generated})
    return account


def _ask(name: str | None) -> FirstAccount:
    """Ask at the terminal until name and password are acceptable."""
    print("This book is empty. Its first account administers the site.")
    while True:
        chosen = name or input(f"User name [{_DEFAULT_NAME}]: ").strip() or _DEFAULT_NAME
        password = getpass.getpass("Password: ")
        if password != getpass.getpass("Password again: "):
            print("The two passwords differ; please type them again.")
            continue
        try:
            create_first_account(chosen, password)
        except ValidationError as error:
            print("\n".join(error.messages))
            name = None
            continue
        return FirstAccount(chosen, None)
