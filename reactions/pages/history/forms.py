"""Forms of the history pages."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from django import forms
from django.contrib.auth.models import User

from reactions.models import Campaign, HistoryImport
from reactions.services.history.columns import FIELDS

# What a cell of each kind may hold.
_EXAMPLES = {
    "mass": "0.25 g",
    "volume": "50 mL",
    "temperature": "110 °C",
    "duration": "1 h 30 min",
    "share": "45 % or 0.45",
    "date": "2026-03-31 or 31.03.2026",
    "structure": "SMILES",
}


class UploadForm(forms.Form):
    """A file and the campaign it goes into."""

    campaign = forms.ModelChoiceField(
        Campaign.objects.none(), label="Campaign", to_field_name="code", empty_label=None
    )
    file = forms.FileField(
        label="Spreadsheet, saved as CSV",
        help_text="The first line names the columns; one row for each reaction; at most 8 MiB.",
        widget=forms.ClearableFileInput(attrs={"accept": ".csv,.tsv,.txt,text/csv"}),
    )

    def __init__(self, *args: Any, user: User, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        field = self.fields["campaign"]
        assert isinstance(field, forms.ModelChoiceField)  # noqa: S101 - tells the type checker
        field.queryset = Campaign.objects.writable_by(user)


class MappingForm(forms.Form):
    """For each field of the record: a column of the file or one value for all, and the unit."""

    def __init__(
        self, *args: Any, job: HistoryImport, header: Sequence[str], **kwargs: Any
    ) -> None:
        kwargs.setdefault("initial", _initial(job))
        super().__init__(*args, **kwargs)
        columns = [("", "not in the file"), *((name, name) for name in header if name)]
        for field in FIELDS:
            self.fields[f"{field.key}-column"] = forms.ChoiceField(
                choices=columns, required=False, label=f"Column for {field.label}"
            )
            self.fields[f"{field.key}-value"] = forms.CharField(
                required=False, max_length=2000, label=f"One value of {field.label} for all rows"
            )
            if field.units:
                units = [("", "stands in each cell"), *((unit, unit) for unit in field.units)]
                self.fields[f"{field.key}-unit"] = forms.ChoiceField(
                    choices=units, required=False, label=f"Unit of bare numbers in {field.label}"
                )

    def rows(self) -> list[dict[str, Any]]:
        """Return a row for each field of the record, with its controls and errors."""
        return [
            {
                "field": field,
                "hint": _EXAMPLES.get(field.kind, ""),
                "column": self[f"{field.key}-column"],
                "value": self[f"{field.key}-value"],
                "unit": self[f"{field.key}-unit"] if field.units else None,
            }
            for field in FIELDS
        ]

    def mapping(self) -> dict[str, dict[str, str]]:
        """Return the mapping as the import takes it: only fields that are given."""
        mapping = {}
        for field in FIELDS:
            choice = {
                part: self.cleaned_data.get(f"{field.key}-{part}", "")
                for part in ("column", "value", "unit")
            }
            if choice["column"] or choice["value"]:
                mapping[field.key] = choice
        return mapping

    def add_service_errors(self, messages: dict[str, list[str]]) -> None:
        """Put the service's errors beside the fields they are about."""
        for key, texts in messages.items():
            name = f"{key.split('.')[0]}-column"
            self.add_error(name if name in self.fields else None, texts)


def _initial(job: HistoryImport) -> dict[str, str]:
    return {
        f"{key}-{part}": text
        for key, choice in job.column_mapping.items()
        for part, text in choice.items()
    }
