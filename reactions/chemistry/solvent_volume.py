"""How much solvent: at least what dissolves the cage, and a warning where the chosen can't."""

from __future__ import annotations

from dataclasses import dataclass

from reactions.chemistry.solvents import least_volume_ml, published_solubilities


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

    The least volume follows from the lowest published solubility at 25 °C, times ``margin``. A
    chosen volume that can't dissolve the cage, an unknown solubility, or a solvent in which the
    cage is practically insoluble gives a warning in words.
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
    if lowest == 0:
        return VolumeAdvice(
            chosen_ml, None, (f"{cage} is practically insoluble in {solvent} at 25 °C.",)
        )
    least = least_volume_ml(cage, cage_mass_mg, solvent, margin)
    if chosen_ml is None or least is None:
        return VolumeAdvice(least, least, ())
    bare = least / margin
    if chosen_ml < bare:
        warning = (
            f"{chosen_ml:.4g} mL of {solvent} dissolves {chosen_ml * lowest:.4g} mg of {cage} at "
            f"25 °C ({lowest:g} mg/mL), not {cage_mass_mg:.4g} mg; take at least {least:.4g} mL."
        )
        return VolumeAdvice(chosen_ml, least, (warning,))
    if chosen_ml < least:
        warning = (
            f"{chosen_ml:.4g} mL of {solvent} just dissolves the {cage} at 25 °C; with a margin of "
            f"{margin:g} it takes {least:.4g} mL."
        )
        return VolumeAdvice(chosen_ml, least, (warning,))
    return VolumeAdvice(chosen_ml, least, ())
