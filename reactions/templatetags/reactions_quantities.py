"""Filters that show numbers with their units, and formulas as chemists write them.

Each shows nothing for None, so that a template can say what stands in its place.
"""

from __future__ import annotations

import re
from collections.abc import Callable

from django import template
from django.utils.html import escape
from django.utils.safestring import SafeString

from reactions.chemistry import quantity_text
from reactions.models import Component
from reactions.pages.quantity_words import (
    format_equivalents,
    format_molar_mass,
    format_percent,
)
from reactions.pages.sheet.line_details import details_of

register = template.Library()

_COUNT_IN_FORMULA = re.compile(r"(?<=[A-Za-z)\]])(\d+)")


def _or_nothing(show: Callable[[float], str]) -> Callable[[float | None], str]:
    """Return ``show`` for numbers, and the empty text for anything else."""

    def shown(value: float | None) -> str:
        return show(value) if isinstance(value, int | float) else ""

    return shown


register.filter("mass", _or_nothing(quantity_text.format_mass))
register.filter("volume", _or_nothing(quantity_text.format_volume))
register.filter("amount", _or_nothing(quantity_text.format_amount))
register.filter("molarity", _or_nothing(quantity_text.format_molarity))
register.filter("density", _or_nothing(quantity_text.format_density))
register.filter("temperature", _or_nothing(quantity_text.format_temperature))
register.filter("duration", _or_nothing(quantity_text.format_duration))
register.filter("molar_mass", _or_nothing(format_molar_mass))
register.filter("equivalents", _or_nothing(format_equivalents))
register.filter("percent", _or_nothing(format_percent))


@register.filter
def formula(text: str | None) -> SafeString:
    """Show a formula such as ``C60`` or ``C7H10O4`` with its counts lowered."""
    return SafeString(_COUNT_IN_FORMULA.sub(r"<sub>\1</sub>", str(escape(text or ""))))


@register.filter
def component_details(component: Component) -> str:
    """Show what a line of the weighing list is made of, in a few words."""
    return details_of(component)
