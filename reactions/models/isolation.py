"""Working up: the steps of an isolation and the fractions each gave."""

from __future__ import annotations

from django.db import models

from reactions.models.constraints import HIGHEST_LEVEL, amount, fraction, in_range, one_of
from reactions.models.reactions import Reaction


class IsolationMethod(models.TextChoices):
    """How a step separates."""

    EXTRACTION = "extraction", "extraction"
    FILTRATION = "filtration", "filtration"
    COLUMN = "column", "column"
    HPLC = "hplc", "preparative HPLC"
    PRECIPITATION = "precipitation", "selective precipitation"
    COMPLEXATION = "complexation", "selective complexation"
    CRYSTALLISATION = "crystallisation", "crystallisation"
    SUBLIMATION = "sublimation", "sublimation"
    UNSTATED = "unstated", "not stated"


class IsolationStep(models.Model):
    """One step of the isolation."""

    reaction = models.ForeignKey(Reaction, models.CASCADE, related_name="isolation_steps")
    position = models.PositiveSmallIntegerField()
    method = models.CharField(max_length=16, choices=IsolationMethod)
    medium = models.CharField(max_length=160, blank=True, help_text="Stationary phase, filter, …")
    solvent = models.CharField(max_length=160, blank=True)
    loading_mg = models.FloatField(null=True, blank=True)
    volume_ml = models.FloatField(null=True, blank=True)
    note = models.TextField(blank=True)

    class Meta:
        ordering = ["position"]
        constraints = [
            models.UniqueConstraint(
                fields=["reaction", "position"], name="reactions_isolationstep_position_once"
            ),
            one_of("method", IsolationMethod),
            amount("loading_mg"),
            amount("volume_ml"),
        ]

    def __str__(self) -> str:
        return f"{self.position}. {self.get_method_display()}"


class Fraction(models.Model):
    """What one step gave. Level 0 is recovered cage; no level is a fraction not identified.

    A fraction that is carried on to a later step does not count in the mass balance again.
    """

    step = models.ForeignKey(IsolationStep, models.CASCADE, related_name="fractions")
    position = models.PositiveSmallIntegerField()
    name = models.CharField(max_length=120, blank=True)
    mass_mg = models.FloatField()
    level = models.PositiveSmallIntegerField(null=True, blank=True)
    purity = models.FloatField(default=1.0)
    is_carried_on = models.BooleanField(default=False)

    class Meta:
        ordering = ["position"]
        constraints = [
            models.UniqueConstraint(
                fields=["step", "position"], name="reactions_fraction_position_once"
            ),
            amount("mass_mg"),
            in_range("level", 0, HIGHEST_LEVEL),
            fraction("purity"),
        ]

    def __str__(self) -> str:
        return f"{self.name or 'fraction'}: {self.mass_mg:g} mg"
