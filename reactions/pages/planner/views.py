"""The planner: worked out while it is typed, stored with one press."""

from __future__ import annotations

from typing import Any

from django.contrib import messages
from django.contrib.auth.models import User
from django.http import HttpRequest, HttpResponse, QueryDict
from django.shortcuts import redirect, render
from django.urls import reverse
from django.views.decorators.http import require_http_methods

from reactions.chemistry.solvents import solvents
from reactions.errors import FieldErrors
from reactions.models import Campaign, Reaction, known_families
from reactions.pages.access import campaign_of, is_enhanced, member_page, person_of
from reactions.pages.planner.forms import CAGES, PlannerForm
from reactions.pages.planner.line_forms import LineForms
from reactions.pages.planner.outcome import Outcome, place_errors, work_out
from reactions.pages.planner.showing import shown
from reactions.pages.planner.storing import at_form, check_complete, plan_input
from reactions.pages.planner.typed import Typed, opened, with_family, with_line
from reactions.services.errors import NeedsConfirmation
from reactions.services.planning import plan_reaction

# Longer addresses are refused by some servers.
_LONGEST_ADDRESS = 1800
_OF_THE_PRESS = ("csrfmiddlewaretoken", "action", "is_level_confirmed")


@require_http_methods(["GET", "HEAD", "POST"])
@member_page
def planner(request: HttpRequest) -> HttpResponse:
    """Show the planner as its address or a press says; store the plan when that is pressed.

    htmx gets what follows from the fields alone, or the whole form where lines are filled.
    """
    user = person_of(request)
    families = known_families()
    sent = request.POST if request.method == "POST" else request.GET
    action = request.POST.get("action", "")
    typed = opened(sent, families)
    if action == "family":
        typed = with_family(typed, families)
    elif action == "add_line":
        typed = with_line(typed)
    form = PlannerForm(typed.data, user, families)
    lines = LineForms(typed.data)
    outcome = work_out(form, lines)
    if action == "plan":
        stored = _stored(user, form, lines, outcome)
        if stored is not None:
            messages.success(request, f"{stored.label} is planned.")
            return redirect("reactions:sheet", stored.campaign.code, stored.number)
    return _page(request, action, typed, form, lines, outcome)


def _stored(user: User, form: PlannerForm, lines: LineForms, outcome: Outcome) -> Reaction | None:
    """Store the plan; None when it can't be, with the reasons at the fields."""
    check_complete(form, outcome)
    if form.errors or any(line.errors for line in lines):
        return None
    campaign: Campaign = campaign_of(user, form.cleaned_data["campaign"])
    try:
        return plan_reaction(user, campaign, plan_input(form, outcome))
    except FieldErrors as error:
        place_errors(form, at_form(error))
    except NeedsConfirmation as question:
        form.add_error("is_level_confirmed", f"{question.reason} Tick it to plan it all the same.")
    return None


def _page(
    request: HttpRequest,
    action: str,
    typed: Typed,
    form: PlannerForm,
    lines: LineForms,
    outcome: Outcome,
) -> HttpResponse:
    is_live = is_enhanced(request) and action in ("", "work_out")
    if not typed.is_touched:
        _forget_errors(form, lines)
    context: dict[str, Any] = {
        "navigation": "plan",
        "form": form,
        "lines": lines,
        "outcome": outcome,
        "cages": CAGES,
        "solvents": list(solvents()),
        "out_of_band": is_live,
        **shown(form, outcome),
    }
    if is_live:
        template = "reactions/planner/live.html"
    elif is_enhanced(request):
        template = "reactions/planner/form.html"
    else:
        template = "reactions/planner/planner.html"
    response = render(request, template, context, status=422 if action == "plan" else 200)
    if is_enhanced(request):
        address = f"{reverse('reactions:planner')}?{_kept(typed.data)}"
        response["HX-Replace-Url"] = address if len(address) < _LONGEST_ADDRESS else "false"
    return response


def _kept(data: QueryDict) -> str:
    """Return what was typed as parameters of an address, so that a reload keeps it."""
    kept = data.copy()
    for name in list(kept):
        if name in _OF_THE_PRESS or not "".join(kept.getlist(name)):
            del kept[name]
    return kept.urlencode()


def _forget_errors(form: PlannerForm, lines: LineForms) -> None:
    """Leave a planner just opened without errors: nothing has been typed that could be wrong."""
    for each in (form, *lines):
        each.errors.clear()
