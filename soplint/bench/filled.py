"""What finished solutions hold, the acid or base that set their pH included.

``Bottles.finished`` fills one preparation of the document: contents in mol/L under each reading,
the pH that is set and the temperature at which it is set.  A part that is not known makes the
whole unknown; nothing is guessed.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from itertools import islice, product

from soplint.bench.acidity import ROOM
from soplint.bench.facts import Facts
from soplint.bench.portions import candidates, portions, stock_strengths
from soplint.bench.preparation import Adjusted, Preparation, Stated, Taken
from soplint.intake.model import Text
from soplint.notation.document import ReadBlock
from soplint.notation.phrases import Dose, Material
from soplint.quantities.model import Measure

Contents = dict[str, float]

_MOST_READINGS = 6
_SOUND = ("made-up", "mark", "total", "heading", "column", "sum")
STRONG_ACIDS = {"HCl", "HNO3", "H2SO4", "HClO4", "HBr"}
STRONG_BASES = {"NaOH", "KOH", "LiOH"}


@dataclass(frozen=True, slots=True)
class Adjuster:
    """What a pH is set with: the name the solver knows and its strength in mol/L, if a solution."""

    material: Material
    name: str
    family: str
    strengths: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class Setting:
    """A pH that is set with a meter."""

    ph: Stated
    degrees: tuple[float, ...]
    adjusted: Adjusted | None
    adjusters: tuple[Adjuster, ...]
    said: Measure | None = None  # the temperature, where the text states one


@dataclass(frozen=True, slots=True)
class Finished:
    """A preparation as it stands in the bottle."""

    preparation: Preparation
    order: int
    start: tuple[Contents, ...]  # mol/L of the final volume before the pH is set, by reading
    litres: float
    setting: Setting | None
    guiding: tuple[Taken, ...] = ()  # "about 50 mL of acid" before the pH is set

    def contents(self) -> Iterator[Contents]:
        """Contents in mol/L under each reading, the adjuster in its computed amount."""
        if self.setting is None:
            yield from self.start
            return
        for start in self.start:
            found = set_to(start, self.setting.ph.measure.nominal, self.setting)
            if found is not None:
                yield found


def set_to(start: Mapping[str, float], ph: float, setting: Setting) -> Contents | None:
    """The contents brought to a pH with the adjuster named, with plain acid or base where none is."""
    from soplint.equilibria import EquilibriumError, adjust

    given = [{a.name: 1.0} for a in setting.adjusters[:1]]
    for adjuster in (*given, None):
        try:
            found = adjust(start, ph, adjuster, _middle(setting.degrees))
        except EquilibriumError:
            continue
        whole = dict(start)
        whole[found.adjuster] = whole.get(found.adjuster, 0.0) + found.amount
        return whole
    return None


def _middle(degrees: tuple[float, ...]) -> float:
    return 25.0 if degrees == ROOM else degrees[0]


@dataclass(slots=True)
class Bottles:
    """All preparations of a document, filled when asked for."""

    preparations: Sequence[Preparation]
    facts: Facts
    blocks: Sequence[ReadBlock] = ()
    _texts: dict[int, Text] = field(default_factory=dict)
    _kept: dict[int, Finished | None] = field(default_factory=dict)

    def text_of(self, dose: Dose, usual: Text) -> Text:
        """The text that a dose stands in; "about 17 mL is needed" is a sentence of its own."""
        if not self._texts:
            self._texts = {
                id(phrase): sentence.text
                for block in self.blocks
                for sentence in block.sentences
                for phrase in sentence.phrases
                if isinstance(phrase, Dose)
            }
        return self._texts.get(id(dose), usual)

    def finished(self, order: int) -> Finished | None:
        """The preparation of that number, or None where a part of it is unknown."""
        if order not in self._kept:
            self._kept[order] = None  # a solution that is made of itself is unknown
            self._kept[order] = self._fill(order)
        return self._kept[order]

    def _fill(self, order: int) -> Finished | None:
        preparation = self.preparations[order]
        volume = preparation.volume
        if volume is None or volume.provenance not in _SOUND or volume.litres <= 0:
            return None
        setting = setting_of(preparation, self.facts)
        doses = [t for t in preparation.taken if not t.late]
        guiding = tuple(t for t in doses if setting is not None and _guides(t))
        kept = [t for t in doses if t not in guiding]
        if not kept:
            return None
        parts: list[list[Contents]] = []
        for taken in kept:
            options = self.brought(taken, order)
            if options is None:
                return None
            parts.append(options)
        start = tuple(
            _total(chosen, volume.litres) for chosen in islice(product(*parts), _MOST_READINGS)
        )
        if not any(start):
            return None
        return Finished(preparation, order, start, volume.litres, setting, guiding)

    def brought(self, taken: Taken, order: int) -> list[Contents] | None:
        """What a dose brings, in mol by name under each reading; None where it is unknown."""
        material, amount = taken.dose.material, taken.dose.amount
        if material is None:
            return [{}] if taken.solvent else None
        if material.is_water:
            return [{}]
        if material.ph is not None or (material.match is not None and material.match.generic):
            return self._of_bottle(taken, order)
        meant = candidates(material)
        if not meant:
            return self._of_bottle(taken, order)
        named = stock_strengths(material)
        solution = amount.dimension == "volume" and next(named, None) is None
        if solution and all(s.state == "solid" for s in meant):
            return self._of_bottle(taken, order)
        return _of_substance(taken, self.facts)

    def _of_bottle(self, taken: Taken, order: int) -> list[Contents] | None:
        """A volume of a solution: of this document, or with its pH printed on the label."""
        material, amount = taken.dose.material, taken.dose.amount
        if material is None or amount.dimension != "volume":
            return None
        solution = self.facts.solution(
            replace(material, ph=None), order, self.preparations[order].section
        )
        if solution is not None and solution.order != order:
            source = self.finished(solution.order)
            if source is None:
                return None
            found = [
                {name: mol * amount.base for name, mol in contents.items()}
                for contents in source.contents()
            ]
            return found or None
        labelled = of_label(material)
        if labelled is None:
            return None
        return [{name: mol * amount.base for name, mol in labelled.items()}]


def of_label(material: Material) -> Contents | None:
    """ "0.5 mol/L Tris-HCl pH 8.0": contents in mol/L by strength and pH of the label."""
    molar = [m for m in material.strengths if m.dimension == "molarity"]
    if len(molar) != 1 or material.ph is None or material.match is None:
        return None
    return of_system(material, molar[0].base, material.ph.nominal, 25.0)


def of_system(material: Material, strength: float, ph: float, degrees: float) -> Contents | None:
    """A buffer of that strength (mol/L) brought to a pH with hydrochloric acid or sodium hydroxide."""
    from soplint.equilibria import EquilibriumError, acid_systems_of, adjust

    for substance in candidates(material):
        name = substance.formula or substance.name
        try:
            if len(acid_systems_of(name)) != 1:
                continue
            found = adjust({name: strength}, ph, None, degrees)
        except EquilibriumError:
            continue
        return {name: strength, found.adjuster: found.amount}
    return None


def _total(chosen: Sequence[Contents], litres: float) -> Contents:
    total: Contents = {}
    for contents in chosen:
        for name, mol in contents.items():
            total[name] = total.get(name, 0.0) + mol / litres
    return total


def _of_substance(taken: Taken, facts: Facts) -> list[Contents] | None:
    found: list[Contents] = []
    for portion in portions(taken, facts):
        if portion.substance is None:
            return None
        names = (portion.substance.formula, portion.substance.name)
        known = next((n for n in names if n is not None and _known(n)), None)
        if known is None:
            if portion.substance.acid_system is not None or portion.substance.formula:
                return None
            found.append({})  # a detergent, a polymer: no acid, no salt
        elif portion.moles is None:
            return None
        else:
            found.append({known: portion.moles})
    return found or None


def _known(name: str) -> bool:
    from soplint.equilibria import EquilibriumError, acid_systems_of

    try:
        acid_systems_of(name)
    except EquilibriumError:
        return False
    return True


def _guides(taken: Taken) -> bool:
    """Whether a dose is "about" so much strong acid or base before the pH is set."""
    material = taken.dose.material
    if material is None or taken.dose.amount.manner != "about":
        return False
    return any(s.family in STRONG_ACIDS | STRONG_BASES for s in candidates(material))


# --- the pH that is set ---------------------------------------------------------------------------


def setting_of(preparation: Preparation, facts: Facts) -> Setting | None:
    """The last pH that the preparation is set to with a meter, with its temperature and adjusters."""
    title = preparation.title
    for adjusted in reversed(preparation.adjusted):
        set_ph = adjusted.set_ph
        aimed = Stated(adjusted.text, set_ph.ph) if set_ph.ph is not None else None
        if aimed is None and title is not None and title.source != "document":
            aimed = title.ph
        if aimed is None or aimed.measure.value is None:
            continue
        said = set_ph.temperature or _before(adjusted)
        if said is None and title is not None and title.ph is not None:
            if abs(title.ph.measure.nominal - aimed.measure.nominal) < 0.005:
                said = title.temperature
        degrees = (said.nominal,) if said is not None and 0 <= said.nominal <= 60 else ROOM
        found = tuple(a for r in set_ph.reagents if (a := adjuster_of(r, facts)) is not None)
        if len(found) < len(set_ph.reagents):
            found = ()
        return Setting(aimed, degrees, adjusted, found, said)
    if title is None or title.ph is None or title.source == "document" or preparation.adjusted:
        return None
    if title.ph.measure.value is None or not any(_guides(t) for t in preparation.taken):
        return None
    said = title.temperature  # "about 54 mL of 1 mol/L HCl to pH 7.0"
    degrees = (said.nominal,) if said is not None and 0 <= said.nominal <= 60 else ROOM
    return Setting(title.ph, degrees, None, (), said)


_THEN = re.compile(r"^[^.;\d]*\b(?:adjust|set|bring)\b", re.IGNORECASE)


def _before(adjusted: Adjusted) -> Measure | None:
    """ "Bring to 25 °C and adjust the pH to 8.0": the temperature in front of the instruction."""
    from soplint.quantities import find_measures

    start = adjusted.set_ph.start
    before = [
        m
        for m in find_measures(adjusted.text.chars)
        if m.dimension == "temperature" and m.end <= start
    ]
    if before and _THEN.search(adjusted.text.chars[before[-1].end : start]):
        return before[-1]
    return None


def adjuster_of(material: Material, facts: Facts) -> Adjuster | None:
    """The acid or base that a name means, with its strength in mol/L where it is a solution."""
    for substance in candidates(material):
        names = (substance.formula, substance.name)
        known = next((n for n in names if n is not None and _known(n)), None)
        if known is None:
            continue
        return Adjuster(material, known, substance.family, strengths_of(material, facts))
    return None


def strengths_of(material: Material, facts: Facts) -> tuple[float, ...]:
    """mol/L of a liquid or solution under each reading; none for a solid or an unknown strength."""
    bare = replace(material, bracket=tuple(m for m in material.bracket if _is_strength(m)))
    litre = Measure(material.start, material.end, "volume", 1.0, 1.0, 1.0, "L", 1.0, 1)
    taken = Taken(Text("", 1, 1), Dose(material.start, material.end, litre, bare), 0)
    found = {round(p.moles, 6) for p in portions(taken, facts) if p.moles}
    return tuple(sorted(found))


def _is_strength(measure: Measure) -> bool:
    return measure.dimension in ("molarity", "normality", "fraction", "mass-concentration")
