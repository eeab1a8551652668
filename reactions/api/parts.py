"""The parts of a reaction's record, each written through a service."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from pydantic import Field
from rest_framework.request import Request
from rest_framework.response import Response

from reactions.api.base import Endpoint, fields_of, read_input
from reactions.api.openapi import described
from reactions.api.outputs import REFUSALS, ReactionOutput
from reactions.api.records import answer_with, find_reaction
from reactions.api.versions import SEEN, seen_version, stated_version, with_seen_version
from reactions.models import State
from reactions.services.inputs import (
    ConclusionInput,
    ConditionsInput,
    Input,
    IsolationStepInput,
    LineInput,
    ObservationInput,
    ReadingInput,
)
from reactions.services.lines import amend_lines
from reactions.services.revising import Edit
from reactions.services.run import (
    add_observation,
    add_reading,
    amend_conclusion,
    amend_conditions,
    amend_isolation,
    remove_observation,
    remove_reading,
)
from reactions.services.states import countersign, move, sign

_CHANGED = {200: ReactionOutput, **REFUSALS}
_ADDED = {201: ReactionOutput, **REFUSALS}


class LinesInput(Input):
    """The whole weighing list, in its order."""

    lines: list[LineInput] = Field(max_length=60)


class IsolationInput(Input):
    """The whole isolation, in its order."""

    steps: list[IsolationStepInput] = Field(max_length=60)


class StateInput(Input):
    """The state to move to; signing has its own address."""

    state: State


class SignatureInput(Input):
    """Nothing but the version that is signed."""


class Part(Endpoint):
    """A part of a reaction."""

    def _write(self, label: str, write: Callable[[Edit], Any], status: int = 200) -> Response:
        """Let ``write`` make a change that can't run over anyone's."""
        write(Edit(self.person, find_reaction(self.person, label).pk))
        return answer_with(find_reaction(self.person, label), status)

    def _replace(
        self, request: Request, label: str, write: Callable[[Edit, dict[str, Any]], Any]
    ) -> Response:
        """Let ``write`` put the request's fields in place of what the seen version holds."""
        reaction = find_reaction(self.person, label)
        fields = fields_of(request)
        seen = seen_version(request, fields, reaction)
        write(Edit(self.person, reaction.pk, seen), fields)
        return answer_with(find_reaction(self.person, label))


class Lines(Part):
    """The weighing list."""

    @described(
        operation_id="reactions_lines",
        parameters=[SEEN],
        request=with_seen_version(LinesInput),
        responses=_CHANGED,
    )
    def put(self, request: Request, label: str) -> Response:
        """Put a weighing list in place of the stored one; every amount is worked out."""
        return self._replace(
            request,
            label,
            lambda edit, fields: amend_lines(edit, read_input(LinesInput, fields).lines),
        )


class Conditions(Part):
    """The conditions."""

    @described(
        operation_id="reactions_conditions",
        parameters=[SEEN],
        request=with_seen_version(ConditionsInput),
        responses=_CHANGED,
    )
    def put(self, request: Request, label: str) -> Response:
        """Put conditions in place of the stored ones."""
        return self._replace(
            request,
            label,
            lambda edit, fields: amend_conditions(edit, read_input(ConditionsInput, fields)),
        )


class Isolation(Part):
    """The isolation."""

    @described(
        operation_id="reactions_isolation",
        parameters=[SEEN],
        request=with_seen_version(IsolationInput),
        responses=_CHANGED,
    )
    def put(self, request: Request, label: str) -> Response:
        """Put isolation steps with their fractions in place of the stored ones."""
        return self._replace(
            request,
            label,
            lambda edit, fields: amend_isolation(edit, read_input(IsolationInput, fields).steps),
        )


class Conclusion(Part):
    """The conclusion."""

    @described(
        operation_id="reactions_conclusion",
        parameters=[SEEN],
        request=with_seen_version(ConclusionInput),
        responses=_CHANGED,
    )
    def put(self, request: Request, label: str) -> Response:
        """Put conclusion and recovered cage in place of the stored ones."""
        return self._replace(
            request,
            label,
            lambda edit, fields: amend_conclusion(edit, read_input(ConclusionInput, fields)),
        )


class Observations(Part):
    """The time line."""

    @described(
        operation_id="reactions_observe",
        request=ObservationInput,
        responses=_ADDED,
    )
    def post(self, request: Request, label: str) -> Response:
        """Add a line to the time line."""
        find_reaction(self.person, label)
        observation = read_input(ObservationInput, request.data)
        return self._write(label, lambda edit: add_observation(edit, observation), 201)


class OneObservation(Part):
    """A line of the time line."""

    @described(operation_id="reactions_unobserve", responses=_CHANGED)
    def delete(self, request: Request, label: str, pk: int) -> Response:
        """Take a line out; the revision keeps what it said."""
        return self._write(label, lambda edit: remove_observation(edit, pk))


class Readings(Part):
    """The readings."""

    @described(
        operation_id="reactions_read_out",
        request=ReadingInput,
        responses=_ADDED,
    )
    def post(self, request: Request, label: str) -> Response:
        """Add a composition, as mole fractions by level."""
        find_reaction(self.person, label)
        reading = read_input(ReadingInput, request.data)
        return self._write(label, lambda edit: add_reading(edit, reading), 201)


class OneReading(Part):
    """A reading."""

    @described(operation_id="reactions_unread", responses=_CHANGED)
    def delete(self, request: Request, label: str, pk: int) -> Response:
        """Take a reading out; the revision keeps what it said."""
        return self._write(label, lambda edit: remove_reading(edit, pk))


class StateOfReaction(Part):
    """The state."""

    @described(
        operation_id="reactions_move",
        parameters=[SEEN],
        request=with_seen_version(StateInput),
        responses=_CHANGED,
    )
    def post(self, request: Request, label: str) -> Response:
        """Move to another state; with a version seen, only if nothing has changed since."""
        reaction = find_reaction(self.person, label)
        fields = fields_of(request)
        seen = stated_version(request, fields, reaction)
        move(Edit(self.person, reaction.pk, seen), read_input(StateInput, fields).state)
        return answer_with(find_reaction(self.person, label))


class AuthorSignature(Part):
    """The author's signature."""

    @described(
        operation_id="reactions_sign",
        parameters=[SEEN],
        request=with_seen_version(SignatureInput),
        responses=_CHANGED,
    )
    def post(self, request: Request, label: str) -> Response:
        """Sign a completed reaction as you saw it; from then on it takes no change."""

        def write(edit: Edit, fields: dict[str, Any]) -> None:
            read_input(SignatureInput, fields)
            sign(edit)

        return self._replace(request, label, write)


class Countersignature(Part):
    """A reviewer's signature."""

    @described(operation_id="reactions_countersign", request=None, responses=_CHANGED)
    def post(self, request: Request, label: str) -> Response:
        """Countersign a signed reaction, which no longer changes."""
        return self._write(label, countersign)
