"""Answering with long lists a page at a time."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any, TypeVar

from django.db.models import Model, QuerySet
from drf_spectacular.utils import OpenApiParameter
from pydantic import BaseModel
from rest_framework.pagination import PageNumberPagination
from rest_framework.request import Request
from rest_framework.response import Response

_Row = TypeVar("_Row", bound=Model)


class Pages(PageNumberPagination):
    """25 rows to a page, or as many as asked, up to 200."""

    page_size = 25
    page_size_query_param = "page_size"
    max_page_size = 200


PAGE_PARAMETERS = [
    OpenApiParameter("page", int, description="Which page, from 1."),
    OpenApiParameter("page_size", int, description=f"Rows to a page, up to {Pages.max_page_size}."),
]


def answer_in_pages(
    request: Request, rows: QuerySet[_Row], show: Callable[[_Row], BaseModel]
) -> Response:
    """Answer with the page that ``request`` asks for, its rows as ``show`` gives them."""
    pages: Any = Pages()
    on_page = pages.paginate_queryset(rows, request)
    shown = [show(row).model_dump(mode="json") for row in on_page]
    answer: Response = pages.get_paginated_response(shown)
    return answer
