"""From what is wanted to the equivalents that give it, and to the composition they give."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from pydantic import ValidationError

from reactions.chemistry.distribution import DistributionRequest, ModelFields, distribution
from reactions.chemistry.families import Family
from reactions.chemistry.planning import CurveRequest, CurveResult, PlanRequest, curve, plan
from reactions.errors import WHOLE, FieldErrors, field_errors
from reactions.services.inputs import ModelInput

OWN_CHOICE = "equivalents"
_DEFAULT_SITES = 30
_DEFAULT_EFFICIENCY = 0.7
_VARIATION = 0.05
_CURVE_POINTS = 81
_LEAST_UPTAKE_SHOWN = 2.0
# Levels rarer than this are left out of what is stored.
_LEAST_STORED = 1e-9
# Where the messages of the calculators belong in the form.
_FIELDS_BY_KIND = {
    "most_of_level": {"level": "level"},
    "mono_to_multi": {"ratio": "ratio"},
    "uptake": {"value": "uptake"},
    "band": {"lowest": "band_lowest", "highest": "band_highest"},
    OWN_CHOICE: {"value": "equivalents"},
}


@dataclass(frozen=True)
class Variant:
    """The composition with a little less or more reagent than planned."""

    name: str
    equivalents: float
    mole_fraction: list[float]


@dataclass(frozen=True)
class Composed:
    """The equivalents that serve what is wanted, and what they give.

    ``objective`` is None for equivalents of one's own choice. ``target_level`` is the level that
    yields are counted by. ``variants`` hold the plan with 5 % less, as it is, and with 5 % more.
    """

    kind: str
    objective: dict[str, Any] | None
    model: ModelInput
    equivalents: float
    uptake: float
    mole_fraction: list[float]
    mono_to_multi: float | None
    target_level: int
    band: tuple[int, int]
    message: str
    variants: list[Variant]
    curve: CurveResult

    @property
    def conversion(self) -> float:
        """Return the share of the cages that react."""
        return 1.0 - self.mole_fraction[0]

    @property
    def stored_composition(self) -> list[float]:
        """Return the mole fractions up to the last level worth storing."""
        last = max(k for k, share in enumerate(self.mole_fraction) if share >= _LEAST_STORED)
        return [min(1.0, max(0.0, share)) for share in self.mole_fraction[: last + 1]]


def compose(cleaned: Mapping[str, Any], family: Family | None, cage: str) -> Composed | None:
    """Return what serves the objective typed; None while its number isn't typed.

    Raises ``FieldErrors`` at the form's fields.
    """
    kind = cleaned.get("objective") or "most_of_level"
    objective = _objective(kind, cleaned)
    if objective is None:
        return None
    model = model_of(cleaned, family, cage)
    fields = ModelFields(
        model=model.model, sites=model.sites, attenuation=model.attenuation
    ).model_dump()
    try:
        if kind == OWN_CHOICE:
            return _at_equivalents(model, fields, float(objective["value"]))
        return _for_objective(kind, model, fields, objective)
    except ValidationError as error:
        raise _at_form(kind, field_errors(error)) from error
    except ValueError as error:
        raise FieldErrors.at(next(iter(_FIELDS_BY_KIND[kind].values())), str(error)) from error


def model_of(cleaned: Mapping[str, Any], family: Family | None, cage: str) -> ModelInput:
    """Return the model typed; what is left blank is as usual for the family. Raises as above."""
    name = cleaned.get("model") or (family.model if family else "sequential")
    usual_sites = family.sites.get(cage, _DEFAULT_SITES) if family else _DEFAULT_SITES
    attenuation = cleaned.get("attenuation")
    values = {
        "model": name,
        "sites": cleaned.get("sites") or usual_sites,
        "attenuation": attenuation if attenuation is not None and name == "sequential" else 1.0,
        "reagent_efficiency": cleaned.get("reagent_efficiency") or _DEFAULT_EFFICIENCY,
    }
    try:
        ModelFields(model=values["model"], sites=values["sites"], attenuation=values["attenuation"])
        return ModelInput(**values)
    except ValidationError as error:
        messages = field_errors(error).messages
        raise FieldErrors(
            {_model_field(path): texts for path, texts in messages.items()}
        ) from error


def _model_field(path: str) -> str:
    first = path.split(".")[0]
    return first if first in {"model", "sites", "reagent_efficiency"} else "attenuation"


def _objective(kind: str, cleaned: Mapping[str, Any]) -> dict[str, Any] | None:
    values = {name: cleaned.get(field) for name, field in _FIELDS_BY_KIND[kind].items()}
    if any(value is None for value in values.values()):
        return None
    return {"kind": kind, **values}


def _for_objective(
    kind: str, model: ModelInput, fields: dict[str, Any], objective: dict[str, Any]
) -> Composed:
    result = plan(
        PlanRequest(**fields, objective=objective, reagent_efficiency=model.reagent_efficiency)
    )
    less, more = result.sensitivity
    level, band = _target(kind, objective, result.uptake, result.mole_fraction)
    return Composed(
        kind=kind,
        objective=objective,
        model=model,
        equivalents=result.equivalents,
        uptake=result.uptake,
        mole_fraction=result.mole_fraction,
        mono_to_multi=result.mono_to_multi,
        target_level=level,
        band=band,
        message=result.message,
        variants=[
            Variant("5 % less", less.equivalents, less.mole_fraction),
            Variant("as planned", result.equivalents, result.mole_fraction),
            Variant("5 % more", more.equivalents, more.mole_fraction),
        ],
        curve=_curve(fields, model, result.equivalents),
    )


def _at_equivalents(model: ModelInput, fields: dict[str, Any], equivalents: float) -> Composed:
    def at(factor: float) -> Any:
        most = model.sites / model.reagent_efficiency if factor > 1 else float("inf")
        return distribution(
            DistributionRequest(
                **fields,
                equivalents=min(equivalents * factor, most),
                reagent_efficiency=model.reagent_efficiency,
            )
        )

    result = at(1.0)
    level, band = _target(OWN_CHOICE, {}, result.uptake, result.mole_fraction)
    return Composed(
        kind=OWN_CHOICE,
        objective=None,
        model=model,
        equivalents=equivalents,
        uptake=result.uptake,
        mole_fraction=result.mole_fraction,
        mono_to_multi=result.mono_to_multi,
        target_level=level,
        band=band,
        message="",
        variants=[
            Variant("5 % less", equivalents * (1 - _VARIATION), at(1 - _VARIATION).mole_fraction),
            Variant("as planned", equivalents, result.mole_fraction),
            Variant("5 % more", equivalents * (1 + _VARIATION), at(1 + _VARIATION).mole_fraction),
        ],
        curve=_curve(fields, model, equivalents),
    )


def _target(
    kind: str, objective: Mapping[str, Any], uptake: float, composition: list[float]
) -> tuple[int, tuple[int, int]]:
    """Return the level that yields are counted by, and the levels that are wanted."""
    if kind == "most_of_level":
        return int(objective["level"]), (int(objective["level"]), int(objective["level"]))
    if kind == "band":
        band = (int(objective["lowest"]), int(objective["highest"]))
        return max(range(band[0], band[1] + 1), key=lambda level: composition[level]), band
    if kind == "mono_to_multi":
        return 1, (1, 1)
    level = max(1, round(uptake))
    return level, (level, level)


def _curve(fields: dict[str, Any], model: ModelInput, equivalents: float) -> CurveResult:
    return curve(
        CurveRequest(
            **fields,
            reagent_efficiency=model.reagent_efficiency,
            highest_equivalents=max(
                2.0 * equivalents, min(_LEAST_UPTAKE_SHOWN, model.sites) / model.reagent_efficiency
            ),
            points=_CURVE_POINTS,
            highest_level_shown=min(model.sites, 8),
        )
    )


def _at_form(kind: str, error: FieldErrors) -> FieldErrors:
    """Return the calculators' messages at the fields of the form."""
    by_name = _FIELDS_BY_KIND[kind]
    first = next(iter(by_name.values()))
    moved: dict[str, list[str]] = {}
    for path, messages in error.messages.items():
        last = path.split(".")[-1]
        own = by_name.get(last) or (first if path == WHOLE or last not in _KEPT else last)
        moved.setdefault(own, []).extend(messages)
    return FieldErrors(moved)


_KEPT = ("sites", "attenuation", "reagent_efficiency", "model")
