"""Changing who may do what in a campaign."""

from __future__ import annotations

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect
from django.views.decorators.http import require_POST

from reactions.errors import FieldErrors
from reactions.pages.access import campaign_of, member_page, person_of
from reactions.pages.campaigns.forms import MemberForm
from reactions.pages.campaigns.views import show_campaign
from reactions.pages.form_errors import add_errors
from reactions.services.campaigns import remove_member, set_member


@require_POST
@member_page
def set_role(request: HttpRequest, code: str) -> HttpResponse:
    """Add a member or change a member's role."""
    user = person_of(request)
    campaign = campaign_of(user, code)
    form = MemberForm(request.POST)
    if form.is_valid():
        try:
            row = set_member(user, campaign, **form.cleaned_data)
        except FieldErrors as error:
            add_errors(form, error)
        else:
            messages.success(request, f"{row.user} is {row.role} in {campaign.code}.")
            return redirect("reactions:campaign", code=code)
    return show_campaign(request, user, campaign, form)


@require_POST
@member_page
def remove(request: HttpRequest, code: str) -> HttpResponse:
    """Take a member out."""
    user = person_of(request)
    campaign = campaign_of(user, code)
    username = request.POST.get("username", "")
    try:
        remove_member(user, campaign, username)
    except FieldErrors as error:
        refusal = " ".join(text for texts in error.messages.values() for text in texts)
        return show_campaign(request, user, campaign, MemberForm(), refusal)
    messages.success(request, f"{username} is no longer a member of {campaign.code}.")
    if username == user.get_username():
        return redirect("reactions:campaigns")
    return redirect("reactions:campaign", code=code)
