"""Drawing the sheet: the whole page, or after an enhanced save the part and what follows."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.template.loader import render_to_string
from django.urls import reverse
from django.utils import timezone
from django.utils.html import format_html

from reactions.pages.access import is_enhanced
from reactions.pages.sheet.conclusion_forms import SignForm
from reactions.pages.sheet.parts import PARTS
from reactions.pages.sheet.record import Record
from reactions.pages.sheet.sections import SectionKind, ShownSection, fresh

# What is computed from the record and drawn anew beside a part that was stored.
_FOLLOWING = ("head", "cautions", "plan", "volume_advice", "found", "standing", "history")


@dataclass
class Standing:
    """State and signatures: the form of a signature, and why a move was refused."""

    form: SignForm = field(default_factory=SignForm)
    problem: str = ""


def show_sheet(
    request: HttpRequest,
    record: Record,
    *,
    part: ShownSection | None = None,
    standing: Standing | None = None,
    status: int = 200,
) -> HttpResponse:
    """Return the whole sheet, with ``part`` or ``standing`` as it came back."""
    parts = {kind.name: fresh(kind, record) for kind in PARTS.values()}
    if part is not None:
        parts[part.kind.name] = part
    context: dict[str, Any] = {
        "record": record,
        "parts": {name.replace("-", "_"): shown for name, shown in parts.items()},
        "standing": standing or Standing(),
    }
    return render(request, "reactions/sheet/sheet.html", context, status=status)


def show_part(
    request: HttpRequest, record: Record, part: ShownSection, *, status: int
) -> HttpResponse:
    """Return a part as it came back: alone to htmx, else within its sheet."""
    if not is_enhanced(request):
        return show_sheet(request, record, part=part, status=status)
    return render(request, _template(part.kind), {"record": record, "part": part}, status=status)


def show_stored(request: HttpRequest, record: Record, kind: SectionKind) -> HttpResponse:
    """Answer a save: to htmx the part as stored with all that follows from it, else the sheet."""
    if not is_enhanced(request):
        return redirect(f"{sheet_address(record)}#{kind.name}")
    now = timezone.localtime().strftime("%H:%M")
    part = fresh(kind, record, f"stored {now}, version {record.reaction.version}")
    context = {"record": record, "part": part}
    return HttpResponse(
        render_to_string(_template(kind), context, request)
        + _following(request, record, f"{kind.title}: {part.note}")
    )


def show_rows(
    request: HttpRequest, record: Record, part: ShownSection, *, status: int
) -> HttpResponse:
    """Answer the removal of a row: to htmx the rows alone, so that a half-typed one stays."""
    if not is_enhanced(request):
        if status == 200:
            return redirect(f"{sheet_address(record)}#{part.kind.name}")
        return show_sheet(request, record, part=part, status=status)
    context = {"record": record, "part": part, "may_remove": record.may_write}
    rows = render_to_string(f"reactions/sheet/read/{part.kind.name}.html", context, request)
    said = part.problem or f"{part.kind.title}: removed"
    return HttpResponse(rows + _following(request, record, said), status=status)


def _following(request: HttpRequest, record: Record, said: str) -> str:
    """Return what follows from the record, to be put in its place, and a word to be read out."""
    context = {"record": record, "standing": Standing(), "oob": True}
    pieces = [
        render_to_string(f"reactions/sheet/{name}.html", context, request) for name in _FOLLOWING
    ]
    pieces.append(
        format_html(
            '<p class="unseen" role="status" id="announcement" hx-swap-oob="true">{}</p>', said
        )
    )
    return "".join(pieces)


def sheet_address(record: Record) -> str:
    """Return the address of the sheet."""
    reaction = record.reaction
    return reverse("reactions:sheet", args=[reaction.campaign.code, reaction.number])


def _template(kind: SectionKind) -> str:
    return f"reactions/sheet/parts/{kind.name}.html"
