"""Numbers of the trade that have no unit of their own kind, as they are shown."""

from __future__ import annotations

from decimal import Decimal


def format_equivalents(equivalents: float) -> str:
    """Show equivalents to four figures, as they are typed: ``1.1 eq``."""
    return f"{Decimal(f'{equivalents:.4g}').normalize():f} eq"


def format_molar_mass(molar_mass_g_per_mol: float) -> str:
    """Show a molar mass with two decimals, as balances and catalogues have it."""
    return f"{molar_mass_g_per_mol:.2f} g/mol"


def format_percent(share: float) -> str:
    """Show a share (0 to 1) in percent with one decimal."""
    return f"{100 * share:.1f} %"
