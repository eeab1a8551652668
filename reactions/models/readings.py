"""Analytical results: a composition over addition levels."""

from __future__ import annotations

from django.conf import settings
from django.db import models

from reactions.models.constraints import HIGHEST_LEVEL, amount, fraction, in_range, one_of
from reactions.models.reactions import Reaction


class ReadingMethod(models.TextChoices):
    """How the composition was measured."""

    HPLC = "hplc", "HPLC"
    NMR = "nmr", "NMR"
    MASS_SPECTRUM = "mass_spectrum", "mass spectrum"
    ISOLATION = "isolation", "isolated masses"
    WEIGHT_LOSS = "weight_loss", "weight loss on heating"
    ELEMENTAL = "elemental", "elemental analysis"
    TLC = "tlc", "TLC, by eye"
    OTHER = "other", "other"


class Reading(models.Model):
    """One composition, from one sample by one method.

    With ``is_higher_lumped`` the highest level stored stands for itself and all above it. The
    fractions may sum to less than 1 (something unassigned), never to more: a trigger sees to it.
    """

    reaction = models.ForeignKey(Reaction, models.CASCADE, related_name="readings")
    sampled_at_min = models.FloatField(null=True, blank=True)
    method = models.CharField(max_length=14, choices=ReadingMethod)
    is_higher_lumped = models.BooleanField(default=False)
    note = models.TextField(blank=True)
    recorded_by = models.ForeignKey(settings.AUTH_USER_MODEL, models.PROTECT, related_name="+")
    recorded_at = models.DateTimeField(auto_now_add=True)

    class Meta:
        ordering = ["sampled_at_min", "id"]
        constraints = [amount("sampled_at_min"), one_of("method", ReadingMethod)]

    def __str__(self) -> str:
        return f"{self.get_method_display()} of {self.reaction}"


class ReadingLevel(models.Model):
    """The mole fraction of cages at one addition level, in one reading."""

    reading = models.ForeignKey(Reading, models.CASCADE, related_name="levels")
    level = models.PositiveSmallIntegerField()
    mole_fraction = models.FloatField()

    class Meta:
        ordering = ["level"]
        constraints = [
            models.UniqueConstraint(
                fields=["reading", "level"], name="reactions_readinglevel_level_once"
            ),
            fraction("mole_fraction"),
            in_range("level", 0, HIGHEST_LEVEL),
        ]

    def __str__(self) -> str:
        return f"level {self.level}: {self.mole_fraction:.3f}"
