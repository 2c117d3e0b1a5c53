"""Hand-made reviews, so that the reports are tested without the rooms before them."""

from datetime import date

import pytest

from soplint.findings.model import (
    Amendment,
    Coverage,
    Entry,
    Finding,
    Interval,
    Permit,
    Related,
    Review,
)
from soplint.intake.model import Span
from soplint.reports.outcome import NotReviewed, Outcome
from soplint.settings import Settings

LINES = (
    "# Acetate buffer 0.0676 mol/L, 1 L",
    "Weigh 4.87 g of sodium acetate trihydrate.",
    "Dissolve and make up to 1000 mL.",
    "Add a pinch of 5 % magic.",
)


def entries() -> tuple[Entry, ...]:
    return (
        Entry(
            Span(1, 18, 1, 30),
            "0.0676 mol/L",
            "sodium acetate",
            "concentration",
            "not-verified",
            "relation-open",
            Interval(0.0676, "mol/L", 0.06692, 0.06828),
        ),
        Entry(
            Span(2, 7, 2, 13),
            "4.87 g",
            "sodium acetate trihydrate",
            "mass",
            "disagrees",
            None,
            Interval(4.87, "g", 4.865, 4.875),
            Interval(9.19945, "g", 9.1, 9.3),
            "0.0676 mol/L × 1 L × 136.08 g/mol = 9.199 g",
            "amounts.mass-gives-concentration",
        ),
        Entry(
            Span(3, 25, 3, 32),
            "1000 mL",
            None,
            "volume",
            "agrees",
            None,
            Interval(1000.0, "mL", 999.5, 1000.5),
            Interval(None, "mL", float("-inf"), 1000.1),
        ),
    )


def mass_finding(**changed: object) -> Finding:
    told: dict[str, object] = {
        "rule": "amounts.mass-gives-concentration",
        "severity": "major",
        "span": Span(2, 7, 2, 13),
        "text": "4.87 g",
        "message": "4.87 g of sodium acetate trihydrate in 1000 mL is 0.0358 mol/L",
        "stated": "4.87 g",
        "computed": "9.20 g",
        "working": "0.0676 mol/L × 1 L × 136.08 g/mol = 9.199 g\nallowance 8 %",
        "cause": "4.87 g is near the mass of the anhydrous salt",
        "cause_kind": "other-hydrate",
        "amendment": Amendment(Span(2, 7, 2, 13), "9.20 g"),
        "related": (Related(Span(1, 18, 1, 30), "0.0676 mol/L", "the strength in the heading"),),
        "see": ("soplint rules amounts.mass-gives-concentration",),
    }
    return Finding(**{**told, **changed})  # type: ignore[arg-type]


PERMIT = Permit("checked in VR-12", "QA", "2026-11-02", "2027-11-02")


def review(*findings: Finding, withheld: tuple[Finding, ...] = ()) -> Review:
    return Review(
        path="buffers/acetate.md",
        sha256="0" * 64,
        title="Acetate buffer 0.0676 mol/L, 1 L",
        lines=LINES,
        notes=("read as Latin-1",),
        entries=entries(),
        findings=findings,
        withheld=withheld,
        coverage=Coverage(4, 3, ((4, LINES[3]),), {"time": 2, "speed": 1}, 1, 2),
    )


def outcome(
    *reviews: Review, missed: tuple[NotReviewed, ...] = (), hold_at: str = "major"
) -> Outcome:
    return Outcome(reviews, missed, Settings(hold_at=hold_at), date(2026, 12, 1))


class Made:
    """What the tests of the reports build their cases from."""

    entries = staticmethod(entries)
    finding = staticmethod(mass_finding)
    review = staticmethod(review)
    outcome = staticmethod(outcome)
    permit = PERMIT


@pytest.fixture
def made() -> type[Made]:
    return Made
