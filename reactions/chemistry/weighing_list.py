"""A weighing list as asked for and as worked out."""

from __future__ import annotations

from typing import Annotated

from pydantic import BaseModel, ConfigDict, Field, model_validator

from reactions.chemistry.shares import Share

DEFAULT_MARGIN = 1.25
LARGEST = 1e9  # of any mass (mg), volume (mL) or amount (mmol)
_Positive = Annotated[float, Field(gt=0, le=LARGEST, allow_inf_nan=False)]
_NotNegative = Annotated[float, Field(ge=0, le=LARGEST, allow_inf_nan=False)]
_Equivalents = Annotated[float, Field(ge=0, le=1e6, allow_inf_nan=False)]
_Needed = Annotated[float, Field(gt=0, le=1e6, allow_inf_nan=False)]
_MolarMass = Annotated[float, Field(gt=0, le=1e6, allow_inf_nan=False)]
_Density = Annotated[float, Field(gt=0, le=30, allow_inf_nan=False)]
_Molarity = Annotated[float, Field(gt=0, le=100, allow_inf_nan=False)]
_Margin = Annotated[float, Field(ge=1, le=100, allow_inf_nan=False)]
_Name = Annotated[str, Field(min_length=1, max_length=200)]
_Smiles = Annotated[str, Field(max_length=2000)]


class _Value(BaseModel):
    model_config = ConfigDict(frozen=True, extra="forbid", str_strip_whitespace=True)


class _LineFields(_Value):
    """What is known of a line.

    - ``role``: what it does in the flask. Lines of role ``reagent`` may limit.
    - ``smiles``: structure of the whole substance, counter-ions and crystal water included.
    - ``molar_mass_g_per_mol``: where there is no structure; a structure goes before it.
    - ``equivalents``: mol per mol of cage, or of the line that ``equivalents_of`` names.
    - ``needed_per_cage``: mol that one mol of cage takes up on its way to the target, by which it
      is judged what limits; None is 1 for a reagent, and "does not limit" for any other role.
    - ``purity``: mass fraction (0 to 1) of the substance in what is weighed.
    - ``density_g_per_ml``: of the neat liquid, or of the solution.
    - ``molarity_mol_per_l``: makes the line a solution; its purity then counts for nothing.
    - ``actual_…``: what went in, given at most once; mmol are of pure substance.
    """

    name: _Name
    role: Annotated[str, Field(max_length=40)] = "reagent"
    smiles: _Smiles | None = None
    molar_mass_g_per_mol: _MolarMass | None = None
    equivalents: _Equivalents | None = None
    equivalents_of: Annotated[str, Field(max_length=200)] | None = None
    needed_per_cage: _Needed | None = None
    purity: Share = 1.0
    density_g_per_ml: _Density | None = None
    molarity_mol_per_l: _Molarity | None = None
    actual_mass_mg: _NotNegative | None = None
    actual_volume_ml: _NotNegative | None = None
    actual_mmol: _NotNegative | None = None


class AmountsLine(_LineFields):
    """One substance to weigh or measure."""

    @model_validator(mode="after")
    def _one_actual_amount(self) -> AmountsLine:
        given = [self.actual_mass_mg, self.actual_volume_ml, self.actual_mmol]
        if sum(value is not None for value in given) > 1:
            raise ValueError(
                f"{self.name} has more than one actual amount; give its mass, its volume or its "
                "amount of substance, and leave the others out."
            )
        return self


class AmountsRequest(_Value):
    """Cage, lines and solvent.

    The cage is given as ``cage_mass_mg`` to weigh, or as ``product_mass_mg`` wanted with its
    ``expected_yield`` (0 to 1, on charged cage) and the product's molar mass or structure.
    ``actual_cage_mass_mg`` is what was weighed. ``solvent_volume_ml`` is a volume chosen; without
    it the least that dissolves the cage is given, times ``solubility_margin``.
    """

    cage: Annotated[str, Field(min_length=2, max_length=40)] = "C60"
    cage_mass_mg: _Positive | None = None
    cage_purity: Share = 1.0
    product_mass_mg: _Positive | None = None
    expected_yield: Share | None = None
    product_molar_mass_g_per_mol: _MolarMass | None = None
    product_smiles: _Smiles | None = None
    actual_cage_mass_mg: _Positive | None = None
    solvent: Annotated[str, Field(max_length=80)] | None = None
    solvent_volume_ml: _Positive | None = None
    solubility_margin: _Margin = DEFAULT_MARGIN
    lines: Annotated[list[AmountsLine], Field(max_length=100)] = []

    @model_validator(mode="after")
    def _cage_given_once(self) -> AmountsRequest:
        if (self.cage_mass_mg is None) == (self.product_mass_mg is None):
            raise ValueError(
                "Give either the mass of cage (cage_mass_mg) or the mass of product wanted "
                "(product_mass_mg); exactly one of the two."
            )
        if self.product_mass_mg is None:
            return self
        if self.expected_yield is None:
            raise ValueError(
                "A mass of product needs the yield you expect (expected_yield), such as 0.4."
            )
        if (self.product_molar_mass_g_per_mol is None) == (not self.product_smiles):
            raise ValueError(
                "A mass of product needs either its molar mass (product_molar_mass_g_per_mol) or "
                "its structure (product_smiles); exactly one of the two."
            )
        return self


class AmountsResultLine(_LineFields):
    """A line with its amounts; None where something needed is not given.

    ``mmol`` is of pure substance, ``mass_mg`` is what goes on the balance, ``volume_ml`` what is
    measured of the liquid or solution. Each of the three actual amounts follows from the one that
    was given. ``actual_equivalents`` count by what went in of the reference, or by what is planned
    of it as long as nothing has.
    """

    mmol: float | None = None
    mass_mg: float | None = None
    volume_ml: float | None = None
    actual_equivalents: float | None = None


class AmountsResult(_Value):
    """The weighing list worked out.

    ``limiting`` names what runs out first by plan: the cage, or a line that may limit;
    ``actual_limiting`` the same by what went in, None as long as nothing has. ``warnings`` are
    sentences for the chemist.
    """

    cage: str
    cage_molar_mass_g_per_mol: float
    cage_mass_mg: float
    cage_mmol: float
    actual_cage_mmol: float | None
    lines: list[AmountsResultLine]
    limiting: str
    actual_limiting: str | None
    solvent_volume_ml: float | None
    least_solvent_volume_ml: float | None
    solubility_margin: float
    warnings: list[str]
