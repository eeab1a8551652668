"""What every endpoint shares: who may come in, in what form, and what errors look like.

Nothing is left to the settings of the site that mounts the app: log-in is demanded, by session or
token, and JSON is spoken, whatever its defaults are. One shape for each kind of refusal:

    400 {"errors": {"lines.0.purity": ["…"]}}      401, 403, 404, 428 and others {"detail": "…"}
    409 {"conflict": {"version": 7, "changes": […]}} or {"confirm": {"field": …, "reason": …}}
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import IO, Any, TypeVar, cast

from django.apps import apps
from django.conf import settings
from django.contrib.auth.models import User
from django.core.exceptions import ObjectDoesNotExist
from django.http import Http404
from drf_spectacular.openapi import AutoSchema
from pydantic import BaseModel, ValidationError
from rest_framework.authentication import (
    BaseAuthentication,
    SessionAuthentication,
    TokenAuthentication,
)
from rest_framework.exceptions import APIException, NotFound
from rest_framework.metadata import SimpleMetadata
from rest_framework.negotiation import DefaultContentNegotiation
from rest_framework.parsers import BaseParser
from rest_framework.permissions import IsAuthenticated
from rest_framework.renderers import JSONRenderer
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView, exception_handler

from reactions.errors import WHOLE, FieldErrors, field_errors
from reactions.json_text import read_json
from reactions.services.errors import EditConflict, NeedsConfirmation, NotAllowed, RecordClosed

_Input = TypeVar("_Input", bound=BaseModel)


def token_is_installed() -> bool:
    """Tell whether the site keeps tokens; without them, the session is the only way in."""
    return apps.is_installed("rest_framework.authtoken")


class TooLarge(APIException):
    """The body is longer than the site takes."""

    status_code = 413
    default_detail = "This is too much at once; send it in smaller portions."


class StrictJSON(BaseParser):
    """JSON that a record can hold, no longer than the site takes in any request."""

    media_type = "application/json"

    def parse(
        self,
        stream: IO[Any],
        media_type: str | None = None,
        parser_context: Mapping[str, Any] | None = None,
    ) -> Any:
        """Return what the body says; raises ``FieldErrors``, or ``TooLarge``."""
        longest = settings.DATA_UPLOAD_MAX_MEMORY_SIZE
        body = stream.read() if longest is None else stream.read(longest + 1)
        if longest is not None and len(body) > longest:
            raise TooLarge
        return read_json(body.decode("utf-8", "surrogateescape"))


class Endpoint(APIView):
    """A view of the API; a person logged in by session or token, and JSON."""

    permission_classes = [IsAuthenticated]
    renderer_classes = [JSONRenderer]
    parser_classes = [StrictJSON]
    throttle_classes = []
    content_negotiation_class = DefaultContentNegotiation
    metadata_class = SimpleMetadata
    versioning_class = None
    schema = AutoSchema()

    def initial(self, request: Request, *args: Any, **kwargs: Any) -> None:
        """Let nobody in without log-in; no address has anything with the character NUL."""
        super().initial(request, *args, **kwargs)
        if any("\x00" in str(value) for value in kwargs.values()):
            raise Http404

    def get_authenticators(self) -> list[BaseAuthentication]:
        """Return the ways in; the token first, so that nobody without either gets a plain 401."""
        token = [TokenAuthentication()] if token_is_installed() else []
        return [*token, SessionAuthentication()]

    @property
    def person(self) -> User:
        """Return who asks; the permission saw to it that they are logged in."""
        return cast("User", self.request.user)

    def get_exception_handler(self) -> Callable[..., Response | None]:
        """Return the framework's own, whatever the site has put in its place."""
        return exception_handler

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
    try:
        return kind.model_validate(data)
    except ValidationError as error:
        raise field_errors(error, data) from error


def fields_of(request: Request) -> dict[str, Any]:
    """Return the fields that a request sends; raises ``FieldErrors`` when it sends none."""
    if not isinstance(request.data, dict):
        raise FieldErrors.at(WHOLE, "Send an object with fields.")
    return dict(request.data)


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
