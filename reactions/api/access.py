"""Tokens for programs, and the API's own description."""

from __future__ import annotations

from django.contrib.auth import authenticate
from django.contrib.auth.decorators import login_not_required
from django.utils.decorators import method_decorator
from drf_spectacular.renderers import (
    OpenApiJsonRenderer,
    OpenApiJsonRenderer2,
    OpenApiYamlRenderer,
    OpenApiYamlRenderer2,
)
from pydantic import BaseModel, ConfigDict, Field
from rest_framework.permissions import AllowAny
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.throttling import AnonRateThrottle

from reactions.api.base import Endpoint, read_input
from reactions.api.openapi import book_schema, described
from reactions.api.outputs import Output, Refusal
from reactions.errors import WHOLE, FieldErrors


class LogInInput(BaseModel):
    """User name and password, which may begin or end with spaces."""

    model_config = ConfigDict(frozen=True, extra="forbid")

    username: str = Field(max_length=150)
    password: str = Field(max_length=1000)


class TokenOutput(Output):
    """A token, to be sent as ``Authorization: Token …``."""

    token: str


class FewTries(AnonRateThrottle):
    """Ten tries a minute from one address."""

    rate = "10/min"
    scope = "token"


@method_decorator(login_not_required, name="dispatch")
class ObtainToken(Endpoint):
    """The token of a person's programs."""

    permission_classes = [AllowAny]
    throttle_classes = [FewTries]

    def get_authenticators(self) -> list[object]:  # type: ignore[override]
        """Ask for no earlier log-in."""
        return []

    @described(operation_id="token", request=LogInInput, responses={200: TokenOutput, 400: Refusal})
    def post(self, request: Request) -> Response:
        """Return your token, made on first use."""
        from rest_framework.authtoken.models import Token

        given = read_input(LogInInput, request.data)
        user = authenticate(request, username=given.username, password=given.password)
        if user is None:
            raise FieldErrors.at(WHOLE, "No account has this name with this password.")
        token, _ = Token.objects.get_or_create(user=user)
        return Response({"token": token.key})


class Schema(Endpoint):
    """The description of the API, by the OpenAPI standard."""

    renderer_classes = [
        OpenApiYamlRenderer,
        OpenApiYamlRenderer2,
        OpenApiJsonRenderer,
        OpenApiJsonRenderer2,
    ]

    @described(exclude=True)
    def get(self, request: Request) -> Response:
        """Return it as YAML, or as JSON where that is asked for."""
        return Response(book_schema())
