"""Address of the planner."""

from __future__ import annotations

from django.urls import path

from reactions.pages.planner import views

urlpatterns = [path("plan/", views.planner, name="planner")]
