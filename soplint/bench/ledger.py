"""The ledger: every stated quantity of a document, each with one verdict."""

from __future__ import annotations

from dataclasses import dataclass, field

from soplint.bench.preparation import Stated
from soplint.findings.model import Entry, Interval
from soplint.intake.model import Document
from soplint.quantities.model import Measure

# Role of a quantity in the record, by dimension.
ROLES = {
    "mass": "mass",
    "volume": "volume",
    "amount": "amount",
    "molarity": "concentration",
    "molality": "concentration",
    "normality": "concentration",
    "mass-concentration": "concentration",
    "ppm": "concentration",
    "activity-concentration": "concentration",
    "osmolality": "concentration",
    "fraction": "fraction",
    "pH": "pH",
    "molar-mass": "molar-mass",
    "density": "density",
    "ratio": "ratio",
    "fold": "factor",
    "temperature": "temperature",
    "volumes": "ratio",
    "activity": "amount",
}


@dataclass(slots=True)
class Line:
    """One line of the ledger while it is being written."""

    stated: Stated
    of: str | None
    role: str
    verdict: str = "not-verified"
    reason: str | None = "given"
    computed: Interval | None = None
    working: str | None = None
    rule: str | None = None


@dataclass(slots=True)
class Ledger:
    """Lines by place; a later, better founded verdict replaces "not verified"."""

    lines: dict[tuple[int, int, int, int], Line] = field(default_factory=dict)

    def enter(self, stated: Stated, of: str | None = None, reason: str = "given") -> None:
        """List a stated quantity; it stays not verified until a relation tests it."""
        role = ROLES.get(stated.measure.dimension, "other")
        if stated.measure.unit == "drop":
            role = "volume"
        line = self.lines.get(stated.key)
        if line is None:
            self.lines[stated.key] = Line(stated, of, role, reason=reason)
        elif line.of is None:
            line.of = of

    def agree(
        self,
        stated: Stated,
        computed: Interval | None,
        working: str | None,
        rule: str | None = None,
    ) -> None:
        """The quantity agrees; a disagreement that another relation found is kept."""
        line = self._line(stated)
        if line.verdict == "not-verified":
            line.verdict, line.reason = "agrees", None
            line.computed, line.working, line.rule = computed, working, rule

    def disagree(
        self, stated: Stated, computed: Interval | None, working: str | None, rule: str
    ) -> None:
        """The quantity disagrees."""
        line = self._line(stated)
        line.verdict, line.reason = "disagrees", None
        line.computed, line.working, line.rule = computed, working, rule

    def leave_open(self, stated: Stated, reason: str) -> None:
        """The quantity could not be verified, for a better reason than "given"."""
        line = self._line(stated)
        if line.verdict == "not-verified":
            line.reason = reason

    def verdict(self, stated: Stated) -> str | None:
        """The verdict on a quantity so far, None when it is not listed."""
        line = self.lines.get(stated.key)
        return line.verdict if line else None

    def _line(self, stated: Stated) -> Line:
        self.enter(stated)
        return self.lines[stated.key]

    def entries(self, document: Document) -> tuple[Entry, ...]:
        """The ledger as entries of the record, by position."""
        return tuple(
            Entry(
                line.stated.span,
                document.source(line.stated.span),
                line.of,
                line.role,
                line.verdict,
                line.reason if line.verdict == "not-verified" else None,
                interval(line.stated.measure),
                line.computed,
                line.working,
                line.rule,
            )
            for line in sorted(self.lines.values(), key=lambda line: line.stated.key)
        )


def interval(measure: Measure) -> Interval:
    """A stated quantity as an interval of the record."""
    unit = measure.unit or ("ratio" if measure.parts else "1")
    return Interval(measure.value, unit, measure.low, measure.high)
