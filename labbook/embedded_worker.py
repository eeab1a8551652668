"""A Celery worker on threads of the server process, for the embedded mode.

The in-memory broker passes messages between threads of one process only, so whoever sends a task
and the worker that runs it must live in that process. A second server process would not see them:
several processes need the server mode and its Redis.
"""

from __future__ import annotations

import logging
import os
import threading
from typing import Any

from celery import Celery
from django.conf import settings

_THREADS = 2
# Between two looks at a stop request the worker waits for a message this long at most (Celery).
_LOOP_S = 2.0

_log = logging.getLogger(__name__)


def is_embedded() -> bool:
    """Tell whether the settings choose the in-memory broker."""
    return str(settings.CELERY_BROKER_URL).startswith("memory:")


class EmbeddedWorker:
    """The worker of one server process; start it once, stop it once."""

    def __init__(self, application: Celery) -> None:
        self._application = application
        self._ready = threading.Event()
        self._thread = threading.Thread(target=self._work, name="embedded-worker", daemon=True)

    def start(self) -> None:
        """Start in the background; tasks sent before it is ready wait for it."""
        self._thread.start()

    def wait_until_ready(self, timeout_s: float) -> bool:
        """Wait for the worker to take tasks; tell whether it does."""
        return self._ready.wait(timeout_s)

    def stop(self, patience_s: float = 10.0) -> bool:
        """Take no further task, let the running ones finish; tell whether they did in time."""
        from celery.worker import state

        if not self._thread.is_alive():
            return True
        state.should_stop = 0
        self._thread.join(patience_s + _LOOP_S)
        stopped = not self._thread.is_alive()
        if stopped:
            state.should_stop = None
        return stopped

    def _work(self) -> None:
        try:
            self._take_tasks()
        except Exception:
            _log.critical("The task worker could not start: no task runs.", exc_info=True)

    def _take_tasks(self) -> None:
        # The server has just come up on these settings; checking them again costs a second.
        os.environ.setdefault("CELERY_SKIP_CHECKS", "1")
        worker = self._application.WorkController(
            hostname="embedded@localhost",
            pool="threads",
            concurrency=_THREADS,
            # The event loop of Celery belongs to a process and cannot be started twice in one.
            use_eventloop=False,
            without_heartbeat=True,
            without_mingle=True,
            without_gossip=True,
            ready_callback=self._on_ready,
        )
        worker.start()
        if worker.exitcode:
            _log.error("The worker ended with code %s: no task runs any more.", worker.exitcode)

    def _on_ready(self, consumer: Any) -> None:
        self._ready.set()
