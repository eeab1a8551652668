"""The list of campaigns and the page of one."""

from __future__ import annotations

from typing import Any

from django.contrib import messages
from django.contrib.auth.models import User
from django.core.paginator import Paginator
from django.db.models import Count, Max, Q, QuerySet
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_safe

from reactions.errors import FieldErrors
from reactions.models import Campaign, Role, State, known_families
from reactions.pages.access import campaign_of, member_page, person_of
from reactions.pages.campaigns.forms import CampaignForm, MemberForm
from reactions.pages.form_errors import add_errors
from reactions.services.campaigns import open_campaign

_ON_A_PAGE = 40


@require_http_methods(["GET", "HEAD", "POST"])
@member_page
def campaigns(request: HttpRequest) -> HttpResponse:
    """List the campaigns of which the person is a member; open a new one by POST."""
    user = person_of(request)
    form = CampaignForm(request.POST or None)
    if request.method == "POST" and form.is_valid():
        try:
            opened = open_campaign(user, **form.cleaned_data)
        except FieldErrors as error:
            add_errors(form, error)
        else:
            messages.success(request, f"Campaign {opened.code} is open; you are its author.")
            return redirect("reactions:campaign", code=opened.code)
    context = {
        "navigation": "campaigns",
        "campaigns": _counted(Campaign.objects.visible_to(user)),
        "states": State,
        "form": form,
    }
    status = 422 if form.is_bound else 200
    return render(request, "reactions/campaigns/list.html", context, status=status)


@require_safe
@member_page
def campaign(request: HttpRequest, code: str) -> HttpResponse:
    """Show a campaign: its reactions as stacked strips, and its members."""
    user = person_of(request)
    return show_campaign(request, user, campaign_of(user, code), MemberForm())


def show_campaign(
    request: HttpRequest,
    user: User,
    campaign: Campaign,
    member_form: MemberForm,
    refusal: str = "",
) -> HttpResponse:
    """Return the page of a campaign; ``refusal`` says why a member was not changed."""
    rows = campaign.reactions.for_listing().order_by("-number")
    page = Paginator(rows, _ON_A_PAGE).get_page(request.GET.get("page"))
    families = known_families()
    role = campaign.role_of(user)
    context: dict[str, Any] = {
        "navigation": "campaigns",
        "campaign": campaign,
        "page": page,
        "pages": page.paginator.get_elided_page_range(page.number),
        "rows": [
            (row, families[row.family_key].name if row.family_key in families else row.family_key)
            for row in page
        ],
        "memberships": campaign.memberships.select_related("user").order_by(
            "role", "user__username"
        ),
        "roles": Role,
        "is_author": role == Role.AUTHOR,
        "role": role,
        "member_form": member_form,
        "refusal": refusal,
    }
    status = 422 if member_form.is_bound or refusal else 200
    return render(request, "reactions/campaigns/campaign.html", context, status=status)


def _counted(campaigns: QuerySet[Campaign]) -> QuerySet[Campaign]:
    """Return the campaigns with their counts by state and the time of the latest change."""
    by_state = {
        f"{state.value}_count": Count("reactions", filter=Q(reactions__state=state), distinct=True)
        for state in State
    }
    return campaigns.annotate(
        reaction_count=Count("reactions", distinct=True),
        changed_at=Max("reactions__changed_at"),
        **by_state,
    )
