"""Campaigns and their members, addition families, addends."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import fields, is_dataclass
from typing import Any

from pydantic import Field
from rest_framework.request import Request
from rest_framework.response import Response

from reactions.api.base import Endpoint, fields_of, read_input
from reactions.api.openapi import described
from reactions.api.outputs import (
    REFUSALS,
    AddendPage,
    AnyObject,
    CampaignList,
    CampaignOutput,
    ObjectList,
)
from reactions.api.paging import PAGE_PARAMETERS, answer_in_pages
from reactions.api.showing import show_addend, show_campaign
from reactions.models import Addend, Campaign, Reaction, known_families
from reactions.services.campaigns import open_campaign, remove_member, set_member
from reactions.services.families import define_family
from reactions.services.inputs import Input, LongText


class CampaignInput(Input):
    """A campaign to open."""

    code: str = Field(max_length=40)
    name: str = Field(max_length=120)
    purpose: LongText = ""


class MemberInput(Input):
    """A role to give: reader, author or reviewer."""

    role: str = Field(max_length=20)


class Campaigns(Endpoint):
    """The campaigns of who asks."""

    @described(operation_id="campaigns_list", responses={200: CampaignList})
    def get(self, request: Request) -> Response:
        """Return the campaigns of which you are a member."""
        rows = Campaign.objects.visible_to(self.person)
        return Response([show_campaign(row, self.person).model_dump() for row in rows])

    @described(
        operation_id="campaigns_open",
        request=CampaignInput,
        responses={201: CampaignOutput, **REFUSALS},
    )
    def post(self, request: Request) -> Response:
        """Open a campaign; you are its first author."""
        given = read_input(CampaignInput, request.data)
        campaign = open_campaign(self.person, **given.model_dump())
        return Response(show_campaign(campaign, self.person).model_dump(), status=201)


class OneCampaign(Endpoint):
    """One campaign."""

    @described(operation_id="campaigns_read", responses={200: CampaignOutput, **REFUSALS})
    def get(self, request: Request, code: str) -> Response:
        """Return a campaign and its members."""
        campaign = Campaign.objects.visible_to(self.person).get(code=code)
        return Response(show_campaign(campaign, self.person).model_dump())


class Member(Endpoint):
    """One member of a campaign."""

    @described(
        operation_id="campaigns_set_member",
        request=MemberInput,
        responses={200: CampaignOutput, **REFUSALS},
    )
    def put(self, request: Request, code: str, username: str) -> Response:
        """Give a person a role; an author may."""
        campaign = Campaign.objects.visible_to(self.person).get(code=code)
        set_member(self.person, campaign, username, read_input(MemberInput, request.data).role)
        return Response(show_campaign(campaign, self.person).model_dump())

    @described(operation_id="campaigns_remove_member", responses={200: CampaignOutput, **REFUSALS})
    def delete(self, request: Request, code: str, username: str) -> Response:
        """Take a person out; an author may."""
        campaign = Campaign.objects.visible_to(self.person).get(code=code)
        remove_member(self.person, campaign, username)
        return Response(show_campaign(campaign, self.person).model_dump())


def _plain(value: Any) -> Any:
    """Return a family, or a part of one, as JSON can hold it."""
    if is_dataclass(value):
        return {field.name: _plain(getattr(value, field.name)) for field in fields(value)}
    if isinstance(value, Mapping):
        return dict(value)
    return [_plain(part) for part in value] if isinstance(value, tuple) else value


class Families(Endpoint):
    """The addition families."""

    @described(operation_id="families_list", responses={200: ObjectList})
    def get(self, request: Request) -> Response:
        """Return every family, the table's and the lab's own."""
        return Response([_plain(family) for family in known_families().values()])

    @described(
        operation_id="families_define",
        request=AnyObject,
        responses={201: AnyObject, **REFUSALS},
    )
    def post(self, request: Request) -> Response:
        """Add a family of the lab's own; an author of any campaign may."""
        family = define_family(self.person, fields_of(request)).family
        return Response(_plain(family), status=201)


class Addends(Endpoint):
    """The addends of the campaigns of who asks."""

    @described(
        operation_id="addends_list",
        parameters=PAGE_PARAMETERS,
        responses={200: AddendPage, **REFUSALS},
    )
    def get(self, request: Request) -> Response:
        """Return the addends of the reactions you may see, by name."""
        used = Reaction.objects.visible_to(self.person).values("addend")
        rows = Addend.objects.filter(pk__in=used).order_by("name", "pk")
        return answer_in_pages(request, rows, show_addend)
