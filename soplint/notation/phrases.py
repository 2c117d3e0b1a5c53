"""Typed phrases: what the grammar finds in one sentence, cell or heading.

Offsets (``start``, ``end``) count characters of the sentence's ``Text``; spans in the source are
made at the edge with ``Text.span``.
"""

from __future__ import annotations

from dataclasses import dataclass

from soplint.intake.model import Text
from soplint.quantities.model import Measure
from soplint.substances.model import Match


@dataclass(frozen=True, slots=True)
class Material:
    """Something that is taken, named or aimed at: a reagent, a stock, a solution of this document."""

    start: int
    end: int
    words: str  # as written, without strengths and brackets
    match: Match | None = None  # what the catalogue makes of the words
    solution: bool = False  # "solution", "stock", "buffer" ... was said
    strengths: tuple[Measure, ...] = ()  # beside the name: "0.5 mol/L", "37 %", "10X"
    ph: Measure | None = None
    temperature: Measure | None = None
    bracket: tuple[Measure, ...] = ()  # strengths and amounts in brackets after the name
    finals: tuple[Measure, ...] = ()  # said to be final: "(final 5 mM)", "final concentration 5 mM"
    molar_mass: Measure | None = None
    density: Measure | None = None
    role: str | None = None  # the role word before it: "in", "with", "into", "from", "of"
    contents: tuple[
        Material, ...
    ] = ()  # named strengths in its brackets: "(0.15 M NaCl, 10 mM Tris)"
    each: bool = False  # the strengths are those of every material that follows: "10 mM each of"

    @property
    def is_water(self) -> bool:
        """Whether the words name water of any grade."""
        return self.match is not None and self.match.substances[0].name == "water"


@dataclass(frozen=True, slots=True)
class Dose:
    """An amount of a material: taken, listed or aimed at."""

    start: int
    end: int
    amount: Measure
    material: Material | None = None
    same: tuple[Measure, ...] = ()  # the same amount in other units: "10 mL (18.4 g)"
    alternatives: tuple[Dose, ...] = ()  # joined by "or": exactly one of them is used
    role: str | None = None  # "in", "with", "into", "from", "to" before it
    command: str | None = None  # the nearest command before it: ADD, WEIGH, DISSOLVE ...
    each: bool = False  # "each", "of each"
    optional: bool = False  # "if necessary", "as required"


@dataclass(frozen=True, slots=True)
class ToVolume:
    """A volume that a mixture is brought to; ``volume`` is None for "to the mark"."""

    start: int
    end: int
    volume: Measure | None
    diluent: Material | None = None
    command: str | None = None
    said_final: bool = False  # "final volume 500 mL"


@dataclass(frozen=True, slots=True)
class SetPH:
    """An instruction that brings the pH to a value."""

    start: int
    end: int
    ph: Measure | None
    temperature: Measure | None = None
    reagents: tuple[Material, ...] = ()
    doses: tuple[Dose, ...] = ()  # "about 5 mL of ..." stated with the instruction


@dataclass(frozen=True, slots=True)
class Claim:
    """A statement about a result: "gives 0.1 mol/L", "the pH is 7.2", "contains 40 mmol/L Tris"."""

    start: int
    end: int
    measure: Measure
    material: Material | None = None  # the thing whose strength is claimed
    # strength, pH, volume, fold; dilution (a ratio), share (of a whole), part ("5 mL of it"),
    # series ("the flasks hold 1, 2 and 5 mg/L"), diluted ("1 mM at 1X"), per litre ("15 g agar
    # per litre (1.5 %)"), titre (a burette reading), worked (a figure of an arithmetic), value
    # (of a symbol)
    kind: str = "strength"


@dataclass(frozen=True, slots=True)
class Assigned(Claim):
    """The value of a symbol: "m = 0.2513 g", "c(NaOH) = 0.1 mol/L", "factor f = 1.004".

    A claim that no preparation makes true; ``kind`` is "value", ``material`` what stands in the
    brackets of the symbol.
    """

    symbol: str = ""


@dataclass(frozen=True, slots=True)
class Equivalent:
    """Each mL of a titrant corresponds to a mass of the substance titrated."""

    start: int
    end: int
    titrant: Material
    volume: Measure | None  # None: "each mL"
    mass: Dose


@dataclass(frozen=True, slots=True)
class Mixture:
    """Parts of named materials: "buffer : acetonitrile 70 : 30 v/v"."""

    start: int
    end: int
    ratio: Measure
    materials: tuple[Material, ...]


@dataclass(frozen=True, slots=True)
class Loose:
    """A quantity that no phrase took up."""

    start: int
    end: int
    measure: Measure


@dataclass(frozen=True, slots=True)
class Ware:
    """A vessel or device with its size: "1000 mL volumetric flask"."""

    start: int
    end: int
    measure: Measure
    words: str
    role: str | None = None


@dataclass(frozen=True, slots=True)
class Command:
    """A command word: ADD, WEIGH, DISSOLVE, MAKE_UP, ADJUST, DILUTE, MIX, TITRATE, COOL, STORE ..."""

    start: int
    end: int
    kind: str


Phrase = Material | Dose | ToVolume | SetPH | Claim | Equivalent | Mixture | Loose | Ware | Command


@dataclass(frozen=True, slots=True)
class Sentence:
    """One sentence, heading, list line or table cell, read."""

    text: Text
    phrases: tuple[Phrase, ...]
    measures: tuple[Measure, ...]  # every quantity found in it, noise included
    kinds: frozenset[str]  # terminals that occurred: command and role words, for quick tests
    block: int = 0  # index of the block in the document
    strict: bool = False
    leads: bool = False  # the title of the sentences behind it: "1 mol/L KCl" before "(7.5 g ...)"
