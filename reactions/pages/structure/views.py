"""Showing structures back while they are typed, and the pictures of stored addends."""

from __future__ import annotations

from typing import get_args

from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import render
from django.views.decorators.cache import cache_control
from django.views.decorators.http import require_POST, require_safe

from reactions.chemistry.structures import StructureError
from reactions.chemistry.substructure import QueryKind
from reactions.models import Addend, Reaction
from reactions.pages.access import is_enhanced, member_page, person_of
from reactions.pages.structure.showing import drawn, show_addend, show_query

_PICTURE_SIZE = (192, 144)


@require_POST
@member_page
def shown(request: HttpRequest) -> HttpResponse:
    """Show back the structure in the field that ``field`` names, or say why it can't be read.

    ``purpose`` says what it is for: an ``addend`` with its attachment points, or a ``query`` of the
    kind in ``<field>_kind``. ``slot`` is the place on the page where an error belongs.
    """
    field = request.POST.get("field", "text")
    text = request.POST.get(field, "")
    context: dict[str, object] = {"slot": request.POST.get("slot", "")}
    try:
        if not text.strip():
            pass
        elif request.POST.get("purpose") == "query":
            context["shown"] = show_query(text, _kind(request.POST.get(f"{field}_kind", "auto")))
        else:
            context["shown"] = show_addend(text)
    except StructureError as error:
        context["error"] = str(error)
    status = 422 if "error" in context and not is_enhanced(request) else 200
    return render(request, "reactions/structure/answer.html", context, status=status)


@require_safe
@member_page
@cache_control(private=True, max_age=24 * 3600)
def picture(request: HttpRequest, key: int) -> HttpResponse:
    """Return the drawing of an addend that a campaign of the person's has used; 404 for any other.

    What other campaigns attach stays theirs: not even that the lab knows such an addend is told.
    The structure of a stored addend never changes, so its picture may be kept for a day.
    """
    used = Reaction.objects.visible_to(person_of(request)).filter(addend_id=key)
    addend = Addend.objects.filter(pk=key).first() if used.exists() else None
    if addend is None:
        raise Http404("There is no such addend, or it is not used in a campaign of yours.")
    drawing = drawn(addend.smiles, *_PICTURE_SIZE, addend.name)
    return HttpResponse(drawing, content_type="image/svg+xml")


def _kind(text: str) -> QueryKind:
    known: tuple[QueryKind, ...] = get_args(QueryKind)
    return next((kind for kind in known if kind == text), "auto")
