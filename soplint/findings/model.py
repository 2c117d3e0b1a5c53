"""The types of the record: entries of the ledger and findings."""

from __future__ import annotations

from dataclasses import dataclass, field

from soplint.intake.model import Span

SEVERITIES = ("critical", "major", "minor", "remark")  # most severe first
REASONS = (
    "given",
    "substance-unknown",
    "volume-missing",
    "strength-missing",
    "unit-unknown",
    "outside-model",
    "several-readings",
    "relation-open",
    "other-document",
    "not-recomputable",
)


@dataclass(frozen=True, slots=True)
class Interval:
    """A value with the interval it stands for; ``value`` is None for a range or a ratio."""

    value: float | None
    unit: str
    low: float
    high: float


@dataclass(frozen=True, slots=True)
class Entry:
    """One stated quantity with its verdict."""

    span: Span
    text: str
    of: str | None
    role: str  # mass, volume, amount, concentration, fraction, pH, molar-mass, density, ratio, factor, temperature, titre, heat, other
    verdict: str  # agrees, disagrees, not-verified
    reason: str | None
    stated: Interval
    computed: Interval | None = None
    working: str | None = None
    rule: str | None = None


@dataclass(frozen=True, slots=True)
class Related:
    """Another place that the finding draws on."""

    span: Span
    text: str
    message: str


@dataclass(frozen=True, slots=True)
class Amendment:
    """A correction in the text's own unit and digits."""

    span: Span
    replacement: str


@dataclass(frozen=True, slots=True)
class Permit:
    """A deviation permit in force."""

    reason: str
    approved_by: str
    on: str
    until: str


@dataclass(frozen=True, slots=True)
class Finding:
    """One disagreement between text and chemistry, or one hazard."""

    rule: str
    severity: str
    span: Span
    text: str
    message: str
    stated: str | None = None
    computed: str | None = None
    working: str | None = None
    cause: str | None = None
    cause_kind: str | None = None
    amendment: Amendment | None = None
    related: tuple[Related, ...] = ()
    permit: Permit | None = None
    caution: str | None = None
    see: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Coverage:
    """What was read and what was not."""

    sentences_with_quantities: int = 0
    sentences_read: int = 0
    unread: tuple[tuple[int, str], ...] = ()  # line, text
    set_aside: dict[str, int] = field(default_factory=dict)
    pairs_assessed: int = 0
    pairs_not_assessed: int = 0


@dataclass(frozen=True, slots=True)
class Review:
    """The review of one document: everything that a report needs."""

    path: str
    sha256: str
    title: str | None
    lines: tuple[str, ...]
    notes: tuple[str, ...]
    entries: tuple[Entry, ...]
    findings: tuple[Finding, ...]
    withheld: tuple[Finding, ...]
    coverage: Coverage
