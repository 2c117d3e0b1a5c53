"""Tables in which every row is a preparation of its own.

"Buffer | Tris | NaCl | pH", "Level | Standard 1000 mg/L (mL) | Made up to (mL) | K (mg/L)": the
headings name what is taken, the cells say how much.  The text of such a row is its cells followed
by the headings that name a material, so that a strength printed in a heading has its place.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, replace

from soplint.intake.model import Text
from soplint.notation.cell_facts import facts
from soplint.notation.cells import Cell, take
from soplint.notation.columns import Column
from soplint.notation.headings import TAKEN, Heading
from soplint.notation.joined import join, sentence_of
from soplint.notation.layout import Layout
from soplint.notation.phrases import Claim, Dose, Material, Phrase, SetPH, ToVolume
from soplint.notation.read import Reading
from soplint.notation.recipe_rows import Builder
from soplint.notation.row_parts import volume_of_row
from soplint.notation.rows import Row
from soplint.notation.shift import match_at, material_at, measure_at
from soplint.notation.stock_above import Above, is_stock
from soplint.quantities.model import Measure

# A label that can be the name of an element or ion: "Chloride", "Nitrate-N", "Cu".
_SPECIES = re.compile(r"[A-Z][A-Za-z]*(?:[ -][A-Za-z]+){0,2}(?: ?\([IVX]+\))?")
# More headings than this are no composition; they are not repeated in the text of every row.
_MOST_HEADS = 24


@dataclass(frozen=True, slots=True)
class PreparationBuilder:
    """Builds the rows of a table whose headings name the materials."""

    found: Layout
    reading: Reading
    block: int
    strict: bool
    above: Above | None = None

    def row(self, texts: Sequence[Text], cells: Sequence[Cell]) -> Row:
        """The row of ``cells``; ``texts`` are their texts."""
        heads = [c for c in self.found.columns if _names_material(c.heading)][:_MOST_HEADS]
        told = [self.above.text] if self.above is not None and self._draws() else []
        text, starts = join([*texts, *(c.heading.text for c in heads), *told])
        start = starts[-1] if told else None
        places = {c.index: starts[len(texts) + at] for at, c in enumerate(heads)}
        phrases: list[Phrase] = []
        measures: list[Measure] = []
        kinds: set[str] = set()
        label = self._label(cells)
        for column in self.found.columns:
            cell = cells[column.index]
            if cell.shape == "blank" or column.role in ("OTHER", "IGNORE"):
                continue
            part, used = self._part(column, cell, places)
            phrases += part
            measures += used
        if start is not None:
            phrases = self._from_above(phrases, start)
        if any(isinstance(p, ToVolume) for p in phrases):
            kinds.add("FINAL")
        sentence = sentence_of(
            text, tuple(phrases), tuple(measures), frozenset(kinds), self.block, self.strict
        )
        return Row(text, "note", label, (), (), sentence)

    def _draws(self) -> bool:
        """Whether one column takes of a stock that its heading does not tell the strength of."""
        heads = [group[0].heading for group in self.found.amounts]
        return sum(is_stock(h.words) and not h.strengths for h in heads) == 1

    def _from_above(self, phrases: list[Phrase], start: int) -> list[Phrase]:
        """The phrases with the stock, and the volume, that the text above the table names."""
        assert self.above is not None
        stock = material_at(self.above.stock, start)
        stock = replace(stock, role=None)
        result: list[Phrase] = [
            replace(p, material=stock)
            if isinstance(p, Dose)
            and p.material is not None
            and is_stock(p.material.words)
            and not p.material.strengths
            else p
            for p in phrases
        ]
        volume = self.above.volume
        if volume is not None and not any(isinstance(p, ToVolume) for p in phrases):
            own = measure_at(volume, start)
            result.append(ToVolume(own.start, own.end, own, None, "MAKE_UP", said_final=True))
        return result

    def _label(self, cells: Sequence[Cell]) -> Material | None:
        """The name of the solution that the row prepares."""
        column = self.found.label
        if column is None or cells[column.index].shape not in ("words", "phrase"):
            return None
        cell = cells[column.index]
        words = cell.text.chars.strip()
        return Material(cell.start, cell.start + len(cell.text.chars), words, solution=True)

    def _part(
        self, column: Column, cell: Cell, places: dict[int, int]
    ) -> tuple[list[Phrase], tuple[Measure, ...]]:
        heading, place = column.heading, places.get(column.index)
        if any(column is group[0] for group in self.found.amounts):
            return self._amount(column, cell, place)
        if column in self.found.volumes:
            volume = volume_of_row(cell, heading.unit)
            if volume is None:
                return [], cell.row_measures
            diluent = _material(heading, place)
            diluent = diluent if diluent is not None and diluent.is_water else None
            made = ToVolume(volume.start, volume.end, volume, diluent, "MAKE_UP", said_final=True)
            return [made], (volume,)
        if column.role == "PH":
            return self._ph(column, cell)
        if column is self.found.label and column not in self.found.finals:
            return self._named_strength(column, cell, places)
        return self._strength(column, cell, places)

    def _ph(self, column: Column, cell: Cell) -> tuple[list[Phrase], tuple[Measure, ...]]:
        """The pH that the row is set to; as label of a mixture, the pH that it comes to."""
        fact = facts(cell, "PH", column.heading.unit)
        if fact.ph is None:
            return [], fact.measures
        start, end = fact.ph.start, fact.ph.end
        if column is self.found.label and self.found.amounts:
            return [Claim(start, end, fact.ph, kind="pH")], fact.measures
        return [SetPH(start, end, fact.ph)], fact.measures

    def _amount(
        self, column: Column, cell: Cell, place: int | None
    ) -> tuple[list[Phrase], tuple[Measure, ...]]:
        taken = take(cell, column.heading.unit, self.reading)
        material = self._taken_material(column, place)
        phrases: list[Phrase] = list(taken.others)
        if taken.to_volume is not None:
            to = taken.to_volume
            phrases.insert(0, replace(to, diluent=to.diluent or material))
        if taken.dose is not None:
            own = taken.dose.material
            worded = own is not None and own.words
            phrases.insert(0, taken.dose if worded else replace(taken.dose, material=material))
        return phrases, taken.measures

    def _taken_material(self, column: Column, place: int | None) -> Material | None:
        """What the heading names; "96 % (mL)" under "Ethanol" is ethanol of 96 %."""
        material = _material(column.heading, place)
        first = self.found.columns[0]
        if material is not None and not material.words and first.heading.match is not None:
            match = first.heading.match
            return replace(material, words=match.written, match=None)
        return material

    def _stocked(self, places: dict[int, int]) -> Material | None:
        """The one thing of a strength that the rows take: what comes out is a strength of it."""
        stocks = [group[0] for group in self.found.amounts if group[0].heading.strengths]
        if len(stocks) != 1:
            return None
        material = _material(stocks[0].heading, places.get(stocks[0].index))
        return replace(material, strengths=(), solution=False) if material is not None else None

    def _named_strength(
        self, column: Column, cell: Cell, places: dict[int, int]
    ) -> tuple[list[Phrase], tuple[Measure, ...]]:
        """A label that is the strength wanted: "50 %" under "Ethanol"."""
        if column.heading.match is None or cell.shape != "quantity":
            return [], tuple(m for m in cell.row_measures if m.dimension != "number")
        return self._strength(column, cell, places)

    def _strength(
        self, column: Column, cell: Cell, places: dict[int, int]
    ) -> tuple[list[Phrase], tuple[Measure, ...]]:
        fact = facts(cell, "CONC", column.heading.unit)
        material = _material(column.heading, places.get(column.index)) or self._stocked(places)
        phrases: list[Phrase] = []
        for strength in fact.strengths:
            if self.found.amounts or material is None:
                phrases.append(Claim(strength.start, strength.end, strength, material))
            else:
                own = replace(material, start=strength.start, strengths=(strength,), ph=fact.ph)
                phrases.append(own)
        return phrases, fact.measures


def _names_material(heading: Heading) -> bool:
    if len(heading.text.chars) > 80:
        return False
    worded = bool(heading.words) and heading.role in (None, "LABEL", "STOCK")
    return worded or heading.match is not None or bool(heading.strengths)


def _material(heading: Heading, place: int | None) -> Material | None:
    """The material that a heading names, counted in the text of the row."""
    if place is None:
        return None
    match = match_at(heading.match, place)
    words = heading.match.written if heading.match is not None else heading.words
    at = (match.start, match.end) if match else (place, place + len(heading.text.chars))
    strengths = tuple(measure_at(m, place) for m in heading.strengths)
    ph = measure_at(heading.ph, place) if heading.ph else None
    return Material(at[0], at[1], words, match, bool(heading.strengths), strengths, ph)


@dataclass(frozen=True, slots=True)
class OwnVolumeBuilder:
    """Rows that name a reagent, its amount and the volume of the preparation it makes."""

    inner: Builder

    def row(self, text: Text, cells: Sequence[Cell]) -> Row:
        """The row with its make-up volume as last phrase."""
        row = self._of_label(self._of_stock(self.inner.row(text, cells), cells), cells)
        for column in self.inner.found.volumes[:1]:
            cell = cells[column.index]
            unit = column.heading.unit
            if unit is not None and unit.dimension not in TAKEN:
                unit = None
            volume = volume_of_row(cell, unit)
            if volume is None:
                continue
            made = ToVolume(volume.start, volume.end, volume, None, "MAKE_UP", said_final=True)
            sentence = replace(
                row.sentence,
                phrases=(*row.sentence.phrases, made),
                measures=tuple(sorted((*row.sentence.measures, volume), key=lambda m: m.start)),
                kinds=row.sentence.kinds | {"FINAL"},
            )
            row = replace(row, sentence=sentence)
        return row

    def _of_label(self, row: Row, cells: Sequence[Cell]) -> Row:
        """ "Chloride | NaCl | 1.6485 g | 1000 mL | 1000 mg/L": the mg/L are those of the label."""
        column = self.inner.found.label
        dose = row.doses[0] if row.doses else None
        if column is None or dose is None or dose.material is None:
            return row
        cell = cells[column.index]
        told = tuple(
            m for m in dose.material.finals if m.dimension in ("mass-concentration", "ppm")
        )
        words = cell.text.chars.strip()
        if not told or cell.shape != "words" or not _SPECIES.fullmatch(words):
            return row
        match = next(iter(self.inner.reading.names.find(cell.text.chars)), None)
        if match is not None:
            match = match_at(match, cell.start)
        label = Material(cell.start, cell.start + len(cell.text.chars), words, match)
        finals = tuple(m for m in dose.material.finals if m not in told)
        salt = replace(dose, material=replace(dose.material, finals=finals))
        phrases: list[Phrase] = [salt if p == dose else p for p in row.sentence.phrases]
        phrases += [Claim(m.start, m.end, m, label) for m in told]
        sentence = replace(row.sentence, phrases=tuple(phrases))
        return replace(row, doses=(salt, *row.doses[1:]), sentence=sentence)

    def _of_stock(self, row: Row, cells: Sequence[Cell]) -> Row:
        """ "Nitric acid 2 mol/L | 65 % | 139 mL": the name says what comes out, the column what is taken."""
        stocks = {
            (m.start, m.end)
            for column in self.inner.found.stocks
            for m in facts(cells[column.index], "STOCK", column.heading.unit).strengths
        }
        dose = row.doses[0] if row.doses else None
        if dose is None or dose.material is None or row.material is None or not stocks:
            return row
        taken = tuple(m for m in dose.material.strengths if (m.start, m.end) in stocks)
        aimed = tuple(m for m in dose.material.strengths if (m.start, m.end) not in stocks)
        if not taken or not aimed:
            return row
        stock = replace(dose, material=replace(dose.material, strengths=taken))
        sentence = replace(
            row.sentence, phrases=tuple(stock if p == dose else p for p in row.sentence.phrases)
        )
        named = replace(row.material, strengths=aimed)
        return replace(row, material=named, doses=(stock, *row.doses[1:]), sentence=sentence)
