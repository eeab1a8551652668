"""Addresses of structures shown back."""

from __future__ import annotations

from django.urls import path

from reactions.pages.structure import views

urlpatterns = [
    path("structure/", views.shown, name="structure"),
    path("addends/<int:key>/picture.svg", views.picture, name="addend-picture"),
]
