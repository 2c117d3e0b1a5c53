"""The roles of a table's columns, from their heading words and from what stands in their cells."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from statistics import median

from soplint.intake.model import Text
from soplint.notation.cells import TO_WORDS, Cell
from soplint.notation.headings import STRENGTHS, TAKEN, Heading, unit_sample
from soplint.notation.read import Reading

# Rows that are looked at to learn what a column holds.
SAMPLE = 60
# Below this, a bare number in a column headed "M" is a molarity, above it a molar mass in g/mol:
# the lightest reagent of a bench is water (18), the strongest solution sulfuric acid (18 mol/L).
_LIGHTEST = 18.5
_FACTS = ("MOLARMASS", "DENSITY", "ASSAY", "FORMULA", "PH")


@dataclass(frozen=True, slots=True)
class Stats:
    """How many cells of a column hold what."""

    filled: int = 0
    numbers: int = 0
    taken: int = 0  # an amount, or a phrase that begins with one
    brought: int = 0  # "to 100 mL"
    strengths: int = 0
    worded: int = 0  # words, no quantity first
    named: int = 0  # a substance of the catalogue or of the document
    units: int = 0  # only a unit
    phrases: int = 0
    middle: float = 0.0  # median of the bare numbers

    def mostly(self, count: int) -> bool:
        """Whether ``count`` is at least half of the filled cells."""
        return self.filled > 0 and 2 * count >= self.filled


@dataclass(frozen=True, slots=True)
class Column:
    """A column with its role: a role of ``headings.txt``, or WORDS, NUMBERS, EMPTY."""

    index: int
    heading: Heading
    stats: Stats
    role: str


def column_stats(cells: Sequence[Cell], reading: Reading) -> Stats:
    """Count what the first cells of a column hold."""
    filled = [cell for cell in cells[:SAMPLE] if cell.shape not in ("blank", "long")]
    prose = sum(cell.shape == "long" for cell in cells[:SAMPLE])
    numbers = [c.measures[0].nominal for c in filled if c.shape == "number"]
    taken = strengths = brought = named = units = 0
    worded = phrases = prose
    for cell in filled:
        chars = cell.text.chars
        first = cell.measures[0] if cell.measures else None
        leads = first is not None and not chars[: first.start].strip(" ~≈<>(")
        if cell.shape in ("phrase", "words") and TO_WORDS.match(chars):
            brought += bool(TO_WORDS.match(chars).group().strip())  # type: ignore[union-attr]
        elif leads and first is not None and first.dimension in TAKEN | {"volumes"}:
            taken += 1
        elif leads and first is not None and first.dimension in STRENGTHS and cell.shape != "words":
            strengths += 1
        if cell.shape == "words" and unit_sample(chars, reading.style) is not None:
            units += 1
        elif cell.shape in ("words", "phrase"):
            phrases += cell.shape == "phrase"
            worded += any(char.isalpha() for char in chars)
            named += bool(len(chars) < 200 and reading.names.find(chars))
    return Stats(
        len(filled) + prose,
        len(numbers),
        taken,
        brought,
        strengths,
        worded,
        named,
        units,
        phrases,
        median(numbers) if numbers else 0.0,
    )


def own_role(heading: Heading, stats: Stats) -> str:
    """The role that a column has by itself, whatever its neighbours are."""
    role, unit = heading.role, heading.unit
    if role in ("OTHER", "IGNORE", "UNIT", *_FACTS):
        return _fact(role, heading, stats)
    if role == "NAME":
        holds = stats.taken + stats.brought
        if unit is not None and unit.dimension in TAKEN and stats.mostly(stats.numbers + holds):
            return "AMOUNT"
        return "NAME"
    if unit is not None:
        by_unit = _by_unit(heading, stats)
        if by_unit:
            return by_unit
    if role in ("AMOUNT", "MAKEUP") and stats.mostly(stats.strengths):
        return "CONC"
    if role in ("FINAL", "CONC", "STOCK") and stats.mostly(stats.taken + stats.brought):
        wordy = role == "STOCK" and stats.mostly(stats.named)
        return "STOCK" if wordy else "MAKEUP" if _is_final_volume(heading) else "AMOUNT"
    if role in ("MAKEUP", "AMOUNT", "FINAL", "STOCK", "CONC"):
        return role
    if heading.volume is not None and not stats.mostly(stats.strengths):
        return "AMOUNT" if not stats.mostly(stats.named - stats.taken) else "WORDS"
    if heading.fold is not None and stats.filled:
        if stats.mostly(stats.strengths):
            return "FINAL"
        return "AMOUNT" if not stats.mostly(stats.named - stats.taken) else "WORDS"
    if role == "LABEL":
        return "LABEL"
    return _by_content(stats)


def _fact(role: str, heading: Heading, stats: Stats) -> str:
    unit = heading.unit
    if role == "UNIT" and not stats.mostly(stats.units):
        return _by_content(stats)
    if role == "ASSAY" and stats.mostly(stats.worded) and not stats.strengths:
        return "IGNORE"
    if role == "PH" and stats.mostly(stats.worded) and not stats.numbers:
        return "IGNORE"
    if role == "DENSITY" and unit is not None and unit.dimension in ("mass", "volume"):
        return "AMOUNT"
    return role


def _is_final_volume(heading: Heading) -> bool:
    return "vol" in heading.text.chars.lower()


def _by_unit(heading: Heading, stats: Stats) -> str | None:
    """Role by the unit in the heading, None where the words decide."""
    unit, role = heading.unit, heading.role
    assert unit is not None
    if unit.dimension == "molar-mass":
        return "MOLARMASS"
    if unit.dimension == "density":
        return "DENSITY" if role not in ("CONC", "FINAL", "STOCK") else role
    if unit.dimension == "molarity" and heading.text.chars.strip(" $*") == "M":
        return "MOLARMASS" if stats.numbers and stats.middle > _LIGHTEST else "CONC"
    if unit.dimension in TAKEN:
        wordy = stats.mostly(stats.worded) and not stats.mostly(stats.taken + stats.numbers)
        if wordy and not stats.mostly(stats.brought + stats.phrases):
            return None
        return "MAKEUP" if role == "MAKEUP" else "AMOUNT"
    if unit.dimension in STRENGTHS:
        if unit.dimension == "fold" and role is None:
            return None
        return role if role in ("FINAL", "STOCK") else "CONC"
    return "OTHER"


def _by_content(stats: Stats) -> str:
    if not stats.filled:
        return "EMPTY"
    if stats.mostly(stats.units) and stats.units >= 0.8 * stats.filled:
        return "UNIT"
    if stats.mostly(stats.taken + stats.brought):
        return "AMOUNT"
    if stats.mostly(stats.strengths) and not stats.mostly(stats.named):
        return "CONC"
    if stats.mostly(stats.numbers):
        return "NUMBERS"
    return "WORDS" if stats.mostly(stats.worded) else "IGNORE"


def columns(
    headings: Sequence[Heading], cells: Sequence[Sequence[Cell]], reading: Reading
) -> list[Column]:
    """All columns with their own roles; ``cells`` is a list of rows."""
    sample = cells[:SAMPLE]
    found = []
    for index, heading in enumerate(headings):
        stats = column_stats([row[index] for row in sample], reading)
        found.append(Column(index, heading, stats, own_role(heading, stats)))
    return _of_standards(found)


def _of_standards(found: list[Column]) -> list[Column]:
    """The columns of "Standard | Stock | Flask | Result" and "Step | 60 % sucrose | buffer".

    A flask of a size is a volume made up to; what comes out of the row is a strength, whether the
    table calls it a result or labels its rows with it.
    """
    taken = any(c.role in ("AMOUNT", "STOCK", "MAKEUP") or c.heading.strengths for c in found[1:])
    result = []
    for column in found:
        role, stats, words = column.role, column.stats, column.heading.words.lower()
        if words in ("flask", "vial", "tube") and column.index and stats.filled == stats.taken > 0:
            role = "MAKEUP"
        elif taken and words in _RESULTS and stats.filled == stats.strengths > 0:
            role = "FINAL"
        result.append(replace(column, role=role))
    return result


_RESULTS = ("result", "results", "gives", "step", "steps", "level", "standard", "tube", "layer")


def empty_heading() -> Heading:
    """The heading of a column without one."""
    return Heading(Text("", 1, 1))
