"""Long work, done by Celery: on threads of the server process, or by workers over Redis."""

from __future__ import annotations

from celery import shared_task
from django.db import transaction
from kombu.exceptions import OperationalError

from reactions.models import HistoryImport, ImportState
from reactions.services.history.importing import run_import, take_up_interrupted


@shared_task(name="reactions.import_history")  # type: ignore[untyped-decorator]
def import_history(job_id: int) -> None:
    """Check and store a queued import."""
    run_import(job_id)


def queue_import(job: HistoryImport) -> None:
    """Hand a queued import to a worker once the transaction has ended.

    Where no broker answers, the import is marked failed with the reason, so that nobody waits.
    """
    transaction.on_commit(lambda: _send(job.pk))


def take_up_interrupted_imports() -> None:
    """Hand over the imports that a stopped server left waiting or running.

    Only for a server process that is alone with its book and whose broker forgets on stopping.
    """
    for job_id in take_up_interrupted():
        _send(job_id)


def _send(job_id: int) -> None:
    try:
        import_history.apply_async((job_id,), retry=False)
    except OperationalError:
        HistoryImport.objects.filter(pk=job_id, state=ImportState.QUEUED).update(
            state=ImportState.FAILED,
            message="No task worker can be reached; ask whoever runs this site to start one.",
        )
