"""The parts of a sheet that are posted, each a line of this table."""

from __future__ import annotations

from collections.abc import Callable

from reactions.pages.sheet.conclusion_forms import conclusion_form, store_conclusion
from reactions.pages.sheet.isolation_forms import (
    isolation_form,
    reshapes_isolation,
    store_isolation,
)
from reactions.pages.sheet.reading_forms import reading_form, store_reading
from reactions.pages.sheet.run_forms import (
    conditions_form,
    observation_form,
    store_conditions,
    store_observation,
)
from reactions.pages.sheet.sections import SectionKind
from reactions.pages.sheet.weighing import lines_form, reshapes_lines, store_lines
from reactions.services.revising import Edit
from reactions.services.run import remove_observation, remove_reading

LINES = SectionKind("lines", "Weighing list", lines_form, store_lines, reshapes=reshapes_lines)
CONDITIONS = SectionKind("conditions", "Conditions", conditions_form, store_conditions)
TIME_LINE = SectionKind(
    "time-line", "Time line", observation_form, store_observation, only_adds=True
)
READINGS = SectionKind("readings", "Readings", reading_form, store_reading, only_adds=True)
ISOLATION = SectionKind(
    "isolation", "Isolation", isolation_form, store_isolation, reshapes=reshapes_isolation
)
CONCLUSION = SectionKind("conclusion", "Conclusion", conclusion_form, store_conclusion)

PARTS: dict[str, SectionKind] = {
    kind.name: kind for kind in (LINES, CONDITIONS, TIME_LINE, READINGS, ISOLATION, CONCLUSION)
}

# What takes one row out of a part whose rows are added one by one.
REMOVALS: dict[str, Callable[[Edit, int], None]] = {
    TIME_LINE.name: remove_observation,
    READINGS.name: remove_reading,
}
