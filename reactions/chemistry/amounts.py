"""What to weigh out: from cage and equivalents to mmol, mg and mL, and back from what was weighed.

For each line, with n the amount of pure substance:

    n(line) = equivalents · n(reference)      reference: the cage, or the line of ``equivalents_of``
    mass on the balance = n · M / purity
    volume of a neat liquid = mass / density; of a solution = n / molarity

Definitions of amount of substance and of molarity; common practice of the laboratory, no source.
"""

from __future__ import annotations

from typing import Annotated

from pydantic import BaseModel, ConfigDict, Field, model_validator

from reactions.chemistry.limiting import Supply, limiting_supply
from reactions.chemistry.line_amounts import (
    LineSubstance,
    amount_from_mass_mmol,
    amount_from_volume_mmol,
    mass_on_balance_mg,
    volume_to_take_ml,
)
from reactions.chemistry.masses import cage_molar_mass_g_per_mol, molar_mass_g_per_mol
from reactions.chemistry.solvent_volume import VolumeAdvice, advise_volume
from reactions.chemistry.structures import StructureError

DEFAULT_MARGIN = 1.25
_Positive = Annotated[float, Field(gt=0, le=1e9, allow_inf_nan=False)]
_NotNegative = Annotated[float, Field(ge=0, le=1e9, allow_inf_nan=False)]
_Share = Annotated[float, Field(gt=0, le=1, allow_inf_nan=False)]
_Name = Annotated[str, Field(min_length=1, max_length=200)]


class _Value(BaseModel):
    model_config = ConfigDict(frozen=True, extra="forbid", str_strip_whitespace=True)


class AmountsLine(_Value):
    """One substance to weigh or measure.

    ``equivalents`` are mol per mol of cage, or of the line named by ``equivalents_of``.
    ``needed_per_cage`` is how many equivalents the target itself consumes, by which what limits is
    judged (None: not consumed, as a base or catalyst in excess). ``purity`` is a mass fraction. With ``molarity_mol_per_l`` the line is a solution. At most one actual amount is given.
    """

    name: _Name
    role: Annotated[str, Field(max_length=40)] = "reagent"
    smiles: Annotated[str, Field(max_length=2000)] | None = None
    molar_mass_g_per_mol: _Positive | None = None
    equivalents: _NotNegative | None = None
    equivalents_of: Annotated[str, Field(max_length=200)] | None = None
    needed_per_cage: _Positive | None = None
    purity: _Share = 1.0
    density_g_per_ml: _Positive | None = None
    molarity_mol_per_l: _Positive | None = None
    actual_mass_mg: _NotNegative | None = None
    actual_volume_ml: _NotNegative | None = None
    actual_mmol: _NotNegative | None = None

    @model_validator(mode="after")
    def _one_actual_amount(self) -> AmountsLine:
        given = [self.actual_mass_mg, self.actual_volume_ml, self.actual_mmol]
        if sum(value is not None for value in given) > 1:
            raise ValueError(
                f"{self.name} has more than one actual amount; give its mass, its volume or its "
                "amount, not two."
            )
        return self


class AmountsRequest(_Value):
    """Cage, lines and solvent.

    The cage is given as ``cage_mass_mg``, or as ``product_mass_mg`` wanted with ``expected_yield``
    and the product's molar mass or structure. ``actual_cage_mass_mg`` is what was weighed.
    """

    cage: Annotated[str, Field(min_length=2, max_length=40)] = "C60"
    cage_mass_mg: _Positive | None = None
    cage_purity: _Share = 1.0
    product_mass_mg: _Positive | None = None
    expected_yield: _Share | None = None
    product_molar_mass_g_per_mol: _Positive | None = None
    product_smiles: Annotated[str, Field(max_length=2000)] | None = None
    actual_cage_mass_mg: _Positive | None = None
    solvent: Annotated[str, Field(max_length=80)] | None = None
    solvent_volume_ml: _Positive | None = None
    solubility_margin: Annotated[float, Field(ge=1, le=100, allow_inf_nan=False)] = DEFAULT_MARGIN
    lines: Annotated[list[AmountsLine], Field(max_length=100)] = []

    @model_validator(mode="after")
    def _cage_given_once(self) -> AmountsRequest:
        if (self.cage_mass_mg is None) == (self.product_mass_mg is None):
            raise ValueError(
                "Give either the mass of cage (cage_mass_mg) or the mass of product wanted "
                "(product_mass_mg), not both and not neither."
            )
        if self.product_mass_mg is not None and (
            self.expected_yield is None
            or (self.product_molar_mass_g_per_mol is None) == (self.product_smiles is None)
        ):
            raise ValueError(
                "A mass of product needs the expected yield (expected_yield) and either the "
                "product's molar mass or its structure."
            )
        return self


class AmountsResultLine(_Value):
    """A line with its amounts; None where something needed is not given.

    Each of the three actual amounts follows from the one that was given.
    """

    name: str
    role: str
    smiles: str | None
    molar_mass_g_per_mol: float | None
    equivalents: float | None
    equivalents_of: str | None
    needed_per_cage: float | None
    purity: float
    density_g_per_ml: float | None
    molarity_mol_per_l: float | None
    actual_mass_mg: float | None
    actual_volume_ml: float | None
    actual_mmol: float | None
    mmol: float | None = None
    mass_mg: float | None = None
    volume_ml: float | None = None
    actual_equivalents: float | None = None


class AmountsResult(_Value):
    """The weighing list worked out.

    ``limiting`` names what runs out first: the cage or a line with role ``reagent`` or with
    ``needed_per_cage``.
    """

    cage: str
    cage_molar_mass_g_per_mol: float
    cage_mass_mg: float
    cage_mmol: float
    actual_cage_mmol: float | None
    lines: list[AmountsResultLine]
    limiting: str
    solvent_volume_ml: float | None
    least_solvent_volume_ml: float | None
    solubility_margin: float
    warnings: list[str]


def amounts(request: AmountsRequest) -> AmountsResult:
    """Work out a weighing list.

    Raises ``ValueError`` (``StructureError`` for a structure that can't be read) naming the line.
    """
    cage_g_per_mol = cage_molar_mass_g_per_mol(request.cage)
    cage_mmol = _cage_mmol(request, cage_g_per_mol)
    cage_mass_mg = cage_mmol * cage_g_per_mol / request.cage_purity
    actual_cage_mmol = (
        None
        if request.actual_cage_mass_mg is None
        else request.actual_cage_mass_mg * request.cage_purity / cage_g_per_mol
    )
    lines, warnings = _worked_out(request, cage_mmol, actual_cage_mmol)
    advice = _solvent(request, cage_mass_mg * request.cage_purity)
    return AmountsResult(
        cage=request.cage,
        cage_molar_mass_g_per_mol=cage_g_per_mol,
        cage_mass_mg=cage_mass_mg,
        cage_mmol=cage_mmol,
        actual_cage_mmol=actual_cage_mmol,
        lines=lines,
        limiting=limiting_supply(_supplies(request.cage, cage_mmol, lines)),
        solvent_volume_ml=advice.volume_ml,
        least_solvent_volume_ml=advice.least_volume_ml,
        solubility_margin=request.solubility_margin,
        warnings=[*warnings, *advice.warnings],
    )


def _cage_mmol(request: AmountsRequest, cage_g_per_mol: float) -> float:
    if request.cage_mass_mg is not None:
        return request.cage_mass_mg * request.cage_purity / cage_g_per_mol
    product = request.product_molar_mass_g_per_mol or molar_mass_g_per_mol(
        request.product_smiles or ""
    )
    if product <= cage_g_per_mol:
        raise ValueError(
            f"The product's molar mass, {product:.2f} g/mol, is not above that of {request.cage}, "
            f"{cage_g_per_mol:.2f} g/mol; check it."
        )
    return (request.product_mass_mg or 0.0) / product / (request.expected_yield or 1.0)


def _worked_out(
    request: AmountsRequest, cage_mmol: float, actual_cage_mmol: float | None
) -> tuple[list[AmountsResultLine], list[str]]:
    planned = _resolved_mmol(request.lines, cage_mmol)
    lines: list[AmountsResultLine] = []
    warnings: list[str] = []
    substances = [_substance(line) for line in request.lines]
    actual = [
        _actual_mmol(line, substance)
        for line, substance in zip(request.lines, substances, strict=True)
    ]
    for place, (line, substance) in enumerate(zip(request.lines, substances, strict=True)):
        mmol = planned[place]
        reference = _reference_actual(request.lines, place, actual, actual_cage_mmol)
        lines.append(
            AmountsResultLine(
                **{
                    **line.model_dump(),
                    **_actual_amounts(line, actual[place], substance),
                    "molar_mass_g_per_mol": substance.molar_mass_g_per_mol,
                },
                mmol=mmol,
                mass_mg=None if mmol is None else mass_on_balance_mg(mmol, substance),
                volume_ml=None if mmol is None else volume_to_take_ml(mmol, substance),
                actual_equivalents=_ratio(actual[place], reference),
            )
        )
        if mmol is not None and not (substance.can_be_weighed or substance.is_solution):
            warnings.append(
                f"{line.name}: no structure and no molar mass are given, so there is no mass to "
                "weigh."
            )
    return lines, warnings


def _substance(line: AmountsLine) -> LineSubstance:
    molar_mass = line.molar_mass_g_per_mol
    if line.smiles:
        try:
            molar_mass = molar_mass_g_per_mol(line.smiles)
        except StructureError as error:
            raise StructureError(f"{line.name}: {error}") from error
    return LineSubstance(molar_mass, line.purity, line.density_g_per_ml, line.molarity_mol_per_l)


def _resolved_mmol(lines: list[AmountsLine], cage_mmol: float) -> list[float | None]:
    """Return the planned amounts in mmol, following references between lines to the cage."""
    places = _places_by_name(lines)
    known: dict[int, float | None] = {}

    def resolve(place: int, above: tuple[int, ...]) -> float | None:
        if place in above:
            raise ValueError(
                f"The equivalents of {lines[place].name} refer in a circle; let one line refer to "
                "the cage."
            )
        if place not in known:
            line = lines[place]
            reference = _reference_place(line, places)
            of = cage_mmol if reference is None else resolve(reference, (*above, place))
            known[place] = None if line.equivalents is None or of is None else line.equivalents * of
        return known[place]

    return [resolve(place, ()) for place in range(len(lines))]


def _places_by_name(lines: list[AmountsLine]) -> dict[str, int]:
    places: dict[str, int] = {}
    for place, line in enumerate(lines):
        places.setdefault(line.name, place)
    return places


def _reference_place(line: AmountsLine, places: dict[str, int]) -> int | None:
    """Return the place of the line that ``equivalents_of`` names; None for the cage."""
    if not line.equivalents_of:
        return None
    if line.equivalents_of not in places:
        raise ValueError(
            f"{line.name} counts its equivalents by “{line.equivalents_of}”, which is no line here."
        )
    return places[line.equivalents_of]


def _actual_mmol(line: AmountsLine, substance: LineSubstance) -> float | None:
    if line.actual_mmol is not None:
        return line.actual_mmol
    if line.actual_mass_mg is not None:
        return amount_from_mass_mmol(line.actual_mass_mg, substance)
    if line.actual_volume_ml is not None:
        return amount_from_volume_mmol(line.actual_volume_ml, substance)
    return None


def _actual_amounts(
    line: AmountsLine, actual_mmol: float | None, substance: LineSubstance
) -> dict[str, float | None]:
    mass, volume = line.actual_mass_mg, line.actual_volume_ml
    if actual_mmol is not None:
        mass = mass_on_balance_mg(actual_mmol, substance) if mass is None else mass
        volume = volume_to_take_ml(actual_mmol, substance) if volume is None else volume
    return {"actual_mmol": actual_mmol, "actual_mass_mg": mass, "actual_volume_ml": volume}


def _reference_actual(
    lines: list[AmountsLine],
    place: int,
    actual: list[float | None],
    actual_cage_mmol: float | None,
) -> float | None:
    reference = _reference_place(lines[place], _places_by_name(lines))
    return actual_cage_mmol if reference is None else actual[reference]


def _ratio(part: float | None, whole: float | None) -> float | None:
    return part / whole if part is not None and whole else None


def _supplies(cage: str, cage_mmol: float, lines: list[AmountsResultLine]) -> list[Supply]:
    supplies = [Supply(cage, cage_mmol)]
    for line in lines:
        is_consumed = line.role == "reagent" or line.needed_per_cage is not None
        if is_consumed and line.mmol is not None:
            supplies.append(Supply(line.name, line.mmol, line.needed_per_cage or 1.0))
    return supplies


def _solvent(request: AmountsRequest, cage_mass_mg: float) -> VolumeAdvice:
    if not request.solvent:
        return VolumeAdvice(request.solvent_volume_ml, None, ())
    return advise_volume(
        request.cage,
        cage_mass_mg,
        request.solvent,
        request.solvent_volume_ml,
        request.solubility_margin,
    )
