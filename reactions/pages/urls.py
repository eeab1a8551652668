"""Addresses of the pages, one line for each area of the site."""

from __future__ import annotations

from django.urls import URLPattern, URLResolver, include, path

urlpatterns: list[URLPattern | URLResolver] = [
    path("", include("reactions.pages.accounts.urls")),
    path("", include("reactions.pages.campaigns.urls")),
    path("", include("reactions.pages.sheet.urls")),
    path("", include("reactions.pages.search.urls")),
    path("", include("reactions.pages.structure.urls")),
    path("", include("reactions.pages.history.urls")),
    path("", include("reactions.pages.planner.urls")),
    path("", include("reactions.pages.families.urls")),
]
