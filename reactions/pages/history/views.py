"""Upload a spreadsheet, confirm its columns, watch it come in."""

from __future__ import annotations

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.views.decorators.http import require_http_methods, require_POST

from reactions.errors import FieldErrors
from reactions.models import Campaign, HistoryImport, ImportState, Role
from reactions.pages.access import is_enhanced, member_page, person_of
from reactions.pages.history.forms import MappingForm, UploadForm
from reactions.services.errors import NotAllowed, RecordClosed
from reactions.services.history.importing import (
    confirm_mapping,
    header_of,
    request_cancel,
    sample_of,
    upload_history,
)
from reactions.tasks import queue_import

_UNDER_WAY = {ImportState.QUEUED, ImportState.RUNNING}
_TO_CONFIRM = {ImportState.UPLOADED, ImportState.REFUSED, ImportState.CANCELLED}


@require_http_methods(["GET", "HEAD", "POST"])
@member_page
def overview(request: HttpRequest) -> HttpResponse:
    """Show earlier imports and take a new file."""
    form = UploadForm(request.POST or None, request.FILES or None, user=person_of(request))
    if request.method == "POST" and form.is_valid():
        file = form.cleaned_data["file"]
        try:
            job = upload_history(
                person_of(request), form.cleaned_data["campaign"], file.name, file.read()
            )
        except FieldErrors as error:
            for texts in error.messages.values():
                form.add_error("file", texts)
        else:
            return redirect("reactions:history-import", pk=job.pk)
    imports = HistoryImport.objects.filter(
        campaign__in=Campaign.objects.visible_to(person_of(request))
    ).select_related("campaign", "uploaded_by")
    context = {
        "navigation": "history",
        "form": form,
        "may_upload": Campaign.objects.writable_by(person_of(request)).exists(),
        "imports": imports.defer("content", "problems")[:50],
    }
    return render(request, "reactions/history/overview.html", context)


def _visible_import(request: HttpRequest, pk: int) -> HistoryImport:
    visible = HistoryImport.objects.filter(
        campaign__in=Campaign.objects.visible_to(person_of(request))
    )
    return get_object_or_404(visible.select_related("campaign", "uploaded_by"), pk=pk)


@require_http_methods(["GET", "HEAD", "POST"])
@member_page
def job(request: HttpRequest, pk: int) -> HttpResponse:
    """Confirm the columns of an uploaded file; then show how far it has come."""
    row = _visible_import(request, pk)
    is_author = row.campaign.role_of(person_of(request)) == Role.AUTHOR
    if request.method == "POST" and not is_author:
        raise NotAllowed("Only an author of the campaign brings a history in.")
    header = header_of(row)
    form = MappingForm(request.POST or None, job=row, header=header)
    if request.method == "POST" and form.is_valid():
        try:
            queue_import(confirm_mapping(person_of(request), row, form.mapping()))
        except FieldErrors as error:
            form.add_service_errors(error.messages)
        except RecordClosed as error:
            messages.error(request, str(error))
            return redirect("reactions:history-import", pk=pk)
        else:
            return redirect("reactions:history-import", pk=pk)
    context = {
        "navigation": "history",
        "job": row,
        "form": form if row.state in _TO_CONFIRM and is_author else None,
        "header": header,
        "sample": sample_of(row),
        "is_under_way": row.state in _UNDER_WAY,
        "is_author": is_author,
    }
    if not is_enhanced(request):
        return render(request, "reactions/history/import.html", context)
    answer = render(request, "reactions/history/progress.html", context)
    if row.state not in _UNDER_WAY:
        # What can be done next stands outside the part that watches.
        answer["HX-Refresh"] = "true"
    return answer


@require_POST
@member_page
def cancel(request: HttpRequest, pk: int) -> HttpResponse:
    """Ask a running import to stop."""
    row = _visible_import(request, pk)
    if row.campaign.role_of(person_of(request)) != Role.AUTHOR:
        raise NotAllowed("Only an author of the campaign cancels its import.")
    request_cancel(person_of(request), row)
    return redirect("reactions:history-import", pk=pk)
