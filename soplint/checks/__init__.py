"""The rules: one function each, registered by name; one card each under ``rules/``."""

from soplint.checks import (
    acid_forms,
    adjusting,
    amounts,
    buffers,
    document,
    hazards,
    meters,
    mobile_phases,
    ph_changes,
    precipitation,
    titrations,
    units,
    upkeep,
)
from soplint.checks.hazard_rules import RULES as HAZARD_RULES
from soplint.checks.registry import RULES, Disagreement, Judgement, Rule, rule

__all__ = [
    "HAZARD_RULES",
    "RULES",
    "Disagreement",
    "Judgement",
    "Rule",
    "acid_forms",
    "adjusting",
    "amounts",
    "buffers",
    "document",
    "hazards",
    "meters",
    "mobile_phases",
    "ph_changes",
    "precipitation",
    "rule",
    "titrations",
    "units",
    "upkeep",
]
