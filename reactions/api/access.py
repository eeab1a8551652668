"""Tokens for programs, and the API's own description."""

from __future__ import annotations

from django.contrib.auth import authenticate
from django.contrib.auth.decorators import login_not_required
from django.utils.decorators import method_decorator
from drf_spectacular.utils import extend_schema
from drf_spectacular.views import SpectacularAPIView
from pydantic import BaseModel, ConfigDict, Field
from rest_framework.negotiation import DefaultContentNegotiation
from rest_framework.permissions import AllowAny, IsAuthenticated
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.throttling import AnonRateThrottle

from reactions.api.base import Endpoint, read_input
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

    @extend_schema(
        operation_id="token", request=LogInInput, responses={200: TokenOutput, 400: Refusal}
    )
    def post(self, request: Request) -> Response:
        """Return your token, made on first use."""
        from rest_framework.authtoken.models import Token

        given = read_input(LogInInput, request.data)
        user = authenticate(request, username=given.username, password=given.password)
        if user is None:
            raise FieldErrors.at(WHOLE, "No account has this name with this password.")
        token, _ = Token.objects.get_or_create(user=user)
        return Response({"token": token.key})


class Schema(SpectacularAPIView):
    """The description of the API, by the OpenAPI standard.

    Version 3.1, whatever the site's setting: 3.0 can't say that a field has one fixed value.
    """

    custom_settings = {"OAS_VERSION": "3.1.0"}

    permission_classes = [IsAuthenticated]
    throttle_classes = []
    content_negotiation_class = DefaultContentNegotiation
    versioning_class = None
    get_authenticators = Endpoint.get_authenticators
    get_exception_handler = Endpoint.get_exception_handler
