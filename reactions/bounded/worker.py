"""The worker process: takes one call after another from its channel, and ends when it is closed.

Started as ``python -m reactions.bounded.worker <file descriptor> <memory limit in bytes>``. It
imports the chemistry and nothing of Django, so it starts in about half a second.
"""

from __future__ import annotations

import pickle
import resource
import sys
from multiprocessing.connection import Connection

from rdkit import rdBase

# So that the first call finds them loaded.
import reactions.chemistry.addends
import reactions.chemistry.substructure  # noqa: F401


def serve(channel: Connection) -> None:
    """Answer each call ``(function, arguments)`` with ``(True, result)`` or ``(False, error)``."""
    while True:
        try:
            call = channel.recv_bytes()
        except (EOFError, OSError):
            return
        channel.send_bytes(_carried_over(_answer(call)))


def _answer(call: bytes) -> tuple[bool, object]:
    try:
        function, arguments = pickle.loads(call)  # noqa: S301  (from the server that started us)
        return True, function(*arguments)
    except Exception as error:
        return False, error


def _carried_over(answer: tuple[bool, object]) -> bytes:
    try:
        return pickle.dumps(answer)
    except Exception as error:
        message = f"{type(error).__name__} on the way back: {error}"
        return pickle.dumps((False, RuntimeError(message)))


def _limit(memory_bytes: int) -> None:
    resource.setrlimit(resource.RLIMIT_AS, (memory_bytes, memory_bytes))
    resource.setrlimit(resource.RLIMIT_CORE, (0, 0))


if __name__ == "__main__":
    _limit(int(sys.argv[2]))
    rdBase.DisableLog("rdApp.*")
    serve(Connection(int(sys.argv[1])))
