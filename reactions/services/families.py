"""A lab's own addition families."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from django.contrib.auth.models import User
from django.db import transaction

from reactions.chemistry.families import FamilyError, families, family_from_data
from reactions.errors import FieldErrors
from reactions.models import LabFamily, Membership, Role
from reactions.services.errors import NotAllowed


@transaction.atomic
def define_family(user: User, definition: Mapping[str, Any]) -> LabFamily:
    """Store a family of the lab's own; an author of any campaign may.

    Raises ``FieldErrors`` for what the definition lacks or a key that is taken.
    """
    if not Membership.objects.filter(user=user, role=Role.AUTHOR).exists():
        raise NotAllowed("Only an author of a campaign may add a family.")
    try:
        family = family_from_data(definition)
    except FamilyError as error:
        raise FieldErrors({field: [text] for field, text in error.errors.items()}) from error
    if family.key in families() or LabFamily.objects.filter(key=family.key).exists():
        raise FieldErrors.at(
            "key", f"There is a family “{family.key}” already; choose another key."
        )
    return LabFamily.objects.create(
        key=family.key, name=family.name, definition=dict(definition), created_by=user
    )
