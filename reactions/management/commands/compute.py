"""Run a calculator: ``compute <name> '<json>'``, or ``-`` for standard input.

JSON goes to standard output; an array of requests gives an array of results. Bad input ends with
exit code 2 and a one-line reason on standard error.
"""

from __future__ import annotations

import codecs
import json
import os
import sys
from argparse import ArgumentParser
from typing import Any, NoReturn

from django.core.management.base import BaseCommand

from reactions.calculators import CALCULATORS, UnknownCalculatorError, compute, compute_each
from reactions.errors import FieldErrors
from reactions.json_text import read_json

_CANNOT_WRITE, _BAD_INPUT, _INTERRUPTED = 1, 2, 130
_USE = "Give a calculator and its request, as JSON or - for standard input. There are {}."


class Command(BaseCommand):
    """Run a calculator on JSON."""

    help = "Run a calculator on a JSON request, or on an array of them."
    requires_system_checks = []

    def add_arguments(self, parser: ArgumentParser) -> None:
        """Take the calculator's name and the request."""
        # Both are needed; but what argparse would say of a missing one takes several lines.
        parser.add_argument("name", nargs="?", help=f"one of {', '.join(CALCULATORS)}")
        parser.add_argument(
            "request", nargs="?", help="the request as JSON, or - for standard input"
        )

    def handle(self, *args: Any, **options: Any) -> None:
        """Print the answer."""
        name, request = options["name"], options["request"]
        if request is None:
            self._end(_BAD_INPUT, _USE.format(", ".join(CALCULATORS)))
        try:
            data = read_json(_text(request))
            answer = (compute_each if isinstance(data, list) else compute)(name, data)
        except (FieldErrors, UnknownCalculatorError) as error:
            self._end(_BAD_INPUT, str(error))
        except KeyboardInterrupt:
            self._end(_INTERRUPTED, "Interrupted.")
        self._print(json.dumps(answer, ensure_ascii=not _writes_unicode()))

    def _print(self, text: str) -> None:
        try:
            self.stdout.write(text)
            self.stdout.flush()
        except OSError as error:
            # What is left in the buffer would fail once more when Python ends.
            os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
            self._end(_CANNOT_WRITE, f"The answer can't be written: {error.strerror}.")

    def _end(self, code: int, reason: str) -> NoReturn:
        self.stderr.write(" ".join(reason.split()))
        raise SystemExit(code)


def _text(request: str) -> str:
    """Return the request; bytes that are no UTF-8 come as halves of characters, refused later."""
    if request != "-":
        return request
    return sys.stdin.buffer.read().decode("utf-8", "surrogateescape")


def _writes_unicode() -> bool:
    return codecs.lookup(sys.stdout.encoding or "utf-8").name == "utf-8"
