"""What to weigh out: from cage and equivalents to mmol, mg and mL, and back from what was weighed.

For each line, with n the amount of pure substance:

    n(line) = equivalents · n(reference)      reference: the cage, or the line of ``equivalents_of``
    mass on the balance = n · M / purity
    volume of a neat liquid = mass / density; of a solution = n / molarity

The cage weighed holds n(cage) = m · purity / M. From a mass of product wanted, n(cage) is
m(product) / M(product) / yield. Definitions of amount of substance and of molarity; common practice
of the laboratory, no source.
"""

from __future__ import annotations

import math
from collections.abc import Iterator

from reactions.chemistry.limiting import Supply, limiting_supply
from reactions.chemistry.line_amounts import (
    AmountsError,
    LineSubstance,
    amount_from_mass_mmol,
    amount_from_volume_mmol,
    mass_on_balance_mg,
    volume_to_take_ml,
)
from reactions.chemistry.line_references import CountedLine, planned_mmol, references
from reactions.chemistry.masses import cage_molar_mass_g_per_mol, molar_mass_g_per_mol
from reactions.chemistry.solvent_volume import VolumeAdvice, advise_volume
from reactions.chemistry.structures import StructureError
from reactions.chemistry.weighing_list import (
    DEFAULT_MARGIN,
    LARGEST,
    AmountsLine,
    AmountsRequest,
    AmountsResult,
    AmountsResultLine,
)

__all__ = [
    "DEFAULT_MARGIN",
    "AmountsError",
    "AmountsLine",
    "AmountsRequest",
    "AmountsResult",
    "AmountsResultLine",
    "amounts",
]

_SAME_MOLAR_MASS = 1e-3


def amounts(request: AmountsRequest) -> AmountsResult:
    """Work out a weighing list.

    Raises AmountsError, which names the field: a structure that can't be read, a reference to no
    line, an amount beyond a tonne.
    """
    cage_g_per_mol = _molar_mass_of_cage(request.cage)
    cage_mmol = _cage_mmol(request, cage_g_per_mol)
    cage_mass_mg = request.cage_mass_mg or cage_mmol * cage_g_per_mol / request.cage_purity
    _check_size(cage_mass_mg, "mg", request.cage, "expected_yield")
    weighed = request.actual_cage_mass_mg
    actual_cage_mmol = None if weighed is None else weighed * request.cage_purity / cage_g_per_mol
    substances = [_substance(place, line) for place, line in enumerate(request.lines)]
    lines = _worked_out(request, substances, cage_mmol, actual_cage_mmol)
    advice = _solvent(request, max(cage_mass_mg, weighed or 0.0))
    return AmountsResult(
        cage=request.cage,
        cage_molar_mass_g_per_mol=cage_g_per_mol,
        cage_mass_mg=cage_mass_mg,
        cage_mmol=cage_mmol,
        actual_cage_mmol=actual_cage_mmol,
        lines=lines,
        limiting=limiting_supply(_planned_supplies(request.cage, cage_mmol, lines)),
        actual_limiting=_actual_limiting(request.cage, cage_mmol, actual_cage_mmol, lines),
        solvent_volume_ml=advice.volume_ml,
        least_solvent_volume_ml=advice.least_volume_ml,
        solubility_margin=request.solubility_margin,
        warnings=[
            *(
                warning
                for line, worked_out, substance in zip(
                    request.lines, lines, substances, strict=True
                )
                for warning in _line_warnings(line, worked_out, substance)
            ),
            *advice.warnings,
        ],
    )


def _molar_mass_of_cage(cage: str) -> float:
    try:
        return cage_molar_mass_g_per_mol(cage)
    except StructureError as error:
        raise AmountsError("cage", str(error)) from error


def _cage_mmol(request: AmountsRequest, cage_g_per_mol: float) -> float:
    if request.cage_mass_mg is not None:
        return request.cage_mass_mg * request.cage_purity / cage_g_per_mol
    field = "product_smiles" if request.product_smiles else "product_molar_mass_g_per_mol"
    try:
        product_g_per_mol = request.product_molar_mass_g_per_mol or molar_mass_g_per_mol(
            request.product_smiles or ""
        )
    except StructureError as error:
        raise AmountsError(field, str(error)) from error
    if product_g_per_mol <= cage_g_per_mol:
        raise AmountsError(
            field,
            f"The product's molar mass, {product_g_per_mol:.2f} g/mol, is not above that of "
            f"{request.cage}, {cage_g_per_mol:.2f} g/mol; give that of the whole product.",
        )
    return (request.product_mass_mg or 0.0) / product_g_per_mol / (request.expected_yield or 1.0)


def _substance(place: int, line: AmountsLine) -> LineSubstance:
    if line.role == "cage":
        raise AmountsError(
            f"lines.{place}.role",
            f"{line.name} is called the cage, which stands beside the lines; give the line another "
            "role, such as reagent.",
        )
    molar_mass = line.molar_mass_g_per_mol
    if line.smiles:
        try:
            molar_mass = molar_mass_g_per_mol(line.smiles)
        except StructureError as error:
            raise AmountsError(f"lines.{place}.smiles", f"{line.name}: {error}") from error
    return LineSubstance(molar_mass, line.purity, line.density_g_per_ml, line.molarity_mol_per_l)


def _worked_out(
    request: AmountsRequest,
    substances: list[LineSubstance],
    cage_mmol: float,
    actual_cage_mmol: float | None,
) -> list[AmountsResultLine]:
    counted = [
        CountedLine(line.name, line.equivalents, line.equivalents_of) for line in request.lines
    ]
    referred = references(request.cage, counted)
    planned = planned_mmol(counted, referred, cage_mmol)
    actual = [
        _actual_mmol(line, substance)
        for line, substance in zip(request.lines, substances, strict=True)
    ]
    lines = []
    for place, (line, substance) in enumerate(zip(request.lines, substances, strict=True)):
        reference = referred[place]
        whole = (
            _first(actual_cage_mmol, cage_mmol)
            if reference is None
            else _first(actual[reference], planned[reference])
        )
        figures = {
            **_planned_figures(planned[place], substance),
            **_actual_figures(line, actual[place], substance),
            "actual_equivalents": _ratio(actual[place], whole),
        }
        for name, value in figures.items():
            field = "equivalents" if name in {"mmol", "mass_mg", "volume_ml"} else name
            unit = name.rpartition("_")[2].replace("ml", "mL")
            _check_size(value, unit, line.name, f"lines.{place}.{field}")
        known = {**line.model_dump(), "molar_mass_g_per_mol": substance.molar_mass_g_per_mol}
        lines.append(AmountsResultLine(**{**known, **figures}))
    return lines


def _planned_figures(mmol: float | None, substance: LineSubstance) -> dict[str, float | None]:
    if mmol is None:
        return {"mmol": None, "mass_mg": None, "volume_ml": None}
    return {
        "mmol": mmol,
        "mass_mg": mass_on_balance_mg(mmol, substance),
        "volume_ml": volume_to_take_ml(mmol, substance),
    }


def _actual_mmol(line: AmountsLine, substance: LineSubstance) -> float | None:
    if line.actual_mmol is not None:
        return line.actual_mmol
    if line.actual_mass_mg is not None:
        return amount_from_mass_mmol(line.actual_mass_mg, substance)
    if line.actual_volume_ml is not None:
        return amount_from_volume_mmol(line.actual_volume_ml, substance)
    return None


def _actual_figures(
    line: AmountsLine, mmol: float | None, substance: LineSubstance
) -> dict[str, float | None]:
    mass, volume = line.actual_mass_mg, line.actual_volume_ml
    if mmol is not None:
        mass = mass_on_balance_mg(mmol, substance) if mass is None else mass
        volume = volume_to_take_ml(mmol, substance) if volume is None else volume
    return {"actual_mmol": mmol, "actual_mass_mg": mass, "actual_volume_ml": volume}


def _first(*values: float | None) -> float | None:
    return next((value for value in values if value is not None), None)


def _ratio(part: float | None, whole: float | None) -> float | None:
    return part / whole if part is not None and whole else None


def _check_size(value: float | None, unit: str, name: str, field: str) -> None:
    if value is not None and not (math.isfinite(value) and value <= LARGEST):
        raise AmountsError(
            field,
            f"{name} comes to {value:.3g} {unit}, beyond anything that is weighed out; check its "
            "equivalents, purity, density and strength.",
        )


def _planned_supplies(cage: str, cage_mmol: float, lines: list[AmountsResultLine]) -> list[Supply]:
    return [Supply(cage, cage_mmol), *_supplies([(line, line.mmol) for line in lines])]


def _actual_limiting(
    cage: str, cage_mmol: float, actual_cage_mmol: float | None, lines: list[AmountsResultLine]
) -> str | None:
    """Return what limits by what went in, each amount not yet given being taken as planned."""
    if actual_cage_mmol is None and all(line.actual_mmol is None for line in lines):
        return None
    used = [(line, _first(line.actual_mmol, line.mmol)) for line in lines]
    charged = cage_mmol if actual_cage_mmol is None else actual_cage_mmol
    return limiting_supply([Supply(cage, charged), *_supplies(used)])


def _supplies(used: list[tuple[AmountsResultLine, float | None]]) -> Iterator[Supply]:
    for line, mmol in used:
        may_limit = line.role == "reagent" or line.needed_per_cage is not None
        if may_limit and mmol is not None:
            yield Supply(line.name, mmol, line.needed_per_cage or 1.0)


def _line_warnings(
    line: AmountsLine, worked_out: AmountsResultLine, substance: LineSubstance
) -> Iterator[str]:
    has_no_mass = substance.molar_mass_g_per_mol is None and not substance.is_solution
    if worked_out.mmol is not None and has_no_mass:
        yield (
            f"{line.name}: no structure and no molar mass are given, so there is no mass to weigh."
        )
    typed, worked = line.molar_mass_g_per_mol, substance.molar_mass_g_per_mol
    if typed and worked and abs(typed - worked) > _SAME_MOLAR_MASS * worked:
        yield (
            f"{line.name}: the structure gives {worked:.2f} g/mol, not the {typed:.2f} g/mol "
            "typed; the structure is followed. Is crystal water or a counter-ion missing?"
        )
    if substance.is_solution and line.purity != 1:
        yield (
            f"{line.name}: a solution is measured by its molarity alone; its purity of "
            f"{100 * line.purity:g} % is left out of account."
        )
    if worked_out.actual_mmol is None:
        if line.actual_volume_ml is not None:
            yield (
                f"{line.name}: a volume becomes an amount only with a density and a molar mass, or "
                "with a molarity; give what is missing."
            )
        elif line.actual_mass_mg is not None:
            missing = "a density" if substance.is_solution else "a structure or a molar mass"
            yield f"{line.name}: a mass becomes an amount only with {missing}; give it."


def _solvent(request: AmountsRequest, cage_mass_mg: float) -> VolumeAdvice:
    """Return the volume for all that is weighed: what isn't cage mostly has to dissolve too."""
    if not request.solvent:
        return VolumeAdvice(request.solvent_volume_ml, None, ())
    return advise_volume(
        request.cage,
        cage_mass_mg,
        request.solvent,
        request.solvent_volume_ml,
        request.solubility_margin,
    )
