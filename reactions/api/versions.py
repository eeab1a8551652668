"""Which version of a record a change was made on, so that nobody's change runs over another's."""

from __future__ import annotations

import re
from typing import Any, TypeVar

from drf_spectacular.utils import OpenApiParameter
from pydantic import BaseModel, Field, create_model
from rest_framework.exceptions import APIException
from rest_framework.request import Request

from reactions.errors import FieldErrors
from reactions.models import Reaction

_ETAG = re.compile(r'(?:W/)?"?(\d{1,9})"?\Z', re.ASCII)
_Input = TypeVar("_Input", bound=BaseModel)

SEEN = OpenApiParameter(
    "If-Match",
    str,
    OpenApiParameter.HEADER,
    description="The version seen, as the ETag gave it; or send the field seen_version.",
)


class VersionNeeded(APIException):
    """A change that could run over another's has to say which version it was made on."""

    status_code = 428
    default_detail = (
        "Say which version you saw: send its ETag as If-Match, or the field seen_version."
    )


def with_seen_version(kind: type[_Input]) -> type[_Input]:
    """Return an input, for the API's description, with the field that says the version seen."""
    field = Field(None, description="The version seen, where If-Match does not say it.")
    return create_model(
        f"{kind.__name__.removesuffix('Input')}Change",
        __base__=kind,
        __doc__=kind.__doc__,
        seen_version=(int | None, field),
    )


def seen_version(request: Request, fields: dict[str, Any], reaction: Reaction) -> int:
    """Return the version the person had seen, taking ``seen_version`` out of the fields.

    Raises ``VersionNeeded``, or ``FieldErrors`` for what is no version of this reaction.
    """
    version = stated_version(request, fields, reaction)
    if version is None:
        raise VersionNeeded
    return version


def stated_version(request: Request, fields: dict[str, Any], reaction: Reaction) -> int | None:
    """Return the version seen where it is said, else None; otherwise as ``seen_version``."""
    in_fields = fields.pop("seen_version", None)
    header = request.headers.get("If-Match")
    if header is not None:
        match = _ETAG.match(header.strip())
        field, typed, version = "If-Match", header, int(match[1]) if match else None
    elif in_fields is not None:
        is_number = isinstance(in_fields, int) and not isinstance(in_fields, bool)
        field, typed, version = "seen_version", in_fields, in_fields if is_number else None
    else:
        return None
    if version is None or not 1 <= version <= reaction.version:
        raise FieldErrors.at(
            field,
            f"“{str(typed)[:40]}” is no version of {reaction.label}, which is at "
            f"{reaction.version}; send the one you saw.",
        )
    return version
