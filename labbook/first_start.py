"""What a server does before it serves: a database at the newest version, and someone to log in."""

from __future__ import annotations

from dataclasses import dataclass, field

from django.conf import settings
from django.core.management import call_command
from django.db import connection, transaction
from django.db.migrations.executor import MigrationExecutor

from labbook.accounts.asking import make_first_account
from labbook.accounts.first_accounts import give_demo_passwords, has_accounts
from labbook.accounts.log_ins import keep_log_ins


@dataclass(frozen=True)
class Start:
    """What was done: ``passwords`` were generated just now and are shown this once."""

    is_first: bool = False
    passwords: dict[str, str] = field(default_factory=dict)


def bring_database_up_to_date() -> None:
    """Run the migrations that the database has not seen; create it when there is none."""
    executor = MigrationExecutor(connection)
    if executor.migration_plan(executor.loader.graph.leaf_nodes()):
        call_command("migrate", interactive=False, verbosity=0)


def prepare_book(*, is_empty: bool, account: str | None) -> Start:
    """Give a book without accounts its first content: the invented demo or one account."""
    settings.STATIC_ROOT.mkdir(exist_ok=True)
    bring_database_up_to_date()
    if has_accounts():
        return Start()
    if is_empty:
        made = make_first_account(settings.DATA_DIR, account)
        return Start(True, {made.name: made.generated} if made.generated else {})
    with transaction.atomic():
        call_command("load_demo", verbosity=0)
        passwords = give_demo_passwords()
    keep_log_ins(settings.DATA_DIR, passwords)
    return Start(True, passwords)
