"""How severe a disagreement is (design: section 5, "Bands")."""

from __future__ import annotations

from soplint.bench import Relation
from soplint.findings.model import SEVERITIES

REMARK, MINOR = 0.03, 0.08  # below REMARK a remark, up to MINOR minor, above major
WEAK_FLOOR = 0.05  # a weak final volume says nothing below this
ONE_FIGURE_MAJOR = 0.25
NEAR_CAUSE = 0.01


def severity(relation: Relation, exact_cause: bool) -> str | None:
    """The class of a disagreement, or None where it is not worth a remark.

    ``exact_cause``: a hypothesis reproduces the stated number within 1 %.
    """
    deviation = abs(relation.deviation)
    if relation.exact:
        return "major"
    weak = relation.volume is not None and relation.volume.provenance == "weak"
    if weak and deviation < WEAK_FLOOR:
        return None
    if deviation < REMARK:
        found = "remark"
    elif deviation <= MINOR:
        found = "minor"
    else:
        found = "major"
    if relation.one_figure and found == "major" and deviation <= ONE_FIGURE_MAJOR:
        found = "major" if exact_cause else "minor"
    return lower(found) if weak else found


def lower(severity_: str) -> str:
    """One class milder."""
    return SEVERITIES[min(SEVERITIES.index(severity_) + 1, len(SEVERITIES) - 1)]


def milder(first: str, second: str) -> str:
    """The milder of two classes."""
    return max(first, second, key=SEVERITIES.index)
