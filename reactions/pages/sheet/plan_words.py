"""A plan's objective and model in words."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from reactions.pages.drawing.levels import level_name

_MODELS = {
    "independent_sites": "independent sites",
    "poisson": "Poisson",
    "sequential": "sequential",
    "cage_graph": "cage graph",
}


def objective_in_words(objective: Mapping[str, Any] | None) -> str:
    """Return what a plan was solved for, such as “mono : multi at least 5 : 1”; blank for none."""
    if not objective:
        return ""
    kind = objective.get("kind")
    if kind == "most_of_level":
        return f"the most {level_name(int(objective['level']))}-adduct"
    if kind == "mono_to_multi":
        return f"mono : multi at least {objective['ratio']:g} : 1, at the highest conversion"
    if kind == "uptake":
        return f"{objective['value']:g} additions per cage on average"
    if kind == "band":
        lowest, highest = (level_name(int(objective[key])) for key in ("lowest", "highest"))
        return f"the most within {lowest} to {highest}"
    return str(kind or "")


def model_in_words(model: Mapping[str, Any] | None) -> str:
    """Return a composition model with its parameters; blank for none."""
    if not model:
        return ""
    name = str(model.get("model", ""))
    parts = [_MODELS.get(name, name)]
    if model.get("sites") is not None and name != "poisson":
        parts.append(f"{model['sites']} sites")
    attenuation = model.get("attenuation")
    if isinstance(attenuation, list):
        parts.append("attenuation " + ", ".join(f"{factor:g}" for factor in attenuation))
    elif attenuation is not None and attenuation != 1:
        parts.append(f"attenuation {attenuation:g} per addition")
    if model.get("reagent_efficiency") is not None:
        parts.append(f"reagent efficiency {100 * model['reagent_efficiency']:g} %")
    return ", ".join(parts)
