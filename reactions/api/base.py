"""What every endpoint shares: who may come in, in what form, and what errors look like.

Nothing is left to the settings of the site that mounts the app: log-in is demanded, by session or
token, and JSON is spoken, whatever its defaults are. One shape for each kind of refusal:

    400 {"errors": {"lines.0.purity": ["…"]}}      404 {"detail": "…"}
    409 {"conflict": {"version": 7, "changes": […]}} or {"confirm": {"field": …, "reason": …}}
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Any, TypeVar, cast

from django.apps import apps
from django.contrib.auth.models import User
from django.core.exceptions import ObjectDoesNotExist
from django.http import Http404
from pydantic import BaseModel, ValidationError
from rest_framework.authentication import (
    BaseAuthentication,
    SessionAuthentication,
    TokenAuthentication,
)
from rest_framework.exceptions import NotFound
from rest_framework.parsers import JSONParser
from rest_framework.permissions import IsAuthenticated
from rest_framework.renderers import JSONRenderer
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from reactions.errors import WHOLE, FieldErrors, field_errors
from reactions.services.errors import EditConflict, NeedsConfirmation, NotAllowed, RecordClosed

_Input = TypeVar("_Input", bound=BaseModel)


def token_is_installed() -> bool:
    """Tell whether the site keeps tokens; without them, the session is the only way in."""
    return apps.is_installed("rest_framework.authtoken")


class Endpoint(APIView):
    """A view of the API; a person logged in by session or token, and JSON."""

    permission_classes = [IsAuthenticated]
    renderer_classes = [JSONRenderer]
    parser_classes = [JSONParser]
    throttle_classes = []

    def get_authenticators(self) -> list[BaseAuthentication]:
        """Return the ways in; the token first, so that nobody without either gets a plain 401."""
        token = [TokenAuthentication()] if token_is_installed() else []
        return [*token, SessionAuthentication()]

    @property
    def person(self) -> User:
        """Return who asks; the permission saw to it that they are logged in."""
        return cast("User", self.request.user)

    def handle_exception(self, exc: Exception) -> Response:
        """Turn what the services refuse into an answer; leave the rest to the framework."""
        for kind, answer in _ANSWERS.items():
            if isinstance(exc, kind):
                return answer(exc)
        if isinstance(exc, (ObjectDoesNotExist, Http404)):
            exc = NotFound()
        return super().handle_exception(exc)


def read_input(kind: type[_Input], data: Any) -> _Input:
    """Return ``data`` as the input a service takes; raises ``FieldErrors``."""
    if not isinstance(data, dict):
        raise FieldErrors.at(WHOLE, "Send an object with fields.")
    _refuse_nul(data)
    try:
        return kind.model_validate(data)
    except ValidationError as error:
        raise field_errors(error, data) from error


def fields_of(request: Request) -> dict[str, Any]:
    """Return the fields that a request sends; raises ``FieldErrors`` when it sends none."""
    if not isinstance(request.data, dict):
        raise FieldErrors.at(WHOLE, "Send an object with fields.")
    return dict(request.data)


def _refuse_nul(value: Any) -> None:
    """Raise for text that no database can hold."""
    if isinstance(value, str) and "\x00" in value:
        raise FieldErrors.at(WHOLE, "A text holds the character NUL; take it out.")
    if isinstance(value, dict):
        for key, inner in value.items():
            _refuse_nul(key)
            _refuse_nul(inner)
    elif isinstance(value, list):
        for inner in value:
            _refuse_nul(inner)


def _bad_fields(error: Any) -> Response:
    return Response({"errors": error.messages}, status=400)


def _not_allowed(error: Any) -> Response:
    return Response({"detail": str(error)}, status=403)


def _closed(error: Any) -> Response:
    return Response({"detail": str(error)}, status=409)


def _to_confirm(error: Any) -> Response:
    return Response({"confirm": {"field": error.field, "reason": error.reason}}, status=409)


def _conflict(error: Any) -> Response:
    return Response(
        {
            "detail": str(error),
            "conflict": {"version": error.version, "changes": error.changes},
        },
        status=409,
    )


_ANSWERS: dict[type[Exception], Callable[[Any], Response]] = {
    FieldErrors: _bad_fields,
    NotAllowed: _not_allowed,
    EditConflict: _conflict,
    NeedsConfirmation: _to_confirm,
    RecordClosed: _closed,
}
