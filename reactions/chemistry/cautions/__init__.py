"""Hazard statements and rules over the substances and conditions of a plan.

A caution is shown, never hidden, and never stands in for local codes, safety data sheets or
licensed practice. A substance that isn't in the table is named as unlisted, which says nothing of
its safety. The rules are the table ``caution_rules.json``; to add one, add a row, and a predicate
only where no present one will do.
"""

from __future__ import annotations

from reactions.chemistry.cautions.assess import cautions_for
from reactions.chemistry.cautions.sheet import (
    STANDING,
    UNLISTED,
    CautionSheet,
    PlannedConditions,
    PlannedSubstance,
    RuleCaution,
    SubstanceCaution,
)

__all__ = [
    "STANDING",
    "UNLISTED",
    "CautionSheet",
    "PlannedConditions",
    "PlannedSubstance",
    "RuleCaution",
    "SubstanceCaution",
    "cautions_for",
]
