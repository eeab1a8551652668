"""The API's description as a page of the book: the OpenAPI schema, laid out to be read."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any

from django.contrib.auth.decorators import login_required
from django.http import HttpRequest, HttpResponse
from django.shortcuts import render
from django.views.decorators.http import require_safe

from reactions.api.openapi import book_schema

_METHODS = ("get", "post", "put", "delete")


@dataclass(frozen=True)
class Parameter:
    """A parameter of an address or a header, or a field of a type."""

    name: str
    type: str
    description: str
    is_required: bool


@dataclass(frozen=True)
class Operation:
    """One method of one address; ``takes`` and ``gives`` name types."""

    method: str
    path: str
    description: str
    parameters: list[Parameter]
    takes: str
    gives: list[tuple[str, str]]


@dataclass(frozen=True)
class TypeDescription:
    """A type that requests or answers have."""

    name: str
    description: str
    fields: list[Parameter] = field(default_factory=list)
    values: list[str] = field(default_factory=list)


@login_required
@require_safe
def description(request: HttpRequest) -> HttpResponse:
    """Show every address of the API with what it takes and gives."""
    schema = book_schema()
    context = {
        "navigation": "api",
        "groups": _groups(schema),
        "types": _types(schema),
    }
    return render(request, "reactions/api/description.html", context)


def _groups(schema: Mapping[str, Any]) -> dict[str, list[Operation]]:
    """Return the operations by the first word of their address below ``api/``."""
    groups: dict[str, list[Operation]] = {}
    for path, methods in schema["paths"].items():
        for method in _METHODS:
            if method in methods:
                tag = path.split("api/", 1)[-1].split("/", 1)[0]
                groups.setdefault(tag, []).append(_operation(method, path, methods[method]))
    return groups


def _operation(method: str, path: str, found: Mapping[str, Any]) -> Operation:
    body = found.get("requestBody", {}).get("content", {}).get("application/json", {})
    return Operation(
        method=method.upper(),
        path=path,
        description=found.get("summary") or found.get("description", ""),
        parameters=[
            Parameter(
                row["name"],
                _type_name(row.get("schema", {})),
                row.get("description", ""),
                row.get("required", False),
            )
            for row in found.get("parameters", [])
        ],
        takes=_type_name(body.get("schema", {})),
        gives=[
            (
                status,
                _type_name(answer.get("content", {}).get("application/json", {}).get("schema", {})),
            )
            for status, answer in found.get("responses", {}).items()
        ],
    )


def _types(schema: Mapping[str, Any]) -> list[TypeDescription]:
    return [
        TypeDescription(
            name=name,
            description=found.get("description", ""),
            fields=[
                Parameter(
                    key,
                    _type_name(value),
                    value.get("description", ""),
                    key in found.get("required", []),
                )
                for key, value in found.get("properties", {}).items()
            ],
            values=[str(value) for value in found.get("enum", [])],
        )
        for name, found in sorted(schema["components"]["schemas"].items())
    ]


def _type_name(schema: Mapping[str, Any]) -> str:
    """Return a schema in a few words, such as ``array of ReadingOutput`` or ``number or null``."""
    if "$ref" in schema:
        return str(schema["$ref"]).rsplit("/", 1)[-1]
    for key in ("anyOf", "oneOf"):
        if key in schema:
            return " or ".join(dict.fromkeys(_type_name(part) for part in schema[key]))
    if "const" in schema:
        return f"“{schema['const']}”"
    if schema.get("type") == "array":
        return f"array of {_type_name(schema.get('items', {})) or 'anything'}"
    kind = schema.get("type", "")
    if isinstance(kind, list):
        return " or ".join(kind)
    return str(kind)
