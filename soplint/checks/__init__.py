"""The rules: one function each, registered by name; one card each under ``rules/``."""

from soplint.checks import amounts, buffers, document, hazards, titrations, units
from soplint.checks.hazard_rules import RULES as HAZARD_RULES
from soplint.checks.registry import RULES, Disagreement, Judgement, Rule, rule

__all__ = [
    "HAZARD_RULES",
    "RULES",
    "Disagreement",
    "Judgement",
    "Rule",
    "amounts",
    "buffers",
    "document",
    "hazards",
    "rule",
    "titrations",
    "units",
]
