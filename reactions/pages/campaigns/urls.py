"""Addresses of the campaigns."""

from __future__ import annotations

from django.urls import path

from reactions.pages.campaigns import members, views
from reactions.pages.converters import register

register()

urlpatterns = [
    path("campaigns/", views.campaigns, name="campaigns"),
    path("campaigns/<campaign_code:code>/", views.campaign, name="campaign"),
    path("campaigns/<campaign_code:code>/members/", members.set_role, name="set-member"),
    path("campaigns/<campaign_code:code>/members/remove/", members.remove, name="remove-member"),
]
