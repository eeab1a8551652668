"""What is typed during a run: conditions and the time line."""

from __future__ import annotations

from django import forms
from django.http import QueryDict

from reactions.chemistry.solvents import solvents
from reactions.models import AdditionMode, Atmosphere, Light, ObservationKind
from reactions.pages.sheet.fields import (
    duration_field,
    temperature_field,
    volume_field,
)
from reactions.pages.sheet.forms import SheetForm, checked
from reactions.pages.sheet.record import Record
from reactions.services.inputs import ConditionsInput, ObservationInput
from reactions.services.revising import Edit
from reactions.services.run import add_observation, amend_conditions


class ConditionsForm(SheetForm):
    """Solvent, temperature, time and the rest of the conditions."""

    solvent = forms.CharField(
        max_length=80, required=False, widget=forms.TextInput(attrs={"list": "solvents"})
    )
    solvent_volume_ml = volume_field(label="Solvent volume")
    temperature_c = temperature_field(label="Temperature")
    duration_min = duration_field(label="Time")
    atmosphere = forms.ChoiceField(choices=Atmosphere, required=False)
    light = forms.ChoiceField(choices=Light, required=False)
    addition_mode = forms.ChoiceField(choices=AdditionMode, required=False, label="Reagent goes in")
    performed_on = forms.DateField(
        required=False,
        label="Date of the run",
        widget=forms.DateInput(attrs={"type": "date"}, format="%Y-%m-%d"),
        error_messages={"invalid": "This is not a date; write it as 2026-03-31."},
    )

    def known_solvents(self) -> list[str]:
        """Return the names that the solvent field proposes."""
        return list(solvents())


def conditions_form(record: Record, data: QueryDict | None) -> ConditionsForm:
    """Return the form of the conditions."""
    reaction = record.reaction
    stored = {name: getattr(reaction, name) for name in ConditionsForm.base_fields}
    return ConditionsForm(data, initial=stored, prefix="conditions")


def store_conditions(edit: Edit, form: ConditionsForm) -> None:
    """Store the conditions as typed."""
    amend_conditions(edit, checked(ConditionsInput, form.cleaned_data))


class ObservationForm(SheetForm):
    """One more line of the time line."""

    at_min = duration_field(label="Time after the start", required=True)
    kind = forms.ChoiceField(choices=ObservationKind, label="What happened")
    text = forms.CharField(
        max_length=20_000, label="In words", widget=forms.Textarea(attrs={"rows": 2})
    )


def observation_form(record: Record, data: QueryDict | None) -> ObservationForm:
    """Return the form of one more line of the time line."""
    return ObservationForm(data, prefix="time-line")


def store_observation(edit: Edit, form: ObservationForm) -> None:
    """Add the line as typed."""
    add_observation(edit, checked(ObservationInput, form.cleaned_data))
