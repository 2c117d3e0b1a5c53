"""The report ``json``: the record of a review, a contract that other programs read.

The order of the keys is part of the contract.  Same input, rules, constants, settings and date
give the identical record.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from soplint import __version__
from soplint.cautions import CAUTIONS
from soplint.reports.layout import Page
from soplint.reports.outcome import summarise, verdicts
from soplint.reports.quantities import coverage, place, printed, quantity

if TYPE_CHECKING:
    from collections.abc import Iterator

    from soplint.findings.model import Amendment, Finding, Permit, Related, Review
    from soplint.reports.outcome import Outcome

RECORD_VERSION = 1


def report(outcome: Outcome, page: Page) -> Iterator[str]:
    """The record as JSON text; the page does not matter."""
    yield printed(record(outcome))


def record(outcome: Outcome) -> dict[str, Any]:
    """The record of a run as plain values."""
    from soplint.reports.digests import constants_digest, rules_digest, settings_digest

    settings = outcome.settings
    return {
        "record": "soplint-review",
        "record_version": RECORD_VERSION,
        "reviewed_on": outcome.on.isoformat(),
        "tool": {
            "name": "soplint",
            "version": __version__,
            "rules_digest": rules_digest(),
            "constants_digest": constants_digest(),
            "settings_digest": settings_digest(settings),
        },
        "rules_off": _rules_off(outcome),
        "terms_changed": [],
        "cautions": [*CAUTIONS, *_notes(outcome)],
        "not_reviewed": [{"path": m.path, "reason": m.reason} for m in outcome.not_reviewed],
        "documents": [_document(review) for review in outcome.reviews],
        "summary": _summary(outcome),
    }


def _notes(outcome: Outcome) -> list[str]:
    """What the reader of a record must know about single documents, such as a guessed encoding."""
    return [f"{review.path}: {note}" for review in outcome.reviews for note in review.notes]


def _rules_off(outcome: Outcome) -> list[str]:
    settings = outcome.settings
    if not settings.only and not settings.without:
        return []
    from soplint.checks.cards import card_names

    return [name for name in card_names() if not settings.applies(name)]


def _document(review: Review) -> dict[str, Any]:
    return {
        "path": review.path,
        "sha256": review.sha256,
        "title": review.title,
        "quantities": [quantity(entry) for entry in review.entries],
        "findings": [_finding(finding) for finding in review.findings],
        "withheld": [_finding(finding) for finding in review.withheld],
        "coverage": coverage(review.coverage, verdicts([review])),
    }


def _finding(finding: Finding) -> dict[str, Any]:
    return {
        "rule": finding.rule,
        "severity": finding.severity,
        **place(finding.span),
        "text": finding.text,
        "message": finding.message,
        "stated": finding.stated,
        "computed": finding.computed,
        "working": finding.working,
        "cause": finding.cause,
        "cause_kind": finding.cause_kind,
        "amendment": None if finding.amendment is None else _amendment(finding.amendment),
        "related": [_related(related) for related in finding.related],
        "permit": None if finding.permit is None else _permit(finding.permit),
        "caution": finding.caution,
        "see": list(finding.see),
    }


def _amendment(amendment: Amendment) -> dict[str, Any]:
    return {**place(amendment.span), "replacement": amendment.replacement}


def _related(related: Related) -> dict[str, Any]:
    return {**place(related.span), "text": related.text, "message": related.message}


def _permit(permit: Permit) -> dict[str, Any]:
    return {
        "reason": permit.reason,
        "approved_by": permit.approved_by,
        "on": permit.on,
        "until": permit.until,
    }


def _summary(outcome: Outcome) -> dict[str, Any]:
    summary = summarise(outcome)
    return {
        "documents": summary.documents,
        "held": summary.held,
        "critical": summary.critical,
        "major": summary.major,
        "minor": summary.minor,
        "remark": summary.remark,
        "under_permit": summary.under_permit,
        "quantities": summary.quantities,
        "agrees": summary.agrees,
        "disagrees": summary.disagrees,
        "not_verified": summary.not_verified,
        "sentences_not_read": summary.sentences_not_read,
    }
