"""Filters that show numbers with their units, and formulas as chemists write them."""

from __future__ import annotations

import re

from django import template
from django.utils.html import escape
from django.utils.safestring import SafeString

register = template.Library()

_COUNT_IN_FORMULA = re.compile(r"(?<=[A-Za-z)\]])(\d+)")


@register.filter
def percent(share: float | None) -> str:
    """Show a fraction (0 to 1) in percent with one decimal; nothing for None."""
    return "" if share is None else f"{100 * share:.1f} %"


@register.filter
def formula(text: str | None) -> SafeString:
    """Show a formula such as ``C60`` or ``C7H10O4`` with its counts lowered."""
    return SafeString(_COUNT_IN_FORMULA.sub(r"<sub>\1</sub>", str(escape(text or ""))))
