"""The calculators over the API, made from their list."""

from __future__ import annotations

from typing import Annotated, Any

from pydantic import BaseModel, Field, RootModel, create_model
from rest_framework.exceptions import NotFound
from rest_framework.request import Request
from rest_framework.response import Response

from reactions.api.base import Endpoint
from reactions.api.openapi import described
from reactions.api.outputs import REFUSALS, AnyObject
from reactions.calculators import (
    CALCULATORS,
    Calculator,
    UnknownCalculatorError,
    compute,
    compute_each,
)
from reactions.errors import WHOLE, FieldErrors

MOST_AT_ONCE = 1000
# An array holds a server thread; what takes longer belongs to the command.
LONGEST_SECONDS = 30.0


class Calculators(Endpoint):
    """The list of calculators."""

    @described(operation_id="compute_list", responses={200: AnyObject})
    def get(self, request: Request) -> Response:
        """Return each calculator with the JSON schemas of its request and its result."""
        return Response(
            {
                row.name: {
                    "summary": row.summary,
                    "request": row.request.model_json_schema(),
                    "result": row.result.model_json_schema(),
                }
                for row in CALCULATORS.values()
            }
        )


class Compute(Endpoint):
    """One calculator; each of the list has a view of its own, so that the schema is typed."""

    name = ""

    def answer(self, data: Any) -> Response:
        """Answer a request, or an array of at most 1,000 of them."""
        if not isinstance(data, list):
            return Response(compute(self.name, data))
        if len(data) > MOST_AT_ONCE:
            raise FieldErrors.at(
                WHOLE, f"{len(data)} requests are too many at once; send {MOST_AT_ONCE} or fewer."
            )
        return Response(compute_each(self.name, data, within_seconds=LONGEST_SECONDS))


class NoSuchCalculator(Endpoint):
    """The answer to a name that is none."""

    @described(exclude=True)
    def post(self, request: Request, name: str) -> Response:
        """Say which calculators there are."""
        raise NotFound(str(UnknownCalculatorError(name)))


def _one_or_more(kind: type[BaseModel]) -> type[BaseModel]:
    """Return the type of one value, or of an array of at most as many as are taken at once."""
    one: Any = kind
    several: Any = Annotated[list[one], Field(max_length=MOST_AT_ONCE)]
    values: Any = RootModel[one | several]
    return create_model(f"{kind.__name__}s", __base__=values, __doc__="One, or an array.")


def view_of(calculator: Calculator) -> type[Compute]:
    """Return the view of one calculator, typed for the schema."""

    @described(
        operation_id=f"compute_{calculator.name}",
        summary=calculator.summary,
        request=_one_or_more(calculator.request),
        responses={200: _one_or_more(calculator.result), **REFUSALS},
    )
    def post(self: Compute, request: Request) -> Response:
        return self.answer(request.data)

    name = f"Compute{calculator.name.title().replace('_', '')}"
    return type(name, (Compute,), {"name": calculator.name, "post": post})
