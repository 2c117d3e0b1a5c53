"""Cells of a recipe table: what a cell says that holds an amount, a strength or a fact."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace

from soplint.intake.model import Text
from soplint.notation.headings import STRENGTHS, TAKEN, in_unit
from soplint.notation.phrases import (
    Command,
    Dose,
    Loose,
    Material,
    Phrase,
    SetPH,
    ToVolume,
)
from soplint.notation.read import Reading, read_sentence
from soplint.notation.shift import measure_at, phrase_at
from soplint.notation.terminals import BY_DIMENSION
from soplint.quantities import NumberStyle, find_measures
from soplint.quantities.model import Measure

_BLANK = re.compile(
    r"[\W_]*(?:n\s*/\s*a|n\.\s?a\.?|na|none|nil|not applicable|as (?:needed|required)|nd)?[\W_]*",
    re.IGNORECASE,
)
_APPROXIMATE = re.compile(r"(?:about|approx(?:imately)?|ca|circa|around|ok)?", re.IGNORECASE)
# A longer cell, or one with more quantities, is prose: they are kept, nothing else is read in it.
LONGEST_CELL = 300
MOST_MEASURES = 12
_AMOUNTS = TAKEN | {"volumes"}


@dataclass(frozen=True, slots=True)
class Cell:
    """One cell; ``start`` is its offset in its row."""

    text: Text
    start: int
    shape: str  # blank, number (bare), quantity, phrase (quantities and words), words, long
    measures: tuple[Measure, ...] = ()  # counted in the cell
    row_measures: tuple[Measure, ...] = ()  # the same, counted in the row


@dataclass(frozen=True, slots=True)
class Taken:
    """What an amount cell says; all offsets count in the row."""

    dose: Dose | None = None
    to_volume: ToVolume | None = None
    others: tuple[Phrase, ...] = ()
    measures: tuple[Measure, ...] = ()
    kinds: frozenset[str] = frozenset()


def read_cell(text: Text, start: int, style: NumberStyle) -> Cell:
    """The shape of a cell and its quantities."""
    chars = text.chars
    if (
        len(chars) <= LONGEST_CELL
        and _BLANK.fullmatch(chars)
        and not any(char.isdigit() for char in chars)
    ):
        return Cell(text, start, "blank")
    measures = tuple(find_measures(chars, style))
    long = len(chars) > LONGEST_CELL or len(measures) > MOST_MEASURES
    shape = "long" if long else _shape(chars, measures)
    return Cell(text, start, shape, measures, tuple(measure_at(m, start) for m in measures))


def _shape(chars: str, measures: tuple[Measure, ...]) -> str:
    if not measures:
        return "words"
    if len(measures) == 1:
        only = measures[0]
        outside = (chars[: only.start] + chars[only.end :]).strip(" \t~≈±*†‡.:;,")
        if _APPROXIMATE.fullmatch(outside):
            return "number" if only.dimension == "number" else "quantity"
    return "phrase"


# --- amounts -------------------------------------------------------------------------------------


def take(cell: Cell, unit: Measure | None, reading: Reading) -> Taken:
    """What a cell of an amount column says; ``unit`` is that of bare numbers in it."""
    if cell.shape == "blank":
        return Taken()
    if cell.shape == "long":
        return Taken(measures=cell.row_measures)
    if cell.shape in ("number", "quantity"):
        return _plain(cell, unit)
    brought = _brought_to(cell, unit)
    if brought is not None:
        return brought
    if cell.shape == "words":
        return _words(cell)
    return _phrase(cell, unit, reading)


def _plain(cell: Cell, unit: Measure | None) -> Taken:
    measure = cell.row_measures[0]
    if measure.dimension == "number" and unit is not None:
        measure = in_unit(measure, unit)
    kinds = frozenset({BY_DIMENSION.get(measure.dimension, "OTHER")})
    if measure.dimension in _AMOUNTS:
        return Taken(Dose(measure.start, measure.end, measure), measures=(measure,), kinds=kinds)
    return Taken(
        others=(Loose(measure.start, measure.end, measure),), measures=(measure,), kinds=kinds
    )


# "to 100 mL", "up to 1 L", "ad 2 L", "q.s. to 500 mL", "bring to", "fill up".
TO_WORDS = re.compile(
    r"\s*(?:(?:bring|fill|make|top|adjust|complete|dilute|auffüllen|довести)\s+)?(?:it\s+)?"
    r"(?:(?:up|off)\s+)?(?:to|ad|auf|до|q\.?\s?s\.?(?:\s?(?:to|ad))?|qsp|fill(?:ed)?(?:\s+up)?"
    r"|make\s+up|top\s+up|bring\s+up)(?=[\s:.\d~(]|$)\s*(?:(?:a|the)\s+)?(?:final\s+|total\s+)?"
    r"(?:vol(?:ume)?\b|mark\b|line\b)?\s*(?:of\s+)?[:.\s(~]*",
    re.IGNORECASE,
)
_REST = re.compile(
    r"\W*(?:balance|remainder|(?:the\s+)?rest|fill(?:\s+up)?|q\.?\s?s\.?|to\s+fill|остальное|rest)\W*",
    re.IGNORECASE,
)
_AFTER_TO = re.compile(
    r"[\s).,;]*(?:\(?\s*(?:final|total|in total|end)?\s*(?:vol(?:ume)?)?\s*\)?)?[\s).]*",
    re.IGNORECASE,
)


def _brought_to(cell: Cell, unit: Measure | None) -> Taken | None:
    """A cell that brings the mixture to a volume, or None."""
    chars = cell.text.chars
    if cell.shape == "words" and _REST.fullmatch(chars):
        return _to(cell, None)
    found = TO_WORDS.match(chars)
    if found is None or not found.group().strip(" :.(~"):
        return None
    if found.end() == len(chars):
        return _to(cell, None)
    if len(cell.measures) != 1:
        return None
    measure = cell.measures[0]
    if measure.start > found.end() or not _AFTER_TO.fullmatch(chars, measure.end):
        return None
    if measure.dimension == "number" and unit is not None:
        measure = in_unit(measure, unit)
    if measure.dimension == "fraction" and measure.nominal == 100:
        return _to(cell, None, measure)
    if measure.dimension == "volume":
        return _to(cell, measure)
    return None


def _to(cell: Cell, volume: Measure | None, other: Measure | None = None) -> Taken:
    written = volume or other
    moved = measure_at(written, cell.start) if written else None
    start, end = cell.start, cell.start + len(cell.text.chars)
    volume = moved if volume else None
    kinds = frozenset({"TO", "VOLUME"} if volume else {"TO"})
    measures = (moved,) if moved else ()
    return Taken(None, ToVolume(start, end, volume, command="MAKE_UP"), (), measures, kinds)


_FOR_PH = re.compile(
    r"\W*(?:to|for|as needed (?:to|for))?\s*(?:adjust(?:ing|ment)?|set(?:ting)?|correct(?:ing)?|bring)?"
    r"\s*(?:the\s+)?ph\b\s*(?:adjustment|adjusted|adj\.?)?\W*",
    re.IGNORECASE,
)


def _words(cell: Cell) -> Taken:
    """An amount cell without a quantity: "to adjust pH", or nothing that is read."""
    if not _FOR_PH.fullmatch(cell.text.chars):
        return Taken()
    end = cell.start + len(cell.text.chars)
    return Taken(others=(SetPH(cell.start, end, None),), kinds=frozenset({"ADJUST", "PHWORD"}))


def _phrase(cell: Cell, unit: Measure | None, reading: Reading) -> Taken:
    """A cell that is a phrase: "5 mL of 1 M stock", "2.4 g (20 mM)", "to pH 4.0"."""
    remarked = _remarked(cell, unit)
    if remarked is not None:
        return remarked
    sentence = read_sentence(cell.text, reading)
    moved = tuple(phrase_at(phrase, cell.start) for phrase in sentence.phrases)
    measures = tuple(measure_at(m, cell.start) for m in sentence.measures)
    moved = _with_ph(cell, moved)
    doses = [p for p in moved if isinstance(p, Dose)]
    to_volume = next((p for p in moved if isinstance(p, ToVolume)), None)
    if to_volume is None and len(doses) == 1 and doses[0].role == "to":
        poured = doses.pop()
        to_volume = ToVolume(poured.start, poured.end, poured.amount, poured.material, "MAKE_UP")
    dose = doses[0] if len(doses) == 1 and to_volume is None else None
    rest = tuple(p for p in moved if _kept(p, dose, to_volume))
    return Taken(dose, to_volume, rest, measures, sentence.kinds)


_TO_PH = re.compile(r"\s*(?:adjust(?:ed)?\s+)?(?:to|until|till|for|at|bis|auf|до)\b", re.IGNORECASE)


def _with_ph(cell: Cell, phrases: tuple[Phrase, ...]) -> tuple[Phrase, ...]:
    """ "to pH 6.8, ~90 µL of 8 N KOH": the pH is an instruction, the amount after it an estimate."""
    first = phrases[0] if phrases else None
    if not isinstance(first, Material) or first.words or first.ph is None:
        return phrases
    if first.strengths or not _TO_PH.match(cell.text.chars):
        return phrases
    doses = tuple(p for p in phrases if isinstance(p, Dose))
    reagents = tuple(d.material for d in doses if d.material is not None)
    told = SetPH(first.start, first.end, first.ph, first.temperature, reagents, doses)
    return (told, *(p for p in phrases[1:] if not isinstance(p, Dose)))


def _kept(phrase: Phrase, dose: Dose | None, to_volume: ToVolume | None) -> bool:
    if isinstance(phrase, (Command, ToVolume)) or phrase is dose:
        return False
    return not (isinstance(phrase, Dose) and to_volume is not None and phrase.role == "to")


_REMARK_WORDS = re.compile(
    r"[\W_]*(?:(final|end)(?:\s+conc(?:entration)?\.?)?[\W_]*)?", re.IGNORECASE
)


def _remarked(cell: Cell, unit: Measure | None) -> Taken | None:
    """ "2.4 g (20 mM)": an amount and, in brackets, what it comes to; None for anything else.

    A bare number that leads the cell is in the unit of the column: "0.61 (5 mM)".
    """
    if not cell.measures:
        return None
    chars, lead = cell.text.chars, cell.row_measures[0]
    if lead.dimension == "number" and unit is not None:
        lead = in_unit(lead, unit)
    first = cell.measures[0]
    if lead.dimension not in _AMOUNTS or chars[: first.start].strip(" ~≈"):
        return None
    behind = chars[first.end :]
    for measure in reversed(cell.measures[1:]):
        behind = chars[first.end : measure.start] + behind[measure.end - first.end :]
    said = _REMARK_WORDS.fullmatch(behind)
    if said is None or not chars[first.end :].lstrip().startswith(("(", "[", "=")):
        return None
    others = cell.row_measures[1:]
    strengths = tuple(m for m in others if m.dimension in STRENGTHS)
    same = tuple(m for m in others if m.dimension in _AMOUNTS)
    start, end = lead.start, cell.start + len(chars)
    material = Material(start, end, "") if strengths else None
    if material is not None and said.group(1):
        material = replace(material, finals=strengths)
    elif material is not None:
        material = replace(material, bracket=strengths)
    kinds = frozenset(BY_DIMENSION.get(m.dimension, "OTHER") for m in (lead, *others))
    return Taken(Dose(start, end, lead, material, same), None, (), (lead, *others), kinds)
