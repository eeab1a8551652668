"""What is stored. Only ``reactions.services`` writes; everything else reads."""

from reactions.models.addends import Addend
from reactions.models.campaigns import Campaign, Membership, Role
from reactions.models.components import Component, ComponentRole
from reactions.models.history_imports import HistoryImport, ImportState
from reactions.models.isolation import Fraction, IsolationMethod, IsolationStep
from reactions.models.lab_families import LabFamily, known_families, known_family
from reactions.models.observations import Observation, ObservationKind
from reactions.models.reactions import AdditionMode, Atmosphere, Light, Reaction, State
from reactions.models.readings import Reading, ReadingLevel, ReadingMethod
from reactions.models.revisions import Revision, Section, Signature

__all__ = [
    "Addend",
    "AdditionMode",
    "Atmosphere",
    "Campaign",
    "Component",
    "ComponentRole",
    "Fraction",
    "HistoryImport",
    "ImportState",
    "IsolationMethod",
    "IsolationStep",
    "LabFamily",
    "Light",
    "Membership",
    "Observation",
    "ObservationKind",
    "Reaction",
    "Reading",
    "ReadingLevel",
    "ReadingMethod",
    "Revision",
    "Role",
    "Section",
    "Signature",
    "State",
    "known_families",
    "known_family",
]
