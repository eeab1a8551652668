"""Addresses of the history pages."""

from __future__ import annotations

from django.urls import path

from reactions.pages.history import views

urlpatterns = [
    path("history/", views.overview, name="history"),
    path("history/<int:pk>/", views.job, name="history-import"),
    path("history/<int:pk>/cancel/", views.cancel, name="history-cancel"),
]
