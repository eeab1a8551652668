"""How much solvent: at least what dissolves the cage, and a warning where the chosen can't."""

from __future__ import annotations

from dataclasses import dataclass

from reactions.chemistry.quantity_text import format_mass, format_volume
from reactions.chemistry.solvents import least_volume_ml, published_solubilities

# "Practically insoluble": more than 10 L per g; European Pharmacopoeia, General Notices 1.4
# (from memory).
PRACTICALLY_INSOLUBLE_MG_PER_ML = 0.1
# A volume advised is shown to four figures and may be typed back so.
_AS_SHOWN = 1 - 1e-3


@dataclass(frozen=True)
class VolumeAdvice:
    """The volume in mL to use, the least that dissolves the cage with its margin, and warnings."""

    volume_ml: float | None
    least_volume_ml: float | None
    warnings: tuple[str, ...]


def advise_volume(
    cage: str, cage_mass_mg: float, solvent: str, chosen_ml: float | None, margin: float
) -> VolumeAdvice:
    """Return the volume for ``cage_mass_mg`` of cage: the chosen, else the least that dissolves it.

    The least volume follows from the lowest published solubility at 25 °C, times ``margin`` (1 or
    more). A chosen volume that can't dissolve the cage, an unknown solubility, or a solvent in
    which the cage is practically insoluble (below 0.1 mg/mL) gives a warning in words.
    """
    published = published_solubilities(cage, solvent)
    if not published:
        return VolumeAdvice(
            chosen_ml,
            None,
            (
                f"No solubility of {cage} in {solvent} is on record here; find it out before you "
                "choose the volume.",
            ),
        )
    lowest = published[0].mg_per_ml
    least = least_volume_ml(cage, cage_mass_mg, solvent, margin)
    volume = least if chosen_ml is None else chosen_ml
    if least is None or lowest < PRACTICALLY_INSOLUBLE_MG_PER_ML:
        return VolumeAdvice(volume, least, (_insoluble(cage, solvent, lowest, least),))
    if chosen_ml is None or chosen_ml >= least * _AS_SHOWN:
        return VolumeAdvice(volume, least, ())
    if chosen_ml < cage_mass_mg / lowest * _AS_SHOWN:
        warning = (
            f"{format_volume(chosen_ml)} of {solvent} dissolves {format_mass(chosen_ml * lowest)} "
            f"of {cage} at 25 °C ({lowest:g} mg/mL), not {format_mass(cage_mass_mg)}; take at "
            f"least {format_volume(least)}."
        )
    else:
        warning = (
            f"{format_volume(chosen_ml)} of {solvent} just dissolves the {cage} at 25 °C; with a "
            f"margin of {margin:g} it takes {format_volume(least)}."
        )
    return VolumeAdvice(volume, least, (warning,))


def _insoluble(cage: str, solvent: str, lowest: float, least: float | None) -> str:
    if least is None:
        return (
            f"{cage} is practically insoluble in {solvent} at 25 °C: no volume dissolves it. "
            "Choose another solvent, or run it as a suspension."
        )
    return (
        f"{cage} is practically insoluble in {solvent} at 25 °C ({lowest:g} mg/mL): dissolving it "
        f"takes {format_volume(least)}. Choose another solvent, or run it as a suspension."
    )
