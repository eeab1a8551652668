"""The list of calculators: each written once, and open by the pages, the API and the command.

A calculator is a pure function of ``reactions.chemistry`` with a typed request and a typed result.
Those that read structures run in a bounded process, because a structure may hang or crash RDKit.
"""

from __future__ import annotations

import difflib
import time
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from types import MappingProxyType
from typing import Any

from pydantic import BaseModel, ValidationError

from reactions.bounded import run_bounded
from reactions.chemistry.amounts import AmountsRequest, AmountsResult, amounts
from reactions.chemistry.cautions.request import CautionsRequest, CautionsResult, cautions
from reactions.chemistry.distribution import (
    DistributionRequest,
    DistributionResult,
    distribution,
)
from reactions.chemistry.molar_mass import MolarMassRequest, MolarMassResult, molar_mass
from reactions.chemistry.planning import (
    CurveRequest,
    CurveResult,
    PlanRequest,
    PlanResult,
    curve,
    plan,
)
from reactions.errors import WHOLE, FieldErrors, field_errors


@dataclass(frozen=True)
class Calculator:
    """A calculator: its name, what it answers, its types and its function."""

    name: str
    summary: str
    request: type[BaseModel]
    result: type[BaseModel]
    function: Callable[[Any], BaseModel]
    reads_structures: bool = False


class UnknownCalculatorError(LookupError):
    """There is no calculator of that name."""

    def __init__(self, name: str) -> None:
        near = difflib.get_close_matches(name, CALCULATORS, n=1)
        hint = f" Did you mean {near[0]}?" if near else f" There are {', '.join(CALCULATORS)}."
        super().__init__(f"There is no calculator “{name}”.{hint}")


CALCULATORS: Mapping[str, Calculator] = MappingProxyType(
    {
        row.name: row
        for row in (
            Calculator(
                "distribution",
                "Composition over addition levels from an uptake, an exposure or equivalents",
                DistributionRequest,
                DistributionResult,
                distribution,
            ),
            Calculator(
                "plan",
                "Equivalents for an objective, what they give and what they cost",
                PlanRequest,
                PlanResult,
                plan,
            ),
            Calculator(
                "curve",
                "Composition against equivalents, for a drawing",
                CurveRequest,
                CurveResult,
                curve,
            ),
            Calculator(
                "amounts",
                "What to weigh out: mmol, mg and mL of every line, and the volume of solvent",
                AmountsRequest,
                AmountsResult,
                amounts,
                reads_structures=True,
            ),
            Calculator(
                "cautions",
                "Hazard statements and rules for substances and conditions",
                CautionsRequest,
                CautionsResult,
                cautions,
                reads_structures=True,
            ),
            Calculator(
                "molar_mass",
                "Formula and masses of a structure",
                MolarMassRequest,
                MolarMassResult,
                molar_mass,
                reads_structures=True,
            ),
        )
    }
)


def compute(name: str, data: Any) -> dict[str, Any]:
    """Return what the calculator ``name`` answers to ``data``, ready for JSON.

    Raises ``UnknownCalculatorError``, or ``FieldErrors`` for a bad request.
    """
    calculator = calculator_called(name)
    try:
        request = calculator.request.model_validate(data)
    except ValidationError as error:
        raise field_errors(error, data) from error
    try:
        if calculator.reads_structures:
            result = run_bounded(calculator.function, request)
        else:
            result = calculator.function(request)
    except ValueError as error:
        raise FieldErrors.at(getattr(error, "field", WHOLE), str(error)) from error
    return result.model_dump(mode="json")


def compute_each(
    name: str, requests: Sequence[Any], within_seconds: float = float("inf")
) -> list[dict[str, Any]]:
    """Return the answers to ``requests``, in their order.

    Raises as ``compute`` does, with paths that start at the request's place, such as ``1.uptake``;
    and at the place of the first request that is not begun ``within_seconds``.
    """
    calculator_called(name)
    end = time.monotonic() + within_seconds
    return [_nth(name, place, data, end) for place, data in enumerate(requests)]


def calculator_called(name: str) -> Calculator:
    """Return the calculator of this name; raises ``UnknownCalculatorError``."""
    if name not in CALCULATORS:
        raise UnknownCalculatorError(name)
    return CALCULATORS[name]


def _nth(name: str, place: int, data: Any, end: float) -> dict[str, Any]:
    if time.monotonic() > end:
        raise FieldErrors.at(
            str(place), f"Time was up after {place} of these requests; send fewer at once."
        )
    try:
        return compute(name, data)
    except FieldErrors as error:
        raise FieldErrors(
            {
                (str(place) if path == WHOLE else f"{place}.{path}"): texts
                for path, texts in error.messages.items()
            }
        ) from error
