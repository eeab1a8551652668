"""Quantities as they are shown: a sensible unit and four significant figures, or as many as asked.

What is shown can be typed back: reading it again gives the value to the figures shown. A field that
someone may save again shows ``EXACT`` figures, so that saving never rounds what was typed.
"""

from __future__ import annotations

from decimal import Decimal

SHOWN = 4
EXACT = 12
_HOURS_FROM_MIN = 120
_DAYS_FROM_H = 72
# From what value on a unit is used, its size, its sign; in mg, mL and mmol, largest unit first.
_MASSES = ((1e6, 1e6, "kg"), (1e3, 1e3, "g"), (0.1, 1.0, "mg"), (0.0, 1e-3, "µg"))
_VOLUMES = ((1e3, 1e3, "L"), (0.1, 1.0, "mL"), (0.0, 1e-3, "µL"))
_AMOUNTS = ((1e3, 1e3, "mol"), (0.1, 1.0, "mmol"), (0.0, 1e-3, "µmol"))


def format_mass(mass_mg: float, figures: int = SHOWN) -> str:
    """Show a mass in mg as µg below 0.1 mg, g from 1 g, kg from 1 kg, else mg."""
    return _in_unit(mass_mg, _MASSES, figures)


def format_volume(volume_ml: float, figures: int = SHOWN) -> str:
    """Show a volume in mL as µL below 0.1 mL, L from 1 L, else mL."""
    return _in_unit(volume_ml, _VOLUMES, figures)


def format_amount(amount_mmol: float, figures: int = SHOWN) -> str:
    """Show an amount in mmol as µmol below 0.1 mmol, mol from 1 mol, else mmol."""
    return _in_unit(amount_mmol, _AMOUNTS, figures)


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
    """Show a time in minutes in parts such as ``4 h 10 min``; hours from 2 h on, days from 3 d on.

    Parts show the time to eight figures at least, so that seconds are not lost in days; below a
    minute it is shown in seconds to the figures asked for.
    """
    if duration_min == 0:
        return "0 min"
    shown = figures if duration_min < 1 else max(figures, 8)
    minutes, seconds = divmod(Decimal(f"{60 * duration_min:.{shown}g}"), 60)
    hours, minutes = divmod(minutes, 60) if minutes >= _HOURS_FROM_MIN else (Decimal(0), minutes)
    days, hours = divmod(hours, 24) if hours >= _DAYS_FROM_H else (Decimal(0), hours)
    parts = ((days, "d"), (hours, "h"), (minutes, "min"), (seconds, "s"))
    return " ".join(f"{_plain(count)} {unit}" for count, unit in parts if count)


def format_fraction(fraction: float, figures: int = SHOWN) -> str:
    """Show a share in percent."""
    return f"{_figures(100 * fraction, figures)} %"


def _in_unit(value: float, units: tuple[tuple[float, float, str], ...], figures: int) -> str:
    """Show ``value`` in the first unit that it is large enough for; 0 in the last but one."""
    if value == 0:
        return f"0 {units[-2][2]}"
    size, unit = next((size, unit) for least, size, unit in units if value >= least)
    return f"{_figures(value / size, figures)} {unit}"


def _figures(value: float, figures: int) -> str:
    """Return ``value`` to so many significant figures, never in powers of ten."""
    return _plain(Decimal(f"{value:.{figures}g}"))


def _plain(value: Decimal) -> str:
    text = f"{value:f}"
    return text.rstrip("0").rstrip(".") if "." in text else text
