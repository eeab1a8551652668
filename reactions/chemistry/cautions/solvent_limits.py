"""What a rule may ask of the solvent at the temperature planned: does it boil, light or ignite?"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from typing import Any

from reactions.chemistry.cautions.plan import Plan
from reactions.chemistry.solvents import Solvent, UnknownSolventError, solvent

Words = Mapping[str, str]

_REFLUX_TOLERANCE_K = 1.0  # a temperature noted as reflux is rounded


def above_boiling_point(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for a temperature above the solvent's boiling point; words: temperature, solvents."""
    return _passed(plan, lambda row: row.boiling_point_c, margin_k=_REFLUX_TOLERANCE_K)


def above_flash_point(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for a temperature above the solvent's flash point; words: temperature, solvents."""
    return _passed(plan, lambda row: row.flash_point_c)


def above_autoignition(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for a temperature above the solvent's autoignition; words: temperature, solvents."""
    return _passed(plan, lambda row: row.autoignition_c)


def solvent_unknown(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for a solvent that the table of solvents doesn't hold; words: solvents."""
    unknown = [name for name, row in _solvents(plan) if row is None]
    return {"solvents": ", ".join(unknown)} if unknown else None


def in_degrees(temperature_c: float) -> str:
    """Return a temperature as printed, with a true minus sign."""
    return f"{temperature_c:g} °C".replace("-", "−")


def _passed(
    plan: Plan, limit_of: Callable[[Solvent], float | None], margin_k: float = 0.0
) -> Words | None:
    temperature_c = plan.conditions.temperature_c
    if temperature_c is None:
        return None
    passed = []
    for name, row in _solvents(plan):
        limit_c = limit_of(row) if row is not None else None
        if limit_c is not None and temperature_c > limit_c + margin_k:
            passed.append(f"{name} ({in_degrees(limit_c)})")
    if not passed:
        return None
    return {"temperature": in_degrees(temperature_c), "solvents": ", ".join(passed)}


def _solvents(plan: Plan) -> Iterator[tuple[str, Solvent | None]]:
    for member in plan.solvent_members:
        yield member.name, _known(member.name, member.record.name if member.record else "")


def _known(*names: str) -> Solvent | None:
    for name in names:
        try:
            return solvent(name)
        except UnknownSolventError:
            continue
    return None
