"""Addition families that a lab has added to the built-in table, and the two read as one."""

from __future__ import annotations

from django.conf import settings
from django.db import models

from reactions.chemistry.families import (
    Family,
    families,
    family,
    family_from_data,
)


class LabFamily(models.Model):
    """A lab's own addition family; ``definition`` has the fields of the chemistry's ``Family``."""

    key = models.SlugField(max_length=60, unique=True)
    name = models.CharField(max_length=120)
    definition = models.JSONField()
    created_by = models.ForeignKey(settings.AUTH_USER_MODEL, models.PROTECT, related_name="+")
    created_at = models.DateTimeField(auto_now_add=True)

    class Meta:
        ordering = ["name"]
        verbose_name_plural = "lab families"

    def __str__(self) -> str:
        return self.name

    @property
    def family(self) -> Family:
        """Return the family in the form that the chemistry uses."""
        return family_from_data(self.definition)


def known_families() -> dict[str, Family]:
    """Return every family by key: the built-in ones in the table's order, then the lab's own."""
    own = {row.key: row.family for row in LabFamily.objects.all()}
    return {**families(), **own}


def known_family(key: str) -> Family:
    """Return one family; raises ``UnknownFamilyError``."""
    row = None if key in families() else LabFamily.objects.filter(key=key).first()
    if row is None:
        return family(key)
    return row.family
