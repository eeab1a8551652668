"""Readings as typed: shares in percent or as fractions, by addition level."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from django import forms
from django.http import QueryDict

from reactions.chemistry import quantities
from reactions.errors import FieldErrors
from reactions.models import ReadingMethod
from reactions.models.constraints import HIGHEST_LEVEL
from reactions.pages.drawing.levels import level_name
from reactions.pages.sheet.fields import duration_field
from reactions.pages.sheet.forms import SheetForm, checked
from reactions.pages.sheet.record import Record
from reactions.services.inputs import ReadingInput
from reactions.services.revising import Edit
from reactions.services.run import add_reading

# Levels with a field of their own; any other level is typed beside its share.
_OWN_FIELD = 7
_FURTHER = 4

# Fractions that sum to 1, read as percent, with as much again for what overlaps.
_TAKEN_FOR_FRACTIONS = 0.02


@dataclass(frozen=True)
class LevelField:
    """The field of one level's share."""

    level: int
    name: str
    field: forms.BoundField


class ReadingForm(SheetForm):
    """A composition as a chromatogram, a spectrum or another method gave it."""

    method = forms.ChoiceField(choices=ReadingMethod)
    sampled_at_min = duration_field(label="Sample taken after")
    scale = forms.ChoiceField(
        label="Numbers are",
        choices=[("percent", "percent"), ("fraction", "fractions of 1")],
        initial="percent",
    )
    is_higher_lumped = forms.BooleanField(
        required=False, label="The highest level given stands for itself and all above it"
    )
    note = forms.CharField(
        required=False, max_length=20_000, widget=forms.Textarea(attrs={"rows": 2})
    )

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        for level in range(_OWN_FIELD):
            self.fields[f"level_{level}"] = _share_text(f"{level} {level_name(level)}")
        for place in range(_FURTHER):
            self.fields[f"further_level_{place}"] = forms.IntegerField(
                required=False,
                min_value=0,
                max_value=HIGHEST_LEVEL,
                label="Level",
                widget=forms.TextInput(attrs={"inputmode": "numeric"}),
            )
            self.fields[f"further_share_{place}"] = _share_text("Share")

    def level_fields(self) -> list[LevelField]:
        """Return the fields of the low levels."""
        return [
            LevelField(level, level_name(level), self[f"level_{level}"])
            for level in range(_OWN_FIELD)
        ]

    def further_fields(self) -> list[tuple[forms.BoundField, forms.BoundField]]:
        """Return the pairs of fields for any other level and its share."""
        return [
            (self[f"further_level_{place}"], self[f"further_share_{place}"])
            for place in range(_FURTHER)
        ]

    @property
    def has_further(self) -> bool:
        """Return whether anything was typed in the pairs for other levels."""
        return any(level.value() or share.value() for level, share in self.further_fields())

    def clean(self) -> dict[str, Any]:
        """Gather the shares by level, every one read on the scale that was chosen."""
        cleaned = super().clean()
        shares: dict[int, float] = {}
        for level in range(_OWN_FIELD):
            self._take(shares, level, f"level_{level}")
        for place in range(_FURTHER):
            further: int | None = cleaned.get(f"further_level_{place}")
            share_name = f"further_share_{place}"
            if further is None:
                if cleaned.get(share_name):
                    self.add_error(f"further_level_{place}", "Say which level this share is of.")
                continue
            if further in shares:
                self.add_error(f"further_level_{place}", f"Level {further} has its share above.")
                continue
            if not cleaned.get(share_name):
                self.add_error(
                    share_name, f"Give the share of level {further}, or clear the level."
                )
                continue
            self._take(shares, further, share_name)
        if not shares and not self.errors:
            self.add_error(None, "Give the share of at least one level.")
        self._question_scale(shares)
        cleaned["mole_fraction_by_level"] = shares
        return cleaned

    def _question_scale(self, shares: dict[int, float]) -> None:
        """Refuse percents that sum to about 1: they are fractions read on the wrong scale."""
        total = sum(shares.values())
        if self.cleaned_data.get("scale") == "percent" and 0 < total <= _TAKEN_FOR_FRACTIONS:
            self.add_error(
                "scale",
                f"In percent these sum to {100 * total:.3g} % of the cages. Choose “fractions of "
                "1”, or give the shares in percent.",
            )

    def _take(self, shares: dict[int, float], level: int, name: str) -> None:
        text = self.cleaned_data.get(name)
        if not text:
            return
        try:
            shares[level] = read_share(text, self.cleaned_data.get("scale", "percent"))
        except ValueError as error:
            self.add_error(name, str(error))

    def place_errors(self, error: FieldErrors) -> None:
        """Put what concerns the composition as a whole to the head of the form."""
        placed: dict[str, list[str]] = {}
        for path, messages in error.messages.items():
            level = path.removeprefix("mole_fraction_by_level.").split(".")[0]
            placed.setdefault(f"level_{level}" if level != path else path, []).extend(messages)
        super().place_errors(FieldErrors(placed))


def read_share(text: str, scale: str) -> float:
    """Return a share typed on ``scale`` (percent or fraction) as a fraction of 1.

    A percent sign always means percent. Raises ``ValueError`` for what is no number or lies
    outside 0 to 1.
    """
    shown = text.strip()
    if scale == "percent" and not shown.endswith("%"):
        shown = f"{shown} %"
    return quantities.fraction(shown)


def _share_text(label: str) -> forms.CharField:
    return forms.CharField(
        required=False,
        max_length=30,
        label=label,
        widget=forms.TextInput(attrs={"inputmode": "decimal", "autocomplete": "off"}),
    )


def reading_form(record: Record, data: QueryDict | None) -> ReadingForm:
    """Return the form of one more reading."""
    return ReadingForm(data, prefix="readings")


def store_reading(edit: Edit, form: ReadingForm) -> None:
    """Add the reading as typed."""
    names = ("method", "mole_fraction_by_level", "sampled_at_min", "is_higher_lumped", "note")
    values = {name: form.cleaned_data[name] for name in names}
    add_reading(edit, checked(ReadingInput, values))
