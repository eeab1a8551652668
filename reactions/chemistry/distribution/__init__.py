"""Compositions over addition levels: how the cages of a mixture share out their additions."""

from reactions.chemistry.distribution.models import CompositionModel
from reactions.chemistry.distribution.request import (
    DistributionRequest,
    DistributionResult,
    ModelFields,
    distribution,
)

__all__ = [
    "CompositionModel",
    "DistributionRequest",
    "DistributionResult",
    "ModelFields",
    "distribution",
]
