"""Reactions: found, planned, read, and written through the services."""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import Any

from django.core.exceptions import ObjectDoesNotExist
from drf_spectacular.utils import OpenApiParameter, extend_schema
from pydantic import BaseModel, Field
from rest_framework.exceptions import APIException
from rest_framework.pagination import PageNumberPagination
from rest_framework.request import Request
from rest_framework.response import Response

from reactions.api.base import Endpoint, fields_of, read_input
from reactions.api.outputs import ReactionOutput, ReactionPage, Refusal
from reactions.api.showing import show_reaction, show_summary
from reactions.errors import FieldErrors
from reactions.models import Campaign, Reaction, State
from reactions.search.query import SearchQuery, find
from reactions.services.inputs import (
    ConclusionInput,
    ConditionsInput,
    Input,
    IsolationStepInput,
    LineInput,
    ObservationInput,
    PlanInput,
    ReadingInput,
)
from reactions.services.lines import amend_lines
from reactions.services.planning import plan_reaction
from reactions.services.revising import Edit
from reactions.services.run import (
    add_observation,
    add_reading,
    amend_conclusion,
    amend_conditions,
    amend_isolation,
    remove_observation,
    remove_reading,
)
from reactions.services.states import countersign, move, sign

_LABEL = re.compile(r"([A-Z][A-Z0-9]{1,11})-([1-9]\d{0,8})\Z", re.ASCII)
_ETAG = re.compile(r'(?:W/)?"?(\d{1,9})"?\Z', re.ASCII)
_REFUSALS: dict[int, type[BaseModel]] = dict.fromkeys((400, 403, 404, 409), Refusal)
_SEEN = OpenApiParameter(
    "If-Match", str, OpenApiParameter.HEADER, description="The version seen, as the ETag gave it."
)


class VersionNeeded(APIException):
    """A change that could run over another's has to say which version it was made on."""

    status_code = 428
    default_detail = (
        "Say which version you saw: send its ETag as If-Match, or the field seen_version."
    )


class PlannedReaction(PlanInput):
    """A plan and the campaign it belongs to."""

    campaign: str = Field(min_length=2, max_length=12)


class LinesInput(Input):
    """The whole weighing list, in its order."""

    lines: list[LineInput] = Field(max_length=60)


class IsolationInput(Input):
    """The whole isolation, in its order."""

    steps: list[IsolationStepInput] = Field(max_length=60)


class StateInput(Input):
    """The state to move to; signing has its own address."""

    state: State


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


def _answer(reaction: Reaction, status: int = 200) -> Response:
    response = Response(show_reaction(reaction).model_dump(mode="json"), status=status)
    response["ETag"] = f'"{reaction.version}"'
    return response


class Pages(PageNumberPagination):
    """25 hits to a page, or as many as asked, up to 200."""

    page_size = 25
    page_size_query_param = "page_size"
    max_page_size = 200


class Reactions(Endpoint):
    """The search, and planning a reaction."""

    @extend_schema(
        operation_id="reactions_find",
        parameters=[
            OpenApiParameter(name, str, description=field.description or "", many=name == "family")
            for name, field in SearchQuery.model_fields.items()
        ]
        + [OpenApiParameter("page", int), OpenApiParameter("page_size", int)],
        responses={200: ReactionPage, **_REFUSALS},
    )
    def get(self, request: Request) -> Response:
        """Return the reactions that a query finds; the parameters are those of the search page."""
        query = SearchQuery.from_address(request.query_params)
        hits = find(query, self.person).select_related("campaign", "addend", "created_by")
        pages = Pages()
        rows = pages.paginate_queryset(hits, request, view=self)
        return pages.get_paginated_response(
            [show_summary(row).model_dump(mode="json") for row in rows or []]
        )

    @extend_schema(
        operation_id="reactions_plan",
        request=PlannedReaction,
        responses={201: ReactionOutput, **_REFUSALS},
    )
    def post(self, request: Request) -> Response:
        """Plan a reaction: it gets its number and its weighing list worked out."""
        planned = read_input(PlannedReaction, request.data)
        campaign = Campaign.objects.visible_to(self.person).filter(code=planned.campaign).first()
        if campaign is None:
            raise FieldErrors.at(
                "campaign", f"You are in no campaign “{planned.campaign}”; choose one of yours."
            )
        plan = PlanInput.model_construct(
            **{name: getattr(planned, name) for name in PlanInput.model_fields}
        )
        reaction = plan_reaction(self.person, campaign, plan)
        return _answer(find_reaction(self.person, reaction.label), status=201)


class OneReaction(Endpoint):
    """One reaction, whole."""

    @extend_schema(operation_id="reactions_read", responses={200: ReactionOutput, **_REFUSALS})
    def get(self, request: Request, label: str) -> Response:
        """Return everything that the record holds; its ETag is the version to send back."""
        return _answer(find_reaction(self.person, label))


class Part(Endpoint):
    """A part of a reaction that is written through a service."""

    def _edit(self, label: str, seen_version: int | None = None) -> Edit:
        return Edit(self.person, find_reaction(self.person, label).pk, seen_version)

    def _write(self, label: str, write: Callable[[Edit], Any], status: int = 200) -> Response:
        write(self._edit(label))
        return _answer(find_reaction(self.person, label), status)

    def _replace(
        self, request: Request, label: str, write: Callable[[Edit, dict[str, Any]], Any]
    ) -> Response:
        """Let ``write`` put the request's fields in place of what the seen version holds."""
        reaction = find_reaction(self.person, label)
        fields = fields_of(request)
        seen = _seen_version(request, fields)
        write(Edit(self.person, reaction.pk, seen), fields)
        return _answer(find_reaction(self.person, label))


def _seen_version(request: Request, fields: dict[str, Any]) -> int:
    """Return the version the person had seen, taking ``seen_version`` out of the fields."""
    in_fields = fields.pop("seen_version", None)
    header = request.headers.get("If-Match")
    if header is not None:
        match = _ETAG.match(header.strip())
        if not match:
            raise FieldErrors.at("If-Match", f"“{header[:40]}” is no version; send the ETag.")
        return int(match[1])
    if in_fields is None:
        raise VersionNeeded
    if isinstance(in_fields, bool) or not isinstance(in_fields, int):
        raise FieldErrors.at("seen_version", f"“{str(in_fields)[:40]}” is no version number.")
    return in_fields


class Lines(Part):
    """The weighing list."""

    @extend_schema(
        operation_id="reactions_lines",
        parameters=[_SEEN],
        request=LinesInput,
        responses={200: ReactionOutput, **_REFUSALS},
    )
    def put(self, request: Request, label: str) -> Response:
        """Put a weighing list in place of the stored one; every amount is worked out."""
        return self._replace(
            request,
            label,
            lambda edit, fields: amend_lines(edit, read_input(LinesInput, fields).lines),
        )


class Conditions(Part):
    """The conditions."""

    @extend_schema(
        operation_id="reactions_conditions",
        parameters=[_SEEN],
        request=ConditionsInput,
        responses={200: ReactionOutput, **_REFUSALS},
    )
    def put(self, request: Request, label: str) -> Response:
        """Put conditions in place of the stored ones."""
        return self._replace(
            request,
            label,
            lambda edit, fields: amend_conditions(edit, read_input(ConditionsInput, fields)),
        )


class Isolation(Part):
    """The isolation."""

    @extend_schema(
        operation_id="reactions_isolation",
        parameters=[_SEEN],
        request=IsolationInput,
        responses={200: ReactionOutput, **_REFUSALS},
    )
    def put(self, request: Request, label: str) -> Response:
        """Put isolation steps with their fractions in place of the stored ones."""
        return self._replace(
            request,
            label,
            lambda edit, fields: amend_isolation(edit, read_input(IsolationInput, fields).steps),
        )


class Conclusion(Part):
    """The conclusion."""

    @extend_schema(
        operation_id="reactions_conclusion",
        parameters=[_SEEN],
        request=ConclusionInput,
        responses={200: ReactionOutput, **_REFUSALS},
    )
    def put(self, request: Request, label: str) -> Response:
        """Put conclusion and recovered cage in place of the stored ones."""
        return self._replace(
            request,
            label,
            lambda edit, fields: amend_conclusion(edit, read_input(ConclusionInput, fields)),
        )


class Observations(Part):
    """The time line."""

    @extend_schema(
        operation_id="reactions_observe",
        request=ObservationInput,
        responses={201: ReactionOutput, **_REFUSALS},
    )
    def post(self, request: Request, label: str) -> Response:
        """Add a line to the time line."""
        find_reaction(self.person, label)
        observation = read_input(ObservationInput, request.data)
        return self._write(label, lambda edit: add_observation(edit, observation), 201)


class OneObservation(Part):
    """A line of the time line."""

    @extend_schema(operation_id="reactions_unobserve", responses={200: ReactionOutput, **_REFUSALS})
    def delete(self, request: Request, label: str, pk: int) -> Response:
        """Take a line out; the revision keeps what it said."""
        return self._write(label, lambda edit: remove_observation(edit, pk))


class Readings(Part):
    """The readings."""

    @extend_schema(
        operation_id="reactions_read_out",
        request=ReadingInput,
        responses={201: ReactionOutput, **_REFUSALS},
    )
    def post(self, request: Request, label: str) -> Response:
        """Add a composition, as mole fractions by level."""
        find_reaction(self.person, label)
        reading = read_input(ReadingInput, request.data)
        return self._write(label, lambda edit: add_reading(edit, reading), 201)


class OneReading(Part):
    """A reading."""

    @extend_schema(operation_id="reactions_unread", responses={200: ReactionOutput, **_REFUSALS})
    def delete(self, request: Request, label: str, pk: int) -> Response:
        """Take a reading out; the revision keeps what it said."""
        return self._write(label, lambda edit: remove_reading(edit, pk))


class StateOfReaction(Part):
    """The state."""

    @extend_schema(
        operation_id="reactions_move",
        request=StateInput,
        responses={200: ReactionOutput, **_REFUSALS},
    )
    def post(self, request: Request, label: str) -> Response:
        """Move to another state."""
        find_reaction(self.person, label)
        state = read_input(StateInput, request.data).state
        return self._write(label, lambda edit: move(edit, state))


class AuthorSignature(Part):
    """The author's signature."""

    @extend_schema(
        operation_id="reactions_sign", request=None, responses={200: ReactionOutput, **_REFUSALS}
    )
    def post(self, request: Request, label: str) -> Response:
        """Sign a completed reaction; from then on it takes no change."""
        return self._write(label, sign)


class Countersignature(Part):
    """A reviewer's signature."""

    @extend_schema(
        operation_id="reactions_countersign",
        request=None,
        responses={200: ReactionOutput, **_REFUSALS},
    )
    def post(self, request: Request, label: str) -> Response:
        """Countersign a signed reaction."""
        return self._write(label, countersign)
