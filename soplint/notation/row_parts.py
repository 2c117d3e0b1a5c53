"""What a row comes to for each variant: doses, volumes, totals."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from soplint.notation.cell_facts import Facts
from soplint.notation.cells import Cell, Taken
from soplint.notation.columns import Column
from soplint.notation.headings import TAKEN, in_unit
from soplint.notation.phrases import Dose, Loose, Material, Phrase, SetPH, ToVolume
from soplint.notation.row_names import Named
from soplint.quantities.model import Measure


@dataclass(frozen=True, slots=True)
class Parts:
    """Doses and volumes of a row, one per variant."""

    kind: str
    doses: tuple[Dose | None, ...]
    to_volumes: tuple[ToVolume | None, ...]
    material: Material | None = None
    others: tuple[Phrase, ...] = ()

    @classmethod
    def none(cls, count: int) -> Parts:
        """A row without amounts."""
        return cls("note", (None,) * count, (None,) * count)


def only_named(
    name: Named,
    material: Material | None,
    taken: Sequence[Taken],
    told: Sequence[tuple[Column, Facts]],
) -> bool:
    """Whether the row holds a name and nothing else: a heading inside the table."""
    if name.dose is not None or told or not taken:
        return False
    if material is not None and (material.strengths or material.bracket):
        return False
    return not any(t.dose or t.to_volume or t.others or t.measures or t.kinds for t in taken)


def by_volume(part: Taken) -> bool:
    """Whether the cell gives a volume taken."""
    return part.dose is not None and part.dose.amount.dimension == "volume"


def together(first: Taken, second: Taken) -> Taken:
    """Two amount columns of one preparation: masses in one, volumes in the other."""
    dose = first.dose or second.dose
    if first.dose and second.dose:
        dose = replace(first.dose, same=(*first.dose.same, second.dose.amount))
    return Taken(
        dose,
        first.to_volume or second.to_volume,
        first.others + second.others,
        first.measures + second.measures,
        first.kinds | second.kinds,
    )


def by_formula(material: Material, formula: Material) -> Material:
    """The name settled by the formula beside it, where that says more."""
    match, other = material.match, formula.match
    if other is None or (match is not None and match.form_named and not match.generic):
        return material
    if match is not None and not match.generic:
        if match.substances[0].family != other.substances[0].family:
            return material
    return replace(material, match=other)


def with_constants(material: Material, fact: Facts) -> Material:
    """``material`` with pH, molar mass and density of another column, where it has none."""
    return replace(
        material,
        ph=material.ph or fact.ph,
        molar_mass=material.molar_mass or fact.molar_mass,
        density=material.density or fact.density,
    )


def dose_of(dose: Dose | None, material: Material | None) -> Dose | None:
    """The dose of the row's material; what the amount cell says of it is kept."""
    if dose is None:
        return None
    own = dose.material
    if material is None:
        return dose
    if own is not None:
        if own.match is not None and material.match is not None:
            if own.match.substances[0].family != material.match.substances[0].family:
                return dose  # the cell names another material: "5 mL of conc. HCl" beside "Acid"
        known = material if material.match or not own.match else replace(material, match=own.match)
        material = replace(
            known,
            strengths=material.strengths + own.strengths,
            ph=material.ph or own.ph,
            bracket=material.bracket + own.bracket,
            finals=material.finals + own.finals,
            molar_mass=material.molar_mass or own.molar_mass,
            solution=material.solution or own.solution,
        )
    start, end = min(dose.start, material.start), max(dose.end, material.end)
    return replace(dose, material=material, start=start, end=end)


def totals(name: Named, taken: Sequence[Taken]) -> Parts:
    """The total row: what the mixture comes to, for each variant."""
    found: list[ToVolume | None] = []
    for part in taken:
        if part.to_volume is not None:
            found.append(replace(part.to_volume, said_final=True))
        elif part.dose is not None and part.dose.amount.dimension == "volume":
            amount = part.dose.amount
            found.append(ToVolume(amount.start, amount.end, amount, said_final=True))
        elif name.volume is not None and len(taken) == 1:
            volume = name.volume
            found.append(ToVolume(volume.start, volume.end, volume, said_final=True))
        else:
            found.append(None)
    return Parts("total", (None,) * len(taken), tuple(found))


def complement(name: Named, material: Material | None, taken: Sequence[Taken]) -> Parts:
    """The row that brings the mixture to volume; a stated amount of it stays a dose."""
    doses: list[Dose | None] = []
    brought: list[ToVolume | None] = []
    for part in taken:
        to, dose = part.to_volume, None
        if to is None and part.dose is not None and name.kind == "complement":
            amount = part.dose.amount
            if amount.dimension == "volume":
                to = ToVolume(amount.start, amount.end, amount, material, "MAKE_UP")
        elif to is None:
            dose = dose_of(part.dose, material)
        if to is None and dose is None and name.kind == "complement":
            at = name.volume or material
            start, end = (at.start, at.end) if at else (0, 0)
            volume = name.volume if len(taken) == 1 else None
            to = ToVolume(start, end, volume, material, "MAKE_UP")
        if to is not None and to.diluent is None:
            to = replace(to, diluent=material)
        doses.append(dose)
        brought.append(to)
    first = next((t.diluent for t in brought if t and t.diluent), None)
    return Parts("complement", tuple(doses), tuple(brought), first)


def with_reagent(phrase: Phrase, material: Material | None) -> Phrase:
    """ "HCl | to pH 7.4": the row's material sets the pH."""
    if isinstance(phrase, SetPH) and material is not None and not phrase.reagents:
        return replace(phrase, reagents=(material,))
    return phrase


def repeated(phrase: Phrase, parts: Parts) -> bool:
    """Whether a row "pH" has already made the loose quantity a pH."""
    return isinstance(phrase, Loose) and any(
        isinstance(p, SetPH) and p.start == phrase.start for p in parts.others
    )


def volume_of_row(cell: Cell, unit: Measure | None) -> Measure | None:
    """The volume in a "made up to" cell, counted in the row."""
    for measure in cell.row_measures:
        if measure.dimension == "number" and unit is not None and unit.dimension in TAKEN:
            measure = in_unit(measure, unit)
        if measure.dimension == "volume":
            return measure
    return None
