"""A series of reactions toward one product, and who may see it."""

from __future__ import annotations

from django.conf import settings
from django.contrib.auth.models import User
from django.core.validators import RegexValidator
from django.db import models

from reactions.models.constraints import one_of


class Role(models.TextChoices):
    """What a member of a campaign may do."""

    READER = "reader", "reader: sees everything, changes nothing"
    AUTHOR = "author", "author: plans, records and signs"
    REVIEWER = "reviewer", "reviewer: sees everything and countersigns"


class CampaignQuerySet(models.QuerySet["Campaign"]):
    """Campaigns by who may see them."""

    def visible_to(self, user: User) -> CampaignQuerySet:
        """Return the campaigns of which ``user`` is a member."""
        return self.filter(memberships__user=user)

    def writable_by(self, user: User) -> CampaignQuerySet:
        """Return the campaigns in which ``user`` may plan and record."""
        return self.filter(memberships__user=user, memberships__role=Role.AUTHOR)


class Campaign(models.Model):
    """A series of reactions toward one product; the unit of permission."""

    code = models.CharField(
        max_length=12,
        unique=True,
        validators=[
            RegexValidator(
                r"^[A-Z][A-Z0-9]{1,11}\Z",
                "Write 2 to 12 capital letters and digits, a letter first, such as “ACC”.",
            )
        ],
        help_text="Stands before the number of each reaction, such as ACC in ACC-17.",
    )
    name = models.CharField(max_length=120)
    purpose = models.TextField(blank=True)
    is_invented = models.BooleanField(default=False, help_text="Demo data: nothing in it is real.")
    created_at = models.DateTimeField(auto_now_add=True)
    members = models.ManyToManyField(settings.AUTH_USER_MODEL, through="Membership")

    objects = CampaignQuerySet.as_manager()

    class Meta:
        ordering = ["name"]

    def __str__(self) -> str:
        return self.name

    def role_of(self, user: User) -> Role | None:
        """Return the role of ``user`` in this campaign; None for one who is no member."""
        membership = self.memberships.filter(user=user).first()
        return Role(membership.role) if membership else None


class Membership(models.Model):
    """One person's role in one campaign."""

    campaign = models.ForeignKey(Campaign, models.CASCADE, related_name="memberships")
    user = models.ForeignKey(
        settings.AUTH_USER_MODEL, models.CASCADE, related_name="campaign_memberships"
    )
    role = models.CharField(max_length=10, choices=Role)

    class Meta:
        constraints = [
            models.UniqueConstraint(
                fields=["campaign", "user"], name="reactions_membership_once_per_campaign"
            ),
            one_of("role", Role),
        ]

    def __str__(self) -> str:
        return f"{self.user} in {self.campaign}: {self.role}"
