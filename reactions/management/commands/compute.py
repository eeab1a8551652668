"""Run a calculator: ``compute <name> '<json>'``, or ``-`` for standard input.

JSON goes to standard output; an array of requests gives an array of results. Bad input ends with
exit code 2 and a one-line reason on standard error.
"""

from __future__ import annotations

import json
import sys
from argparse import ArgumentParser
from typing import Any

from django.core.management.base import BaseCommand

from reactions.calculators import CALCULATORS, UnknownCalculatorError, compute
from reactions.errors import FieldErrors

_BAD_INPUT = 2


class Command(BaseCommand):
    """Run a calculator on JSON."""

    help = "Run a calculator on a JSON request, or on an array of them."
    requires_system_checks = []

    def add_arguments(self, parser: ArgumentParser) -> None:
        """Take the calculator's name and the request."""
        parser.add_argument("name", help=f"one of {', '.join(CALCULATORS)}")
        parser.add_argument("request", help="the request as JSON, or - for standard input")

    def handle(self, *args: Any, **options: Any) -> None:
        """Print the answer."""
        text = sys.stdin.read() if options["request"] == "-" else options["request"]
        try:
            data = json.loads(text)
        except (ValueError, RecursionError) as error:
            self._refuse(f"The request is not JSON: {error}.")
        try:
            if isinstance(data, list):
                answer: Any = [compute(options["name"], row) for row in data]
            else:
                answer = compute(options["name"], data)
        except (FieldErrors, UnknownCalculatorError) as error:
            self._refuse(str(error))
        self.stdout.write(json.dumps(answer, ensure_ascii=False))

    def _refuse(self, reason: str) -> Any:
        self.stderr.write(" ".join(reason.split()))
        raise SystemExit(_BAD_INPUT)
