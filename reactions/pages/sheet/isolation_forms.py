"""The isolation as typed: steps, each with its fractions."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any

from django import forms
from django.http import QueryDict

from reactions.errors import WHOLE, FieldErrors
from reactions.models import Fraction, IsolationMethod, IsolationStep
from reactions.models.constraints import HIGHEST_LEVEL
from reactions.pages.sheet.fields import mass_field, share_field, volume_field
from reactions.pages.sheet.forms import SheetForm, checked
from reactions.pages.sheet.record import Record
from reactions.pages.sheet.rows import next_place, places_in
from reactions.services.inputs import FractionInput, IsolationStepInput
from reactions.services.revising import Edit
from reactions.services.run import amend_isolation

_PREFIX = "isolation"


class FractionForm(SheetForm):
    """One fraction of a step; left empty, it is no fraction."""

    name = forms.CharField(required=False, max_length=120, label="Fraction")
    mass_mg = mass_field(label="Mass")
    level = forms.IntegerField(
        required=False,
        min_value=0,
        max_value=HIGHEST_LEVEL,
        label="Level",
        error_messages={
            "invalid": "Give one whole number, such as 2; leave it blank for a mixture of levels."
        },
        widget=forms.TextInput(attrs={"inputmode": "numeric", "placeholder": "not known"}),
    )
    purity = share_field(label="Purity")
    is_carried_on = forms.BooleanField(required=False, label="went on to a later step")

    def clean(self) -> dict[str, Any]:
        """Ask for the mass of a fraction that has anything else."""
        cleaned = super().clean()
        if not self.is_empty and cleaned.get("mass_mg") is None and "mass_mg" not in self.errors:
            self.add_error("mass_mg", "Give the mass with its unit, such as 41 mg.")
        return cleaned

    @property
    def place(self) -> str:
        """Return the place of the fraction in the names of its fields."""
        return str(self.prefix).rsplit("-", 1)[-1]

    @property
    def is_empty(self) -> bool:
        """Return whether nothing was typed."""
        return not any(self[name].value() for name in ("name", "mass_mg", "level", "purity"))

    def values(self) -> dict[str, Any]:
        """Return what was typed; a purity left out is 100 %."""
        values = dict(self.cleaned_data)
        if values["purity"] is None:
            values["purity"] = 1.0
        return values


class StepForm(SheetForm):
    """One step of the isolation."""

    method = forms.ChoiceField(choices=IsolationMethod)
    medium = forms.CharField(required=False, max_length=160, label="Phase, filter or agent")
    solvent = forms.CharField(required=False, max_length=160, label="Solvent or eluent")
    loading_mg = mass_field(label="Loading")
    volume_ml = volume_field(label="Volume")
    note = forms.CharField(required=False, max_length=20_000)

    fractions: list[FractionForm]

    @property
    def place(self) -> str:
        """Return the place of the step in the names of its fields."""
        return str(self.prefix).rsplit("-", 1)[-1]


class IsolationForm:
    """All steps of an isolation, posted together."""

    def __init__(self, steps: list[StepForm], is_bound: bool) -> None:
        self.steps = steps
        self.is_bound = is_bound
        self.problems: list[str] = []

    @classmethod
    def stored(cls, steps: Iterable[IsolationStep]) -> IsolationForm:
        """Return the form of the steps as stored."""
        forms_ = []
        for place, step in enumerate(steps):
            form = StepForm(initial=_initial(step, StepForm), prefix=f"{_PREFIX}-{place}")
            form.fractions = [
                FractionForm(
                    initial=_initial(row, FractionForm),
                    prefix=f"{_PREFIX}-{place}-fractions-{order}",
                )
                for order, row in enumerate(step.fractions.all())
            ]
            forms_.append(form)
        return cls(forms_, is_bound=False)

    @classmethod
    def typed(cls, data: QueryDict, stored: list[IsolationStep]) -> IsolationForm:
        """Return the form of the steps as typed, one more or fewer where a button asks so."""
        places = places_in(data, _PREFIX)
        forms_ = [
            cls._typed_step(data, place, stored[place] if place < len(stored) else None)
            for place in places
            if data.get("remove_step") != str(place)
        ]
        if "add_step" in data:
            added = StepForm(prefix=f"{_PREFIX}-{next_place(places)}")
            added.fractions = [FractionForm(prefix=f"{added.prefix}-fractions-0")]
            forms_.append(added)
        return cls(forms_, is_bound=True)

    @staticmethod
    def _typed_step(data: QueryDict, place: int, step: IsolationStep | None) -> StepForm:
        prefix = f"{_PREFIX}-{place}"
        form = StepForm(data, prefix=prefix, initial=_initial(step, StepForm) if step else None)
        rows = list(step.fractions.all()) if step else []
        places = places_in(data, f"{prefix}-fractions")
        form.fractions = [
            FractionForm(
                data,
                prefix=f"{prefix}-fractions-{order}",
                initial=_initial(rows[order], FractionForm) if order < len(rows) else None,
            )
            for order in places
            if data.get("remove_fraction") != f"{place}.{order}"
        ]
        if data.get("add_fraction") == str(place):
            form.fractions.append(FractionForm(prefix=f"{prefix}-fractions-{next_place(places)}"))
        return form

    def is_valid(self) -> bool:
        """Return whether every step and fraction can be understood."""
        each = [form.is_valid() for step in self.steps for form in (step, *step.fractions)]
        return all(each)

    def place_errors(self, error: FieldErrors) -> None:
        """Put what a service objected to at the step or fraction it is about."""
        for path, messages in error.messages.items():
            parts = path.split(".")
            target: SheetForm | None = None
            if parts[0].isdigit() and int(parts[0]) < len(self.steps):
                step = target = self.steps[int(parts[0])]
                parts = parts[1:]
                if parts[:1] == ["fractions"] and len(parts) > 2:
                    target = self._kept(step)[int(parts[1])]
                    parts = parts[2:]
            if target is None:
                self.problems += messages
            else:
                target.place_errors(FieldErrors({".".join(parts) or WHOLE: messages}))

    @staticmethod
    def _kept(step: StepForm) -> list[FractionForm]:
        return [row for row in step.fractions if not row.is_empty]

    def inputs(self) -> list[IsolationStepInput]:
        """Return what was typed as the service takes it; raises ``FieldErrors``."""
        steps = []
        for place, step in enumerate(self.steps):
            fractions = []
            for order, row in enumerate(self._kept(step)):
                fractions.append(
                    _checked_at(f"{place}.fractions.{order}", FractionInput, row.values())
                )
            values = {**step.cleaned_data, "fractions": fractions}
            steps.append(_checked_at(str(place), IsolationStepInput, values))
        return steps


def _checked_at(path: str, kind: Any, values: Mapping[str, Any]) -> Any:
    try:
        return checked(kind, dict(values))
    except FieldErrors as error:
        raise FieldErrors(
            {f"{path}.{field}": texts for field, texts in error.messages.items()}
        ) from error


def _initial(row: IsolationStep | Fraction, kind: type[forms.Form]) -> dict[str, Any]:
    return {name: getattr(row, name) for name in kind.base_fields}


def isolation_form(record: Record, data: QueryDict | None) -> IsolationForm:
    """Return the form of the isolation."""
    if data is None:
        return IsolationForm.stored(record.steps)
    return IsolationForm.typed(data, record.steps)


def reshapes_isolation(data: QueryDict) -> bool:
    """Return whether a button asks for another step or fraction, or one fewer."""
    return any(
        name in data for name in ("add_step", "remove_step", "add_fraction", "remove_fraction")
    )


def store_isolation(edit: Edit, form: IsolationForm) -> None:
    """Store the steps as typed."""
    amend_isolation(edit, form.inputs())
