"""Address of the families."""

from __future__ import annotations

from django.urls import path

from reactions.pages.families import views

urlpatterns = [path("families/", views.families, name="families")]
