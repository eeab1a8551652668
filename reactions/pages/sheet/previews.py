"""What follows from what is being typed, worked out before anything is stored."""

from __future__ import annotations

from django.http import HttpRequest, HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_POST

from reactions.models import Role
from reactions.pages.access import member_page, person_of, reaction_of
from reactions.pages.sheet.reading_forms import reading_form
from reactions.pages.sheet.record import Record
from reactions.pages.sheet.weighing import lines_form
from reactions.services.revising import require_role


def _writable(request: HttpRequest, code: str, number: int) -> Record:
    user = person_of(request)
    record = Record(reaction_of(user, code, number), user)
    require_role(user, record.reaction.campaign, Role.AUTHOR)
    return record


@require_POST
@member_page
def preview_lines(request: HttpRequest, code: str, number: int) -> HttpResponse:
    """Return the amounts that follow from the weighing list as typed."""
    form = lines_form(_writable(request, code, number), request.POST)
    return render(request, "reactions/sheet/lines_preview.html", {"form": form})


@require_POST
@member_page
def preview_reading(request: HttpRequest, code: str, number: int) -> HttpResponse:
    """Return the strip of a reading as typed."""
    form = reading_form(_writable(request, code, number), request.POST)
    form.is_valid()
    shares: dict[int, float] = form.cleaned_data.get("mole_fraction_by_level", {})
    composition = [shares.get(level, 0.0) for level in range(max(shares, default=-1) + 1)]
    context = {
        "composition": composition,
        "total": sum(composition),
        "is_lumped": form.cleaned_data.get("is_higher_lumped", False),
    }
    return render(request, "reactions/sheet/reading_preview.html", context)
