"""Who changed what and when, and who stands by it."""

from __future__ import annotations

from django.conf import settings
from django.db import models

from reactions.models.campaigns import Role
from reactions.models.constraints import one_of
from reactions.models.reactions import Reaction


class Section(models.TextChoices):
    """The part of a sheet that one revision touches."""

    PLAN = "plan", "plan"
    LINES = "lines", "weighing list"
    CONDITIONS = "conditions", "conditions"
    TIME_LINE = "time_line", "time line"
    READINGS = "readings", "readings"
    ISOLATION = "isolation", "isolation"
    CONCLUSION = "conclusion", "conclusion"
    STATE = "state", "state"


class Revision(models.Model):
    """One change of one reaction; never altered afterwards.

    ``changes`` is a list of ``{"field": …, "before": …, "after": …}`` in the words of the sheet.
    """

    reaction = models.ForeignKey(Reaction, models.CASCADE, related_name="revisions")
    number = models.PositiveIntegerField()
    section = models.CharField(max_length=12, choices=Section)
    action = models.CharField(max_length=120)
    changes = models.JSONField(default=list)
    made_by = models.ForeignKey(settings.AUTH_USER_MODEL, models.PROTECT, related_name="+")
    made_at = models.DateTimeField(auto_now_add=True)

    class Meta:
        ordering = ["number"]
        constraints = [
            models.UniqueConstraint(
                fields=["reaction", "number"], name="reactions_revision_number_once"
            ),
            one_of("section", Section),
        ]

    def __str__(self) -> str:
        return f"revision {self.number} of {self.reaction_id}: {self.action}"


class Signature(models.Model):
    """A person's word that a record is true, over the digest of what it then said."""

    reaction = models.ForeignKey(Reaction, models.PROTECT, related_name="signatures")
    signed_by = models.ForeignKey(settings.AUTH_USER_MODEL, models.PROTECT, related_name="+")
    role = models.CharField(max_length=10, choices=Role)
    signed_at = models.DateTimeField(auto_now_add=True)
    digest = models.CharField(max_length=64, help_text="SHA-256 of the record as signed.")

    class Meta:
        ordering = ["signed_at", "id"]
        constraints = [
            models.UniqueConstraint(
                fields=["reaction", "signed_by"], name="reactions_signature_once_per_person"
            ),
            one_of("role", Role),
        ]

    def __str__(self) -> str:
        return f"{self.signed_by} signed {self.reaction_id}"
