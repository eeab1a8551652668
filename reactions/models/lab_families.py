"""Addition families that a lab has added to the built-in table."""

from __future__ import annotations

from django.conf import settings
from django.db import models


class LabFamily(models.Model):
    """A lab's own addition family; ``definition`` has the fields of ``chemistry.families.Family``."""

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
