"""Moving a record through its states, and signing it."""

from __future__ import annotations

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect
from django.views.decorators.http import require_POST

from reactions.models import State
from reactions.pages.access import member_page, person_of, reaction_of
from reactions.pages.sheet.conclusion_forms import SignForm
from reactions.pages.sheet.record import Record
from reactions.pages.sheet.sections import seen_version_in
from reactions.pages.sheet.showing import Standing, show_sheet
from reactions.services.errors import EditConflict, RecordClosed
from reactions.services.revising import Edit
from reactions.services.states import countersign, move, sign

COUNTERSIGNED = "countersigned"


@require_POST
@member_page
def change_state(request: HttpRequest, code: str, number: int) -> HttpResponse:
    """Move the record to a state, sign it or countersign it."""
    user = person_of(request)
    record = Record(reaction_of(user, code, number), user)
    wanted = request.POST.get("state", "")
    form = SignForm(request.POST)
    if wanted not in (COUNTERSIGNED, *State.values):
        return _refused(request, record, f"“{wanted}” is no state of a record.", 422)
    edit = Edit(user, record.reaction.pk, seen_version_in(request.POST))
    if wanted in (State.SIGNED, COUNTERSIGNED):
        if not form.is_valid():
            return show_sheet(request, record, standing=Standing(form), status=422)
        changed = _changed_since(record, edit)
        if changed:
            return _refused(request, record, changed, 409)
    try:
        if wanted == State.SIGNED:
            sign(edit)
        elif wanted == COUNTERSIGNED:
            countersign(edit)
        else:
            move(edit, State(wanted))
    except (EditConflict, RecordClosed) as error:
        again = Record(reaction_of(user, code, number), user)
        return _refused(request, again, str(error), 409)
    messages.success(request, f"{record.reaction.label} is {wanted}.")
    return redirect("reactions:sheet", code=code, number=number)


def _changed_since(record: Record, edit: Edit) -> str:
    """Return who changed the record since the person read it; one signs what one has seen."""
    since = [
        row.revision for row in record.revisions if row.revision.number > (edit.seen_version or 0)
    ]
    if not since:
        return ""
    names = ", ".join(dict.fromkeys(str(revision.made_by) for revision in since))
    return f"{names} changed this record since you opened it. Read it again below, then sign."


def _refused(request: HttpRequest, record: Record, reason: str, status: int) -> HttpResponse:
    return show_sheet(request, record, standing=Standing(problem=reason), status=status)
