"""Addresses of the app; a site mounts them anywhere with one ``include``."""

from __future__ import annotations

from django.urls import include, path

app_name = "reactions"

urlpatterns = [
    path("api/", include("reactions.api.urls")),
    path("", include("reactions.pages.urls")),
]
