"""What earlier phrases of a sentence tell: equivalents, what "it" is, whose strength is claimed."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from soplint.notation.phrases import (
    Assigned,
    Claim,
    Command,
    Dose,
    Equivalent,
    Material,
    Phrase,
    ToVolume,
)
from soplint.quantities.model import Measure

_NO_GRADE = 60  # per cent; above it stands a purity: "water (99.9 %)"


def close(phrases: list[Phrase]) -> list[Phrase]:
    """The phrases with nameless strengths given to the only solute of the sentence.

    "12 mL of 0.5 M CHES to 150 mL with water (40 mM)" claims the strength of CHES.
    """
    phrases = series(from_stock(phrases))
    solutes = _solutes(phrases)
    if len(solutes) != 1:
        return phrases
    solute = Material(solutes[0].start, solutes[0].end, solutes[0].words, solutes[0].match)
    return [
        replace(phrase, material=solute)
        if isinstance(phrase, Claim)
        and not isinstance(phrase, Assigned)
        and phrase.kind == "strength"
        and phrase.material is None
        else phrase
        for phrase in phrases
    ]


def series(phrases: list[Phrase]) -> list[Phrase]:
    """ "the flasks hold 1, 2 and 5 mg/L of calcium": one strength for each of several solutions."""
    result = list(phrases)
    end = 0
    for index, phrase in enumerate(phrases):
        if index < end or not _is_strength(phrase):
            continue
        end = index + 1
        while end < len(phrases) and _continues(phrases[end - 1], phrases[end]):
            end += 1
        run = [p for p in phrases[index:end] if isinstance(p, Claim)]
        if len({p.measure.nominal for p in run}) > 1:
            result[index:end] = [replace(p, material=run[-1].material, kind="series") for p in run]
    return result


def _is_strength(phrase: Phrase) -> bool:
    return isinstance(phrase, Claim) and phrase.kind == "strength"


def _continues(first: Phrase, second: Phrase) -> bool:
    """Whether a second strength follows a nameless one in the same unit."""
    if not (isinstance(first, Claim) and isinstance(second, Claim) and _is_strength(second)):
        return False
    return first.material is None and first.measure.unit == second.measure.unit


def from_stock(phrases: list[Phrase]) -> list[Phrase]:
    """ "From the stock pipette 5 mL", "dilute 25 mL from the stock": the amount is of the stock."""
    stocks = [p for p in phrases if isinstance(p, Material) and p.role == "from" and p.words]
    if len(stocks) != 1:
        return phrases
    stock = replace(stocks[0], role=None)
    return [
        replace(
            phrase,
            material=stock,
            alternatives=tuple(replace(a, material=stock) for a in phrase.alternatives),
        )
        if isinstance(phrase, Dose)
        and phrase.material is None
        and phrase.role is None
        and phrase.amount.dimension in ("mass", "volume")
        else phrase
        for phrase in phrases
    ]


def _solutes(phrases: list[Phrase]) -> list[Material]:
    """The different things that are taken, water and its like aside."""
    found: dict[str, Material] = {}
    for phrase in phrases:
        if isinstance(phrase, Dose) and phrase.material is not None:
            material = phrase.material
            solvent = phrase.role == "in" or material.is_water
            if material.words and not solvent and material.match is not None:
                found.setdefault(material.match.substances[0].family, material)
            elif material.words and not solvent:
                found.setdefault(material.words, material)
    return list(found.values())


def join_equivalent(phrases: list[Phrase]) -> None:
    """Join "each mL of TITRANT is equivalent to MASS of ANALYTE" into one phrase."""
    if len(phrases) < 3:
        return
    mass, middle, left = phrases[-1], phrases[-2], phrases[-3]
    if not (isinstance(mass, Dose) and isinstance(middle, Command)):
        return
    if middle.kind != "EQUIVALENT" or mass.amount.dimension not in ("mass", "amount"):
        return
    titrant = left.material if isinstance(left, Dose) else left
    if not isinstance(titrant, Material):
        return
    volume = left.amount if isinstance(left, Dose) else None
    first = len(phrases) - 3
    if first and isinstance(phrases[first - 1], Command):
        before = phrases[first - 1]
        if isinstance(before, Command) and before.kind == "EACHML":
            first -= 1
    start = phrases[first].start
    phrases[first:] = [Equivalent(start, mass.end, titrant, volume, mass)]


def without_claims(diluent: Material) -> tuple[Material, tuple[Measure, ...]]:
    """Water without the strengths in its brackets, and those strengths."""
    if not diluent.is_water:
        return diluent, ()
    claims = tuple(
        m
        for m in diluent.bracket
        if m.dimension in ("molarity", "normality", "mass-concentration")
        or (m.dimension == "fraction" and m.nominal < _NO_GRADE)
    )
    rest = tuple(m for m in diluent.bracket if m not in claims)
    return replace(diluent, bracket=rest), claims + diluent.finals


def without_weight_claims(
    solvent: Material, claims: tuple[Measure, ...]
) -> tuple[Material, tuple[Measure, ...]]:
    """A solvent without the mass strengths in its brackets, and these after ``claims``."""
    told = tuple(
        m for m in solvent.bracket if m.basis == "w/v" or m.dimension == "mass-concentration"
    )
    rest = tuple(m for m in solvent.bracket if m not in told)
    return replace(solvent, bracket=rest), claims + told


def stands_before(phrases: Sequence[Phrase]) -> Material | None:
    """The last thing that was named."""
    for phrase in reversed(phrases):
        found = phrase
        if isinstance(phrase, ToVolume):
            found = phrase.diluent or phrase
        elif isinstance(phrase, (Dose, Claim)):
            found = phrase.material or phrase
        if isinstance(found, Material) and found.words:
            return replace(found, role=None)
    return None


def same_thing(first: Dose, other: Dose) -> Dose:
    """ "3.9 mg NiCl2 or 30 µL of 1 M": the second is the same substance."""
    named, nameless = first.material, other.material
    if named is None or (nameless is not None and nameless.words):
        return other
    if nameless is None:
        return replace(other, material=replace(named, strengths=(), bracket=(), finals=()))
    return replace(other, material=replace(nameless, words=named.words, match=named.match))
