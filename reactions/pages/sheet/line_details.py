"""What a line is made of, in a few words."""

from __future__ import annotations

from reactions.chemistry import quantity_text
from reactions.models import Component
from reactions.pages.quantity_words import format_molar_mass


def details_of(component: Component) -> str:
    """Return molar mass, purity, strength, density and batch, such as ``239.1 g/mol · 97 %``."""
    parts = []
    if component.molar_mass_g_per_mol is not None:
        parts.append(format_molar_mass(component.molar_mass_g_per_mol))
    if component.purity is not None and component.purity != 1:
        parts.append(f"purity {quantity_text.format_fraction(component.purity)}")
    if component.molarity_mol_per_l is not None:
        parts.append(quantity_text.format_molarity(component.molarity_mol_per_l))
    if component.density_g_per_ml is not None:
        parts.append(quantity_text.format_density(component.density_g_per_ml))
    if component.equivalents_of:
        parts.append(f"equivalents of {component.equivalents_of}")
    if component.batch:
        parts.append(f"batch {component.batch}")
    return " · ".join(parts)
