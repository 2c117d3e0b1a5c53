"""A preparation: what one recipe takes, to which volume it is brought and what it aims at."""

from __future__ import annotations

from dataclasses import dataclass, field

from soplint.intake.model import Span, Text
from soplint.notation.phrases import Claim, Dose, Material, Mixture, SetPH, ToVolume
from soplint.quantities.model import Measure


@dataclass(frozen=True, slots=True)
class Stated:
    """A quantity in its place in the document."""

    text: Text
    measure: Measure

    @property
    def span(self) -> Span:
        """Where the quantity stands in the source."""
        return self.text.span(self.measure.start, self.measure.end)

    @property
    def key(self) -> tuple[int, int, int, int]:
        """Identity of the quantity in the ledger."""
        span = self.span
        return span.line, span.column, span.end_line, span.end_column


@dataclass(frozen=True, slots=True)
class Target:
    """A strength that the preparation is said to have."""

    stated: Stated
    material: Material | None  # None: the strength of the preparation as such
    source: str  # title, bracket, claim, document, maybe (only agreement counts)
    fold: Measure | None = None


@dataclass(frozen=True, slots=True)
class Mixed:
    """Parts of named materials in their place."""

    text: Text
    mixture: Mixture
    step: int


@dataclass(frozen=True, slots=True)
class Title:
    """What a heading, lead-in, one-line recipe or column head says about a preparation."""

    text: Text
    words: str
    materials: tuple[Material, ...]
    targets: tuple[Target, ...]
    fold: Stated | None = None
    ph: Stated | None = None
    temperature: Measure | None = None
    volume: Stated | None = None
    source: str = "title"
    mixtures: tuple[Mixed, ...] = ()
    folds: tuple[Target, ...] = ()  # of named parts: "2x SSL, 0.1 % SDS"

    @property
    def bare(self) -> bool:
        """Whether the title names no solution of its own ("Recipe:", "Preparation", "For 1 L")."""
        return not (self.targets or self.ph or self.fold or self.materials)


@dataclass(frozen=True, slots=True)
class Taken:
    """A dose in its place.  ``step`` counts sentences, ``solvent`` marks "in 800 mL of water"."""

    text: Text
    dose: Dose
    step: int
    solvent: bool = False
    late: bool = False  # added after the volume was made up
    scale: float = 1.0  # number of times, "each" groups
    block: int = -1  # of the document; -1 where the dose stands in a table

    @property
    def stated(self) -> Stated:
        """The amount in its place."""
        return Stated(self.text, self.dose.amount)


@dataclass(frozen=True, slots=True)
class Made:
    """A make-up in its place: ``order`` counts the doses taken before it."""

    text: Text
    to: ToVolume
    step: int
    order: int


@dataclass(frozen=True, slots=True)
class Adjusted:
    """A pH setting in its place."""

    text: Text
    set_ph: SetPH
    step: int
    after_volume: bool  # after a final make-up


@dataclass(frozen=True, slots=True)
class Claimed:
    """A claim in its place."""

    text: Text
    claim: Claim
    step: int
    fold: Measure | None = None  # "1x is 30 mM Tris": the claim holds at this fold


@dataclass(frozen=True, slots=True)
class FinalVolume:
    """The volume that strengths refer to.

    ``provenance``: made-up, mark, total, heading, column, sum, weak (in the survey's order).
    """

    litres: float
    relative: float  # half-width of its interval, relative
    provenance: str
    stated: Stated | None


@dataclass(slots=True)
class Preparation:
    """One recipe of the document, in order of its sentences."""

    title: Title | None
    parents: tuple[Title, ...] = ()
    taken: list[Taken] = field(default_factory=list)
    made: list[Made] = field(default_factory=list)
    adjusted: list[Adjusted] = field(default_factory=list)
    claimed: list[Claimed] = field(default_factory=list)
    mixed: list[Mixed] = field(default_factory=list)
    flasks: list[tuple[Stated, str]] = field(default_factory=list)  # volumetric ware in use
    kind: str = "steps"  # steps, list, table, line
    section: int = 0
    volume: FinalVolume | None = None
    sole: bool = False  # the only preparation of the document
    total: Stated | None = None  # a "Total" row

    @property
    def name(self) -> str:
        """What the preparation is called, for messages."""
        return self.title.words if self.title else ""
