"""Equivalents: the mass of a substance that one millilitre of titrant stands for."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, replace

from soplint.bench.ledger import Ledger
from soplint.bench.numbers import shown
from soplint.bench.preparation import Stated
from soplint.bench.relation import Relation
from soplint.bench.species import fragment_of
from soplint.bench.stoichiometry import kinds_of_titrant, named_analyte, units_of_analyte
from soplint.findings.model import Interval
from soplint.intake.model import Text
from soplint.notation.phrases import Dose, Equivalent, Material, Sentence
from soplint.quantities.model import Measure
from soplint.substances import molar_mass
from soplint.substances.model import Substance

# Weight sets that average older isotope data differ by up to 0.02 % (IUPAC abridged weights 2021).
ATOMIC_WEIGHTS = 0.0002
ROUNDED_MASS = 0.0005  # factors worked out with molar masses of four figures
_EQUIVALENT = re.compile(r"1\s*/\s*\d|[½⅓¼⅕⅙]|\beq\b|\bval\b")  # "c(1/5 KMnO4) = 0.1 mol/L"
_JOINED = re.compile(r"[\s,;]*(?:(?:and|or|as well as|=)\s*)?(?:to\s*)?")
_NITROGEN = re.compile(r"\bnitrogen\b(?! *(?:mon|di|tri)?oxide)|-N$")
_UNNAMED = {"acid": "acid", "alkali": "base", "base": "base"}
_WORD = re.compile(r"[A-Za-z]+")
# Words beside the name of an element or ion that leave its formula as it is.
_PLAIN = frozenset(
    "active available free total dissolved residual combined ion ions metal as and the in of"
    " elemental content ii iii iv vi demand chemical sample hardness".split()
)


@dataclass(frozen=True, slots=True)
class _Way:
    """One reaction that the sentence can mean."""

    name: str
    mass: float  # g/mol
    number: float  # reactive units of the analyte
    units: float  # reactive units of the titrant
    substance: Substance | None = None

    def grams(self, mol: float) -> float:
        return mol * self.units * self.mass / self.number


def equivalent_relations(
    sentence: Sentence, phrase: Equivalent, ledger: Ledger
) -> Iterator[Relation]:
    """Each mass of "is equivalent to 0.40 mg of calcium and to 1.00 mg of calcium carbonate"."""
    for dose in _masses(sentence, phrase):
        ledger.enter(Stated(sentence.text, dose.amount))
        relation = _relation(sentence.text, replace(phrase, mass=dose), ledger)
        if relation is not None:
            yield relation


def _masses(sentence: Sentence, phrase: Equivalent) -> Iterator[Dose]:
    """The mass of the phrase, and those joined to it by a comma, "and", "or"."""
    yield from (phrase.mass, *phrase.mass.alternatives)
    end = phrase.end
    for other in sentence.phrases:
        if other.start < end:
            continue
        if not isinstance(other, Dose) or other.amount.dimension != "mass":
            return
        if not _JOINED.fullmatch(sentence.text.chars[end : other.start]):
            return
        yield from (other, *other.alternatives)
        end = other.end


def _relation(text: Text, phrase: Equivalent, ledger: Ledger) -> Relation | None:
    """c·n(titrant)·M / n(analyte), by the table of reactions; None where the table is silent."""
    strength = _strength(phrase.titrant)
    measure, analyte = phrase.mass.amount, phrase.mass.material
    if strength is None or analyte is None or measure.dimension != "mass" or not measure.base:
        return None
    by_units = strength.dimension == "normality" or bool(
        _EQUIVALENT.search(text.chars[phrase.start : phrase.end])
    )
    ways = _ways(phrase.titrant, analyte, by_units)
    if not ways:
        if analyte.words:
            ledger.leave_open(Stated(text, measure), "outside-model")
        return None
    litres = phrase.volume.base if phrase.volume is not None else 0.001
    mol = strength.base * litres
    way = min(ways, key=lambda way: abs(way.grams(mol) / measure.base - 1))
    if not way.grams(mol):
        return None
    return _tested(text, measure, strength, litres, way)


def _tested(text: Text, measure: Measure, strength: Measure, litres: float, way: _Way) -> Relation:
    value = way.grams(strength.base * litres) / measure.factor
    half = (measure.high - measure.low) / 2 + value * ATOMIC_WEIGHTS
    by = f" / {way.number:g}" if way.number != 1 else ""
    times = f" × {way.units:g}" if way.units != 1 else ""
    # 0.0167 mol/L for 1/60: a strength in a factor is exact but for the rounding of its figures.
    rounded = value * _thirds(strength)
    return Relation(
        "equivalent",
        Stated(text, measure),
        way.name,
        Interval(value, measure.unit, value - half - rounded, value + half + rounded),
        abs(measure.nominal - value) <= half + rounded + value * ROUNDED_MASS,
        measure.nominal / value - 1,
        f"{shown(strength)} × {litres * 1000:g} mL{times} × {way.mass:.3f} g/mol{by}"
        f" = {value:.5g} {measure.unit}",
        (Stated(text, strength),),
        exact=True,
    )


def _thirds(strength: Measure) -> float:
    """Relative rounding of a strength that is a sixth or a third written out: 0.0167, 0.1667.

    Such a strength has at least three figures, and 6 times it is round within them.
    """
    half = (strength.high - strength.low) / 2
    if not half or half > strength.nominal * 0.005:
        return 0.0
    six = 6 * strength.nominal
    away = abs(six - float(f"{six:.1g}"))
    return half / strength.nominal if 1e-9 * six < away <= 6 * half else 0.0


def _strength(titrant: Material) -> Measure | None:
    found = [m for m in titrant.strengths if m.dimension in ("molarity", "normality")]
    return found[0] if len(found) == 1 else None


def _ways(titrant: Material, analyte: Material, by_units: bool) -> list[_Way]:
    """The reactions that titrant and analyte can have, by the tables."""
    return [
        _Way(name, mass, number, 1.0 if by_units else units)
        for kind, units in _kinds(titrant, by_units)
        for name, family, mass in _species(analyte)
        for number in units_of_analyte(family, kind)
    ]


def _kinds(titrant: Material, by_units: bool) -> tuple[tuple[str, float], ...]:
    """Kinds of titration; "0.02 N acid" needs no name, since its strength counts the protons."""
    if by_units and titrant.words.lower() in _UNNAMED:
        return ((_UNNAMED[titrant.words.lower()], 1.0),)
    return kinds_of_titrant(_substance(titrant))


def _substance(material: Material) -> Substance | None:
    if material.match is None or material.match.generic or not material.match.substances:
        return None
    return material.match.substances[0]


def _species(analyte: Material) -> list[tuple[str, str, float]]:
    """Name, family and molar mass of what a factor counts: a substance or an element."""
    words = analyte.words.strip(" .")
    if _NITROGEN.search(words):  # ammonia nitrogen, nitrogen as ammonia, NH4-N
        return [("N", "N", molar_mass("N"))]
    formula = named_analyte(words)
    if formula is not None:
        return [(words, formula, molar_mass(formula))]
    if analyte.match is not None and not analyte.match.generic:
        return [(s.name, s.family, s.molar_mass) for s in analyte.match.substances if s.molar_mass]
    fragment = fragment_of(words)
    if fragment is None or not _only(words, fragment):
        return []
    return [(fragment, fragment, molar_mass(fragment))]


def _only(words: str, fragment: str) -> bool:
    """Whether words name nothing but the element or ion: "arsenic trioxide" is not arsenic."""
    rest = [w for w in _WORD.findall(words) if w.lower() not in _PLAIN]
    named = [w for w in rest if fragment_of(w) == fragment]
    return len(rest) <= 1 or len(named) == len(rest)
