"""Reactions: found, planned and read."""

from __future__ import annotations

import re
from typing import Annotated, Any

from django.core.exceptions import ObjectDoesNotExist
from drf_spectacular.utils import OpenApiParameter
from pydantic import Field
from rest_framework.request import Request
from rest_framework.response import Response

from reactions.api.base import Endpoint, read_input
from reactions.api.openapi import described
from reactions.api.outputs import REFUSALS, ReactionOutput, ReactionPage
from reactions.api.paging import PAGE_PARAMETERS, answer_in_pages
from reactions.api.showing import show_reaction, show_summary
from reactions.chemistry.distribution.request import Efficiency, ModelFields
from reactions.chemistry.planning.objectives import Objective
from reactions.errors import FieldErrors
from reactions.models import Campaign, Reaction
from reactions.search.query import SearchQuery, find
from reactions.services.inputs import ModelInput, PlanInput, Share
from reactions.services.planning import plan_reaction

_LABEL = re.compile(r"([A-Z][A-Z0-9]{1,11})-([1-9]\d{0,8})\Z", re.ASCII)


class PlannedModel(ModelFields):
    """The composition model that the plan rests on, with the share of the reagent that adds."""

    reagent_efficiency: Efficiency = 1.0


class PlannedReaction(PlanInput):
    """A plan and the campaign it belongs to."""

    campaign: str = Field(min_length=2, max_length=12)
    objective: Objective | None = None  # type: ignore[assignment]
    composition_model: PlannedModel | None = None  # type: ignore[assignment]
    predicted_composition: Annotated[list[Share], Field(max_length=201)] | None = None

    def as_plan(self) -> PlanInput:
        """Return the plan as the service takes it."""
        values = {name: getattr(self, name) for name in PlanInput.model_fields}
        values["objective"] = self.objective and self.objective.model_dump()
        values["composition_model"] = self.composition_model and ModelInput(
            **self.composition_model.model_dump()
        )
        return PlanInput(**values)


def find_reaction(user: Any, label: str) -> Reaction:
    """Return a reaction that ``user`` may see, by its label; raises ``ObjectDoesNotExist``."""
    match = _LABEL.match(label)
    if not match:
        raise ObjectDoesNotExist
    return (
        Reaction.objects.visible_to(user)
        .select_related("campaign", "addend", "created_by")
        .get(campaign__code=match[1], number=int(match[2]))
    )


def answer_with(reaction: Reaction, status: int = 200) -> Response:
    """Answer with everything that the record holds; its version is the ETag."""
    response = Response(show_reaction(reaction).model_dump(mode="json"), status=status)
    response["ETag"] = f'"{reaction.version}"'
    return response


def _search_parameters() -> list[OpenApiParameter]:
    """Return the fields of a query as parameters of an address."""
    schema = SearchQuery.model_json_schema()
    return [
        OpenApiParameter(name, _kind(field, schema["$defs"]))
        for name, field in schema["properties"].items()
    ]


def _kind(field: dict[str, Any], named: dict[str, Any]) -> dict[str, Any]:
    """Return what a parameter takes; in an address, None is said by leaving it out."""
    kind = next((part for part in field.get("anyOf", []) if part.get("type") != "null"), field)
    if "$ref" in kind:
        kind = named[kind["$ref"].rpartition("/")[2]]
    wanted = ("type", "format", "enum", "items", "minimum", "maximum", "maxLength", "maxItems")
    return {key: kind[key] for key in wanted if key in kind}


class Reactions(Endpoint):
    """The search, and planning a reaction."""

    @described(
        operation_id="reactions_find",
        parameters=[*_search_parameters(), *PAGE_PARAMETERS],
        responses={200: ReactionPage, **REFUSALS},
    )
    def get(self, request: Request) -> Response:
        """Return the reactions that a query finds; the parameters are those of the search page."""
        query = SearchQuery.from_address(request.query_params)
        hits = find(query, self.person).select_related("campaign", "addend", "created_by")
        return answer_in_pages(request, hits, show_summary)

    @described(
        operation_id="reactions_plan",
        request=PlannedReaction,
        responses={201: ReactionOutput, **REFUSALS},
    )
    def post(self, request: Request) -> Response:
        """Plan a reaction: it gets its number and its weighing list worked out."""
        planned = read_input(PlannedReaction, request.data)
        campaign = Campaign.objects.visible_to(self.person).filter(code=planned.campaign).first()
        if campaign is None:
            raise FieldErrors.at(
                "campaign", f"You are in no campaign “{planned.campaign}”; choose one of yours."
            )
        reaction = plan_reaction(self.person, campaign, planned.as_plan())
        return answer_with(find_reaction(self.person, reaction.label), status=201)


class OneReaction(Endpoint):
    """One reaction, whole."""

    @described(operation_id="reactions_read", responses={200: ReactionOutput, **REFUSALS})
    def get(self, request: Request, label: str) -> Response:
        """Return everything that the record holds; its ETag is the version to send back."""
        return answer_with(find_reaction(self.person, label))
