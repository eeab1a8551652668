"""Addresses of the app; a site mounts them anywhere with one ``include``."""

from __future__ import annotations

from django.urls import URLPattern, URLResolver

app_name = "reactions"

urlpatterns: list[URLPattern | URLResolver] = []
