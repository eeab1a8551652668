"""An import that a stopped server left behind is taken up again, once and whole."""

import time

import pytest

from reactions.models import HistoryImport, ImportState, Reaction
from reactions.services.history.importing import confirm_mapping, upload_history
from reactions.tasks import take_up_interrupted_imports

pytestmark = pytest.mark.django_db(transaction=True)

HISTORY = b"family,cage mass / mg,title\nbingel,72.1,first\nbingel,144.2,second\n"


@pytest.fixture
def queued(campaign, author):
    job = upload_history(author, campaign, "history.csv", HISTORY)
    return confirm_mapping(author, job, job.column_mapping)


def wait_until_finished(job, patience_s=20):
    deadline = time.monotonic() + patience_s
    while time.monotonic() < deadline:
        job.refresh_from_db()
        if job.finished_at:
            return
        time.sleep(0.02)
    raise AssertionError(f"still {job.get_state_display()}")


@pytest.mark.parametrize("left_behind", [ImportState.QUEUED, ImportState.RUNNING])
def test_an_import_left_behind_is_taken_up(task_worker, queued, left_behind):
    HistoryImport.objects.filter(pk=queued.pk).update(state=left_behind, rows_done=1)
    take_up_interrupted_imports()
    wait_until_finished(queued)
    assert (queued.state, queued.problems, queued.created_count) == (ImportState.DONE, [], 2)
    assert Reaction.objects.count() == 2


def test_an_import_taken_up_twice_is_stored_once(task_worker, queued):
    take_up_interrupted_imports()
    take_up_interrupted_imports()
    wait_until_finished(queued)
    time.sleep(0.5)
    assert Reaction.objects.count() == 2


def test_a_finished_import_stays_as_it_is(task_worker, queued):
    HistoryImport.objects.filter(pk=queued.pk).update(state=ImportState.CANCELLED)
    take_up_interrupted_imports()
    time.sleep(0.5)
    queued.refresh_from_db()
    assert queued.state == ImportState.CANCELLED
