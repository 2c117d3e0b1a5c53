"""Move phrases from the offsets of a cell to those of its row."""

from __future__ import annotations

from dataclasses import fields, replace
from operator import attrgetter

from soplint.notation.phrases import (
    Claim,
    Dose,
    Equivalent,
    Loose,
    Material,
    Mixture,
    Phrase,
    SetPH,
    ToVolume,
    Ware,
)
from soplint.quantities.model import Measure
from soplint.substances.model import Match

_LATER_FIELDS = tuple(field.name for field in fields(Measure))[2:]
_later = attrgetter(*_LATER_FIELDS)
_NUMERAL = _LATER_FIELDS.index("numeral")


def measure_at(measure: Measure, by: int) -> Measure:
    """``measure`` with its offsets ``by`` characters further on."""
    if not by:
        return measure
    # dataclasses.replace costs four times as much, and a table moves every quantity it holds.
    values = list(_later(measure))
    first, last = measure.numeral
    values[_NUMERAL] = (first + by, last + by)
    return Measure(measure.start + by, measure.end + by, *values)


def phrase_at(phrase: Phrase, by: int) -> Phrase:
    """``phrase``, and all in it, ``by`` characters further on."""
    if not by:
        return phrase
    start, end = phrase.start + by, phrase.end + by
    if isinstance(phrase, Material):
        return material_at(phrase, by)
    if isinstance(phrase, Dose):
        return dose_at(phrase, by)
    if isinstance(phrase, ToVolume):
        diluent = material_at(phrase.diluent, by) if phrase.diluent else None
        return replace(
            phrase, start=start, end=end, volume=_optional(phrase.volume, by), diluent=diluent
        )
    if isinstance(phrase, SetPH):
        return replace(
            phrase,
            start=start,
            end=end,
            ph=_optional(phrase.ph, by),
            temperature=_optional(phrase.temperature, by),
            reagents=tuple(material_at(m, by) for m in phrase.reagents),
            doses=tuple(dose_at(d, by) for d in phrase.doses),
        )
    if isinstance(phrase, Claim):
        material = material_at(phrase.material, by) if phrase.material else None
        return replace(
            phrase, start=start, end=end, measure=measure_at(phrase.measure, by), material=material
        )
    if isinstance(phrase, Equivalent):
        return replace(
            phrase,
            start=start,
            end=end,
            titrant=material_at(phrase.titrant, by),
            volume=_optional(phrase.volume, by),
            mass=dose_at(phrase.mass, by),
        )
    if isinstance(phrase, Mixture):
        materials = tuple(material_at(m, by) for m in phrase.materials)
        return replace(
            phrase, start=start, end=end, ratio=measure_at(phrase.ratio, by), materials=materials
        )
    if isinstance(phrase, (Loose, Ware)):
        return replace(phrase, start=start, end=end, measure=measure_at(phrase.measure, by))
    return replace(phrase, start=start, end=end)


def material_at(material: Material, by: int) -> Material:
    """``material`` with all its offsets ``by`` characters further on."""
    if not by:
        return material
    return replace(
        material,
        start=material.start + by,
        end=material.end + by,
        match=match_at(material.match, by),
        strengths=_all(material.strengths, by),
        ph=_optional(material.ph, by),
        temperature=_optional(material.temperature, by),
        bracket=_all(material.bracket, by),
        finals=_all(material.finals, by),
        molar_mass=_optional(material.molar_mass, by),
        density=_optional(material.density, by),
    )


def dose_at(dose: Dose, by: int) -> Dose:
    """``dose`` with all its offsets ``by`` characters further on."""
    if not by:
        return dose
    return replace(
        dose,
        start=dose.start + by,
        end=dose.end + by,
        amount=measure_at(dose.amount, by),
        material=material_at(dose.material, by) if dose.material else None,
        same=_all(dose.same, by),
        alternatives=tuple(dose_at(other, by) for other in dose.alternatives),
    )


def match_at(match: Match | None, by: int) -> Match | None:
    """``match`` with its offsets ``by`` characters further on."""
    return replace(match, start=match.start + by, end=match.end + by) if match and by else match


def _optional(measure: Measure | None, by: int) -> Measure | None:
    return measure_at(measure, by) if measure else None


def _all(measures: tuple[Measure, ...], by: int) -> tuple[Measure, ...]:
    return tuple(measure_at(measure, by) for measure in measures)
