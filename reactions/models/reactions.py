"""The record of one run of one addition."""

from __future__ import annotations

from django.conf import settings
from django.contrib.auth.models import User
from django.db import models
from django.db.models import Q

from reactions.models.addends import Addend
from reactions.models.campaigns import Campaign
from reactions.models.constraints import HIGHEST_LEVEL, amount, fraction, in_range, one_of


class State(models.TextChoices):
    """Where a reaction stands; it moves down this list, and a signed one takes no change."""

    PLANNED = "planned", "planned"
    RUNNING = "running", "running"
    COMPLETED = "completed", "completed"
    SIGNED = "signed", "signed"


class Atmosphere(models.TextChoices):
    """What stands over the solution."""

    UNSTATED = "", "not stated"
    AIR = "air", "air"
    NITROGEN = "nitrogen", "nitrogen"
    ARGON = "argon", "argon"
    HYDROGEN = "hydrogen", "hydrogen"
    OXYGEN = "oxygen", "oxygen"
    VACUUM = "vacuum", "vacuum"


class Light(models.TextChoices):
    """What light falls on the vessel."""

    UNSTATED = "", "not stated"
    AMBIENT = "ambient", "ambient light"
    DARK = "dark", "in the dark"
    IRRADIATED = "irradiated", "irradiated"


class AdditionMode(models.TextChoices):
    """How the reagent went in."""

    UNSTATED = "", "not stated"
    AT_ONCE = "at_once", "all at once"
    PORTIONS = "portions", "in portions"
    DROPWISE = "dropwise", "dropwise"
    PUMPED = "pumped", "by pump at a steady rate"


class ReactionQuerySet(models.QuerySet["Reaction"]):
    """Reactions by who may see them."""

    def visible_to(self, user: User) -> ReactionQuerySet:
        """Return the reactions of the campaigns of which ``user`` is a member."""
        return self.filter(campaign__memberships__user=user)

    def for_listing(self) -> ReactionQuerySet:
        """Return the reactions with what a row of a list shows."""
        return self.select_related("campaign", "addend")


class Reaction(models.Model):
    """One run of one addition.

    The columns under "found" are computed by ``services`` from readings and fractions at each
    change, so that a search need not; nobody types them.
    """

    campaign = models.ForeignKey(Campaign, models.PROTECT, related_name="reactions")
    number = models.PositiveIntegerField(help_text="Runs from 1 within the campaign.")
    title = models.CharField(max_length=200)
    state = models.CharField(max_length=10, choices=State, default=State.PLANNED)
    version = models.PositiveIntegerField(default=1, help_text="Number of its latest revision.")
    is_invented = models.BooleanField(default=False)

    family_key = models.CharField(max_length=60, db_index=True)
    cage = models.CharField(max_length=40, default="C60", db_index=True)
    addend = models.ForeignKey(
        Addend, models.PROTECT, null=True, blank=True, related_name="reactions"
    )

    objective = models.JSONField(null=True, blank=True, help_text="What the plan was solved for.")
    composition_model = models.JSONField(
        null=True, blank=True, help_text="Model, sites, attenuation and reagent efficiency."
    )
    target_level = models.PositiveSmallIntegerField(null=True, blank=True)
    predicted_composition = models.JSONField(
        null=True, blank=True, help_text="Mole fraction of each level, from 0."
    )

    solvent = models.CharField(max_length=80, blank=True, db_index=True)
    solvent_volume_ml = models.FloatField(null=True, blank=True)
    temperature_c = models.FloatField(null=True, blank=True)
    duration_min = models.FloatField(null=True, blank=True)
    atmosphere = models.CharField(max_length=12, choices=Atmosphere, blank=True, default="")
    light = models.CharField(max_length=12, choices=Light, blank=True, default="")
    addition_mode = models.CharField(max_length=12, choices=AdditionMode, blank=True, default="")

    recovered_cage_mg = models.FloatField(
        null=True, blank=True, help_text="Recovered cage that is in no fraction."
    )
    conclusion = models.TextField(blank=True)

    performed_on = models.DateField(null=True, blank=True)
    created_by = models.ForeignKey(settings.AUTH_USER_MODEL, models.PROTECT, related_name="+")
    created_at = models.DateTimeField(auto_now_add=True)
    changed_at = models.DateTimeField(auto_now=True)
    completed_at = models.DateTimeField(null=True, blank=True)
    signed_at = models.DateTimeField(null=True, blank=True)

    found_composition = models.JSONField(null=True, blank=True)
    level_reached = models.PositiveSmallIntegerField(null=True, blank=True, db_index=True)
    conversion = models.FloatField(null=True, blank=True)
    yield_on_charged = models.FloatField(null=True, blank=True)
    yield_on_consumed = models.FloatField(null=True, blank=True)

    objects = ReactionQuerySet.as_manager()

    class Meta:
        ordering = ["-created_at", "-id"]
        constraints = [
            models.UniqueConstraint(
                fields=["campaign", "number"], name="reactions_reaction_number_once"
            ),
            one_of("state", State),
            amount("solvent_volume_ml"),
            in_range("temperature_c", -273.15, 3000),
            amount("duration_min"),
            amount("recovered_cage_mg"),
            in_range("target_level", 0, HIGHEST_LEVEL),
            in_range("level_reached", 0, HIGHEST_LEVEL),
            fraction("conversion"),
            models.CheckConstraint(
                condition=Q(state=State.SIGNED, signed_at__isnull=False)
                | (~Q(state=State.SIGNED) & Q(signed_at__isnull=True)),
                name="reactions_reaction_signed_when_signed",
            ),
            models.CheckConstraint(
                condition=Q(state__in=[State.COMPLETED, State.SIGNED], completed_at__isnull=False)
                | Q(state__in=[State.PLANNED, State.RUNNING], completed_at__isnull=True),
                name="reactions_reaction_completed_before_signed",
            ),
        ]
        indexes = [models.Index(fields=["campaign", "state"], name="reactions_by_campaign_state")]

    def __str__(self) -> str:
        return f"{self.label} {self.title}"

    @property
    def label(self) -> str:
        """Return what people call the reaction, such as ``ACC-17``."""
        return f"{self.campaign.code}-{self.number}"

    @property
    def is_open(self) -> bool:
        """Return whether the record may still change."""
        return self.state != State.SIGNED
