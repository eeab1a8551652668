"""Quantities as they are shown: a sensible unit and four significant figures, or as many as asked.

What is shown can be typed back: reading it again gives the value to the figures shown. A field that
someone may save again shows ``EXACT`` figures, so that saving never rounds what was typed.
"""

from __future__ import annotations

from decimal import Decimal

SHOWN = 4
EXACT = 12
_HOURS_FROM = 120
_DAYS_FROM = 3 * 1440


def format_mass(mass_mg: float, figures: int = SHOWN) -> str:
    """Show a mass in mg as µg below 0.1 mg, g from 1 g, kg from 1 kg, else mg."""
    return _in_unit(mass_mg, ((1e6, "kg"), (1e3, "g"), (0.1, "mg")), 1e-3, "µg", figures)


def format_volume(volume_ml: float, figures: int = SHOWN) -> str:
    """Show a volume in mL as µL below 0.1 mL, L from 1 L, else mL."""
    return _in_unit(volume_ml, ((1e3, "L"), (0.1, "mL")), 1e-3, "µL", figures)


def format_amount(amount_mmol: float, figures: int = SHOWN) -> str:
    """Show an amount in mmol as µmol below 0.1 mmol, mol from 1 mol, else mmol."""
    return _in_unit(amount_mmol, ((1e3, "mol"), (0.1, "mmol")), 1e-3, "µmol", figures)


def format_molarity(molarity_mol_per_l: float, figures: int = SHOWN) -> str:
    """Show a concentration in mol/L."""
    return f"{_figures(molarity_mol_per_l, figures)} M"


def format_density(density_g_per_ml: float, figures: int = SHOWN) -> str:
    """Show a density in g/mL."""
    return f"{_figures(density_g_per_ml, figures)} g/mL"


def format_temperature(temperature_c: float, figures: int = SHOWN) -> str:
    """Show a temperature in °C."""
    sign = "−" if temperature_c < 0 else ""
    return f"{sign}{_figures(abs(temperature_c), figures)} °C"


def format_duration(duration_min: float, figures: int = SHOWN) -> str:
    """Show a time in minutes as ``90 min`` below 2 h, else in parts such as ``4 h 10 min``."""
    if duration_min < _HOURS_FROM:
        return f"{_figures(duration_min, figures)} min"
    days, rest = divmod(duration_min, 1440) if duration_min >= _DAYS_FROM else (0.0, duration_min)
    hours, minutes = divmod(rest, 60)
    parts = [(days, "d"), (hours, "h"), (minutes, "min")]
    shown = [(_figures(count, figures), unit) for count, unit in parts]
    return " ".join(f"{count} {unit}" for count, unit in shown if count != "0")


def format_fraction(fraction: float, figures: int = SHOWN) -> str:
    """Show a share in percent."""
    return f"{_figures(100 * fraction, figures)} %"


def _in_unit(
    value: float,
    units: tuple[tuple[float, str], ...],
    small: float,
    small_unit: str,
    figures: int,
) -> str:
    """Show ``value`` in the first unit whose lower limit it reaches, else in the small one."""
    for least, unit in units:
        if value >= least:
            return f"{_figures(value / (least if least >= 1 else 1.0), figures)} {unit}"
    if value == 0:
        return f"0 {units[-1][1]}"
    return f"{_figures(value / small, figures)} {small_unit}"


def _figures(value: float, figures: int) -> str:
    """Return ``value`` to so many significant figures, never in powers of ten."""
    digits = format(Decimal(f"{value:.{figures}g}"), "f")
    return digits.rstrip("0").rstrip(".") if "." in digits else digits
