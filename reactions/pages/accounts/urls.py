"""Addresses of logging in and out."""

from __future__ import annotations

from django.urls import path

from reactions.pages.accounts import views

urlpatterns = [
    path("log-in/", views.LogIn.as_view(), name="login"),
    path("log-out/", views.LogOut.as_view(), name="logout"),
]
