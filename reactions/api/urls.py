"""Addresses of the API."""

from __future__ import annotations

from django.urls import path

from reactions.api import access, catalogue, computing, parts, records
from reactions.api.base import token_is_installed
from reactions.api.description import description
from reactions.calculators import CALCULATORS

_RECORD = "reactions/<str:label>/"
_PARTS = {
    "lines": parts.Lines,
    "conditions": parts.Conditions,
    "isolation": parts.Isolation,
    "conclusion": parts.Conclusion,
    "observations": parts.Observations,
    "readings": parts.Readings,
    "state": parts.StateOfReaction,
    "signature": parts.AuthorSignature,
    "countersignature": parts.Countersignature,
}

urlpatterns = [
    path("", description, name="api-docs"),
    path("schema/", access.Schema.as_view(), name="api-schema"),
    path("campaigns/", catalogue.Campaigns.as_view(), name="api-campaigns"),
    path("campaigns/<str:code>/", catalogue.OneCampaign.as_view(), name="api-campaign"),
    path(
        "campaigns/<str:code>/members/<str:username>/",
        catalogue.Member.as_view(),
        name="api-member",
    ),
    path("families/", catalogue.Families.as_view(), name="api-families"),
    path("addends/", catalogue.Addends.as_view(), name="api-addends"),
    path("reactions/", records.Reactions.as_view(), name="api-reactions"),
    path(_RECORD, records.OneReaction.as_view(), name="api-reaction"),
    path(
        f"{_RECORD}observations/<int:pk>/",
        parts.OneObservation.as_view(),
        name="api-observation",
    ),
    path(f"{_RECORD}readings/<int:pk>/", parts.OneReading.as_view(), name="api-reading"),
    *(
        path(f"{_RECORD}{name}/", view.as_view(), name=f"api-{name}")
        for name, view in _PARTS.items()
    ),
    path("compute/", computing.Calculators.as_view(), name="api-compute-list"),
    *(
        path(
            f"compute/{row.name}/",
            computing.view_of(row).as_view(),
            name=f"api-compute-{row.name}",
        )
        for row in CALCULATORS.values()
    ),
    path("compute/<str:name>/", computing.NoSuchCalculator.as_view(), name="api-compute"),
]

if token_is_installed():
    urlpatterns.append(path("token/", access.ObtainToken.as_view(), name="api-token"))
