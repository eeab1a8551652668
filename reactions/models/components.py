"""What goes into the flask: one line for each substance, planned beside actual."""

from __future__ import annotations

from django.db import models

from reactions.models.constraints import amount, in_range
from reactions.models.reactions import Reaction


class ComponentRole(models.TextChoices):
    """What a substance does in the flask."""

    CAGE = "cage", "cage"
    REAGENT = "reagent", "reagent"
    BASE = "base", "base"
    ACID = "acid", "acid"
    ALDEHYDE = "aldehyde", "aldehyde"
    CATALYST = "catalyst", "catalyst"
    OXIDANT = "oxidant", "oxidant"
    REDUCTANT = "reductant", "reductant"
    ADDITIVE = "additive", "additive"
    QUENCH = "quench", "quench"


class Component(models.Model):
    """One line of the weighing list.

    Amounts of substance (mmol) are of the pure substance; masses are what goes on the balance.
    ``equivalents_of`` names the line that the equivalents refer to; blank is the cage.
    ``actual_equivalents`` is computed from the actual amounts, never typed.
    """

    reaction = models.ForeignKey(Reaction, models.CASCADE, related_name="components")
    position = models.PositiveSmallIntegerField()
    role = models.CharField(max_length=12, choices=ComponentRole)
    name = models.CharField(max_length=160)
    smiles = models.CharField(max_length=2000, blank=True)
    molar_mass_g_per_mol = models.FloatField(null=True, blank=True)
    purity = models.FloatField(default=1.0)
    density_g_per_ml = models.FloatField(null=True, blank=True)
    molarity_mol_per_l = models.FloatField(null=True, blank=True)
    batch = models.CharField(max_length=80, blank=True)

    equivalents = models.FloatField(null=True, blank=True)
    equivalents_of = models.CharField(max_length=160, blank=True)
    planned_mmol = models.FloatField(null=True, blank=True)
    planned_mass_mg = models.FloatField(null=True, blank=True)
    planned_volume_ml = models.FloatField(null=True, blank=True)

    actual_mass_mg = models.FloatField(null=True, blank=True)
    actual_volume_ml = models.FloatField(null=True, blank=True)
    actual_mmol = models.FloatField(null=True, blank=True)
    actual_equivalents = models.FloatField(null=True, blank=True)

    class Meta:
        ordering = ["position"]
        constraints = [
            models.UniqueConstraint(
                fields=["reaction", "position"], name="reactions_component_position_once"
            ),
            models.UniqueConstraint(
                fields=["reaction"],
                condition=models.Q(role=ComponentRole.CAGE),
                name="reactions_component_one_cage",
            ),
            in_range("purity", 1e-6, 1),
            *[
                amount(field)
                for field in (
                    "molar_mass_g_per_mol",
                    "density_g_per_ml",
                    "molarity_mol_per_l",
                    "equivalents",
                    "planned_mmol",
                    "planned_mass_mg",
                    "planned_volume_ml",
                    "actual_mass_mg",
                    "actual_volume_ml",
                    "actual_mmol",
                    "actual_equivalents",
                )
            ],
        ]

    def __str__(self) -> str:
        return f"{self.name} ({self.role})"
