"""All hits of a search as CSV and as JSON, written while they are read."""

from __future__ import annotations

import csv
import json
from collections.abc import Iterator, Mapping
from typing import Any, Protocol

from django.core.serializers.json import DjangoJSONEncoder
from django.http import HttpRequest, HttpResponse, JsonResponse, StreamingHttpResponse
from django.views.decorators.http import require_safe

from reactions.chemistry.families import Family
from reactions.models import Reaction
from reactions.pages.access import member_page, person_of
from reactions.pages.search.asking import Question, ask
from reactions.search.query import Answer

_AT_ONCE = 500
HIGHEST_COLUMN = 6
COLUMNS = (
    "label", "campaign", "title", "state", "family", "family_key", "cage", "addend",
    "addend_smiles", "target_level", "solvent", "solvent_volume_ml", "temperature_c",
    "duration_min", "atmosphere", "light", "addition_mode", "performed_on", "level_reached",
    "conversion", "yield_on_charged",
    "yield_on_consumed",
)  # fmt: skip
COMPOSITION_COLUMNS = (
    *(f"found_mole_fraction_{level}" for level in range(HIGHEST_COLUMN)),
    f"found_mole_fraction_{HIGHEST_COLUMN}_and_higher",
)


class _Line:
    """Gives back what is written to it."""

    def write(self, text: str) -> str:
        return text


class _Writer(Protocol):
    def writerow(self, row: list[Any], /) -> Any: ...


@require_safe
@member_page  # type: ignore[arg-type]  # a streaming response has a class of its own
def as_csv(request: HttpRequest) -> HttpResponse | StreamingHttpResponse:
    """Send all hits as CSV, one reaction to a row."""
    question = ask(request.GET, person_of(request))
    if question.found is None:
        return _refused(question)
    return _download(_csv_lines(question.found), "text/csv; charset=utf-8", "reactions.csv")


@require_safe
@member_page  # type: ignore[arg-type]  # a streaming response has a class of its own
def as_json(request: HttpRequest) -> HttpResponse | StreamingHttpResponse:
    """Send all hits as a JSON array, one object to a reaction."""
    question = ask(request.GET, person_of(request))
    if question.found is None:
        return _refused(question)
    return _download(_json_parts(question.found), "application/json", "reactions.json")


def harmless(cell: Any) -> Any:
    """Return a cell that no spreadsheet takes for a formula; numbers stay as they are."""
    if isinstance(cell, str) and cell[:1] in {"=", "+", "-", "@", "\t", "\r"} and not _number(cell):
        return f"'{cell}"
    return cell


def _number(text: str) -> bool:
    try:
        float(text)
    except ValueError:
        return False
    return True


def _csv_lines(found: Answer) -> Iterator[str]:
    writer: _Writer = csv.writer(_Line(), lineterminator="\r\n")
    yield "\ufeff"  # so that spreadsheets read the file as UTF-8
    yield writer.writerow([*COLUMNS, *COMPOSITION_COLUMNS])
    for row in _rows(found):
        composition = row.pop("found_composition") or []
        cells = [*row.values(), *_columns_of(composition)]
        yield writer.writerow([harmless("" if cell is None else cell) for cell in cells])


def _json_parts(found: Answer) -> Iterator[str]:
    yield "["
    before = "\n"
    for row in _rows(found):
        yield before + json.dumps(row, cls=DjangoJSONEncoder, ensure_ascii=False)
        before = ",\n"
    yield "\n]\n"


def _columns_of(composition: list[float]) -> list[float | None]:
    if not composition:
        return [None] * len(COMPOSITION_COLUMNS)
    shares = [*composition, *[0.0] * HIGHEST_COLUMN][:HIGHEST_COLUMN]
    return [*shares, sum(composition[HIGHEST_COLUMN:])]


def _rows(found: Answer) -> Iterator[dict[str, Any]]:
    for reaction in found.hits.iterator(chunk_size=_AT_ONCE):
        yield _row(reaction, found.families)


def _row(reaction: Reaction, families: Mapping[str, Family]) -> dict[str, Any]:
    """Return a reaction by the names of ``COLUMNS``, then its composition."""
    family = families.get(reaction.family_key)
    own = {
        "label": reaction.label,
        "campaign": reaction.campaign.code,
        "family": family.name if family else reaction.family_key,
        "addend": reaction.addend.name if reaction.addend else "",
        "addend_smiles": reaction.addend.smiles if reaction.addend else "",
    }
    row = {
        column: own[column] if column in own else getattr(reaction, column) for column in COLUMNS
    }
    return {**row, "found_composition": reaction.found_composition}


def _download(parts: Iterator[str], content_type: str, name: str) -> StreamingHttpResponse:
    response = StreamingHttpResponse(parts, content_type=content_type)
    response["Content-Disposition"] = f'attachment; filename="{name}"'
    response["Cache-Control"] = "private, no-store"
    return response


def _refused(question: Question) -> HttpResponse:
    messages = question.errors.messages if question.errors else {}
    return JsonResponse({"errors": messages}, status=422)
