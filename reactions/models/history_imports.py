"""A lab's history coming in from its spreadsheet."""

from __future__ import annotations

from django.conf import settings
from django.db import models

from reactions.models.campaigns import Campaign
from reactions.models.constraints import one_of


class ImportState(models.TextChoices):
    """How far an import has come."""

    UPLOADED = "uploaded", "waiting for its columns to be confirmed"
    QUEUED = "queued", "waiting for a worker"
    RUNNING = "running", "running"
    DONE = "done", "done"
    REFUSED = "refused", "refused: rows need correction; nothing was stored"
    CANCELLED = "cancelled", "cancelled; nothing was stored"
    FAILED = "failed", "failed; nothing was stored"


class HistoryImport(models.Model):
    """One file, its column mapping and how far it has come.

    ``column_mapping`` maps a field of the import to a column of the file. ``problems`` is a list
    of ``{"row": number in the file, "reason": text}``.
    """

    campaign = models.ForeignKey(Campaign, models.CASCADE, related_name="imports")
    uploaded_by = models.ForeignKey(settings.AUTH_USER_MODEL, models.PROTECT, related_name="+")
    file_name = models.CharField(max_length=200)
    content = models.TextField()
    column_mapping = models.JSONField(default=dict)
    state = models.CharField(max_length=10, choices=ImportState, default=ImportState.UPLOADED)
    is_cancel_requested = models.BooleanField(default=False)
    row_count = models.PositiveIntegerField(default=0)
    rows_done = models.PositiveIntegerField(default=0)
    created_count = models.PositiveIntegerField(default=0)
    problems = models.JSONField(default=list)
    message = models.CharField(max_length=300, blank=True)
    created_at = models.DateTimeField(auto_now_add=True)
    finished_at = models.DateTimeField(null=True, blank=True)

    class Meta:
        ordering = ["-created_at", "-id"]
        constraints = [one_of("state", ImportState)]

    def __str__(self) -> str:
        return f"{self.file_name} into {self.campaign}"
