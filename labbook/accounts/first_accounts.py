"""The accounts a new book starts with.

The demo's people come from ``load_demo`` without a usable password; a real lab's book starts with
one account that may administer the site and so make the others.
"""

from __future__ import annotations

from django.contrib.auth import get_user_model
from django.contrib.auth.password_validation import validate_password
from django.db import transaction

from labbook.accounts.log_ins import generated_password

DEMO_PEOPLE = ("chemist", "reviewer", "guest")


def has_accounts() -> bool:
    """Tell whether anyone can be in this book yet."""
    return get_user_model().objects.exists()


@transaction.atomic
def give_demo_passwords() -> dict[str, str]:
    """Give each of the demo's people who has none a generated password; return them by name."""
    passwords: dict[str, str] = {}
    for person in get_user_model().objects.filter(username__in=DEMO_PEOPLE):
        if person.has_usable_password():
            continue
        passwords[person.get_username()] = password = generated_password()
        person.set_password(password)
        person.save(update_fields=["password"])
    return passwords


@transaction.atomic
def create_first_account(name: str, password: str) -> None:
    """Create the account ``name`` that administers the site.

    Raises ``ValidationError`` when the name or the password is not acceptable, and stores nothing
    then.
    """
    model = get_user_model()
    account = model(username=name, is_staff=True, is_superuser=True)
    validate_password(password, account)
    account.set_password(password)
    account.full_clean()
    account.save()
