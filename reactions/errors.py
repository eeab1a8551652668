"""Errors that belong to a field, in words for the person who typed.

Every door (page, API, command, import) turns what the layers below raise into one shape: a
mapping from a field's path, such as ``lines.2.purity``, to messages.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any

from pydantic import ValidationError

# Beside each of pydantic's error types: what is wrong with {value}, and the remedy.
_MESSAGES = {
    "missing": "Nothing is given; fill this in.",
    "extra_forbidden": "“{name}” is not a field here; take it out.",
    "greater_than": "{value} is not above {gt}; give more than {gt}.",
    "greater_than_equal": "{value} is below {ge}; give {ge} or more.",
    "less_than": "{value} is not below {lt}; give less than {lt}.",
    "less_than_equal": "{value} is above {le}; give {le} or less.",
    "finite_number": "{value} is not a finite number; give an ordinary number.",
    "float_parsing": "“{value}” is not a number; write digits, such as 1.5.",
    "float_type": "{value} is not a number; write digits, such as 1.5.",
    "int_parsing": "“{value}” is not a whole number; write digits, such as 2.",
    "int_type": "{value} is not a whole number; write digits, such as 2.",
    "int_from_float": "{value} is not a whole number; leave out the decimals.",
    "bool_parsing": "“{value}” is neither true nor false.",
    "bool_type": "{value} is neither true nor false.",
    "list_type": "{value} is not a list.",
    "dict_type": "{value} is not an object with fields.",
    "model_type": "{value} is not an object with fields.",
    "model_attributes_type": "{value} is not an object with fields.",
    "int_parsing_size": "{value} has too many digits.",
    "string_type": "{value} is not text.",
    "string_too_long": "This is longer than {max_length} characters; shorten it.",
    "string_too_short": "This is empty; write something.",
    "too_short": "The list is too short; it needs at least {min_length}.",
    "too_long": "The list is too long; it takes at most {max_length}.",
    "literal_error": "“{value}” is not known here; choose one of {expected}.",
    "enum": "“{value}” is not known here; choose one of {expected}.",
    "date_from_datetime_parsing": "“{value}” is not a date; write it as 2026-03-31.",
    "date_parsing": "“{value}” is not a date; write it as 2026-03-31.",
    "union_tag_invalid": "“{tag}” is not known here; choose one of {expected_tags}.",
    "union_tag_not_found": "Say which kind is meant, in {discriminator}.",
}

WHOLE = "__all__"  # the key of what concerns no single field; Django's forms use the same


class FieldErrors(ValueError):
    """Messages by field; the key ``WHOLE`` holds what concerns no single field."""

    def __init__(self, messages: Mapping[str, Iterable[str]]) -> None:
        self.messages = {field: list(texts) for field, texts in messages.items()}
        super().__init__(
            "; ".join(
                text if field == WHOLE else f"{field}: {text}"
                for field, texts in self.messages.items()
                for text in texts
            )
        )

    @classmethod
    def at(cls, field: str, message: str) -> FieldErrors:
        """Return the error of a single field."""
        return cls({field: [message]})


def field_errors(error: ValidationError, data: Any = None) -> FieldErrors:
    """Return pydantic's validation error in the user's words, by field path.

    With ``data``, what was validated, the paths are those of its own fields: pydantic also names
    the branch of a union it tried, which the person never wrote.
    """
    messages: dict[str, list[str]] = {}
    for detail in error.errors(include_url=False):
        is_missing = detail["type"] == "missing"
        parts = detail["loc"] if data is None else _own_parts(detail["loc"], data, is_missing)
        path = ".".join(str(part) for part in parts) or WHOLE
        message = _message(dict(detail))
        if message not in messages.setdefault(path, []):
            messages[path].append(message)
    return FieldErrors(messages)


def _own_parts(parts: tuple[int | str, ...], data: Any, is_missing: bool) -> list[int | str]:
    """Return the parts of a path that lead through ``data``, and a last one that is missing."""
    own: list[int | str] = []
    node = data
    for place, part in enumerate(parts):
        leads_on = (isinstance(node, Mapping) and part in node) or (
            isinstance(node, list) and isinstance(part, int) and part < len(node)
        )
        if leads_on:
            node = node[part]
        elif not (is_missing and isinstance(node, Mapping) and place == len(parts) - 1):
            continue
        own.append(part)
    return own


def _message(detail: dict[str, Any]) -> str:
    if detail["type"] == "value_error":
        return str(detail["ctx"]["error"])
    template = _MESSAGES.get(detail["type"])
    if template is None:
        return f"{detail['msg']}."
    known = dict(detail.get("ctx", {}))
    known = {key: _plain(value) for key, value in known.items()}
    name = detail["loc"][-1] if detail["loc"] else ""
    return template.format(value=_plain(detail.get("input")), name=name, **known)


def _plain(value: Any) -> str:
    if isinstance(value, float):
        return f"{value:g}"
    return str(value)[:120]
