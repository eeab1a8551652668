"""From equivalents to what is weighed out, how much solvent, and what gas comes off."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from pydantic import ValidationError

from reactions.chemistry.addends import AddendStructure
from reactions.chemistry.amounts import DEFAULT_MARGIN, AmountsRequest, amounts
from reactions.chemistry.families import Family, gas_evolved_ml
from reactions.chemistry.masses import cage_molar_mass_g_per_mol
from reactions.chemistry.solvent_volume import VolumeAdvice, advise_volume
from reactions.chemistry.structures import StructureError
from reactions.errors import FieldErrors, field_errors
from reactions.models import Component, ComponentRole
from reactions.pages.planner.composing import OWN_CHOICE, Composed
from reactions.pages.planner.line_forms import PER_CAGE, PlannedLineForm
from reactions.services.inputs import LineInput
from reactions.services.lines import WorkedOutLines, work_out_lines

_ROOM_TEMPERATURE_C = 25.0


@dataclass(frozen=True)
class Charged:
    """The weighing list worked out. Figures that lack what they follow from are None or empty.

    ``inputs`` are the lines as the services take them, the cage first where its mass is known.
    """

    inputs: list[LineInput]
    lines: WorkedOutLines
    cage_mass_mg: float | None
    cage_mmol: float | None
    solvent: VolumeAdvice | None
    gas_ml: Mapping[str, float]
    level_mass_mg: list[float]


def cage_mass_of(
    cleaned: Mapping[str, Any], cage: str, composed: Composed | None, addend: AddendStructure | None
) -> float | None:
    """Return the mass of cage in mg, as typed or from the product wanted; None without either.

    Raises ``FieldErrors``.
    """
    if (cleaned.get("basis") or "cage") == "cage":
        return cleaned.get("cage_mass") or None
    product_mass = cleaned.get("product_mass")
    if not product_mass:
        return None
    if not cleaned.get("expected_yield"):
        raise FieldErrors.at(
            "expected_yield", "A mass of product needs the yield you expect; write it as 40 %."
        )
    if composed is None or addend is None:
        raise FieldErrors.at(
            "product_mass", "A mass of product needs the addend and the level wanted; give both."
        )
    product_g_per_mol = (
        cage_molar_mass_g_per_mol(cage) + composed.target_level * addend.mass_g_per_mol
    )
    return amounts(
        AmountsRequest(
            cage=cage,
            cage_purity=cleaned.get("cage_purity") or 1.0,
            product_mass_mg=product_mass,
            expected_yield=cleaned["expected_yield"],
            product_molar_mass_g_per_mol=product_g_per_mol,
        )
    ).cage_mass_mg


def charge(
    cleaned: Mapping[str, Any],
    forms: Sequence[PlannedLineForm],
    family: Family | None,
    composed: Composed | None,
    addend: AddendStructure | None,
) -> Charged:
    """Work out the weighing list, the solvent and the gas. Raises ``FieldErrors``.

    Paths of lines count the ``forms`` from 0: ``lines.1.smiles``.
    """
    cage = cleaned.get("cage") or "C60"
    cage_g_per_mol = _cage_g_per_mol(cage)
    mass_mg = cage_mass_of(cleaned, cage, composed, addend)
    purity = cleaned.get("cage_purity") or 1.0
    equivalents = composed.equivalents if composed else _own_choice(cleaned)
    inputs = _inputs(cage, mass_mg, purity, forms, equivalents)
    lines = _work_out(cage, inputs, has_cage=mass_mg is not None)
    mmol = None if mass_mg is None else mass_mg * purity / cage_g_per_mol
    return Charged(
        inputs=inputs,
        lines=lines,
        cage_mass_mg=mass_mg,
        cage_mmol=mmol,
        solvent=_solvent(cleaned, cage, mass_mg, purity),
        gas_ml=_gas(cleaned, family, mmol, composed, equivalents),
        level_mass_mg=_level_masses(cage_g_per_mol, mmol, composed, addend),
    )


def others_of(charged: Charged) -> list[Component]:
    """Return the worked-out lines beside the cage, in the order of the forms."""
    return [row for row in charged.lines.components if row.role != ComponentRole.CAGE]


def _cage_g_per_mol(cage: str) -> float:
    try:
        return cage_molar_mass_g_per_mol(cage)
    except StructureError as error:
        raise FieldErrors.at("cage", str(error)) from error


def _own_choice(cleaned: Mapping[str, Any]) -> float | None:
    return cleaned.get("equivalents") if cleaned.get("objective") == OWN_CHOICE else None


def _inputs(
    cage: str,
    mass_mg: float | None,
    purity: float,
    forms: Sequence[PlannedLineForm],
    equivalents: float | None,
) -> list[LineInput]:
    inputs = []
    if mass_mg is not None:
        inputs.append(
            LineInput(role=ComponentRole.CAGE, name=cage, planned_mass_mg=mass_mg, purity=purity)
        )
    leading = forms[0] if forms and forms[0].is_leading else None
    for place, form in enumerate(forms):
        try:
            inputs.append(_input(form, leading, equivalents))
        except ValidationError as error:
            messages = field_errors(error).messages
            raise FieldErrors(
                {f"lines.{place}.{path}": texts for path, texts in messages.items()}
            ) from error
    return inputs


def _input(
    form: PlannedLineForm, leading: PlannedLineForm | None, equivalents: float | None
) -> LineInput:
    cleaned = form.cleaned_data
    values = {
        "role": cleaned["role"] or ComponentRole.REAGENT,
        "name": cleaned["name"],
        "smiles": cleaned["smiles"],
        "purity": cleaned["purity"] or 1.0,
        "density_g_per_ml": cleaned["density"],
        "molarity_mol_per_l": cleaned["molarity"],
    }
    if form is leading:
        planned = None if equivalents is None else float(f"{equivalents:.4g}")
        return LineInput(**values, equivalents=planned)
    is_per_cage = cleaned["per"] == PER_CAGE or leading is None
    return LineInput(
        **values,
        equivalents=cleaned["equivalents"],
        equivalents_of="" if is_per_cage or leading is None else leading.cleaned_data["name"],
    )


def _work_out(cage: str, inputs: list[LineInput], *, has_cage: bool) -> WorkedOutLines:
    try:
        return work_out_lines(cage, inputs)
    except FieldErrors as error:
        raise _counted_without_cage(error, int(has_cage)) from error


def _counted_without_cage(error: FieldErrors, cages: int) -> FieldErrors:
    moved = {}
    for path, messages in error.messages.items():
        parts = path.split(".")
        if parts[0] == "lines" and len(parts) == 3:
            parts[1] = str(int(parts[1]) - cages)
        moved[".".join(parts)] = messages
    return FieldErrors(moved)


def _solvent(
    cleaned: Mapping[str, Any], cage: str, mass_mg: float | None, purity: float
) -> VolumeAdvice | None:
    if not cleaned.get("solvent") or mass_mg is None:
        return None
    return advise_volume(
        cage, mass_mg * purity, cleaned["solvent"], cleaned.get("solvent_volume"), DEFAULT_MARGIN
    )


def _gas(
    cleaned: Mapping[str, Any],
    family: Family | None,
    cage_mmol: float | None,
    composed: Composed | None,
    equivalents: float | None,
) -> Mapping[str, float]:
    if family is None or cage_mmol is None or equivalents is None:
        return {}
    temperature_c = cleaned.get("temperature")
    return gas_evolved_ml(
        family,
        cage_mmol,
        composed.uptake if composed else 0.0,
        _ROOM_TEMPERATURE_C if temperature_c is None else temperature_c,
        equivalents,
    )


def _level_masses(
    cage_g_per_mol: float,
    cage_mmol: float | None,
    composed: Composed | None,
    addend: AddendStructure | None,
) -> list[float]:
    """Return x_k · n(cage) · (M(cage) + k · M(addition)) for each level, in mg."""
    if cage_mmol is None or composed is None or addend is None:
        return []
    return [
        share * cage_mmol * (cage_g_per_mol + level * addend.mass_g_per_mol)
        for level, share in enumerate(composed.mole_fraction)
    ]
