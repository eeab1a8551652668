"""Who gets to see a page, and how a refusal is answered.

Every view of the app stands behind ``member_page``, so that it is safe in a site that has no
log-in middleware of its own.
"""

from __future__ import annotations

from collections.abc import Callable
from functools import wraps
from typing import Any

from django.conf import global_settings, settings
from django.contrib.auth.decorators import login_not_required
from django.contrib.auth.models import User
from django.contrib.auth.views import redirect_to_login
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import render, resolve_url

from reactions.models import Campaign, Reaction
from reactions.services.errors import NotAllowed, RecordClosed

View = Callable[..., HttpResponse]


def is_enhanced(request: HttpRequest) -> bool:
    """Return whether htmx asks, and so wants a part of a page."""
    return request.headers.get("HX-Request") == "true"


def person_of(request: HttpRequest) -> User:
    """Return the person logged in; only for views behind ``member_page``."""
    if not request.user.is_authenticated:
        raise NotAllowed("Log in first.")
    return request.user


def member_page(view: View) -> View:
    """Require log-in, and answer what a service refuses with 403 or 409 and the reason.

    The log-in page is the site's ``LOGIN_URL`` where it sets one, else the app's own. A request of
    htmx is answered 401 instead of the log-in page, which has no place inside a section.
    """

    @login_not_required  # in favour of the check below
    @wraps(view)
    def guarded(request: HttpRequest, *args: Any, **kwargs: Any) -> HttpResponse:
        if not request.user.is_authenticated:
            if is_enhanced(request):
                return HttpResponse("Log in first.", status=401)
            return redirect_to_login(request.get_full_path(), log_in_address())
        try:
            return view(request, *args, **kwargs)
        except NotAllowed as error:
            return _refuse(request, str(error), 403)
        except RecordClosed as error:
            return _refuse(request, str(error), 409)

    return guarded


def log_in_address() -> str:
    """Return the address of the log-in page."""
    is_set = settings.LOGIN_URL != global_settings.LOGIN_URL
    return resolve_url(settings.LOGIN_URL if is_set else "reactions:login")


def campaign_of(user: User, code: str) -> Campaign:
    """Return a campaign that ``user`` may see; 404 for any other, whether or not there is one."""
    campaign = Campaign.objects.visible_to(user).filter(code=code).first()
    if campaign is None:
        raise Http404("There is no such campaign, or you are not a member of it.")
    return campaign


def reaction_of(user: User, code: str, number: int) -> Reaction:
    """Return a reaction that ``user`` may see; 404 for any other."""
    reaction = (
        Reaction.objects.visible_to(user)
        .for_listing()
        .filter(campaign__code=code, number=number)
        .first()
    )
    if reaction is None:
        raise Http404("There is no such reaction, or you are not a member of its campaign.")
    return reaction


def _refuse(request: HttpRequest, reason: str, status: int) -> HttpResponse:
    return render(request, "reactions/refused.html", {"reason": reason}, status=status)
