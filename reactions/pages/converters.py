"""Parts of addresses."""

from __future__ import annotations

from functools import cache

from django.urls import register_converter


class CampaignCode:
    """The code of a campaign, such as ``ACC``."""

    regex = "[A-Z][A-Z0-9]{1,11}"

    def to_python(self, value: str) -> str:
        """Return the code as it stands in the address."""
        return value

    def to_url(self, value: str) -> str:
        """Return the code as it stands in the address."""
        return value


@cache
def register() -> None:
    """Make ``<campaign_code:…>`` known to the addresses, once."""
    register_converter(CampaignCode, "campaign_code")
