"""Errors of the services at the fields of a form."""

from __future__ import annotations

from django.forms import BaseForm

from reactions.errors import WHOLE, FieldErrors


def add_errors(form: BaseForm, error: FieldErrors) -> None:
    """Put each message at its field; what has no field in this form goes to the head of it."""
    for path, messages in error.messages.items():
        field = path if path in form.fields else None
        for message in messages:
            text = message if field or path == WHOLE else f"{path}: {message}"
            form.add_error(field, text)
