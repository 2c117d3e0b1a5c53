"""What a step brings into a vessel: substance, class, amount, strength."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

from soplint.bench.facts import Facts, Solution
from soplint.bench.hazard_tables import classes_of, word_classes
from soplint.bench.portions import equivalents, portions
from soplint.bench.preparation import Taken
from soplint.intake.model import Text
from soplint.notation.phrases import Dose, Material
from soplint.substances import Substance
from soplint.substances import density as solution_density


@dataclass(frozen=True, slots=True)
class Content:
    """One thing in a vessel, with the place where the text brings it in."""

    text: Text
    start: int
    end: int
    words: str
    classes: frozenset[str]
    substance: Substance | None = None
    moles: float | None = None
    grams: float | None = None  # of the substance itself
    litres: float | None = None  # of the liquid added
    percent: float | None = None  # % w/w of the liquid added
    step: int = 0
    water: bool = False
    stream: bool = False  # named by the container ("the acid waste"), not by an addition
    diluted: bool = False  # comes with a solution of known composition
    origin: int = 0  # number of the vessel that it was poured from, 0: none

    @property
    def known(self) -> bool:
        """Whether the catalogue or the table of classes knows what it is."""
        return self.substance is not None or bool(self.classes) or self.water

    @property
    def key(self) -> str:
        """What makes two contents the same thing."""
        return self.substance.family if self.substance is not None else self.words.lower()

    @property
    def protons(self) -> float | None:
        """mol of H+ or OH- that it can give."""
        if self.moles is None or self.substance is None:
            return self.moles
        return self.moles * equivalents(self.substance)


def contents_of(
    text: Text, dose: Dose | Material, step: int, facts: Facts, order: int
) -> Iterator[Content]:
    """The contents that a dose or a bare material brings."""
    material = dose.material if isinstance(dose, Dose) else dose
    if (
        material is None
        or not material.words
        or _LABEL.search(text.chars[dose.start : dose.end + 1])
    ):
        return
    if material.is_water:
        litres = _litres(dose) if isinstance(dose, Dose) else None
        yield Content(
            text, dose.start, dose.end, material.words, frozenset(), litres=litres, step=step, water=True
        )  # fmt: skip
        return
    solution = _from_shelf(material, facts, order)
    if solution is not None:
        yield from _of_solution(text, dose, step, solution)
        return
    substance = _substance(material)
    taken = Taken(text, dose, step) if isinstance(dose, Dose) else None
    found = portions(taken, facts) if taken is not None else []
    best = found[0] if found else None
    if best is not None and best.substance is not None and best.substance.kind:
        substance = best.substance
    litres = _litres(dose) if isinstance(dose, Dose) else None
    grams = best.grams if best is not None else None
    yield Content(
        text,
        dose.start,
        dose.end,
        material.words,
        (classes_of(substance) if substance is not None else _by_words(material.words))
        | _by_ph(material),
        substance,
        best.moles if best is not None else None,
        grams,
        litres,
        percent_of(material, substance, grams, litres, facts),
        step,
    )


_LABEL = re.compile(r"\bHF-|-HF\b")  # a catalogue number, no acid


_ACID_LABEL = 5.5  # label pH below which a buffer counts as an acid


def _by_ph(material: Material) -> frozenset[str]:
    """ "Acetate buffer pH 4.5" is an acid to what is added."""
    sour = material.ph is not None and material.ph.nominal < _ACID_LABEL
    return frozenset({"acid"} if sour else ())


def _by_words(words: str) -> frozenset[str]:
    """Classes that the words of an unknown thing name: "cyanide sample"."""
    return frozenset(c for _, _, classes in word_classes(words) for c in classes)


def _litres(dose: Dose) -> float | None:
    return dose.amount.base if dose.amount.dimension == "volume" else None


def _substance(material: Material) -> Substance | None:
    match = material.match
    if match is None or match.generic or not match.substances:
        return None
    return match.substances[0]


def percent_of(
    material: Material,
    substance: Substance | None,
    grams: float | None,
    litres: float | None,
    facts: Facts,
) -> float | None:
    """Strength of a liquid in % w/w: as printed, by mass and volume, or as it is sold."""
    for measure in (*material.strengths, *material.bracket):
        if measure.dimension == "fraction" and measure.basis in (None, "w/w"):
            return measure.base * 100
    if substance is None:
        return None
    for measure in (*material.strengths, *material.bracket):
        if measure.dimension in ("molarity", "normality") and substance.molar_mass:
            mass = measure.base * substance.molar_mass
            return mass / (10 * _thickness(substance, mass))
    known = facts.strength(material)
    if known is not None and known.dimension == "fraction":
        return known.base * 100
    if known is None and substance.state == "solution" and not material.strengths:
        return None if "dilute" in material.words.lower() else substance.strength
    if grams is not None and litres:
        return grams / (litres * 10 * _thickness(substance, grams / litres))
    return 100.0 if substance.state == "solid" else substance.strength


def _thickness(substance: Substance, grams_per_litre: float) -> float:
    """Density in g/mL of a solution of so many g/L: by the tables, else between water and concentrate."""
    density = 1.0
    for _ in range(6):
        percent = grams_per_litre / (10 * density)
        tabulated = solution_density(substance.family, percent)
        if tabulated is not None:
            density = tabulated
        elif substance.density and substance.strength and substance.state != "solid":
            share = min(1.0, percent / substance.strength)
            density = 1.0 + (substance.density - 1.0) * share
    return density


def _from_shelf(material: Material, facts: Facts, order: int) -> Solution | None:
    """The solution of this document that is meant, when it is no bought reagent."""
    if material.match is not None and not material.solution and not material.match.generic:
        return None
    found = facts.solution(material, order, 0)
    return found if found is not None and found.components else None


def _of_solution(
    text: Text, dose: Dose | Material, step: int, solution: Solution
) -> Iterator[Content]:
    litres = _litres(dose) if isinstance(dose, Dose) else None
    for component in solution.components:
        molar, mass = component.mol_per_litre, component.gram_per_litre
        substance = component.substance
        yield Content(
            text,
            dose.start,
            dose.end,
            component.words,
            classes_of(substance) if substance is not None else frozenset(),
            substance,
            molar * litres if molar is not None and litres is not None else None,
            mass * litres if mass is not None and litres is not None else None,
            litres,
            mass / 10 if mass is not None else None,
            step,
            diluted=True,
        )
