"""Ranges the database itself enforces, so that no door can store an impossible number."""

from __future__ import annotations

from django.db import models
from django.db.models import Q

# Larger than any flask; also what keeps NaN and infinity out, which compare above every number.
LARGEST_AMOUNT = 1e9
HIGHEST_LEVEL = 70


def in_range(field: str, lowest: float, highest: float) -> models.CheckConstraint:
    """Return the constraint lowest ≤ ``field`` ≤ highest; NULL passes."""
    return models.CheckConstraint(
        condition=Q(**{f"{field}__gte": lowest, f"{field}__lte": highest})
        | Q(**{f"{field}__isnull": True}),
        name=f"%(app_label)s_%(class)s_{field}_range",
        violation_error_message=f"{field} must lie between {lowest:g} and {highest:g}.",
    )


def amount(field: str) -> models.CheckConstraint:
    """Return the constraint that a mass, volume or amount of substance is 0 or more and finite."""
    return in_range(field, 0, LARGEST_AMOUNT)


def fraction(field: str) -> models.CheckConstraint:
    """Return the constraint that a fraction lies between 0 and 1."""
    return in_range(field, 0, 1)


def one_of(field: str, choices: type[models.TextChoices]) -> models.CheckConstraint:
    """Return the constraint that ``field`` holds one of the choices."""
    return models.CheckConstraint(
        condition=Q(**{f"{field}__in": [str(value) for value in choices.values]}),
        name=f"%(app_label)s_%(class)s_{field}_known",
    )
