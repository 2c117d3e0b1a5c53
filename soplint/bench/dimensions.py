"""Quantities whose unit cannot be meant: the figure fits, the dimension does not."""

from __future__ import annotations

from collections.abc import Iterator

from soplint.bench.portions import candidates
from soplint.bench.preparation import Stated
from soplint.bench.relation import Relation
from soplint.findings.model import Interval
from soplint.notation.phrases import Dose, Material, Sentence

_NEAR = 0.02
_DENSEST = 23.0  # g/mL; osmium 22.6 is the densest solid


def dimension_relations(sentence: Sentence) -> Iterator[Relation]:
    """Wrong units that the figure itself gives away."""
    for phrase in sentence.phrases:
        material = phrase.material if isinstance(phrase, Dose) else phrase
        if isinstance(material, Material):
            yield from _of_material(sentence, material)
        if isinstance(phrase, Dose):
            yield from _of_dose(sentence, phrase)


def _of_material(sentence: Sentence, material: Material) -> Iterator[Relation]:
    for substance in candidates(material)[:1]:
        density, mass = material.density, material.molar_mass
        if density is not None and density.base > _DENSEST and substance.molar_mass:
            if abs(density.nominal / substance.molar_mass - 1) < _NEAR:
                yield _relation(
                    Stated(sentence.text, density), substance.name, substance.molar_mass, "g/mol",
                    "a molar mass in a unit of density",
                )  # fmt: skip
        if mass is not None and "unit-slip" in mass.flags:
            yield _relation(
                Stated(sentence.text, mass), substance.name, mass.nominal, "g/mol",
                "a molar mass in another unit",
            )  # fmt: skip
        elif mass is not None and mass.base < _DENSEST and substance.density:
            if abs(mass.nominal / substance.density - 1) < _NEAR:
                yield _relation(
                    Stated(sentence.text, mass), substance.name, substance.density, "g/mL",
                    "a density in a unit of molar mass",
                )  # fmt: skip


def _of_dose(sentence: Sentence, dose: Dose) -> Iterator[Relation]:
    """ "Weigh 7.46 mL of potassium chloride": a solid by volume."""
    material = dose.material
    if material is None or dose.command != "WEIGH" or dose.amount.dimension != "volume":
        return
    meant = candidates(material)
    if not meant or material.solution or material.strengths:
        return
    if any(substance.state != "solid" for substance in meant):
        return
    unit = {"mL": "g", "µL": "mg", "L": "kg"}.get(dose.amount.unit, "g")
    yield _relation(
        Stated(sentence.text, dose.amount), meant[0].name, dose.amount.nominal, unit,
        "a solid weighed in a unit of volume",
    )  # fmt: skip


def _relation(stated: Stated, name: str, value: float, unit: str, note: str) -> Relation:
    return Relation(
        "dimension",
        stated,
        name,
        Interval(value, unit, value * (1 - _NEAR), value * (1 + _NEAR)),
        False,
        stated.measure.nominal / value - 1,
        note,
        exact=True,
        note="",
    )
