"""Amount, mass and volume of one substance, each from the other.

n = m · w / M for a solid or neat liquid of mass fraction w; n = c · V for a solution; V = m / ρ.
Definitions; common practice of the laboratory, no source. Units: mmol, mg, mL, g/mol, g/mL, mol/L.
"""

from __future__ import annotations

from dataclasses import dataclass

_MG_PER_G = 1000.0


class AmountsError(ValueError):
    """Amounts that can't be worked out; ``field`` is the path of what is wrong.

    Paths are those of the request: ``lines.1.smiles``, ``cage``.
    """

    def __init__(self, field: str, message: str) -> None:
        super().__init__(message)
        self.field = field

    def __reduce__(self) -> tuple[type[AmountsError], tuple[str, str]]:
        """Pickle with the field, for work in another process."""
        return type(self), (self.field, str(self))


@dataclass(frozen=True)
class LineSubstance:
    """What turns amounts of one substance into masses and volumes; None where not given."""

    molar_mass_g_per_mol: float | None
    purity: float = 1.0
    density_g_per_ml: float | None = None
    molarity_mol_per_l: float | None = None

    @property
    def is_solution(self) -> bool:
        """Tell whether the substance is used as a solution of known molarity."""
        return self.molarity_mol_per_l is not None


def mass_on_balance_mg(mmol: float, substance: LineSubstance) -> float | None:
    """Return the mass in mg that holds ``mmol`` of substance; of a solution, by its density."""
    if substance.is_solution:
        volume_ml = volume_to_take_ml(mmol, substance)
        if volume_ml is None or substance.density_g_per_ml is None:
            return None
        return volume_ml * substance.density_g_per_ml * _MG_PER_G
    if substance.molar_mass_g_per_mol is None:
        return None
    return mmol * substance.molar_mass_g_per_mol / substance.purity


def volume_to_take_ml(mmol: float, substance: LineSubstance) -> float | None:
    """Return the volume in mL that holds ``mmol``: of the solution, or of the neat liquid."""
    if substance.molarity_mol_per_l is not None:
        return mmol / substance.molarity_mol_per_l
    mass_mg = mass_on_balance_mg(mmol, substance)
    if mass_mg is None or substance.density_g_per_ml is None:
        return None
    return mass_mg / substance.density_g_per_ml / _MG_PER_G


def amount_from_mass_mmol(mass_mg: float, substance: LineSubstance) -> float | None:
    """Return the amount of pure substance in mmol that a weighed mass holds."""
    if substance.molarity_mol_per_l is not None:
        if substance.density_g_per_ml is None:
            return None
        return mass_mg / substance.density_g_per_ml / _MG_PER_G * substance.molarity_mol_per_l
    if substance.molar_mass_g_per_mol is None:
        return None
    return mass_mg * substance.purity / substance.molar_mass_g_per_mol


def amount_from_volume_mmol(volume_ml: float, substance: LineSubstance) -> float | None:
    """Return the amount of pure substance in mmol that a measured volume holds."""
    if substance.molarity_mol_per_l is not None:
        return volume_ml * substance.molarity_mol_per_l
    if substance.density_g_per_ml is None:
        return None
    return amount_from_mass_mmol(volume_ml * substance.density_g_per_ml * _MG_PER_G, substance)
