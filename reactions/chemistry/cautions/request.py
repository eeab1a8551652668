"""The calculator ``cautions``: what a list of substances and its conditions call for."""

from __future__ import annotations

from typing import Annotated

from pydantic import BaseModel, ConfigDict, Field

from reactions.chemistry.cautions.assess import cautions_for
from reactions.chemistry.cautions.sheet import UNLISTED, PlannedConditions, PlannedSubstance

_Name = Annotated[str, Field(max_length=160)]
_Amount = Annotated[float, Field(ge=0, le=1e9, allow_inf_nan=False)]


class _Value(BaseModel):
    model_config = ConfigDict(frozen=True, extra="forbid", str_strip_whitespace=True)


class CautionsSubstance(_Value):
    """A substance by name and, where known, its structure."""

    name: Annotated[str, Field(min_length=1, max_length=160)]
    smiles: Annotated[str, Field(max_length=2000)] | None = None
    role: _Name = ""
    mass_mg: _Amount | None = None


class CautionsRequest(_Value):
    """The substances planned and the conditions, as far as they are known."""

    substances: Annotated[list[CautionsSubstance], Field(max_length=100)]
    solvent: _Name | None = None
    temperature_c: Annotated[float, Field(ge=-273.15, le=3000, allow_inf_nan=False)] | None = None
    cage_mmol: _Amount | None = None
    family: _Name | None = None
    level: Annotated[float, Field(ge=0, le=200, allow_inf_nan=False)] | None = None
    light: _Name | None = None
    atmosphere: _Name | None = None


class Statement(_Value):
    """A hazard or precautionary statement of the GHS."""

    code: str
    text: str


class ListedCaution(_Value):
    """What the table of substances says of one substance, with its source."""

    name: str
    signal_word: str
    pictograms: list[str]
    hazard_statements: list[Statement]
    precautionary_statements: list[Statement]
    remark: str
    source: str


class RuleFound(_Value):
    """A rule that the plan meets."""

    key: str
    severity: str
    text: str
    source: str


class CautionsResult(_Value):
    """Listed substances, unlisted ones (which are not thereby safe), and the rules met."""

    standing: str
    listed: list[ListedCaution]
    unlisted: list[str]
    unlisted_means: str
    rules: list[RuleFound]


def cautions(request: CautionsRequest) -> CautionsResult:
    """Return the cautions for a plan."""
    sheet = cautions_for(
        [
            PlannedSubstance(row.name, row.smiles, row.role, row.mass_mg)
            for row in request.substances
        ],
        PlannedConditions(
            solvent=request.solvent,
            temperature_c=request.temperature_c,
            cage_mmol=request.cage_mmol,
            family_key=request.family,
            level=request.level,
            light=request.light,
            atmosphere=request.atmosphere,
        ),
    )
    return CautionsResult(
        standing=sheet.standing,
        listed=[
            ListedCaution(
                name=row.name,
                signal_word=row.signal_word,
                pictograms=list(row.pictograms),
                hazard_statements=_statements(row.hazard_statements),
                precautionary_statements=_statements(row.precautionary_statements),
                remark=row.remark,
                source=row.source,
            )
            for row in sheet.listed
        ],
        unlisted=list(sheet.unlisted),
        unlisted_means=UNLISTED,
        rules=[
            RuleFound(key=row.key, severity=row.severity, text=row.text, source=row.source)
            for row in sheet.rules
        ],
    )


def _statements(pairs: tuple[tuple[str, str], ...]) -> list[Statement]:
    return [Statement(code=code, text=text) for code, text in pairs]
