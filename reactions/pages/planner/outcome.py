"""All that follows from what is typed into the planner."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from django import forms

from reactions.chemistry.cautions import CautionSheet
from reactions.chemistry.families import Family, LevelQuestion, question_level
from reactions.chemistry.structures import StructureError
from reactions.errors import WHOLE, FieldErrors
from reactions.models import Component, Reaction
from reactions.pages.planner.charging import Charged, charge, others_of
from reactions.pages.planner.composing import OWN_CHOICE, Composed, compose
from reactions.pages.planner.forms import PlannerForm
from reactions.pages.planner.line_forms import LineForms, PlannedLineForm
from reactions.pages.sheet.cautions import cautions_of
from reactions.pages.structure.showing import ShownStructure, show_addend

_LINE_FIELDS = {
    "density_g_per_ml": "density",
    "molarity_mol_per_l": "molarity",
    "equivalents_of": "per",
}


@dataclass(frozen=True)
class Outcome:
    """What the plan comes to, as far as what is typed goes."""

    family: Family | None
    cage: str
    addend: ShownStructure | None
    composed: Composed | None
    charged: Charged | None
    question: LevelQuestion | None
    cautions: CautionSheet


def work_out(form: PlannerForm, lines: LineForms) -> Outcome:
    """Work out a plan as far as it can be read; what is wrong goes to the fields of the forms."""
    form.is_valid()
    lines_are_read = lines.is_valid()
    cleaned = form.cleaned_data
    family = form.families.get(cleaned.get("family") or "")
    cage = cleaned.get("cage") or "C60"
    addend = _addend(form)
    composed = _composed(form, family, cage)
    charged = None
    if lines_are_read:
        charged = _charged(form, lines, family, composed, addend)
    return Outcome(
        family=family,
        cage=cage,
        addend=addend,
        composed=composed,
        charged=charged,
        question=_question(family, cage, composed, form),
        cautions=_cautions(cleaned, family, composed, charged.lines.components if charged else []),
    )


def _addend(form: PlannerForm) -> ShownStructure | None:
    text = form.cleaned_data.get("addend") or form.cleaned_data.get("usual_addend")
    if not text:
        return None
    try:
        return show_addend(text)
    except StructureError as error:
        form.add_error("addend", str(error))
        return None


def _composed(form: PlannerForm, family: Family | None, cage: str) -> Composed | None:
    cleaned = form.cleaned_data
    if family is not None and not family.is_forward:
        if (cleaned.get("objective") or "") != OWN_CHOICE:
            form.add_error(
                "objective",
                f"{family.name} takes additions off or works on the cage itself, which this model "
                "does not describe; choose the equivalents yourself.",
            )
        return None
    try:
        return compose(cleaned, family, cage)
    except FieldErrors as error:
        place_errors(form, error)
        return None


def _charged(
    form: PlannerForm,
    lines: LineForms,
    family: Family | None,
    composed: Composed | None,
    addend: ShownStructure | None,
) -> Charged | None:
    structure = addend.addend if addend else None
    try:
        charged = charge(form.cleaned_data, lines.filled, family, composed, structure)
    except FieldErrors as error:
        place_errors(form, error, lines.filled)
        return None
    for line, component in zip(lines.filled, others_of(charged), strict=True):
        line.component = component
    return charged


def place_errors(
    form: forms.Form, error: FieldErrors, lines: list[PlannedLineForm] | None = None
) -> None:
    """Put messages at the fields of the plan or of the line that their path names."""
    for path, messages in error.messages.items():
        target: forms.Form = form
        field: str | None = path
        parts = path.split(".")
        if parts[0] == "lines" and len(parts) == 3 and lines and int(parts[1]) < len(lines):
            target, field = lines[int(parts[1])], _LINE_FIELDS.get(parts[2], parts[2])
        known = field in target.fields
        for message in messages:
            text = message if known or path in (WHOLE, "lines") else f"{path}: {message}"
            target.add_error(field if known else None, text)


def _question(
    family: Family | None, cage: str, composed: Composed | None, form: PlannerForm
) -> LevelQuestion | None:
    if family is None or composed is None:
        return None
    question = question_level(family, cage, composed.band[1])
    if question is not None and question.severity == "error":
        field = {"most_of_level": "level", "band": "band_highest"}.get(composed.kind)
        form.add_error(field, question.reason)
        return None
    return question


def _cautions(
    cleaned: Mapping[str, Any],
    family: Family | None,
    composed: Composed | None,
    components: list[Component],
) -> CautionSheet:
    planned = Reaction(
        family_key=family.key if family else "",
        solvent=cleaned.get("solvent") or "",
        temperature_c=cleaned.get("temperature"),
        target_level=composed.target_level if composed else None,
        light=cleaned.get("light") or "",
        atmosphere=cleaned.get("atmosphere") or "",
    )
    return cautions_of(planned, components, family)
