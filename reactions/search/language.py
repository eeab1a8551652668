"""What can be asked of the book: one query language for the page, the API and the downloads.

A query is a frozen value that stands in an address and is read back from it. Whoever asks gets
answers from the campaigns of which they are a member, and from no others.
"""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date
from typing import Annotated, Any, Literal, get_args
from urllib.parse import urlencode

from django.http import QueryDict
from pydantic import BaseModel, ConfigDict, Field, ValidationError, ValidationInfo, field_validator

from reactions.chemistry.substructure import QueryKind
from reactions.errors import field_errors
from reactions.models import State
from reactions.models.constraints import HIGHEST_LEVEL, LARGEST_AMOUNT
from reactions.search.typed import DurationMin, Percent, TemperatureC

SortKey = Literal[
    "changed", "-changed",
    "performed", "-performed",
    "label", "-label",
    "temperature", "-temperature",
    "duration", "-duration",
    "level", "-level",
    "conversion", "-conversion",
    "yield", "-yield",
]  # fmt: skip
NEWEST_FIRST: SortKey = "-changed"
# In the same address, but of the page or the transport and not of the query.
BESIDE_THE_QUERY = frozenset({"page", "page_size", "format"})

_Temperature = Annotated[TemperatureC, Field(ge=-273.15, le=3000, allow_inf_nan=False)]
_Duration = Annotated[DurationMin, Field(ge=0, le=LARGEST_AMOUNT, allow_inf_nan=False)]
# A yield above 100 % is a fault in the record, and so a thing to look for.
_Yield = Annotated[Percent, Field(ge=0, le=1000, allow_inf_nan=False)]
_Level = Annotated[int, Field(ge=0, le=HIGHEST_LEVEL)]
_Name = Annotated[str, Field(max_length=120)]


class SearchQuery(BaseModel):
    """A search over reactions; every field left out asks nothing.

    ``family`` holds keys of families and names of their branches, any of which will do.
    ``substructure`` is SMILES, SMARTS or a molfile, as ``substructure_kind`` says. Ranges include
    their ends. ``text`` is words, each of which has to stand in the title, the conclusion, a line's
    name, an observation or a reading's note. ``sort`` counts down with a minus before it.
    """

    model_config = ConfigDict(frozen=True, extra="forbid", str_strip_whitespace=True)

    family: Annotated[tuple[_Name, ...], Field(max_length=60)] = ()
    addend: Annotated[int, Field(ge=1, le=2**62)] | None = None
    substructure: Annotated[str, Field(max_length=20_000)] = ""
    substructure_kind: QueryKind = "auto"
    cage: _Name = ""
    solvent: _Name = ""
    temperature_c_lowest: _Temperature | None = None
    temperature_c_highest: _Temperature | None = None
    duration_min_lowest: _Duration | None = None
    duration_min_highest: _Duration | None = None
    level_lowest: _Level | None = None
    level_highest: _Level | None = None
    yield_percent_lowest: _Yield | None = None
    yield_percent_highest: _Yield | None = None
    campaign: Annotated[str, Field(max_length=12)] = ""
    state: State | None = None
    text: Annotated[str, Field(max_length=200)] = ""
    performed_from: date | None = None
    performed_to: date | None = None
    sort: SortKey = NEWEST_FIRST

    @field_validator(
        "temperature_c_highest", "duration_min_highest", "level_highest", "yield_percent_highest",
        "performed_to",
    )  # fmt: skip
    @classmethod
    def _not_below_the_lowest(cls, value: Any, info: ValidationInfo) -> Any:
        name = str(info.field_name)
        other = name.replace("_highest", "_lowest").replace("_to", "_from")
        lowest = info.data.get(other)
        if value is not None and lowest is not None and value < lowest:
            raise ValueError(f"{_shown(value)} lies below {_shown(lowest)}; swap the two.")
        return value

    @classmethod
    def from_address(cls, parameters: QueryDict) -> SearchQuery:
        """Read a query from the parameters of an address; raises ``FieldErrors``.

        Empty parameters, and those of the page or the transport, are passed over.
        """
        data: dict[str, Any] = {}
        for name in parameters:
            texts = (text.replace("\x00", "") for text in parameters.getlist(name))
            typed = [text for text in texts if text.strip()]
            if typed and name not in BESIDE_THE_QUERY:
                data[name] = typed if name == "family" else typed[-1]
        return cls.from_data(data)

    @classmethod
    def from_data(cls, data: Mapping[str, Any]) -> SearchQuery:
        """Read a query from values by field name; raises ``FieldErrors``."""
        try:
            return cls.model_validate(data)
        except ValidationError as error:
            raise field_errors(error) from error

    def to_address(self) -> str:
        """Return the query as the parameters of an address, without what asks nothing."""
        return urlencode(
            {
                name: list(value) if isinstance(value, tuple) else _shown(value)
                for name, value in self.asked().items()
            },
            doseq=True,
        )

    def asked(self) -> dict[str, Any]:
        """Return the fields that differ from their defaults, by name."""
        fields = type(self).model_fields
        return {
            name: getattr(self, name)
            for name, field in fields.items()
            if getattr(self, name) != field.default
        }

    def without(self, *names: str) -> SearchQuery:
        """Return the query with these fields asking nothing."""
        fields = type(self).model_fields
        return self.model_copy(update={name: fields[name].default for name in names})


def sort_keys() -> tuple[str, ...]:
    """Return what hits can be sorted by, each up and down."""
    return get_args(SortKey)


def _shown(value: Any) -> str:
    if isinstance(value, float):
        return repr(value).removesuffix(".0")
    return str(value)
