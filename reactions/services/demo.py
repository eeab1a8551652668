"""The invented demo: a small laboratory's two campaigns, for a first look at a working book.

Everything goes in through the services a person's own work would, so that the demo holds nothing
a real book couldn't. Compositions come from the parameters stated in the table plus noise.
"""

from __future__ import annotations

import math
import random
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from datetime import date, timedelta
from typing import Any

from django.contrib.auth import get_user_model
from django.contrib.auth.models import User
from django.db import transaction

from reactions.chemistry.distribution import DistributionRequest, distribution
from reactions.chemistry.masses import cage_molar_mass_g_per_mol
from reactions.chemistry.tables import read_json_table
from reactions.models import Campaign, Membership, Reaction, Role, State, known_family
from reactions.services.campaigns import open_campaign
from reactions.services.inputs import (
    ConclusionInput,
    ConditionsInput,
    FractionInput,
    IsolationStepInput,
    LineInput,
    ModelInput,
    ObservationInput,
    PlanInput,
    ReadingInput,
)
from reactions.services.lines import amend_lines, lines_of
from reactions.services.planning import plan_reaction
from reactions.services.revising import Edit
from reactions.services.run import (
    add_observation,
    add_reading,
    amend_conclusion,
    amend_isolation,
)
from reactions.services.states import countersign, move, sign

HIGHEST_LEVEL_READ = 8
_EXPECTED_EFFICIENCY = 0.7
_FIRST_DAY = date(2026, 2, 2)


@dataclass(frozen=True)
class _Run:
    """One reaction of the demo: its series, its own draw of conditions, and who does it."""

    series: Mapping[str, Any]
    equivalents: float
    cage_mass_mg: float
    temperature_c: float
    duration_min: float
    day: date
    true_efficiency: float


@transaction.atomic
def load_demo() -> list[User]:
    """Load the demo into an empty book and return its people, none with a password yet.

    Raises ``ValueError`` when the book already holds a campaign.
    """
    if Campaign.objects.exists():
        raise ValueError("The book holds campaigns already; the demo goes into an empty book only.")
    table = read_json_table("demo.json")
    draw = random.Random(table["seed"])  # noqa: S311 - noise of invented data guards nothing
    people = {row["role"]: _person(row) for row in table["people"]}
    for row in table["campaigns"]:
        campaign = _campaign(row, people)
        runs = list(_runs(row["series"], draw))
        runs.sort(key=lambda run: run.day)
        for position, run in enumerate(runs):
            stage = _stage(position, len(runs))
            _record(campaign, people, run, stage, draw)
    return list(people.values())


def _person(row: Mapping[str, str]) -> User:
    user, _ = get_user_model().objects.get_or_create(
        username=row["username"],
        defaults={"first_name": row["first_name"], "last_name": row["last_name"]},
    )
    user.set_unusable_password()
    user.save()
    return user


def _campaign(row: Mapping[str, Any], people: Mapping[str, User]) -> Campaign:
    campaign = open_campaign(
        people[Role.AUTHOR],
        code=row["code"],
        name=row["name"],
        purpose=row["purpose"],
        is_invented=True,
    )
    for role in (Role.REVIEWER, Role.READER):
        Membership.objects.create(campaign=campaign, user=people[role], role=role)
    return campaign


def _runs(all_series: list[Mapping[str, Any]], draw: random.Random) -> Iterator[_Run]:
    for series in all_series:
        for _ in range(series["count"]):
            yield _Run(
                series=series,
                equivalents=round(draw.uniform(*series["equivalents"]), 2),
                cage_mass_mg=round(draw.uniform(*series["cage_mass_mg"]) / 5) * 5,
                temperature_c=float(draw.randint(*series["temperature_c"])),
                duration_min=round(draw.uniform(*series["duration_min"]) / 5) * 5,
                day=_FIRST_DAY + timedelta(days=draw.randint(0, 270)),
                true_efficiency=min(0.98, series["efficiency"] * draw.gauss(1.0, 0.05)),
            )


def _stage(position: int, count: int) -> str:
    """Return how far the run at ``position`` has come: the latest are still open."""
    left = count - position
    if left <= 2:
        return State.PLANNED
    if left == 3:
        return State.RUNNING
    return State.COMPLETED if left <= 8 else State.SIGNED


def _record(
    campaign: Campaign,
    people: Mapping[str, User],
    run: _Run,
    stage: str,
    draw: random.Random,
) -> None:
    author = people[Role.AUTHOR]
    reaction = plan_reaction(author, campaign, _plan(run))
    edit = Edit(author, reaction.pk)
    if stage == State.PLANNED:
        return
    move(edit, State.RUNNING)
    _weigh(edit, reaction, draw)
    add_observation(edit, ObservationInput(at_min=0, kind="addition", text="Reagent added."))
    add_observation(
        edit,
        ObservationInput(
            at_min=round(run.duration_min / 2), kind="sample", text="Sample taken for HPLC."
        ),
    )
    if stage == State.RUNNING:
        return
    _read_out(edit, reaction, run, draw)
    move(edit, State.COMPLETED)
    if stage == State.SIGNED:
        sign(edit)
        if draw.random() < 0.6:
            countersign(Edit(people[Role.REVIEWER], reaction.pk))


def _plan(run: _Run) -> PlanInput:
    series = run.series
    family = known_family(series["family"])
    sites = family.sites.get(series["cage"], 30)
    predicted = _composition(sites, 1.0, run.equivalents, _EXPECTED_EFFICIENCY)
    return PlanInput(
        title=series["title"],
        family_key=family.key,
        cage=series["cage"],
        addend=series["addend"],
        addend_name=series["addend_name"],
        target_level=series["target_level"],
        objective={"kind": "most_of_level", "level": series["target_level"]},
        composition_model=ModelInput(
            model="independent_sites", sites=sites, reagent_efficiency=_EXPECTED_EFFICIENCY
        ),
        predicted_composition=predicted,
        lines=[
            LineInput(
                role="cage",
                name=series["cage"],
                planned_mass_mg=run.cage_mass_mg,
                purity=0.995,
            ),
            *(_line(line, run.equivalents) for line in series["lines"]),
        ],
        conditions=ConditionsInput(
            solvent=series["solvent"],
            solvent_volume_ml=round(run.cage_mass_mg * 0.8),
            temperature_c=run.temperature_c,
            duration_min=run.duration_min,
            atmosphere=series["atmosphere"],
            addition_mode=series["addition_mode"],
            performed_on=run.day,
        ),
        is_level_confirmed=True,
    )


def _line(line: Mapping[str, Any], equivalents: float) -> LineInput:
    values = {key: value for key, value in line.items() if key != "factor"}
    return LineInput(**values, equivalents=round(equivalents * line["factor"], 3))


def _composition(
    sites: int, attenuation: float, equivalents: float, efficiency: float
) -> list[float]:
    """Return the model's composition up to the highest level read, the rest lumped into it."""
    result = distribution(
        DistributionRequest(
            model="sequential",
            sites=sites,
            attenuation=attenuation,
            equivalents=equivalents,
            reagent_efficiency=efficiency,
        )
    )
    shares = list(result.mole_fraction)
    return [*shares[:HIGHEST_LEVEL_READ], sum(shares[HIGHEST_LEVEL_READ:])]


def _weigh(edit: Edit, reaction: Reaction, draw: random.Random) -> None:
    """Enter actual masses within about one percent of the planned ones."""
    weighed = [
        line.model_copy(
            update={
                "actual_mass_mg": round(
                    (component.planned_mass_mg or 0.0) * draw.gauss(1.0, 0.006), 2
                )
            }
        )
        for line, component in zip(lines_of(reaction), reaction.components.all(), strict=True)
    ]
    amend_lines(edit, weighed)


def _read_out(edit: Edit, reaction: Reaction, run: _Run, draw: random.Random) -> None:
    series = run.series
    shares = _composition(
        known_family(series["family"]).sites.get(series["cage"], 30),
        series["attenuation"],
        run.equivalents,
        run.true_efficiency,
    )
    noisy = [max(0.0, share * draw.gauss(1.0, 0.04)) for share in shares]
    # Rounded down, so that a reading never exceeds its whole.
    found = [math.floor(1000 * share / sum(noisy)) / 1000 for share in noisy]
    last = max(level for level, share in enumerate(found) if share >= 0.001)
    add_reading(
        edit,
        ReadingInput(
            method="hplc",
            sampled_at_min=run.duration_min,
            mole_fraction_by_level=dict(enumerate(found[: last + 1])),
            is_higher_lumped=last == HIGHEST_LEVEL_READ,
            note="Invented reading.",
        ),
    )
    _isolate(edit, reaction, run, found, draw)


def _isolate(
    edit: Edit, reaction: Reaction, run: _Run, found: list[float], draw: random.Random
) -> None:
    """Enter a column whose fractions hold most of what the reading found."""
    target = run.series["target_level"]
    reaction.refresh_from_db()
    cage_mmol = reaction.components.get(role="cage").actual_mmol or 0.0
    addition = reaction.addend.mass_g_per_mol if reaction.addend else 0.0
    cage_g_per_mol = cage_molar_mass_g_per_mol(run.series["cage"])
    kept = draw.uniform(0.78, 0.92)
    fractions = [
        FractionInput(
            name=name,
            level=level,
            mass_mg=round(cage_mmol * found[level] * kept * (cage_g_per_mol + level * addition), 1),
            purity=0.98,
        )
        for name, level in (("recovered cage", 0), ("product", target))
        if found[level] > 0.005
    ]
    amend_isolation(
        edit,
        [
            IsolationStepInput(
                method="column",
                medium="silica gel",
                solvent="toluene",
                loading_mg=round(run.cage_mass_mg * 1.3, 1),
                volume_ml=round(run.cage_mass_mg * 4),
                fractions=fractions,
            )
        ],
    )
    amend_conclusion(
        edit,
        ConclusionInput(
            conclusion=f"Invented. Level {target} found at {100 * found[target]:.0f} %."
        ),
    )
