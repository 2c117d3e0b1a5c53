"""Rows whose cells are sentences: "Solution | Preparation", "Step | Action"."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from soplint.intake import sentences
from soplint.intake.model import Text
from soplint.notation.cells import Cell
from soplint.notation.joined import sentence_of
from soplint.notation.layout import Layout
from soplint.notation.phrases import Dose, Material, Phrase
from soplint.notation.read import Reading, read_sentence
from soplint.notation.rows import Row
from soplint.notation.shift import measure_at, phrase_at
from soplint.quantities.model import Measure


@dataclass(frozen=True, slots=True)
class ProseBuilder:
    """Reads the sentences in the cells of a row; the row's material is what its label names."""

    found: Layout
    reading: Reading
    block: int
    strict: bool

    def row(self, text: Text, cells: Sequence[Cell]) -> Row:
        """The row whose cells are ``cells``."""
        phrases: list[Phrase] = []
        measures: list[Measure] = []
        kinds: set[str] = set()
        prose = {group[0].index for group in self.found.amounts}
        for index, cell in enumerate(cells):
            if index not in prose:
                measures += [m for m in cell.row_measures if m.dimension != "number"]
                continue
            at = 0
            for piece in sentences(cell.text):
                at = max(at, cell.text.chars.find(piece.chars, at))
                read = read_sentence(piece, self.reading, always=True)
                phrases += [phrase_at(phrase, cell.start + at) for phrase in read.phrases]
                measures += [measure_at(m, cell.start + at) for m in read.measures]
                kinds |= read.kinds
                at += len(piece.chars)
        sentence = sentence_of(
            text, tuple(phrases), tuple(measures), frozenset(kinds), self.block, self.strict
        )
        return Row(text, "note", self._label(cells), (), (), sentence)

    def _label(self, cells: Sequence[Cell]) -> Material | None:
        column = self.found.label
        if column is None or cells[column.index].shape not in ("words", "phrase"):
            return None
        cell = cells[column.index]
        for phrase in read_sentence(cell.text, self.reading, always=True).phrases:
            named = phrase.material if isinstance(phrase, Dose) else phrase
            if isinstance(named, Material) and named.words and (named.strengths or named.ph):
                shifted = phrase_at(named, cell.start)
                assert isinstance(shifted, Material)
                return shifted  # "Ammonia 2 mol/L": what the row makes, with its strength
        end = cell.start + len(cell.text.chars)
        return Material(cell.start, end, cell.text.chars.strip(), solution=True)
