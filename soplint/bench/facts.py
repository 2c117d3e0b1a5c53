"""What the document says about the things on its reagent list, and about its own solutions."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from functools import lru_cache

from soplint.notation.phrases import Material
from soplint.quantities.model import Measure
from soplint.substances.model import Substance

_STOP = {
    *("solution", "stock", "buffer", "the", "of", "a", "an", "and", "working", "in", "water"),
    *("prepared", "fresh", "preparation", "to", "for", "with", "at", "soln", "standard", "reagent"),
    *("section", "step", "from", "this", "above", "mix", "dilute", "diluted", "recipe", "make"),
    *("aqueous", "medium", "sterile", "cold", "ice", "concentrate", "concentrated", "fold"),
}
_TOKEN = re.compile(r"[^\W_]+")


@lru_cache(maxsize=4096)
def tokens(words: str) -> frozenset[str]:
    """The telling words of a name, in lower case; the letter of "solution A" is one."""
    return frozenset(
        word.lower()
        for word in _TOKEN.findall(words)
        if word.lower() not in _STOP or (len(word) == 1 and word.isupper())
    )


@dataclass(frozen=True, slots=True)
class Component:
    """One substance in a solution."""

    substance: Substance | None
    words: str
    mol_per_litre: float | None
    gram_per_litre: float | None
    relative: float


@dataclass(frozen=True, slots=True)
class Solution:
    """A solution of the document: its names, label strengths and composition."""

    words: str
    tokens: frozenset[str]
    strengths: tuple[tuple[Measure, Material | None], ...]  # label
    fold: Measure | None
    ph: Measure | None
    components: tuple[Component, ...]
    order: int  # number of the preparation in the document
    section: int


@dataclass(slots=True)
class Facts:
    """Shelf and reagent list of one document."""

    listed: list[Material] = field(default_factory=list)
    solutions: list[Solution] = field(default_factory=list)

    def strength(self, material: Material) -> Measure | None:
        """The strength that the reagent list prints for a liquid, if exactly one fits."""
        first: Measure | None = None
        for other in self.listed:
            if not other.strengths or not same_substance(material, other):
                continue
            for measure in other.strengths:
                if measure.dimension not in _LISTED:
                    continue
                if first is None:
                    first = measure
                elif _distinct(measure) != _distinct(first):
                    return None
        return first

    def density(self, material: Material) -> Measure | None:
        """The density that the reagent list prints for a material."""
        found = [o.density for o in self.listed if o.density and same_substance(material, o)]
        return found[0] if len({m.base for m in found}) == 1 else None

    def solution(self, material: Material, order: int, section: int) -> Solution | None:
        """The solution of this document that a material names, if only one can be meant."""
        found = self.meant(material, order, section)
        return found[0] if len(found) == 1 or (found and tokens(material.words)) else None

    def meant(self, material: Material, order: int, section: int) -> tuple[Solution, ...]:
        """Solutions that a material can mean, the likeliest first; never the preparation itself.

        A name of its own means the nearest solution of that name.  A bare "stock", "buffer" or
        nothing means the solution made last in the section, else any made before.
        """
        wanted = tokens(material.words)
        named = [s for s in self.solutions if s.order != order and _fits(s, material, wanted)]
        said = _KINDS & set(_TOKEN.findall(material.words.lower()))
        if wanted:
            exact = [s for s in named if s.tokens == wanted] or named
            alike = [s for s in exact if said & set(_TOKEN.findall(s.words.lower()))] or exact
            return tuple(sorted(alike, key=lambda s: _distance(s, order))[:1])
        before = [s for s in named if s.order < order]
        telling = [s for s in before if said & set(_TOKEN.findall(s.words.lower()))]
        near = [s for s in before if s.section == section]
        if near and (not said or near[-1] in telling or not telling):
            return (near[-1],) if said != {"buffer"} or near[-1] in telling else ()
        if said and telling:
            return tuple(reversed(telling))
        return () if said else tuple(reversed(before))[:1]


# Strengths that a reagent list prints for a liquid.
_LISTED = ("molarity", "fraction", "mass-concentration")


def _distinct(measure: Measure) -> tuple[str, float]:
    return measure.dimension, round(measure.base, 9)


# Nouns that stand for a solution named before.
_KINDS = {"stock", "buffer", "solution", "concentrate", "titrant", "standard", "medium"}


def _distance(solution: Solution, order: int) -> int:
    """Solutions made before come before those made after."""
    gap = order - solution.order
    return gap if gap > 0 else 10_000 - gap


def _fits(solution: Solution, material: Material, wanted: frozenset[str]) -> bool:
    if not wanted and not (material.solution or not material.words):
        return False
    if wanted and not wanted <= solution.tokens:
        return False
    fold = next((m for m in material.strengths if m.dimension == "fold"), None)
    if fold and solution.fold and abs(fold.base - solution.fold.base) > 0.01 * solution.fold.base:
        return False
    for strength in material.strengths:
        same = [m for m, _ in solution.strengths if m.dimension == strength.dimension]
        if same and all(abs(m.base / strength.base - 1) > 0.02 for m in same if strength.base):
            return False
    if material.ph and solution.ph:
        return abs(material.ph.nominal - solution.ph.nominal) < 0.06
    return True


def same_substance(first: Material, second: Material) -> bool:
    """Whether two materials name one substance (in any of the forms both can mean)."""
    if first.match is None or second.match is None:
        return bool(first.words) and tokens(first.words) == tokens(second.words) != frozenset()
    return share_family(first.match.substances, second.match.substances)


def share_family(first: Iterable[Substance], second: Sequence[Substance]) -> bool:
    """Whether two lists of substances have an anhydrous parent in common."""
    families = {substance.family for substance in second}
    return any(substance.family in families for substance in first)
