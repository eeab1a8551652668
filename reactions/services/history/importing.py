"""The import itself: upload, confirm, check every row, then store all of them or none.

Checking goes row by row, says how far it has come and heeds a cancel; only when every row is good
does one transaction store them all, so that nothing is ever half-imported.
"""

from __future__ import annotations

import csv
import io
from collections.abc import Mapping

from django.contrib.auth.models import User
from django.db import transaction
from django.utils import timezone
from pydantic import TypeAdapter, ValidationError

from reactions.chemistry.families import Family
from reactions.errors import FieldErrors, field_errors
from reactions.models import Campaign, HistoryImport, ImportState, Role, known_families
from reactions.services.errors import RecordClosed
from reactions.services.history.columns import (
    FIELD_BY_KEY,
    FIELDS,
    ColumnMapping,
    suggest_mapping,
)
from reactions.services.history.rows import HistoryRow, RowProblem, read_row
from reactions.services.history.storing import Structures, read_structures, store_rows
from reactions.services.revising import require_role

LARGEST_FILE_BYTES = 8 * 1024 * 1024
MOST_ROWS = 50_000
MOST_COLUMNS = 200
# A list of more problems than this helps nobody; the rest is counted.
MOST_PROBLEMS_LISTED = 500
_ROWS_BETWEEN_REPORTS = 200

_MAPPING = TypeAdapter(ColumnMapping)


class ImportCancelled(Exception):
    """The person cancelled the import."""


def upload_history(user: User, campaign: Campaign, file_name: str, content: bytes) -> HistoryImport:
    """Store an uploaded file with the mapping its header suggests.

    Raises ``FieldErrors`` at ``file``.
    """
    require_role(user, campaign, Role.AUTHOR)
    if len(content) > LARGEST_FILE_BYTES:
        raise FieldErrors.at(
            "file",
            f"The file has {len(content) / 2**20:.1f} MiB; split it into files of at most "
            f"{LARGEST_FILE_BYTES // 2**20} MiB.",
        )
    text = _decoded(content)
    rows = _rows(text)
    header = next(rows, None)
    if not header or not any(name.strip() for name in header):
        raise FieldErrors.at("file", "The first line holds no column names; add a header line.")
    if len(header) > MOST_COLUMNS:
        raise FieldErrors.at("file", f"{len(header)} columns are too many; keep to {MOST_COLUMNS}.")
    doubled = sorted({name for name in header if name and header.count(name) > 1})
    if doubled:
        raise FieldErrors.at("file", f"Two columns are called “{doubled[0]}”; rename one.")
    row_count = _count_rows(rows)
    return HistoryImport.objects.create(
        campaign=campaign,
        uploaded_by=user,
        file_name=file_name[:200],
        content=text,
        row_count=row_count,
        column_mapping={
            key: choice.model_dump() for key, choice in suggest_mapping(header).items()
        },
    )


def _decoded(content: bytes) -> str:
    try:
        text = content.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise FieldErrors.at(
            "file", "The file is not UTF-8 text; save it from the spreadsheet as CSV UTF-8."
        ) from error
    if "\x00" in text:
        raise FieldErrors.at("file", "The file is not text; save it from the spreadsheet as CSV.")
    return text


def _rows(text: str) -> csv._reader:  # type: ignore[name-defined]
    """Return a reader that takes comma, semicolon or tab as the header line uses them."""
    head = text.split("\n", 1)[0]
    delimiter = max(",;\t", key=head.count)
    return csv.reader(io.StringIO(text, newline=""), delimiter=delimiter, strict=False)


def _count_rows(rows: csv._reader) -> int:  # type: ignore[name-defined]
    try:
        count = sum(1 for row in rows if any(cell.strip() for cell in row))
    except csv.Error as error:
        raise FieldErrors.at("file", f"The file can't be read as CSV: {error}.") from error
    if count == 0:
        raise FieldErrors.at("file", "There is no row below the header.")
    if count > MOST_ROWS:
        raise FieldErrors.at("file", f"{count} rows are too many; split them by {MOST_ROWS}.")
    return count


def header_of(job: HistoryImport) -> list[str]:
    """Return the column names of the uploaded file."""
    return next(_rows(job.content), [])


def sample_of(job: HistoryImport, count: int = 3) -> list[list[str]]:
    """Return the first rows of the uploaded file, for the person to compare."""
    rows = _rows(job.content)
    next(rows, None)
    return [row for row, _ in zip(rows, range(count), strict=False)]


@transaction.atomic
def confirm_mapping(
    user: User, job: HistoryImport, mapping: Mapping[str, Mapping[str, str]]
) -> HistoryImport:
    """Take the mapping the person confirmed and queue the import; raises ``FieldErrors``."""
    require_role(user, job.campaign, Role.AUTHOR)
    locked = HistoryImport.objects.select_for_update().get(pk=job.pk)
    if locked.state not in {ImportState.UPLOADED, ImportState.REFUSED, ImportState.CANCELLED}:
        raise RecordClosed(f"This import is {locked.get_state_display()}; upload the file again.")
    try:
        choices = _MAPPING.validate_python(mapping)
    except ValidationError as error:
        raise field_errors(error) from error
    _check_mapping(choices, header_of(locked))
    locked.column_mapping = {key: choice.model_dump() for key, choice in choices.items()}
    locked.state = ImportState.QUEUED
    locked.is_cancel_requested = False
    locked.rows_done = 0
    locked.problems = []
    locked.message = ""
    locked.save()
    return locked


def _check_mapping(mapping: ColumnMapping, header: list[str]) -> None:
    errors: dict[str, list[str]] = {}
    for key, choice in mapping.items():
        field = FIELD_BY_KEY.get(key)
        if field is None:
            errors[key] = [f"“{key}” is no field of the import."]
        elif choice.column and choice.column not in header:
            errors[key] = [f"The file has no column “{choice.column}”."]
        elif choice.unit and choice.unit not in field.units:
            units = ", ".join(field.units) or "no unit"
            errors[key] = [f"“{choice.unit}” is not a unit here; choose {units}."]
    for field in FIELDS:
        given = mapping.get(field.key)
        if field.is_required and not (given and (given.column or given.value)):
            errors[field.key] = [f"Say which column holds the {field.label}, or one value for all."]
    if errors:
        raise FieldErrors(errors)


@transaction.atomic
def request_cancel(user: User, job: HistoryImport) -> None:
    """Ask a running import to stop; it stores nothing then."""
    require_role(user, job.campaign, Role.AUTHOR)
    HistoryImport.objects.filter(
        pk=job.pk, state__in=[ImportState.QUEUED, ImportState.RUNNING]
    ).update(is_cancel_requested=True)


def run_import(job_id: int) -> None:
    """Check and store the rows of a queued import; the task's whole work.

    Runs once: a second delivery of the same task finds the import no longer queued.
    """
    claimed = HistoryImport.objects.filter(pk=job_id, state=ImportState.QUEUED).update(
        state=ImportState.RUNNING
    )
    if not claimed:
        return
    job = HistoryImport.objects.select_related("campaign", "uploaded_by").get(pk=job_id)
    try:
        rows, structures, problems = _checked(job)
        if problems:
            _finish(job, ImportState.REFUSED, problems=problems)
            return
        _heed_cancel(job)
        # Said to be done with its rows or not at all: cut off before, it can safely run again.
        with transaction.atomic():
            created = store_rows(job, rows, structures)
            _finish(job, ImportState.DONE, created_count=created)
    except ImportCancelled:
        _finish(job, ImportState.CANCELLED)
    except Exception as error:
        _finish(job, ImportState.FAILED, message=f"{type(error).__name__}: {error}"[:300])
        raise


def take_up_interrupted() -> list[int]:
    """Queue again what a stopped server left running; return all that wait for a worker, by id.

    Only for a server process that is alone with its book: there no worker can be at a running one.
    """
    HistoryImport.objects.filter(state=ImportState.RUNNING).update(
        state=ImportState.QUEUED, rows_done=0
    )
    return list(HistoryImport.objects.filter(state=ImportState.QUEUED).values_list("pk", flat=True))


def _checked(
    job: HistoryImport,
) -> tuple[list[HistoryRow], Structures, list[dict[str, object]]]:
    """Return the rows read, their structures read, and the problems by row."""
    mapping = _MAPPING.validate_python(job.column_mapping)
    families = known_families()
    rows: list[HistoryRow] = []
    problems: list[dict[str, object]] = []
    for done, (number, cells) in enumerate(_numbered_cells(job), 1):
        try:
            rows.append(_read(number, cells, mapping, families))
        except RowProblem as problem:
            problems.append({"row": number, "reason": str(problem)})
        if done % _ROWS_BETWEEN_REPORTS == 0:
            HistoryImport.objects.filter(pk=job.pk).update(rows_done=done)
            _heed_cancel(job)
    HistoryImport.objects.filter(pk=job.pk).update(rows_done=job.row_count)
    structures = read_structures(rows, lambda: _heed_cancel(job))
    problems += structures.problems(rows)
    return rows, structures, sorted(problems, key=lambda problem: int(str(problem["row"])))


def _read(
    number: int,
    cells: Mapping[str, str] | None,
    mapping: ColumnMapping,
    families: Mapping[str, Family],
) -> HistoryRow:
    if cells is None:
        raise RowProblem("The row has more cells than the header has columns.")
    return read_row(number, cells, mapping, families)


def _numbered_cells(job: HistoryImport) -> list[tuple[int, dict[str, str] | None]]:
    """Return the non-empty rows by their number in the file; None for one with too many cells."""
    rows = _rows(job.content)
    header: list[str] = next(rows, [])
    numbered: list[tuple[int, dict[str, str] | None]] = []
    for number, row in enumerate(rows, 2):
        if not any(cell.strip() for cell in row):
            continue
        fits = not any(cell.strip() for cell in row[len(header) :])
        numbered.append((number, dict(zip(header, row, strict=False)) if fits else None))
    return numbered


def _heed_cancel(job: HistoryImport) -> None:
    if HistoryImport.objects.filter(pk=job.pk, is_cancel_requested=True).exists():
        raise ImportCancelled


def _finish(
    job: HistoryImport,
    state: ImportState,
    *,
    problems: list[dict[str, object]] | None = None,
    message: str = "",
    created_count: int = 0,
) -> None:
    problems = problems or []
    if len(problems) > MOST_PROBLEMS_LISTED:
        message = f"{len(problems)} rows need correction; the first {MOST_PROBLEMS_LISTED} follow."
    HistoryImport.objects.filter(pk=job.pk).update(
        state=state,
        problems=problems[:MOST_PROBLEMS_LISTED],
        message=message,
        created_count=created_count,
        finished_at=timezone.now(),
    )
