"""Addresses of the search and of its downloads."""

from __future__ import annotations

from django.urls import path

from reactions.pages.search import downloads, views

urlpatterns = [
    path("", views.search, name="search"),
    path("reactions.csv", downloads.as_csv, name="search-csv"),
    path("reactions.json", downloads.as_json, name="search-json"),
]
