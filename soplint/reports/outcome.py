"""What a run of reviews came to: the one thing that every report is made from."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from soplint.findings.model import SEVERITIES, Finding, Review

if TYPE_CHECKING:
    from collections.abc import Iterable
    from datetime import date

    from soplint.settings import Settings


@dataclass(frozen=True, slots=True)
class NotReviewed:
    """A path that was asked for and not reviewed."""

    path: str
    reason: str
    fault: bool = False  # soplint itself failed, not the file


@dataclass(frozen=True, slots=True)
class Outcome:
    """Reviews in order, what was not reviewed, and the settings and date of the run."""

    reviews: tuple[Review, ...]
    not_reviewed: tuple[NotReviewed, ...]
    settings: Settings
    on: date


@dataclass(frozen=True, slots=True)
class Summary:
    """Counts over all documents; the classes count open findings only."""

    documents: int
    held: bool
    critical: int
    major: int
    minor: int
    remark: int
    under_permit: int
    withheld: int
    quantities: int
    agrees: int
    disagrees: int
    not_verified: int
    sentences_not_read: int


def is_open(finding: Finding) -> bool:
    """Whether the finding counts: no permit covers it, or it is a critical hazard."""
    critical_hazard = finding.severity == "critical" and finding.rule.startswith("hazards.")
    return finding.permit is None or critical_hazard


def holds(finding: Finding, hold_at: str) -> bool:
    """Whether an open finding of this class holds the procedure at level ``hold_at``."""
    return is_open(finding) and SEVERITIES.index(finding.severity) <= SEVERITIES.index(hold_at)


def verdicts(reviews: Iterable[Review]) -> dict[str, int]:
    """How many quantities have each verdict, all three keys always present."""
    counts = {"agrees": 0, "disagrees": 0, "not-verified": 0}
    for review in reviews:
        for entry in review.entries:
            counts[entry.verdict] += 1
    return counts


def summarise(outcome: Outcome) -> Summary:
    """The counts of a run and whether it is held."""
    findings = [finding for review in outcome.reviews for finding in review.findings]
    withheld = [finding for review in outcome.reviews for finding in review.withheld]
    classes = dict.fromkeys(SEVERITIES, 0)
    for finding in findings:
        classes[finding.severity] += is_open(finding)
    counts = verdicts(outcome.reviews)
    permitted = [f for f in (*findings, *withheld) if f.permit is not None and not is_open(f)]
    return Summary(
        documents=len(outcome.reviews),
        held=any(holds(finding, outcome.settings.hold_at) for finding in findings),
        critical=classes["critical"],
        major=classes["major"],
        minor=classes["minor"],
        remark=classes["remark"],
        under_permit=len(permitted),
        withheld=sum(finding.permit is None for finding in withheld),
        quantities=sum(counts.values()),
        agrees=counts["agrees"],
        disagrees=counts["disagrees"],
        not_verified=counts["not-verified"],
        sentences_not_read=sum(len(review.coverage.unread) for review in outcome.reviews),
    )
