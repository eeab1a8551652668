"""Tasks sent from a request's thread run on the worker's, and talk through the database."""

import threading
import time

import pytest
from django.db import connection

from labbook.celery import application
from reactions.models import HistoryImport

pytestmark = pytest.mark.django_db(transaction=True)


@application.task(name="tests.count_up")
def count_up(job_id, most):
    """Count in the row until it says cancel, as a long import does."""
    for done in range(1, most + 1):
        if HistoryImport.objects.filter(pk=job_id, is_cancel_requested=True).exists():
            HistoryImport.objects.filter(pk=job_id).update(message="cancelled")
            return
        HistoryImport.objects.filter(pk=job_id).update(rows_done=done)
        time.sleep(0.01)
    HistoryImport.objects.filter(pk=job_id).update(message="done")


@pytest.fixture
def job(campaign, author):
    return HistoryImport.objects.create(
        campaign=campaign, uploaded_by=author, file_name="history.csv", content="a\n1\n"
    )


def send_from_another_thread(*arguments):
    def send():
        count_up.delay(*arguments)
        connection.close()

    thread = threading.Thread(target=send)
    thread.start()
    thread.join(10)


def wait_for(job, condition, patience_s=15):
    deadline = time.monotonic() + patience_s
    while time.monotonic() < deadline:
        job.refresh_from_db()
        if condition(job):
            return
        time.sleep(0.02)
    raise AssertionError(f"waited in vain: {job.rows_done} rows, “{job.message}”")


def test_a_task_sent_from_another_thread_runs(task_worker, job):
    send_from_another_thread(job.pk, 5)
    wait_for(job, lambda row: row.message == "done")
    assert job.rows_done == 5


def test_a_task_shows_its_progress_and_heeds_a_cancel(task_worker, job):
    send_from_another_thread(job.pk, 10_000)
    wait_for(job, lambda row: row.rows_done >= 3)
    HistoryImport.objects.filter(pk=job.pk).update(is_cancel_requested=True)
    wait_for(job, lambda row: row.message == "cancelled")
    assert job.rows_done < 10_000


def test_stopping_waits_for_the_running_task(task_worker, job):
    send_from_another_thread(job.pk, 60)
    wait_for(job, lambda row: row.rows_done >= 1)
    assert task_worker.stop()
    job.refresh_from_db()
    assert job.message == "done"
