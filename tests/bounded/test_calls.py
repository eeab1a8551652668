"""Work on structures can hang, crash or eat memory without harm to the server."""

from __future__ import annotations

import math
import os
import signal
import threading
import time

import pytest

from reactions.bounded import StructureTimeoutError, run_bounded, warm_up
from reactions.bounded.workers import MEMORY_LIMIT_BYTES, MOST_WORKERS
from reactions.chemistry.addends import read_addend
from reactions.chemistry.structures import StructureError


@pytest.fixture(autouse=True)
def _a_worker_is_running():
    warm_up()


def test_a_result_comes_back():
    assert run_bounded(read_addend, "*c1ccccc1") == read_addend("*c1ccccc1")


def test_it_runs_in_another_process():
    assert run_bounded(os.getpid) != os.getpid()


def test_what_the_function_raises_is_raised_here():
    with pytest.raises(StructureError, match="mark where it is attached"):
        run_bounded(read_addend, "CCO")
    with pytest.raises(ValueError, match="math domain error"):
        run_bounded(math.sqrt, -1.0)


def test_a_hang_is_cut_off_and_the_next_call_served():
    started = time.monotonic()
    with pytest.raises(StructureTimeoutError, match=r"within 0\.3 s"):
        run_bounded(time.sleep, 60, timeout_seconds=0.3)
    assert time.monotonic() - started < 3
    assert run_bounded(math.sqrt, 4.0) == 2.0


@pytest.mark.parametrize("deadly", [signal.SIGSEGV, signal.SIGABRT, signal.SIGKILL])
def test_a_crash_is_survived(deadly):
    with pytest.raises(StructureError, match="broke off"):
        run_bounded(signal.raise_signal, deadly)
    assert run_bounded(math.sqrt, 4.0) == 2.0


def test_memory_is_bounded_and_the_next_call_served():
    with pytest.raises(StructureError, match="broke off"):
        run_bounded(bytearray, MEMORY_LIMIT_BYTES)
    assert run_bounded(math.sqrt, 4.0) == 2.0


def test_a_worker_that_died_at_rest_is_replaced_unnoticed():
    os.kill(run_bounded(os.getpid), signal.SIGKILL)
    time.sleep(0.1)
    assert run_bounded(math.sqrt, 4.0) == 2.0


def test_a_result_that_cannot_be_carried_over_is_an_error_not_a_hang():
    with pytest.raises(RuntimeError, match="on the way back"):
        run_bounded(threading.Lock)


def test_more_threads_than_workers_all_get_their_answer():
    answers: dict[int, float] = {}

    def ask(number: int) -> None:
        answers[number] = run_bounded(math.sqrt, number**2)

    threads = [threading.Thread(target=ask, args=(number,)) for number in range(20)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()
    assert answers == {number: number for number in range(20)}


def test_waiting_for_a_free_worker_is_bounded():
    sleepers = [
        threading.Thread(target=run_bounded, args=(time.sleep, 1.5)) for _ in range(MOST_WORKERS)
    ]
    for sleeper in sleepers:
        sleeper.start()
    time.sleep(0.5)
    try:
        with pytest.raises(StructureTimeoutError):
            run_bounded(math.sqrt, 4.0, timeout_seconds=0.1)
    finally:
        for sleeper in sleepers:
            sleeper.join()


def test_a_forked_process_has_workers_of_its_own():
    mine = run_bounded(os.getpid)
    reader, writer = os.pipe()
    child = os.fork()
    if child == 0:
        os.write(writer, str(run_bounded(os.getpid)).encode())
        os._exit(0)
    os.close(writer)
    with os.fdopen(reader) as answer:
        theirs = int(answer.read())
    os.waitpid(child, 0)
    assert theirs != mine
    assert run_bounded(os.getpid) == mine


def test_the_worker_is_told_no_secrets(monkeypatch):
    monkeypatch.setenv("LABBOOK_SECRET_KEY", "invented")
    with pytest.raises(StructureError):
        run_bounded(signal.raise_signal, signal.SIGKILL)  # so that a new one starts
    assert run_bounded(os.getenv, "LABBOOK_SECRET_KEY") is None
