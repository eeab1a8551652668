"""The time line of a run."""

from __future__ import annotations

from django.conf import settings
from django.db import models

from reactions.models.constraints import amount, one_of
from reactions.models.reactions import Reaction


class ObservationKind(models.TextChoices):
    """What happened."""

    OBSERVATION = "observation", "observation"
    ADDITION = "addition", "addition or top-up"
    SAMPLE = "sample", "sample taken"
    TEMPERATURE = "temperature", "temperature change"
    STOP = "stop", "quench or stop"


class Observation(models.Model):
    """Something seen or done, at a time counted from the start of the reaction."""

    reaction = models.ForeignKey(Reaction, models.CASCADE, related_name="observations")
    at_min = models.FloatField(help_text="Minutes after the start.")
    kind = models.CharField(
        max_length=12, choices=ObservationKind, default=ObservationKind.OBSERVATION
    )
    text = models.TextField()
    recorded_by = models.ForeignKey(settings.AUTH_USER_MODEL, models.PROTECT, related_name="+")
    recorded_at = models.DateTimeField(auto_now_add=True)

    class Meta:
        ordering = ["at_min", "id"]
        constraints = [amount("at_min"), one_of("kind", ObservationKind)]

    def __str__(self) -> str:
        return f"{self.at_min:g} min: {self.text[:60]}"
