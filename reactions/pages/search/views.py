"""The reaction list that is the search."""

from __future__ import annotations

from typing import Any
from urllib.parse import urlencode

from django.core.paginator import Page, Paginator
from django.http import HttpRequest, HttpResponse
from django.shortcuts import render
from django.urls import reverse
from django.utils.cache import patch_vary_headers
from django.views.decorators.http import require_safe

from reactions.chemistry.families import Family
from reactions.chemistry.structures import StructureError
from reactions.models import Reaction
from reactions.pages.access import is_enhanced, member_page, person_of
from reactions.pages.search.asking import Question, ask
from reactions.pages.structure.showing import ShownStructure, show_query

ON_A_PAGE = 25


@require_safe
@member_page
def search(request: HttpRequest) -> HttpResponse:
    """Answer the question in the address; htmx gets the answer alone, and the address to show.

    What can't be answered in a question is said at its fields, on a whole page with status 422.
    """
    question = ask(request.GET, person_of(request))
    context: dict[str, Any] = {
        "navigation": "search",
        "question": question,
        "form": question.form,
        "tree": question.tree,
        **_page_of(question, request.GET.get("page")),
    }
    if is_enhanced(request):
        response = render(request, "reactions/search/answer.html", context)
        response["HX-Push-Url"] = _address(question.address)
    else:
        context["shown"] = _shown(question)
        status = 200 if question.found else 422
        response = render(request, "reactions/search/search.html", context, status=status)
    patch_vary_headers(response, ["HX-Request"])
    return response


def _page_of(question: Question, number: str | None) -> dict[str, Any]:
    if question.found is None:
        return {"rows": [], "page": None}
    paginator = Paginator(question.found.hits, ON_A_PAGE)
    page: Page[Reaction] = paginator.get_page(number)
    return {
        "page": page,
        "pages": [
            (place, _address(question.address, page=place) if isinstance(place, int) else None)
            for place in paginator.get_elided_page_range(page.number)
        ],
        "rows": [(row, _family_name(row, question.found.families)) for row in page],
    }


def _family_name(reaction: Reaction, families: Any) -> str:
    family: Family | None = families.get(reaction.family_key)
    return family.name if family else reaction.family_key


def _address(parameters: str, **more: object) -> str:
    every = "&".join(part for part in (parameters, urlencode(more)) if part)
    return f"{reverse('reactions:search')}?{every}" if every else reverse("reactions:search")


def _shown(question: Question) -> ShownStructure | None:
    if question.found is None or not question.query.substructure:
        return None
    try:
        return show_query(question.query.substructure, question.query.substructure_kind)
    except StructureError:
        return None
