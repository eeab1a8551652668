"""The inverse of a composition model: how much reagent meets an objective, and what it costs."""

from reactions.chemistry.planning.curve import CurveRequest, CurveResult, curve
from reactions.chemistry.planning.plan import PlanRequest, PlanResult, plan

__all__ = ["CurveRequest", "CurveResult", "PlanRequest", "PlanResult", "curve", "plan"]
