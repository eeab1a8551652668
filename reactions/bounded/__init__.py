"""Work on structures from outside, where neither a hang nor a crash reaches the server.

RDKit is C++: a match on a symmetric query can run for minutes without letting Python interrupt it,
and a malformed structure can end the process. So such work runs in a worker process of its own,
which has a memory limit, is killed when the time is up, and is replaced after a crash.
"""

from __future__ import annotations

from reactions.bounded.calls import StructureTimeoutError, run_bounded, warm_up

__all__ = ["StructureTimeoutError", "run_bounded", "warm_up"]
