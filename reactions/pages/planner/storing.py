"""From a plan worked out to a planned reaction."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from pydantic import ValidationError

from reactions.chemistry.addends import usual_addends
from reactions.errors import FieldErrors, field_errors
from reactions.pages.drawing.levels import level_name
from reactions.pages.planner.forms import PlannerForm
from reactions.pages.planner.outcome import Outcome
from reactions.services.inputs import ConditionsInput, PlanInput

# Where a path of the service's input has another name in the form.
_FIELDS = {
    "family_key": "family",
    "target_level": "level",
    "conditions.solvent": "solvent",
    "conditions.solvent_volume_ml": "solvent_volume",
    "conditions.temperature_c": "temperature",
    "conditions.duration_min": "duration",
}


def check_complete(form: PlannerForm, outcome: Outcome) -> None:
    """Put an error at each field without which a reaction can't be planned."""
    cleaned = form.cleaned_data
    if not cleaned.get("campaign") and "campaign" not in form.errors:
        form.add_error("campaign", "Choose the campaign that the reaction belongs to.")
    if outcome.family is None and "family" not in form.errors:
        form.add_error("family", "Choose the family of the addition.")
    wants_product = cleaned.get("basis") == "product"
    if outcome.charged is not None and outcome.charged.cage_mass_mg is None:
        field = "product_mass" if wants_product else "cage_mass"
        if field not in form.errors:
            form.add_error(field, "Give the mass, such as 0.5 g; all amounts follow from it.")


def plan_input(form: PlannerForm, outcome: Outcome) -> PlanInput:
    """Return what the service stores; raises ``FieldErrors`` at the form's fields."""
    cleaned = form.cleaned_data
    composed, charged = outcome.composed, outcome.charged
    addend = outcome.addend.addend if outcome.addend else None
    try:
        return PlanInput(
            title=cleaned.get("title") or suggested_title(form, outcome),
            family_key=outcome.family.key if outcome.family else "",
            cage=outcome.cage,
            addend=addend.smiles if addend else "",
            addend_name=addend_name(form, outcome),
            target_level=composed.target_level if composed else None,
            objective=composed.objective if composed else None,
            composition_model=composed.model if composed else None,
            predicted_composition=composed.stored_composition if composed else None,
            lines=charged.inputs if charged else [],
            conditions=_conditions(cleaned, outcome),
            is_level_confirmed=is_confirmed(form, outcome),
        )
    except ValidationError as error:
        raise at_form(field_errors(error)) from error


def is_confirmed(form: PlannerForm, outcome: Outcome) -> bool:
    """Return whether the very level that is wanted was confirmed."""
    confirmed = form.cleaned_data.get("is_level_confirmed")
    return outcome.composed is not None and confirmed == str(outcome.composed.band[1])


def at_form(error: FieldErrors) -> FieldErrors:
    """Return a service's messages under the names of the form's fields."""
    return FieldErrors({_FIELDS.get(path, path): texts for path, texts in error.messages.items()})


def addend_name(form: PlannerForm, outcome: Outcome) -> str:
    """Return the addend's name as typed, else its usual one."""
    typed = form.cleaned_data.get("addend_name") or ""
    if typed or outcome.addend is None or outcome.addend.addend is None:
        return str(typed)
    smiles = outcome.addend.addend.smiles
    return next((row.name for row in usual_addends() if row.structure.smiles == smiles), "")


def suggested_title(form: PlannerForm, outcome: Outcome) -> str:
    """Return a title from what is planned, such as “diethyl malonate (methano) mono-adduct”."""
    what = addend_name(form, outcome) or (outcome.family.name if outcome.family else "")
    if outcome.composed is None:
        return f"{what} on {outcome.cage}"[:200]
    lowest, highest = outcome.composed.band
    levels = level_name(lowest)
    if highest != lowest:
        levels = f"{levels} to {level_name(highest)}"
    return f"{what} {levels}-adduct of {outcome.cage}".strip()[:200]


def _conditions(cleaned: Mapping[str, Any], outcome: Outcome) -> ConditionsInput:
    advice = outcome.charged.solvent if outcome.charged else None
    return ConditionsInput(
        solvent=cleaned.get("solvent") or "",
        solvent_volume_ml=advice.volume_ml if advice else cleaned.get("solvent_volume"),
        temperature_c=cleaned.get("temperature"),
        duration_min=cleaned.get("duration"),
        atmosphere=cleaned.get("atmosphere") or "",
        light=cleaned.get("light") or "",
        addition_mode=cleaned.get("addition_mode") or "",
    )
