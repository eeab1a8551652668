"""Worker processes: starting, lending, ending.

A worker is a plain child process at the far end of a socket pair. Python's own process pools would
do most of this, but refuse to start inside a Celery worker's daemonic processes and run the
server's main module again in every child.
"""

from __future__ import annotations

import atexit
import os
import socket
import subprocess
import sys
import threading
import time
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from multiprocessing.connection import Connection
from typing import Any

MEMORY_LIMIT_BYTES = 2 * 1024**3
MOST_WORKERS = max(2, min(4, os.cpu_count() or 2))
_START_SECONDS = 60.0  # half a second on an idle machine
# All that a worker is told of the server's environment: no keys, no addresses.
_PASSED_ON = ("PATH", "LD_LIBRARY_PATH", "LANG", "LC_ALL", "TZ")


class OverrunError(Exception):
    """A call took longer than it may, or no worker came free in time."""


class WorkerEndedError(Exception):
    """The worker went away, or ran out of memory, before it answered."""


class Worker:
    """One child process; ``is_sound`` turns false when it can't be used again."""

    def __init__(self) -> None:
        ours, theirs = socket.socketpair()
        with theirs:
            self._process = subprocess.Popen(  # noqa: S603  (a fixed command)
                [
                    *(sys.executable, "-m", "reactions.bounded.worker"),
                    *(str(theirs.fileno()), str(MEMORY_LIMIT_BYTES)),
                ],
                env=_environment(),
                stdin=subprocess.DEVNULL,
                stdout=subprocess.DEVNULL,
                pass_fds=[theirs.fileno()],
                start_new_session=True,  # an interrupt at the terminal is the server's to handle
            )
        self._channel = Connection(ours.detach())
        self.calls = -1  # the one that waits for the start isn't a user's
        self.is_sound = True
        self.call(time.monotonic, (), _START_SECONDS)

    def call(self, function: Callable[..., Any], arguments: tuple[Any, ...], seconds: float) -> Any:
        """Return the function's result or raise its error; OverrunError after ``seconds``."""
        self.calls += 1
        self.is_sound = False
        succeeded, answer = self._exchange((function, arguments), seconds)
        self.is_sound = succeeded or not isinstance(answer, MemoryError)
        if succeeded:
            return answer
        if not self.is_sound:
            raise WorkerEndedError from answer
        raise answer

    def _exchange(self, call: tuple[Any, ...], seconds: float) -> tuple[bool, Any]:
        try:
            self._channel.send(call)
            if not self._channel.poll(seconds):
                raise OverrunError
            answer: tuple[bool, Any] = self._channel.recv()
        except (EOFError, ConnectionError) as error:
            raise WorkerEndedError from error
        return answer

    def end(self) -> None:
        """Close the channel and kill the process, whatever it is doing."""
        self._channel.close()
        self._process.kill()
        self._process.wait()


class Workers:
    """The workers of one server process: those at rest, and places for those at work."""

    def __init__(self) -> None:
        self._at_rest: list[Worker] = []
        self._places = threading.BoundedSemaphore(MOST_WORKERS)
        self._lock = threading.Lock()

    @contextmanager
    def one(self, *, wait_seconds: float, fresh: bool = False) -> Iterator[Worker]:
        """Lend a worker; OverrunError when none comes free. ``fresh``: one that hasn't served."""
        if not self._places.acquire(timeout=wait_seconds):
            raise OverrunError
        try:
            worker = Worker() if fresh else self._rested() or Worker()
            try:
                yield worker
            finally:
                self._take_back(worker)
        finally:
            self._places.release()

    def end(self) -> None:
        """End the workers at rest."""
        while (worker := self._rested()) is not None:
            worker.end()

    def _rested(self) -> Worker | None:
        with self._lock:
            return self._at_rest.pop() if self._at_rest else None

    def _take_back(self, worker: Worker) -> None:
        with self._lock:
            has_room = worker.is_sound and len(self._at_rest) < MOST_WORKERS
            if has_room:
                self._at_rest.append(worker)
        if not has_room:
            worker.end()


def _environment() -> dict[str, str]:
    passed_on = {name: os.environ[name] for name in _PASSED_ON if name in os.environ}
    search_path = os.pathsep.join(folder or os.getcwd() for folder in sys.path)
    return {**passed_on, "PYTHONPATH": search_path, "OPENBLAS_NUM_THREADS": "1"}


workers = Workers()
atexit.register(workers.end)
# A forked server process starts its own; those of its parent are not its to use or to end.
os.register_at_fork(after_in_child=workers.__init__)  # type: ignore[misc]
