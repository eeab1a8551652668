"""What is asked about, and the sheet of cautions that answers."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from reactions.chemistry.families import Family

STANDING = (
    "Local codes, the safety data sheets of the bottles in hand and licensed practice come first. "
    "This sheet is a reminder and is never complete."
)
UNLISTED = "not listed here: read its safety data sheet"
UNCLASSIFIED = (
    "No hazard statement is on record here. That doesn't make it safe: read its safety data sheet."
)

Severity = Literal["danger", "warning", "notice"]
SEVERITIES: tuple[Severity, ...] = ("danger", "warning", "notice")


@dataclass(frozen=True)
class PlannedSubstance:
    """A substance that is to go in, or to be used in the work-up, by name and structure."""

    name: str
    smiles: str | None
    role: str = ""
    mass_mg: float | None = None


@dataclass(frozen=True)
class PlannedConditions:
    """The conditions that rules look at; what isn't known is left out.

    ``cage_mmol`` and ``level`` (additions wanted per cage) set the gas evolved, ``equivalents``
    (additions' worth of reagent charged per cage) where it is more. ``light`` is dark, ambient or
    irradiated; ``atmosphere`` air, oxygen, nitrogen, argon, hydrogen or vacuum. ``family`` serves a
    lab's own family, which isn't in the table under ``family_key``.
    """

    solvent: str | None = None
    temperature_c: float | None = None
    cage_mmol: float | None = None
    family_key: str | None = None
    level: float | None = None
    light: str | None = None
    atmosphere: str | None = None
    equivalents: float | None = None
    family: Family | None = None


@dataclass(frozen=True)
class SubstanceCaution:
    """What the substance table says of one planned substance.

    Statements are pairs of code and wording. ``remark`` is for a substance with none.
    """

    name: str
    signal_word: str
    pictograms: tuple[str, ...]
    hazard_statements: tuple[tuple[str, str], ...]
    precautionary_statements: tuple[tuple[str, str], ...]
    source: str
    remark: str = ""


@dataclass(frozen=True)
class RuleCaution:
    """A rule that the plan meets, in words that name what meets it, most severe first."""

    key: str
    severity: Severity
    text: str
    source: str


@dataclass(frozen=True)
class CautionSheet:
    """All cautions of a plan; ``unlisted`` names the substances that the table doesn't hold."""

    standing: str
    listed: tuple[SubstanceCaution, ...]
    unlisted: tuple[str, ...]
    rules: tuple[RuleCaution, ...]
