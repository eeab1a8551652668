"""The groups that additions attach, each stored once."""

from __future__ import annotations

from django.db import models

from reactions.models.constraints import amount, in_range


class Addend(models.Model):
    """An addend, taken from its drawing; equal structures share one row.

    ``smiles`` is the canonical form with ``*`` for attachment points and is the identity.
    ``search_smiles`` carries the attached cage carbons too, so that a ring closed through the
    cage is a ring to a query. ``fingerprint`` belongs to ``rdkit_version``.
    """

    smiles = models.CharField(max_length=2000, unique=True)
    search_smiles = models.CharField(max_length=2500)
    name = models.CharField(max_length=160, blank=True)
    attachment_points = models.PositiveSmallIntegerField()
    formula = models.CharField(max_length=120)
    mass_g_per_mol = models.FloatField(help_text="Average mass that one addition adds.")
    fingerprint = models.BinaryField(blank=True, default=b"")
    rdkit_version = models.CharField(max_length=20, blank=True)
    created_at = models.DateTimeField(auto_now_add=True)

    class Meta:
        ordering = ["name", "smiles"]
        constraints = [amount("mass_g_per_mol"), in_range("attachment_points", 1, 6)]

    def __str__(self) -> str:
        return self.name or self.smiles
