"""Loads the modules of the hazards, so that their rules register."""

from soplint.checks import (
    hazard_heat,
    hazard_load,
    hazard_pairs,
    hazard_papers,
    hazard_places,
    hazard_special,
)
from soplint.checks.registry import RULES

__all__ = [
    "RULES",
    "hazard_heat",
    "hazard_load",
    "hazard_pairs",
    "hazard_papers",
    "hazard_places",
    "hazard_special",
]
