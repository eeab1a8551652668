"""The API's description by the OpenAPI standard, the same in whatever site the app is mounted.

Only this app's addresses are described, in version 3.1 (3.0 can't say that a field has one fixed
value), whatever the site's settings say of its own.
"""

from __future__ import annotations

import threading
from collections.abc import Callable
from functools import cache
from typing import Any, TypeVar

from drf_spectacular.generators import EndpointEnumerator, SchemaGenerator
from drf_spectacular.openapi import AutoSchema
from drf_spectacular.settings import patched_settings
from drf_spectacular.utils import extend_schema

_Method = TypeVar("_Method", bound=Callable[..., Any])

_PACKAGE = __name__.rpartition(".")[0]
_SETTINGS = {"OAS_VERSION": "3.1.0", "TITLE": "Labbook", "VERSION": "1"}
_making = threading.Lock()


def described(**description: Any) -> Callable[[_Method], _Method]:
    """Return a decorator that describes a method of an endpoint, as ``extend_schema`` takes it."""

    def describe(method: _Method) -> _Method:
        # Else the site's own class of schemas would be extended.
        method.kwargs = {"schema": AutoSchema}  # type: ignore[attr-defined]
        return extend_schema(**description)(method)

    return describe


def book_schema() -> dict[str, Any]:
    """Return the description of the API."""
    with _making:  # the settings below are patched for the whole process
        return _made()


@cache
def _made() -> dict[str, Any]:
    with patched_settings(_SETTINGS):
        generator = _Generator()  # type: ignore[no-untyped-call]
        made: dict[str, Any] = generator.get_schema(  # type: ignore[no-untyped-call]
            request=None, public=True
        )
    return made


class _OwnEndpoints(EndpointEnumerator):
    """The addresses of this app among those of the site."""

    def get_api_endpoints(self, patterns: Any = None, prefix: str = "") -> list[Any]:
        """Return path, pattern, method and view of each."""
        found = super().get_api_endpoints(patterns, prefix)  # type: ignore[no-untyped-call]
        return [row for row in found if row[3].cls.__module__.startswith(f"{_PACKAGE}.")]


class _Generator(SchemaGenerator):
    endpoint_inspector_cls = _OwnEndpoints
