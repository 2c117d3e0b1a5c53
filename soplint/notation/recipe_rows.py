"""Rows of a recipe table: name, strengths and the amounts of every variant."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from soplint.intake.model import Text
from soplint.notation.cell_facts import Facts, facts
from soplint.notation.cells import Cell, Taken, take
from soplint.notation.columns import Column
from soplint.notation.headings import unit_sample
from soplint.notation.joined import sentence_of
from soplint.notation.layout import Layout
from soplint.notation.phrases import Claim, Dose, Material, Phrase, SetPH
from soplint.notation.read import Reading
from soplint.notation.row_names import Named, read_name
from soplint.notation.row_parts import (
    Parts,
    by_formula,
    by_volume,
    complement,
    dose_of,
    only_named,
    repeated,
    together,
    totals,
    with_constants,
    with_reagent,
)
from soplint.notation.rows import Row
from soplint.notation.shift import material_at
from soplint.quantities.model import Measure

_SKIPPED = frozenset({"IGNORE", "OTHER", "LABEL", "UNIT", "EMPTY", "FORMULA", "WORDS"})


@dataclass(frozen=True, slots=True)
class Builder:
    """Builds the rows of one table."""

    found: Layout
    reading: Reading
    guessed: dict[int, Measure]  # units of columns whose heading names none
    block: int
    strict: bool

    def row(self, text: Text, cells: Sequence[Cell]) -> Row:
        """The row whose cells are ``cells``."""
        assert self.found.name is not None
        name = read_name(cells[self.found.name.index], self.reading)
        told = self._facts(cells)
        taken = [self._taken(group, cells) for group in self.found.amounts]
        if not taken and self.found.kind == "recipe":
            taken = [Taken()]  # the amounts stand before the names: "5.84 g NaCl"
        bracket = any(by_volume(t) for t in taken)
        material = self._material(name.material, cells, told, bracket)
        if name.kind == "component" and only_named(name, material, taken, told):
            return self._made(text, "note", material, Parts.none(len(taken)), name, taken, told)
        parts = self._parts(name, material, taken, cells, told)
        return self._made(text, parts.kind, material or parts.material, parts, name, taken, told)

    # --- cells -------------------------------------------------------------------------------------

    def _facts(self, cells: Sequence[Cell]) -> list[tuple[Column, Facts]]:
        """What the strength and fact columns say."""
        found = []
        for column in self.found.columns:
            if column.role in ("AMOUNT", "NAME", "MAKEUP", *_SKIPPED):
                continue
            cell = cells[column.index]
            if cell.shape == "blank":
                continue
            unit = self._unit_beside(column, cells) or column.heading.unit
            found.append((column, facts(cell, column.role, unit)))
        return found

    def _unit_beside(self, column: Column, cells: Sequence[Cell]) -> Measure | None:
        """The unit in the unit column that belongs to ``column``."""
        unit = self.found.units.get(column.index)
        if unit is None:
            return None
        return unit_sample(cells[unit.index].text.chars.strip(), self.reading.style)

    def _taken(self, group: Sequence[Column], cells: Sequence[Cell]) -> Taken:
        """What the amount cells of one variant say, put together."""
        result = Taken()
        for column in group:
            unit = (
                self._unit_beside(column, cells)
                or column.heading.unit
                or self.guessed.get(column.index)
            )
            result = together(result, take(cells[column.index], unit, self.reading))
        return result

    def _material(
        self,
        material: Material | None,
        cells: Sequence[Cell],
        told: Sequence[tuple[Column, Facts]],
        bracket: bool,
    ) -> Material | None:
        """The named material with what the other columns say about it."""
        formula = self._formula(cells)
        if material is None:
            if formula is None:
                return None
            material = formula
        elif formula is not None:
            material = by_formula(material, formula)
            if not self.found.amounts:
                material = replace(material, words=f"{material.words} ({formula.words})")
        own = {id(c) for c in self.found.stocks}
        final = {id(c) for c in self.found.finals[: None if self._paired() else 1]}
        strengths, finals, unsure = material.strengths, material.finals, material.bracket
        named = bool(material.strengths)
        for column, fact in told:
            if id(column) in own:
                strengths += fact.strengths
            elif id(column) in final:
                finals += fact.strengths
            elif column.role == "ASSAY":
                strengths += fact.strengths
            elif any(column is c for c in self.found.unsure):
                # An unnamed kind of strength beside a weighed solid or a stock that has its own
                # is the final one; beside a volume it may be either.
                if not self.found.amounts:
                    strengths += fact.strengths if len(self.found.unsure) == 1 else ()
                elif bracket and not named:
                    unsure += fact.strengths
                else:
                    finals += fact.strengths
            material = with_constants(material, fact)
        return replace(material, strengths=strengths, finals=finals, bracket=unsure)

    def _paired(self) -> bool:
        """Whether each variant has a column of final strengths of its own."""
        return 1 < len(self.found.finals) == len(self.found.amounts)

    def _formula(self, cells: Sequence[Cell]) -> Material | None:
        for column in self.found.by_role("FORMULA"):
            cell = cells[column.index]
            matches = self.reading.names.find(cell.text.chars) if cell.shape != "blank" else []
            if cell.shape != "blank":
                end = cell.start + len(cell.text.chars)
                match = matches[0] if matches else None
                material = Material(0, end - cell.start, cell.text.chars.strip(), match)
                return material_at(material, cell.start)
        return None

    # --- the row -----------------------------------------------------------------------------------

    def _parts(
        self,
        name: Named,
        material: Material | None,
        taken: Sequence[Taken],
        cells: Sequence[Cell],
        told: Sequence[tuple[Column, Facts]],
    ) -> Parts:
        count = len(taken)
        if name.kind == "total":
            return totals(name, taken)
        if name.kind == "pH":
            return self._target_ph(taken, cells, told)
        if name.kind == "note" and (name.phrases or not any(t.dose for t in taken)):
            return Parts.none(count)
        if name.kind == "complement" or any(t.to_volume for t in taken):
            return complement(name, material, taken)
        sets = [p for t in taken for p in t.others if isinstance(p, SetPH)]
        if sets and not any(t.dose for t in taken):
            return Parts("note", (None,) * count, (None,) * count)
        finals = self._finals(told) if self._paired() else None
        doses = []
        for index, part in enumerate(taken):
            own = material
            if finals and own is not None:
                own = replace(own, finals=finals[index])
            doses.append(dose_of(part.dose, own))
        if name.dose is not None and count == 1 and not any(doses):
            doses = [dose_of(replace(name.dose, material=None), material)]
        kind = "component" if material or any(d and d.material for d in doses) else "note"
        if kind == "note":
            return Parts.none(count)
        first = next((d.material for d in doses if d and d.material), None)
        return Parts(kind, tuple(doses), (None,) * count, first)

    def _finals(self, told: Sequence[tuple[Column, Facts]]) -> list[tuple[Measure, ...]]:
        by_column = {id(column): fact.strengths for column, fact in told}
        return [by_column.get(id(column), ()) for column in self.found.finals]

    def _target_ph(
        self,
        taken: Sequence[Taken],
        cells: Sequence[Cell],
        told: Sequence[tuple[Column, Facts]],
    ) -> Parts:
        """The row "pH | 7.4": a pH for each variant."""
        sets: list[Phrase] = []
        columns = [c for group in self.found.amounts for c in group] + [c for c, _ in told]
        for column in columns:
            for measure in cells[column.index].row_measures[:1]:
                if measure.dimension not in ("number", "pH") or not 0 <= measure.nominal <= 14:
                    continue
                value = replace(measure, dimension="pH", unit="pH", factor=1.0)
                sets.append(SetPH(measure.start, measure.end, value))
        empty = (None,) * len(taken)
        return Parts("note", empty, empty, None, tuple(sets))

    def _made(
        self,
        text: Text,
        kind: str,
        material: Material | None,
        parts: Parts,
        name: Named,
        taken: Sequence[Taken],
        told: Sequence[tuple[Column, Facts]],
    ) -> Row:
        phrases: list[Phrase] = [d for d in parts.doses if d]
        phrases += [v for v in parts.to_volumes if v]
        phrases += [*name.phrases, *parts.others]
        for part in taken:
            phrases += [with_reagent(p, material) for p in part.others if not repeated(p, parts)]
            if kind == "note" and part.dose is not None:
                phrases.append(part.dose)
        if material is not None and not any(isinstance(p, (Dose, SetPH)) for p in phrases):
            if kind != "complement":
                phrases[:0] = self._compositions(material, told) or [material]
        phrases += [
            Claim(m.start, m.end, m, material, "dilution")
            for column, fact in told
            for m in fact.measures
            if column.role == "DILUTION" and m.dimension == "ratio"
        ]
        measures = [*name.measures]
        for part in taken:
            measures += part.measures
        for _, fact in told:
            measures += fact.measures
        measures += [p.ph for p in parts.others if isinstance(p, SetPH) and p.ph is not None]
        kinds = name.kinds.union(*(part.kinds for part in taken))
        sentence = sentence_of(
            text, tuple(phrases), tuple(measures), kinds, self.block, self.strict
        )
        return Row(text, kind, material, parts.doses, parts.to_volumes, sentence)

    def _compositions(
        self, material: Material, told: Sequence[tuple[Column, Facts]]
    ) -> list[Material]:
        """The material once for every solution whose composition a list gives side by side."""
        if self.found.amounts or len(self.found.unsure) < 2:
            return []
        return [
            replace(material, strengths=fact.strengths)
            for column, fact in told
            if fact.strengths and any(column is c for c in self.found.unsure)
        ]
