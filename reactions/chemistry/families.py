"""Addition families: the table, the questions it puts to an addition level, and the gas set free.

The table is ``families.json``, in the order of the family tree; each row names its source. To add
a family, add a row: nothing in code names a family.
"""

from __future__ import annotations

import difflib
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from types import MappingProxyType
from typing import Literal

from reactions.chemistry.family_records import (
    MODELS,
    ByProduct,
    Family,
    FamilyError,
    FamilyRole,
    family_from_data,
)
from reactions.chemistry.tables import read_json_table

__all__ = [
    "MODELS",
    "ByProduct",
    "Family",
    "FamilyError",
    "FamilyRole",
    "LevelQuestion",
    "UnknownFamilyError",
    "branches",
    "families",
    "family",
    "family_from_data",
    "gas_evolved_ml",
    "question_level",
]

_GAS_ML_PER_MMOL_AT_25_C = 24.5
_ZERO_CELSIUS_K = 273.15


class UnknownFamilyError(LookupError):
    """No family has the key asked for; ``near`` holds the keys nearest to it."""

    def __init__(self, key: str, near: tuple[str, ...]) -> None:
        self.key = key
        self.near = near
        hint = f" Did you mean {' or '.join(near)}?" if near else ""
        super().__init__(f"There is no addition family {key!r}.{hint}")


@dataclass(frozen=True)
class LevelQuestion:
    """Why an addition level is questioned: an error can't be, a warning asks to be confirmed."""

    severity: Literal["error", "warning"]
    reason: str


@cache
def families() -> Mapping[str, Family]:
    """Return every family of the table by key, in the order of the family tree."""
    rows = (family_from_data(row) for row in read_json_table("families.json")["families"])
    return MappingProxyType({row.key: row for row in rows})


def family(key: str) -> Family:
    """Return the family with this key; raise :class:`UnknownFamilyError` if there is none."""
    try:
        return families()[key]
    except KeyError:
        near = tuple(difflib.get_close_matches(key, families(), n=3))
        raise UnknownFamilyError(key, near) from None


@cache
def branches() -> Mapping[str, tuple[Family, ...]]:
    """Return the family tree: the families of each branch by the branch's name, in table order."""
    tree: dict[str, tuple[Family, ...]] = {}
    for row in families().values():
        tree[row.branch] = (*tree.get(row.branch, ()), row)
    return MappingProxyType(tree)


def question_level(family: Family, cage: str, level: int) -> LevelQuestion | None:
    """Question an addition level wanted on a cage (a name such as C60), or return None.

    A level below 1 or above the family's sites is an error. One above the highest level known is a
    warning; so is any level on a cage that the family doesn't name, and one above 1 where no
    highest level is on record.
    """
    if level < 1:
        return LevelQuestion("error", f"A level of {level} adds nothing: choose 1 or more.")
    sites = family.sites.get(cage)
    if sites is None:
        return LevelQuestion(
            "warning",
            f"{family.name} is on record for {' and '.join(family.sites)}, not for {cage}: neither "
            f"its sites nor its highest level are known. Confirm that level {level} is meant.",
        )
    if level > sites:
        return LevelQuestion(
            "error",
            f"Level {level} is impossible: {cage} can carry at most {sites} in {family.name} "
            f"(one level is {family.level_counts}).",
        )
    highest = family.highest_level.get(cage)
    if highest is not None and level > highest:
        return LevelQuestion(
            "warning",
            f"Level {level} is above {highest}, the highest known for {family.name} on {cage}. "
            "Confirm that it is meant.",
        )
    if highest is None and level > 1:
        return LevelQuestion(
            "warning",
            f"No highest level is on record for {family.name} on {cage}. "
            f"Confirm that level {level} is meant.",
        )
    return None


def gas_evolved_ml(
    family: Family,
    cage_mmol: float,
    level: float,
    temperature_c: float = 25.0,
    equivalents: float | None = None,
) -> Mapping[str, float]:
    """Return the volume of each gas set free, in mL at 1 atm, by the gas's name.

    An ideal gas fills 24.5 mL per mmol at 25 °C (R·T/p) and more in proportion to its absolute
    temperature. ``level`` is the mean number of additions per cage; where more reagent than that is
    charged (``equivalents``, mol per mol of cage), all of it is counted, since an excess that
    decomposes gives gas as well. Raises ValueError on a negative amount.
    """
    additions = max(level, equivalents or 0.0)
    if cage_mmol < 0 or additions < 0 or temperature_c <= -_ZERO_CELSIUS_K:
        raise ValueError("the cage, the level and the absolute temperature can't be negative")
    ml_per_mmol = (
        _GAS_ML_PER_MMOL_AT_25_C * (temperature_c + _ZERO_CELSIUS_K) / (25.0 + _ZERO_CELSIUS_K)
    )
    volumes: dict[str, float] = {}
    for product in family.by_products:
        if product.is_gas:
            volume_ml = cage_mmol * additions * product.per_addition * ml_per_mmol
            volumes[product.name] = volumes.get(product.name, 0.0) + volume_ml
    return MappingProxyType(volumes)
