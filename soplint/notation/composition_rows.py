"""Rows that tell a composition and what it takes: "A | 20 mM Tris, 50 mM NaCl | 20 mL 1 M Tris ...".

Also "Agarose | 50 mL | 100 mL" over "0.8 % | 0.4 g | 0.8 g": the first column gives strengths of
what its heading names.  Every column of amounts makes a preparation of its own, of the volume
that stands over it.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

from soplint.intake.model import Text
from soplint.notation.cells import Cell, take
from soplint.notation.columns import Column
from soplint.notation.joined import join, sentence_of
from soplint.notation.layout import Layout
from soplint.notation.phrases import Claim, Dose, Material, Phrase, ToVolume
from soplint.notation.read import Reading, read_sentence
from soplint.notation.rows import Row
from soplint.notation.shift import match_at, measure_at, phrase_at
from soplint.quantities.model import Measure

_COMPOSITION = re.compile(r"(?:final |buffer )?(?:composition|contains|contents?)", re.IGNORECASE)


def composed(columns: Sequence[Column]) -> Layout | None:
    """The layout of such a table, None for any other."""
    told = next((c for c in columns if _tells(c)), None)
    if told is None:
        return None
    amounts = [c for c in columns if c is not told and c.heading.volume and _amounts(c, told)]
    if not amounts:
        return None
    label = columns[0] if columns[0] is not told and columns[0] not in amounts else None
    return Layout("composed", list(columns), name=told, label=label, amounts=[[c] for c in amounts])


def _tells(column: Column) -> bool:
    """Whether a column tells the composition, or strengths of what its heading names."""
    stats = column.stats
    if _COMPOSITION.fullmatch(column.heading.text.chars.strip()):
        return stats.mostly(stats.phrases + stats.strengths + stats.worded)
    named = column.index == 0 and column.heading.match is not None
    return named and 0 < stats.filled == stats.strengths


def _amounts(column: Column, told: Column) -> bool:
    stats = column.stats
    if told.heading.match is not None:
        return 0 < stats.filled == stats.taken
    return stats.mostly(stats.taken + stats.phrases)


@dataclass(frozen=True, slots=True)
class ComposedBuilder:
    """Builds one row for each preparation of the table."""

    found: Layout
    reading: Reading
    block: int
    strict: bool

    def rows(self, texts: Sequence[Text], cells: Sequence[Cell]) -> Iterator[Row]:
        """The preparations of one printed row."""
        told = self.found.name
        assert told is not None
        for group in self.found.amounts:
            column = group[0]
            heads = [c.heading.text for c in (told, column)]
            text, starts = join([*texts, *heads])
            named, over = starts[len(texts)], starts[len(texts) + 1]
            material = _named(told, named)
            if cells[column.index].shape == "blank" or cells[told.index].shape == "blank":
                continue
            phrases: list[Phrase] = list(self._claims(told, cells[told.index], material))
            phrases += self._taken(column, cells[column.index], material)
            if not any(isinstance(p, ToVolume) for p in phrases) and column.heading.volume:
                volume = measure_at(column.heading.volume, over)
                phrases.append(ToVolume(volume.start, volume.end, volume, said_final=True))
            measures = tuple(m for p in phrases for m in _measures(p))
            if material is not None:
                measures += cells[told.index].row_measures
            sentence = sentence_of(
                text, tuple(phrases), measures, frozenset({"FINAL"}), self.block, self.strict
            )
            label = self._label(cells)
            strengths = cells[told.index].row_measures
            if material is not None and strengths:
                label = replace(material, start=strengths[0].start, strengths=strengths)
                sentence = replace(sentence, phrases=(label, *sentence.phrases))
            yield Row(text, "note", label, (), (), sentence)

    def _claims(self, told: Column, cell: Cell, material: Material | None) -> Iterator[Claim]:
        if material is not None:
            return
        for phrase in read_sentence(cell.text, self.reading, always=True).phrases:
            moved = phrase_at(phrase, cell.start)
            if isinstance(moved, Claim):
                yield moved
            elif isinstance(moved, Material):
                for strength in moved.strengths:
                    yield Claim(moved.start, moved.end, strength, moved)

    def _taken(self, column: Column, cell: Cell, material: Material | None) -> list[Phrase]:
        if material is not None:
            dose = take(cell, column.heading.unit, self.reading).dose
            return [replace(dose, material=material)] if dose is not None else []
        read = read_sentence(cell.text, self.reading, always=True)
        return [phrase_at(phrase, cell.start) for phrase in read.phrases]

    def _label(self, cells: Sequence[Cell]) -> Material | None:
        if self.found.label is None:
            return None
        cell = cells[self.found.label.index]
        end = cell.start + len(cell.text.chars)
        return Material(cell.start, end, cell.text.chars.strip(), solution=True)


def _named(told: Column, place: int) -> Material | None:
    """What the heading over the strengths names, counted in the text of the row."""
    match = match_at(told.heading.match, place)
    if match is None or _COMPOSITION.fullmatch(told.heading.text.chars.strip()):
        return None
    return Material(match.start, match.end, match.written, match)


def _measures(phrase: Phrase) -> Iterator[Measure]:
    if isinstance(phrase, Claim):
        yield phrase.measure
    elif isinstance(phrase, Dose):
        yield phrase.amount
        if phrase.material is not None:
            yield from phrase.material.strengths
    elif isinstance(phrase, ToVolume) and phrase.volume is not None:
        yield phrase.volume
