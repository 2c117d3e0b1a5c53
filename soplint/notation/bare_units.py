"""The unit of bare numbers under a heading that names none.

"Component | Final | 50 mL" with bare numbers below: microlitres, millilitres, grams?  The table itself
often says so: a total row, a sum that equals the volume of the heading, or rows in which stock and
final strength (or final strength and molar mass) settle the amount.  Where nothing does, the unit
stays unknown.
"""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Sequence

from soplint.intake.model import Text
from soplint.notation.cell_facts import facts
from soplint.notation.cells import Cell, take
from soplint.notation.columns import Column
from soplint.notation.headings import STRENGTHS, unit_sample
from soplint.notation.layout import Layout
from soplint.notation.read import Reading
from soplint.notation.row_names import is_complement, is_total
from soplint.quantities import find_measures
from soplint.quantities.model import Measure

_UNITS = ("µL", "mL", "L", "mg", "g")
_CLOSE = 0.03  # rounding of pipetted amounts; two units are a factor of 1000 apart
_ROWS = 200  # rows that are asked; a recipe has fewer

_SAID = re.compile(
    r"\b(?:volumes?|amounts?|mass(?:es)?|weights?|quantit(?:y|ies)|all|values?|numbers?|объ[её]мы?)\b"
    r"[\w\s,]{0,30}?\b(?:in|в)\s+(?P<unit>[^\W\d_]{1,12})",
    re.IGNORECASE,
)
_BRACKET = re.compile(r"\((?P<unit>[^\W\d_]{1,2})\)\s*:?$")


def said_unit(texts: Sequence[Text], reading: Reading) -> Measure | None:
    """The unit that a caption or lead-in names: "all volumes in µL".

    >>> from soplint.quantities import number_style
    >>> from soplint.substances import NameIndex
    >>> said_unit([Text("Volumes in µL", 1, 1)], Reading(number_style(()), NameIndex())).unit
    'µL'
    """
    for text in texts:
        found = _SAID.search(text.chars) or _BRACKET.search(text.chars)
        sample = unit_sample(found.group("unit"), reading.style) if found else None
        if sample is not None and sample.dimension in ("volume", "mass"):
            return sample
    return None


def bare_units(
    found: Layout, rows: Sequence[Sequence[Cell]], reading: Reading, context: Sequence[Text]
) -> dict[int, Measure]:
    """Units of the amount columns whose headings name none, by column."""
    open_columns = [
        column
        for group in found.amounts
        for column in group
        if column.heading.unit is None and column.stats.numbers and column.index not in found.units
    ]
    if not open_columns or found.name is None:
        return {}
    said = said_unit(context, reading)
    if said is not None:
        return {column.index: said for column in open_columns}
    alone = _volume_of(context, reading) if len(found.amounts) == 1 else None
    units = {name: unit_sample(name, reading.style) for name in _UNITS}
    settled: dict[int, str] = {}
    for column in open_columns:
        name = _settle(found, column, rows[:_ROWS], alone, reading)
        if name:
            settled[column.index] = name
    agreed = set(settled.values())
    if len(agreed) == 1:
        # A column that does not close is a mistake in the column, not another unit.
        settled = {column.index: next(iter(agreed)) for column in open_columns}
    return {index: sample for index, name in settled.items() if (sample := units[name])}


def _volume_of(context: Sequence[Text], reading: Reading) -> float | None:
    """The only volume that caption and lead-in name, in L."""
    volumes = {
        m.base
        for text in context
        for m in find_measures(text.chars[:400], reading.style)
        if m.dimension == "volume"
    }
    return next(iter(volumes)) if len(volumes) == 1 else None


def _settle(
    found: Layout,
    column: Column,
    rows: Sequence[Sequence[Cell]],
    alone: float | None,
    reading: Reading,
) -> str | None:
    """The unit in which the column closes, or None."""
    volume = column.heading.volume.base if column.heading.volume else alone
    by_sum = _by_sum(found, column, rows, volume, reading)
    if by_sum:
        return by_sum
    if volume is None:
        return None
    votes = Counter(v for row in rows for v in _votes(found, column, row, volume))
    if not votes:
        return None
    best, count = votes.most_common(1)[0]
    return best if 2 * count > sum(votes.values()) else None


def _by_sum(
    found: Layout,
    column: Column,
    rows: Sequence[Sequence[Cell]],
    volume: float | None,
    reading: Reading,
) -> str | None:
    """The unit in which the numbers, or their total row, come to the volume of the preparation."""
    assert found.name is not None
    total, explicit, numbers, open_ended = None, 0.0, 0.0, False
    for row in rows:
        cell, name = row[column.index], row[found.name.index]
        if is_total(name):
            if cell.shape == "number":
                total = cell.measures[0].nominal
            elif cell.shape == "quantity" and cell.measures[0].dimension == "volume":
                volume = cell.measures[0].base
        elif is_complement(name) or (cell.shape in ("words", "phrase") and _brought(cell, reading)):
            open_ended = True
            if cell.measures and cell.measures[-1].dimension == "volume":
                volume = volume or cell.measures[-1].base
        elif cell.shape == "number":
            numbers += cell.measures[0].nominal
        elif cell.shape == "quantity" and cell.measures[0].dimension == "volume":
            explicit += cell.measures[0].base
    if volume is None or volume <= 0:
        return None
    tests = ([total] if total is not None else []) + ([] if open_ended else [numbers])
    for unit, factor in (("µL", 1e-6), ("mL", 1e-3), ("L", 1.0)):
        for number in tests:
            rest = explicit if number is numbers else 0.0
            if number > 0 and abs(number * factor + rest - volume) <= _CLOSE * volume:
                return unit
    return None


def _brought(cell: Cell, reading: Reading) -> bool:
    return take(cell, None, reading).to_volume is not None


def _votes(found: Layout, column: Column, row: Sequence[Cell], volume: float) -> list[str]:
    """The unit in which this row's number gives the final strength, if any does."""
    cell = row[column.index]
    if cell.shape != "number" or found.name is None:
        return []
    number = cell.measures[0].nominal
    final = _strength(found.finals or found.unsure, row)
    stock = _strength(found.stocks, row) or _named_strength(row[found.name.index])
    if final is None or number <= 0:
        return []
    if stock is not None and stock.dimension == final.dimension and stock.base > 0:
        wanted = volume * final.base / stock.base
        return _closing(number, wanted, (("µL", 1e-6), ("mL", 1e-3), ("L", 1.0)))
    for mass in found.by_role("MOLARMASS"):
        molar = facts(row[mass.index], "MOLARMASS", mass.heading.unit).molar_mass
        if molar is not None and final.dimension == "molarity":
            return _closing(number, volume * final.base * molar.base, (("mg", 1e-3), ("g", 1.0)))
    return []


def _closing(number: float, wanted: float, units: Sequence[tuple[str, float]]) -> list[str]:
    close = [name for name, factor in units if abs(number * factor - wanted) <= _CLOSE * wanted]
    return close[:1]


def _strength(columns: Sequence[Column], row: Sequence[Cell]) -> Measure | None:
    for column in columns:
        strengths = facts(row[column.index], column.role, column.heading.unit).strengths
        if strengths:
            return strengths[0]
    return None


def _named_strength(name: Cell) -> Measure | None:
    return next((m for m in name.measures if m.dimension in STRENGTHS), None)
