"""Addresses of the site: the app at the root, the site's own accounts and health beside it."""

from __future__ import annotations

from django.contrib import admin
from django.urls import include, path

from labbook.health import health

urlpatterns = [
    path("health/", health, name="health"),
    path("admin/", admin.site.urls),
    path("", include("reactions.urls")),
]
