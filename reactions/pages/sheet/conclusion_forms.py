"""What is typed to close a record: title, recovered cage, conclusion, and the signature."""

from __future__ import annotations

from django import forms
from django.http import QueryDict

from reactions.pages.sheet.fields import mass_field
from reactions.pages.sheet.forms import SheetForm, checked
from reactions.pages.sheet.record import Record
from reactions.services.inputs import ConclusionInput
from reactions.services.revising import Edit
from reactions.services.run import amend_conclusion


class ConclusionForm(SheetForm):
    """What came of it."""

    conclusion = forms.CharField(
        required=False, max_length=20_000, widget=forms.Textarea(attrs={"rows": 5})
    )
    recovered_cage_mg = mass_field(label="Recovered cage that is in no fraction")
    title = forms.CharField(max_length=200, label="Title of the sheet")


def conclusion_form(record: Record, data: QueryDict | None) -> ConclusionForm:
    """Return the form of the conclusion."""
    reaction = record.reaction
    stored = {name: getattr(reaction, name) for name in ConclusionForm.base_fields}
    return ConclusionForm(data, initial=stored, prefix="conclusion")


def store_conclusion(edit: Edit, form: ConclusionForm) -> None:
    """Store the conclusion as typed."""
    amend_conclusion(edit, checked(ConclusionInput, form.cleaned_data))


class SignForm(forms.Form):
    """A person's word; signing can't be taken back."""

    is_true = forms.BooleanField(
        label="I have read this record; it is true and complete.",
        error_messages={"required": "Tick this first: a signature can't be taken back."},
    )
