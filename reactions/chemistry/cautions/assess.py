"""Putting a plan to the substance table and to every rule."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from functools import cache
from typing import Any

from reactions.chemistry.cautions.plan import Plan, read_plan
from reactions.chemistry.cautions.predicates import PREDICATES
from reactions.chemistry.cautions.sheet import (
    SEVERITIES,
    STANDING,
    UNCLASSIFIED,
    CautionSheet,
    PlannedConditions,
    PlannedSubstance,
    RuleCaution,
    Severity,
    SubstanceCaution,
)
from reactions.chemistry.substances import Substance, statement_texts
from reactions.chemistry.tables import read_json_table


@dataclass(frozen=True)
class Rule:
    """A row of the rule table: it applies where every one of its conditions does."""

    key: str
    severity: Severity
    text: str
    source: str
    when: tuple[tuple[str, Mapping[str, Any]], ...]

    def applied_to(self, plan: Plan) -> RuleCaution | None:
        """Return the caution, its text filled in from the plan, or None."""
        words: dict[str, str] = {}
        for predicate, arguments in self.when:
            found = PREDICATES[predicate](plan, arguments)
            if found is None:
                return None
            words |= found
        return RuleCaution(self.key, self.severity, self.text.format(**words), self.source)


def cautions_for(
    substances: Iterable[PlannedSubstance], conditions: PlannedConditions
) -> CautionSheet:
    """Return the cautions of a plan: statements of what is listed, names of what isn't, rules.

    The solvent of the conditions is looked up as a substance too. Rules come most severe first;
    a substance planned twice is shown once.
    """
    plan = read_plan(substances, conditions)
    listed: dict[str, SubstanceCaution] = {}
    unlisted: dict[str, None] = {}
    for member in plan.members:
        if member.record is None:
            unlisted[member.name] = None
        else:
            listed.setdefault(member.record.key, _substance_caution(member.name, member.record))
    met = [caution for rule in rules() if (caution := rule.applied_to(plan)) is not None]
    met.sort(key=lambda caution: SEVERITIES.index(caution.severity))
    return CautionSheet(STANDING, tuple(listed.values()), tuple(unlisted), tuple(met))


@cache
def rules() -> tuple[Rule, ...]:
    """Return every rule of the table, in its order."""
    return tuple(
        Rule(
            key=row["key"],
            severity=row["severity"],
            text=row["text"],
            source=row["source"],
            when=tuple(
                (condition["predicate"], {k: v for k, v in condition.items() if k != "predicate"})
                for condition in row["when"]
            ),
        )
        for row in read_json_table("caution_rules.json")["rules"]
    )


def _substance_caution(name: str, record: Substance) -> SubstanceCaution:
    texts = statement_texts()
    return SubstanceCaution(
        name=name,
        signal_word=record.signal_word,
        pictograms=record.pictograms,
        hazard_statements=tuple((code, texts[code]) for code in record.hazard_statements),
        precautionary_statements=tuple(
            (code, texts[code]) for code in record.precautionary_statements
        ),
        source=record.source,
        remark="" if record.hazard_statements else UNCLASSIFIED,
    )
