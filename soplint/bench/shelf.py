"""Put the finished solutions of a document on the shelf, with name, label and composition."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from soplint.bench.facts import Component, Facts, Solution, tokens
from soplint.bench.numbers import ALIQUOT, relative
from soplint.bench.portions import portions
from soplint.bench.preparation import Preparation, Title
from soplint.notation.phrases import Material
from soplint.quantities.model import Measure


def stock_shelf(preparations: Sequence[Preparation], facts: Facts) -> None:
    """Fill ``facts.solutions``; solutions made of other solutions need a second round."""
    for _ in range(2):
        facts.solutions = [
            solution
            for order, preparation in enumerate(preparations)
            if (solution := _solution(preparation, order, facts)) is not None
        ]


def _solution(preparation: Preparation, order: int, facts: Facts) -> Solution | None:
    title = preparation.title
    if title is None:
        if not preparation.taken:
            return None
        title = Title(preparation.taken[0].text, "", (), ())  # only "the solution made last"
    if not (preparation.taken or title.targets or title.fold or title.ph):
        return None
    adjusted = [a.set_ph.ph for a in preparation.adjusted if a.set_ph.ph is not None]
    ph: Measure | None = adjusted[-1] if adjusted else (title.ph.measure if title.ph else None)
    return Solution(
        title.words,
        tokens(title.words),
        (*_labels(title), *_claims(preparation), *_aims(preparation)),
        title.fold.measure if title.fold else None,
        ph,
        tuple(_components(preparation, order, facts)),
        order,
        preparation.section,
    )


def _labels(title: Title) -> Iterator[tuple[Measure, Material | None]]:
    for target in title.targets:
        yield target.stated.measure, target.material


def _claims(preparation: Preparation) -> Iterator[tuple[Measure, Material | None]]:
    """ "S2: 100 µL of S1 + 100 µL water = 0.5 mg/mL": the claim is the label."""
    for claimed in preparation.claimed:
        if claimed.claim.kind == "strength":
            yield claimed.claim.measure, claimed.claim.material


def _aims(preparation: Preparation) -> Iterator[tuple[Measure, Material | None]]:
    """ "5 % milk: 2.5 g in 50 mL": the strength aimed at in a line of its own."""
    if preparation.kind == "line":
        for taken in preparation.taken[:1]:
            material = taken.dose.material
            for measure in material.finals if material is not None else ():
                yield measure, material


def _components(preparation: Preparation, order: int, facts: Facts) -> Iterator[Component]:
    if not preparation.taken:
        yield from _labelled(preparation)
        return
    volume = preparation.volume
    if volume is None or volume.litres <= 0:
        return
    for taken in preparation.taken:
        material = taken.dose.material
        if material is None or material.is_water:
            continue
        found = portions(taken, facts)
        if found:
            best = found[0]
            yield Component(
                best.substance,
                material.words,
                best.moles / volume.litres if best.moles is not None else None,
                best.grams / volume.litres if best.grams is not None else None,
                best.relative + volume.relative,
            )
            continue
        if taken.dose.amount.dimension != "volume":
            yield Component(None, material.words, None, None, 0.05)
            continue
        source = facts.solution(material, order, preparation.section)
        if source is None or source.order == order:
            yield Component(None, material.words, None, None, 0.05)
            continue
        share = taken.dose.amount.base / volume.litres
        for component in source.components:
            yield Component(
                component.substance,
                component.words,
                _times(component.mol_per_litre, share),
                _times(component.gram_per_litre, share),
                component.relative + volume.relative,
            )


def _labelled(preparation: Preparation) -> Iterator[Component]:
    """A bottle known by its label alone: "Solution A: 0.2 mol/L sodium dihydrogen phosphate"."""
    title = preparation.title
    targets = title.targets if title is not None else ()
    if title is None or title.ph is not None or len(targets) != 1:
        return
    measure, material = targets[0].stated.measure, targets[0].material
    if measure.dimension != "molarity" or material is None or material.match is None:
        return
    if material.match.generic or title.source != "line":
        return
    substance = material.match.substances[0]
    mass = substance.molar_mass
    grams = measure.base * mass if mass else None
    yield Component(substance, material.words, measure.base, grams, relative(measure, ALIQUOT))


def _times(value: float | None, factor: float) -> float | None:
    return None if value is None else value * factor
