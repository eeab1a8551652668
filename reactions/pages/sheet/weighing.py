"""The whole weighing list as typed, and the amounts that follow from it."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

from django.http import QueryDict

from reactions.errors import WHOLE, FieldErrors
from reactions.models import Component, ComponentRole, Reaction
from reactions.pages.sheet.charges import Charge
from reactions.pages.sheet.forms import checked
from reactions.pages.sheet.line_forms import LineForm
from reactions.pages.sheet.record import Record
from reactions.pages.sheet.rows import next_place, places_in
from reactions.services.inputs import LineInput
from reactions.services.lines import amend_lines, lines_of, work_out_lines
from reactions.services.revising import Edit

_PREFIX = "lines"


@dataclass
class WeighingForm:
    """The lines of a weighing list, posted together.

    ``limiting`` is what runs out first and ``warnings`` come with the amounts, once worked out;
    ``problems`` concern the list as a whole.
    """

    cage: str
    lines: list[LineForm]
    is_bound: bool
    problems: list[str] = field(default_factory=list)
    limiting: str | None = None
    warnings: list[str] = field(default_factory=list)

    def is_valid(self) -> bool:
        """Return whether every line can be understood."""
        each = [line.is_valid() for line in self.lines]
        return all(each) and not self.problems

    def place_errors(self, error: FieldErrors) -> None:
        """Put what a service objected to at the line it is about."""
        self._place(error, self.lines)

    def inputs(self) -> list[LineInput]:
        """Return the lines as the service takes them; raises ``FieldErrors``."""
        return inputs_of(self.cage, self.lines)

    def work_out(self) -> None:
        """Work out every amount that follows, leaving out the lines that can't be understood."""
        for line in self.lines:
            line.worked_out = None
        usable = [line for line in self.lines if line.is_usable]
        while usable:
            try:
                result = work_out_lines(self.cage, inputs_of(self.cage, usable))
            except FieldErrors as error:
                at_fault = self._place(error, usable)
                if not at_fault:
                    return
                usable = [line for line in usable if line not in at_fault]
                continue
            for line, component in zip(usable, result.components, strict=True):
                line.worked_out = component
            self.limiting = result.limiting
            self.warnings = result.warnings
            return

    def take_stored(self, reaction: Reaction) -> None:
        """Say of the stored lines what runs out first and what to heed."""
        try:
            result = work_out_lines(self.cage, lines_of(reaction))
        except FieldErrors as error:
            self.problems += [str(error)]
            return
        self.limiting = result.limiting
        self.warnings = result.warnings

    def _place(self, error: FieldErrors, lines: list[LineForm]) -> list[LineForm]:
        """Put each message at its line, or at the head of the list; return the lines at fault."""
        at_fault = []
        for path, messages in error.messages.items():
            parts = path.removeprefix("lines.").split(".")
            if parts[0].isdigit() and int(parts[0]) < len(lines):
                line = lines[int(parts[0])]
                line.place_errors(FieldErrors({".".join(parts[1:]) or WHOLE: messages}))
                at_fault.append(line)
            else:
                self.problems += messages
        return at_fault


def inputs_of(cage: str, lines: list[LineForm]) -> list[LineInput]:
    """Return valid lines as the service takes them, amounts turned into equivalents.

    A planned amount of a reagent (``250 mg``) is stored as the equivalents it makes of the planned
    cage, or of the line it refers to. Raises ``FieldErrors`` with paths such as ``lines.2.purity``.
    """
    plans = _plans(cage, lines)
    return [
        _line(place, line, plan, line.cleaned_data.get("actual"))
        for place, (line, plan) in enumerate(zip(lines, plans, strict=True))
    ]


def _plans(cage: str, lines: list[LineForm]) -> list[Charge | None]:
    """Return what is planned of each line: a mass of the cage, equivalents of the rest."""
    charges: list[Charge | None] = [line.cleaned_data.get("charge") for line in lines]
    if not any(charge and charge.is_amount for charge in charges):
        return charges
    # The service turns actual amounts into mmol; planned ones pass through it the same way.
    trial = [
        _line(place, line, None if charge and charge.is_amount else charge, _amount(charge))
        for place, (line, charge) in enumerate(zip(lines, charges, strict=True))
    ]
    for place, line in enumerate(lines):
        charge = charges[place]
        if line.is_cage and charge:
            weighed = work_out_lines(cage, [trial[place]]).components[0]
            charges[place] = Charge(mass_mg=weighed.actual_mass_mg)
            trial[place] = _line(place, line, charges[place], _amount(charge))
    worked_out = work_out_lines(cage, trial).components
    for place, charge in enumerate(charges):
        if charge and charge.is_amount and not lines[place].is_cage:
            charges[place] = _as_equivalents(place, worked_out)
    return charges


def _amount(charge: Charge | None) -> Charge | None:
    return charge if charge and charge.is_amount else None


def _as_equivalents(place: int, components: list[Component]) -> Charge:
    component = components[place]
    reference = _reference(component, components)
    mmol = component.actual_mmol
    if mmol is None or not reference:
        what = component.equivalents_of or "the cage"
        raise FieldErrors.at(
            f"lines.{place}.equivalents",
            f"The amount can't be turned into equivalents: give the amount of {what} first, and "
            "the structure or molar mass of this line.",
        )
    return Charge(equivalents=mmol / reference)


def _reference(component: Component, components: list[Component]) -> float | None:
    """Return the planned mmol of what the equivalents of ``component`` refer to."""
    for other in components:
        is_meant = (
            other.name == component.equivalents_of
            if component.equivalents_of
            else other.role == ComponentRole.CAGE
        )
        if is_meant and other is not component:
            return other.actual_mmol if other.planned_mmol is None else other.planned_mmol
    return None


def _line(place: int, line: LineForm, plan: Charge | None, actual: Charge | None) -> LineInput:
    values: dict[str, Any] = line.substance()
    if plan:
        values["equivalents"] = plan.equivalents
        values["planned_mass_mg"] = plan.mass_mg
    if actual:
        values["actual_mass_mg"] = actual.mass_mg
        values["actual_volume_ml"] = actual.volume_ml
        values["actual_mmol"] = actual.mmol
    try:
        typed: LineInput = checked(LineInput, values)
    except FieldErrors as error:
        raise FieldErrors(
            {f"lines.{place}.{name}": texts for name, texts in error.messages.items()}
        ) from error
    return typed


def lines_form(record: Record, data: QueryDict | None) -> WeighingForm:
    """Return the form of the weighing list, one line more or fewer where a button asks so."""
    stored = record.components
    cage = record.reaction.cage
    if data is None:
        lines = [
            LineForm(component=row, prefix=f"{_PREFIX}-{place}") for place, row in enumerate(stored)
        ]
        form = WeighingForm(cage, lines, is_bound=False)
        form.take_stored(record.reaction)
        return form
    places = places_in(data, _PREFIX)
    lines = [
        LineForm(
            data,
            prefix=f"{_PREFIX}-{place}",
            component=stored[place] if place < len(stored) else None,
        )
        for place in places
        if data.get("remove_line") != str(place)
    ]
    if "add_line" in data:
        lines.append(LineForm(prefix=f"{_PREFIX}-{next_place(places)}"))
    form = WeighingForm(cage, lines, is_bound=True)
    form.work_out()
    return form


def reshapes_lines(data: QueryDict) -> bool:
    """Return whether a button asks for a line more or fewer, or to work out the amounts."""
    return any(name in data for name in ("add_line", "remove_line", "work_out"))


def store_lines(edit: Edit, form: WeighingForm) -> None:
    """Store the lines as typed."""
    amend_lines(edit, form.inputs())
