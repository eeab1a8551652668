"""Pictograms of the Globally Harmonized System."""

from __future__ import annotations

from django import template
from django.templatetags.static import static
from django.utils.html import format_html
from django.utils.safestring import SafeString

register = template.Library()

# Names as in the Globally Harmonized System, Annex 3; from memory.
_NAMES = {
    "GHS01": "exploding bomb",
    "GHS02": "flame",
    "GHS03": "flame over circle",
    "GHS04": "gas cylinder",
    "GHS05": "corrosion",
    "GHS06": "skull and crossbones",
    "GHS07": "exclamation mark",
    "GHS08": "health hazard",
    "GHS09": "environment",
}


@register.simple_tag
def pictogram(code: str) -> SafeString:
    """Draw the pictogram of a code from GHS01 to GHS09, its name as the alternative text."""
    name = _NAMES.get(code)
    if name is None:
        return format_html("<b>{}</b>", code)
    return format_html(
        '<img src="{}" alt="{}: {}" title="{}: {}" width="44" height="44">',
        static(f"reactions/pictograms/{code}.svg"),
        code,
        name,
        code,
        name,
    )
