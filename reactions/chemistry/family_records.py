"""What is known of an addition family, as plain values, and the check of a lab's own family.

A family comes in as a mapping (a row of ``families.json``, or a form that a lab filled in) and goes
out as a frozen :class:`Family`; whatever is wrong with it is reported field by field.
"""

from __future__ import annotations

import math
import re
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from types import MappingProxyType
from typing import Any, TypeVar

from reactions.chemistry.drawings import sanitised, unsanitised
from reactions.chemistry.structures import StructureError

MODELS = ("independent_sites", "sequential", "poisson")
ROLES = (
    "reagent",
    "base",
    "acid",
    "aldehyde",
    "catalyst",
    "oxidant",
    "reductant",
    "additive",
    "quench",
)
_KEY = re.compile(r"[a-z0-9]+(_[a-z0-9]+)*")
_ABSOLUTE_ZERO_C = -273.15
_Value = TypeVar("_Value")


class FamilyError(ValueError):
    """A family that can't stand; ``errors`` maps each faulty field to what is wrong with it.

    A field of a role or by-product is named with its place, counted from 0:
    ``roles.1.equivalents_per_addition``.
    """

    def __init__(self, errors: Mapping[str, str]) -> None:
        self.errors: Mapping[str, str] = MappingProxyType(dict(errors))
        super().__init__("; ".join(f"{field}: {message}" for field, message in errors.items()))


@dataclass(frozen=True)
class FamilyRole:
    """A part that a substance plays in one addition; ``role`` is one of ``ROLES``.

    ``equivalents_per_addition`` is the usual mol charged per mol of additions wanted (None where
    practice varies too much to say); ``substance`` is a key of the substance table, or None where
    ``name`` describes a kind.
    """

    role: str
    name: str
    equivalents_per_addition: float | None
    substance: str | None


@dataclass(frozen=True)
class ByProduct:
    """What one addition sets free: ``per_addition`` mol per mol of additions."""

    name: str
    smiles: str | None
    per_addition: float
    is_gas: bool


@dataclass(frozen=True)
class Family:
    """A kind of addition: what it attaches, where, with what, and how far it is known to go.

    ``attachment_points`` counts the cage atoms that one addition uses. ``sites`` gives, by cage,
    the most additions that the cage can carry at once; ``highest_level`` the highest level on
    record. Both know only the cages they name.
    """

    key: str
    name: str
    branch: str
    attaches: str
    attachment_points: int
    sites: Mapping[str, int]
    level_counts: str
    roles: tuple[FamilyRole, ...]
    by_products: tuple[ByProduct, ...]
    usual_solvents: tuple[str, ...]
    usual_temperature_c: tuple[float, float] | None
    usual_duration_min: tuple[float, float] | None
    highest_level: Mapping[str, int]
    thermally_reversible: bool
    reversibility: str
    model: str
    is_forward: bool
    source: str

    def __reduce__(self) -> tuple[Callable[[Mapping[str, Any]], Family], tuple[dict[str, Any]]]:
        """Pickle through dictionaries, for work in another process: read-only views don't."""
        plain = {
            name: dict(value) if isinstance(value, Mapping) else value
            for name, value in vars(self).items()
        }
        return _unpickled, (plain,)


def _unpickled(values: Mapping[str, Any]) -> Family:
    read_only: dict[str, Any] = {
        name: MappingProxyType(value) if isinstance(value, dict) else value
        for name, value in values.items()
    }
    return Family(**read_only)


def family_from_data(data: Mapping[str, Any]) -> Family:
    """Check a family given as a mapping with the field names of :class:`Family`, and return it.

    Optional fields: ``roles``, ``by_products``, ``usual_solvents``, ``usual_temperature_c``,
    ``usual_duration_min``, ``highest_level``, ``thermally_reversible``, ``reversibility``,
    ``model`` (sequential) and ``is_forward`` (true). Temperatures in °C and durations in min are
    pairs, lower first. Raises :class:`FamilyError` naming every faulty field.
    """
    fields = _Fields(data)
    sites = fields.take("sites", _counts_by_cage)
    highest_level = fields.take("highest_level", _counts_by_cage, {})
    if sites is not None and highest_level is not None:
        for cage, level in highest_level.items():
            if level > sites.get(cage, level):
                fields.errors["highest_level"] = (
                    f"{level} on {cage} is more than its {sites[cage]} sites"
                )
    if sites is not None and not sites:
        fields.errors["sites"] = "give the number of sites on at least one cage"
    values: dict[str, Any] = {
        "key": fields.take("key", _key),
        "name": fields.take("name", _text),
        "branch": fields.take("branch", _text),
        "attaches": fields.take("attaches", _text),
        "attachment_points": fields.take("attachment_points", _count),
        "sites": sites,
        "level_counts": fields.take("level_counts", _text),
        "roles": fields.take_each("roles", _role),
        "by_products": fields.take_each("by_products", _by_product),
        "usual_solvents": fields.take("usual_solvents", _texts, ()),
        "usual_temperature_c": fields.take(
            "usual_temperature_c", _range_from(_ABSOLUTE_ZERO_C, "°C"), None
        ),
        "usual_duration_min": fields.take("usual_duration_min", _range_from(0.0, "min"), None),
        "highest_level": highest_level,
        "thermally_reversible": fields.take("thermally_reversible", _truth, False),
        "reversibility": fields.take("reversibility", _text, "Not stated."),
        "model": fields.take("model", _model, "sequential"),
        "is_forward": fields.take("is_forward", _truth, True),
        "source": fields.take("source", _text),
    }
    fields.refuse_unknown(values)
    if fields.errors:
        raise FamilyError(fields.errors)
    return Family(**values)


_MISSING: Any = object()


class _Fields:
    """Reads fields out of a mapping and gathers the messages of those that fail."""

    def __init__(self, data: Mapping[str, Any], prefix: str = "") -> None:
        self.data = data
        self.prefix = prefix
        self.errors: dict[str, str] = {}

    def take(
        self, field: str, convert: Callable[[Any], _Value], absent: Any = _MISSING
    ) -> _Value | None:
        value = self.data.get(field, _MISSING)
        if value is _MISSING or (value is None and absent is not _MISSING):
            if absent is _MISSING:
                self.errors[self.prefix + field] = "is needed"
                return None
            value = absent
            if value is None:
                return None
        try:
            return convert(value)
        except (ValueError, TypeError) as error:
            self.errors[self.prefix + field] = str(error)
            return None

    def take_each(
        self, field: str, convert: Callable[[_Fields], _Value]
    ) -> tuple[_Value, ...] | None:
        rows = self.data.get(field) or ()
        if isinstance(rows, str | Mapping) or not isinstance(rows, Sequence):
            self.errors[field] = "give a list"
            return None
        taken = []
        for place, row in enumerate(rows):
            if not isinstance(row, Mapping):
                self.errors[f"{field}.{place}"] = "give its fields by name"
                continue
            inner = _Fields(row, f"{field}.{place}.")
            taken.append(convert(inner))
            self.errors |= inner.errors
        return tuple(taken)

    def refuse_unknown(self, known: Mapping[str, Any]) -> None:
        for field in self.data:
            if field not in known:
                self.errors[self.prefix + str(field)] = "is not a field of a family"


def _role(fields: _Fields) -> FamilyRole:
    values: dict[str, Any] = {
        "role": fields.take("role", _role_name),
        "name": fields.take("name", _text),
        "equivalents_per_addition": fields.take("equivalents_per_addition", _positive, None),
        "substance": fields.take("substance", _text, None),
    }
    fields.refuse_unknown(values)
    return FamilyRole(**values)


def _role_name(value: Any) -> str:
    if value not in ROLES:
        raise ValueError(f"{value!r} is no role: choose {', '.join(ROLES)}")
    return str(value)


def _by_product(fields: _Fields) -> ByProduct:
    values: dict[str, Any] = {
        "name": fields.take("name", _text),
        "smiles": fields.take("smiles", _smiles, None),
        "per_addition": fields.take("per_addition", _positive, 1.0),
        "is_gas": fields.take("is_gas", _truth, False),
    }
    fields.refuse_unknown(values)
    return ByProduct(**values)


def _text(value: Any) -> str:
    if not isinstance(value, str) or not value.strip():
        raise ValueError("give a text")
    return value.strip()


def _texts(value: Any) -> tuple[str, ...]:
    if isinstance(value, str) or not isinstance(value, Sequence):
        raise ValueError("give a list of names")
    return tuple(_text(item) for item in value)


def _key(value: Any) -> str:
    if not isinstance(value, str) or not _KEY.fullmatch(value):
        raise ValueError(f"{value!r} can't be a key: use lower-case letters and digits joined by _")
    return value


def _truth(value: Any) -> bool:
    if not isinstance(value, bool):
        raise ValueError(f"{value!r} is neither true nor false")
    return value


def _number(value: Any) -> float:
    if isinstance(value, bool) or not isinstance(value, int | float) or not math.isfinite(value):
        raise ValueError(f"{value!r} is not a number")
    return float(value)


def _positive(value: Any) -> float:
    number = _number(value)
    if number <= 0:
        raise ValueError(f"{value!r} must be more than 0")
    return number


def _count(value: Any) -> int:
    number = _number(value)
    if number < 1 or number != int(number):
        raise ValueError(f"{value!r} must be a whole number, 1 or more")
    return int(number)


def _counts_by_cage(value: Any) -> Mapping[str, int]:
    if not isinstance(value, Mapping):
        raise ValueError("give a number for each cage by name, as C60: 30")
    return MappingProxyType({_text(cage): _count(number) for cage, number in value.items()})


def _range_from(least: float, unit: str) -> Callable[[Any], tuple[float, float]]:
    def convert(value: Any) -> tuple[float, float]:
        if isinstance(value, str) or not isinstance(value, Sequence) or len(value) != 2:
            raise ValueError(f"give two values in {unit}, the lower first")
        low, high = _number(value[0]), _number(value[1])
        if not least <= low <= high:
            raise ValueError(
                f"{low:g} to {high:g} {unit} is no range: the lower first, not below {least:g}"
            )
        return low, high

    return convert


def _model(value: Any) -> str:
    if value not in MODELS:
        raise ValueError(f"{value!r} is no composition model: choose {', '.join(MODELS)}")
    return str(value)


def _smiles(value: Any) -> str:
    text = _text(value)
    try:
        sanitised(unsanitised(text))
    except StructureError as error:
        raise ValueError(str(error)) from error
    return text
