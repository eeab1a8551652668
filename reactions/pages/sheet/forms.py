"""What the forms of the sheet have in common."""

from __future__ import annotations

from typing import Any

from pydantic import ValidationError

from reactions.errors import FieldErrors, field_errors
from reactions.pages.form_errors import add_errors
from reactions.pages.sheet.fields import KeepsStored


class SheetForm(KeepsStored):
    """A form of the sheet that knows where to put what a service objects to."""

    def place_errors(self, error: FieldErrors) -> None:
        """Put what a service objected to at the fields."""
        add_errors(self, error)


def checked(kind: Any, values: dict[str, Any]) -> Any:
    """Return ``values`` as a service's input; raises ``FieldErrors``."""
    try:
        return kind(**values)
    except ValidationError as error:
        raise field_errors(error) from error
