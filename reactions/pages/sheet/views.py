"""The sheet and its print, and the posts of its parts."""

from __future__ import annotations

from django.contrib.auth.models import User
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_POST, require_safe

from reactions.errors import FieldErrors
from reactions.models import Role
from reactions.pages.access import member_page, person_of, reaction_of
from reactions.pages.sheet.parts import PARTS, REMOVALS
from reactions.pages.sheet.record import Record
from reactions.pages.sheet.sections import SectionKind, ShownSection, bound, fresh, seen_version_in
from reactions.pages.sheet.showing import show_part, show_rows, show_sheet, show_stored
from reactions.services.errors import EditConflict, RecordClosed
from reactions.services.revising import Edit, require_role


@require_safe
@member_page
def sheet(request: HttpRequest, code: str, number: int) -> HttpResponse:
    """Show the sheet of a reaction."""
    user = person_of(request)
    return show_sheet(request, Record(reaction_of(user, code, number), user))


@require_safe
@member_page
def print_sheet(request: HttpRequest, code: str, number: int) -> HttpResponse:
    """Show everything of the record as a document for paper."""
    user = person_of(request)
    record = Record(reaction_of(user, code, number), user)
    return render(request, "reactions/sheet/print.html", {"record": record})


@require_http_methods(["GET", "HEAD", "POST"])
@member_page
def part(request: HttpRequest, code: str, number: int, name: str) -> HttpResponse:
    """Store one part of the sheet; a GET goes to the part on its sheet."""
    user = person_of(request)
    kind = _kind(name)
    record = Record(reaction_of(user, code, number), user)
    if request.method != "POST":
        return _back_to(code, number, name)
    require_role(user, record.reaction.campaign, Role.AUTHOR)
    shown = bound(kind, record, request.POST)
    if kind.reshapes(request.POST):
        return show_part(request, record, shown, status=200)
    status = _try_to_store(user, record, shown)
    if status == 200:
        return show_stored(request, _again(user, record), kind)
    return show_part(request, record, shown, status=status)


@require_POST
@member_page
def remove_row(request: HttpRequest, code: str, number: int, name: str, pk: int) -> HttpResponse:
    """Take one row out of a part whose rows are added one by one."""
    user = person_of(request)
    kind = _kind(name)
    if name not in REMOVALS:
        raise Http404("Rows of this part are not removed one by one.")
    record = Record(reaction_of(user, code, number), user)
    edit = Edit(user, record.reaction.pk, seen_version_in(request.POST))
    shown = fresh(kind, record)
    try:
        REMOVALS[name](edit, pk)
    except FieldErrors as error:
        shown.problem = " ".join(text for texts in error.messages.values() for text in texts)
        return show_rows(request, _again(user, record), shown, status=409)
    except EditConflict as conflict:
        shown.take_conflict(conflict)
        return show_rows(request, _again(user, record), shown, status=409)
    again = _again(user, record)
    return show_rows(request, again, fresh(kind, again), status=200)


def _try_to_store(user: User, record: Record, shown: ShownSection) -> int:
    """Store what was typed; return 200, or the status of what ``shown`` says stood in the way."""
    if not shown.form.is_valid():
        return 422
    edit = Edit(user, record.reaction.pk, None if shown.kind.only_adds else shown.seen_version)
    try:
        shown.kind.store(edit, shown.form)
    except FieldErrors as error:
        shown.form.place_errors(error)
        return 422
    except EditConflict as conflict:
        shown.take_conflict(conflict)
        return 409
    except RecordClosed as closed:
        shown.problem = f"{closed} What you typed is not stored; copy it if you need it."
        return 409
    return 200


def _again(user: User, record: Record) -> Record:
    """Return the record as it now stands in the database."""
    reaction = record.reaction
    return Record(reaction_of(user, reaction.campaign.code, reaction.number), user)


def _kind(name: str) -> SectionKind:
    if name not in PARTS:
        raise Http404("A sheet has no such part.")
    return PARTS[name]


def _back_to(code: str, number: int, name: str) -> HttpResponse:
    response = redirect("reactions:sheet", code=code, number=number)
    response["Location"] += f"#{name}"
    return response
