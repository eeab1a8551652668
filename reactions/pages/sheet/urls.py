"""Addresses of the reaction sheet."""

from __future__ import annotations

from django.urls import path

from reactions.pages.converters import register
from reactions.pages.sheet import previews, standing, views

register()

_SHEET = "<campaign_code:code>-<int:number>/"

urlpatterns = [
    path(_SHEET, views.sheet, name="sheet"),
    path(f"{_SHEET}print/", views.print_sheet, name="print"),
    path(f"{_SHEET}state/", standing.change_state, name="state"),
    path(f"{_SHEET}lines/preview/", previews.preview_lines, name="preview-lines"),
    path(f"{_SHEET}readings/preview/", previews.preview_reading, name="preview-reading"),
    path(f"{_SHEET}<slug:name>/", views.part, name="part"),
    path(f"{_SHEET}<slug:name>/<int:pk>/remove/", views.remove_row, name="remove-row"),
]
