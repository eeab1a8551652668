"""Calls into the worker processes, from any thread of any server process.

A few workers run at a time, each on one call. One that overruns its time is killed; one that ends
is replaced at the next call. They start when first needed, also in a server process that has just
been forked, and end with it: a worker whose channel is closed leaves by itself.
"""

from __future__ import annotations

import time
from collections.abc import Callable
from typing import Any, TypeVar

from reactions.bounded.workers import OverrunError, WorkerEndedError, workers
from reactions.chemistry.structures import StructureError

_Result = TypeVar("_Result")


class StructureTimeoutError(StructureError):
    """Working on the structure took longer than it may."""


def run_bounded(
    function: Callable[..., _Result], *arguments: Any, timeout_seconds: float = 5.0
) -> _Result:
    """Return ``function(*arguments)``, worked out in a bounded process.

    ``function`` must be a module-level function of ``reactions.chemistry`` or of Python's library
    (a worker knows no Django); arguments and result must pickle. A call may take
    ``timeout_seconds``, after waiting as long at most for a free worker.

    Raises what the function raises; StructureTimeoutError when time is up; StructureError when
    the worker crashed or needed more than its 2 GiB.
    """
    try:
        answer: _Result = _result(function, arguments, timeout_seconds)
    except OverrunError as error:
        raise StructureTimeoutError(
            f"The structure can't be worked out within {timeout_seconds:g} s; "
            "make it simpler or more specific."
        ) from error
    except WorkerEndedError as error:
        raise StructureError(
            "The structure can't be worked out: the attempt broke off; "
            "check it, draw it again, or make it simpler."
        ) from error
    return answer


def warm_up() -> None:
    """Start a worker now, so that the first structure doesn't wait half a second for it."""
    run_bounded(time.monotonic)


def _result(function: Callable[..., Any], arguments: tuple[Any, ...], seconds: float) -> Any:
    with workers.one(wait_seconds=seconds) as worker:
        is_fresh = worker.calls == 0
        try:
            return worker.call(function, arguments, seconds)
        except WorkerEndedError:
            if is_fresh:
                raise
    # It may have died at rest, or be full from earlier calls; a fresh worker decides.
    with workers.one(wait_seconds=seconds, fresh=True) as worker:
        return worker.call(function, arguments, seconds)
