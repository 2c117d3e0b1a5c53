"""Which doses bring the thing that a strength speaks of, and how much of it."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from functools import lru_cache

from soplint.bench.facts import Component, Facts, Solution, same_substance, tokens
from soplint.bench.numbers import ALIQUOT, relative, shown
from soplint.bench.portions import candidates, equivalents, portions
from soplint.bench.preparation import Preparation, Taken
from soplint.bench.shares import Share, as_shares, by_mass, diluted, shares
from soplint.bench.species import fragment_of, groups_per_formula, share_of
from soplint.notation.phrases import Material
from soplint.quantities.model import Measure
from soplint.substances.model import Substance

# Acid systems whose solutions are no buffers by themselves or are named otherwise.
SEQUESTRANTS = {"edta"}


@dataclass(frozen=True, slots=True)
class Bearers:
    """Doses that together bring the thing; ``how`` says why they were put together."""

    how: str  # substance, part, system, stock, solute
    shares: tuple[tuple[Share, ...], ...]  # per dose its readings, nearest to the text first
    sure: bool = True  # the text leaves no doubt that these doses are meant


def bearers(
    preparation: Preparation,
    material: Material | None,
    strength: Measure,
    facts: Facts,
    order: int,
) -> Iterator[Bearers]:
    """The groups of doses that can bear a strength, the most literal first."""
    doses = [t for t in preparation.taken if not _is_water(t)]
    if material is not None and material.is_water:
        return
    fragment = _fragment(material)
    if fragment is not None:
        parts = tuple(
            tuple(s)
            for t in doses
            if (
                s := _of_part(t, fragment, strength, facts)
                or _part_by_label(
                    t, fragment, strength, facts, order, preparation, only=len(doses) == 1
                )
            )
        )
        if parts:
            yield Bearers("part", parts)
        elif len(doses) == 1 and (found := _printed_label(doses[0], strength)):
            yield Bearers("stock", (tuple(found),))
        if strength.dimension != "molarity":
            return
    if material is not None and (material.match is not None or tokens(material.words)):
        yield from _named(doses, material, strength, facts, order, preparation)
        if any(m.dimension == "ratio" for m in material.bracket):
            yield from _all_weighed(doses, strength)  # "40 % acrylamide (19:1)"
        if material.match is not None and not material.solution and not material.match.generic:
            if _extra_words(material):
                yield from _any_dose(doses, strength, facts)
            return
        if material.match is not None and material.match.generic and not _counts(strength):
            return
    unnamed = list(_unnamed(doses, material, strength, facts, order, preparation))
    yield from unnamed
    if material is not None and material.match is None and not unnamed:
        yield from _any_dose(doses, strength, facts)


def _all_weighed(doses: list[Taken], strength: Measure) -> Iterator[Bearers]:
    """Everything that was weighed, for a percentage of several things together."""
    if strength.dimension != "fraction":
        return
    found = [tuple(by_mass(t, strength)) for t in doses if t.dose.amount.dimension == "mass"]
    if len(found) > 1 and all(found):
        yield Bearers("any", tuple(found), sure=False)


def _any_dose(doses: list[Taken], strength: Measure, facts: Facts) -> Iterator[Bearers]:
    """A name that says nothing ("acid alcohol, 1 %"): any dose may bear it, none has to."""
    for taken in doses:
        found = shares(taken, strength, facts)
        if found:
            yield Bearers("any", (tuple(found),), sure=False)


def _fragment(material: Material | None) -> str | None:
    """The element or ion that a strength is about, where no whole substance is named."""
    if material is None or (material.match is not None and not material.match.generic):
        return None
    return fragment_of(material.words)


def _of_part(taken: Taken, fragment: str, strength: Measure, facts: Facts) -> list[Share]:
    """What a dose brings of a part of its substance: copper of copper sulfate."""
    material = taken.dose.material
    poured = taken.dose.amount.dimension == "volume"
    if material is not None and poured and _fragment(material) == fragment:
        return shares(taken, strength, facts)  # diluted from a stock of the same part
    found: list[Share] = []
    for portion in portions(taken, facts):
        if portion.substance is None or portion.moles is None or portion.grams is None:
            continue
        if strength.dimension == "molarity":
            count = groups_per_formula(portion.substance, fragment)
            if count is not None:
                changed = replace(portion, moles=portion.moles * count)
                found.extend(as_shares(taken, changed, strength))
            continue
        share = share_of(portion.substance, fragment)
        if share is not None:
            reading = f"{fragment} is {share:.4g} of {portion.substance.name}"
            changed = replace(portion, grams=portion.grams * share, reading=reading)
            found.extend(as_shares(taken, changed, strength))
    return found


def _printed_label(taken: Taken, strength: Measure) -> list[Share]:
    """ "2.5 mL of the single standard 1000 mg/L": the label of the only thing taken."""
    material = taken.dose.material
    if material is None or material.match is not None or taken.dose.amount.dimension != "volume":
        return []
    labels = [m for m in material.strengths if m.dimension == strength.dimension]
    return [diluted(taken, labels[0])] if len(labels) == 1 else []


def _part_by_label(
    taken: Taken,
    fragment: str,
    strength: Measure,
    facts: Facts,
    order: int,
    preparation: Preparation,
    only: bool,
) -> list[Share]:
    """Diluted from a solution of this document whose label speaks of the same part.

    The label of the only dose counts as well when it names nothing.
    """
    return [
        diluted(taken, label)
        for solution in _shelf(taken, facts, order, preparation)
        for label, of in solution.strengths
        if label.dimension == strength.dimension
        and (
            (of is not None and _fragment(of) == fragment)
            or (only and (of is None or (of.match is None and not _fragment(of))))
        )
    ][:1]


def _counts(strength: Measure) -> bool:
    """Whether a strength counts particles, so that all salts of one acid weigh alike in it."""
    return strength.dimension in ("molarity", "molality", "normality")


def _is_water(taken: Taken) -> bool:
    material = taken.dose.material
    return material is not None and material.is_water


def _named(
    doses: list[Taken],
    material: Material,
    strength: Measure,
    facts: Facts,
    order: int,
    preparation: Preparation,
) -> Iterator[Bearers]:
    """Doses of the substance named, of its acid system, or of a stock that holds it."""
    members = [(t, _of_substance(t, material, strength, facts, order, preparation)) for t in doses]
    direct = [(t, s) for t, s in members if s]
    generic = material.match is not None and material.match.generic
    if generic and not _counts(strength):
        return  # "phosphate, 10 mg/L" may be counted as any of its forms
    sure = sum(not t.solvent for t in doses) == 1 or _counts(strength) or not _extra_words(material)
    if direct and not generic:
        same = [(t, s) for t, s in direct if not _only_related(t, material)]
        if same and len(same) < len(direct):
            yield Bearers("substance", tuple(tuple(s) for _, s in same), sure)
        yield Bearers("substance", tuple(tuple(s) for _, s in direct), sure)
    systems = _systems(material)
    if systems:
        sums = [_of_system(t, systems, strength, facts, order, preparation) for t in doses]
        kept = tuple(tuple(s) for s in sums if s)
        if kept and (generic or len(kept) != len(direct)):
            yield Bearers("system", kept)


def _systems(material: Material) -> frozenset[str]:
    if material.match is None:
        return frozenset()
    return frozenset(s.acid_system for s in material.match.substances if s.acid_system)


def _of_substance(
    taken: Taken,
    material: Material,
    strength: Measure,
    facts: Facts,
    order: int,
    preparation: Preparation,
) -> list[Share]:
    own = taken.dose.material
    if own is None:
        return []
    if same_substance(material, own) or _related(material, own):
        diluted = list(_made_here(taken, strength, facts, order))
        after = taken.text.chars[taken.dose.start : taken.dose.end + 12]
        if diluted and _CLAUSE.search(after):
            return diluted
        return [*shares(taken, strength, facts), *diluted]
    if material.match is None:
        return []
    families = {s.family for s in material.match.substances}
    return [
        share
        for solution in _shelf(taken, facts, order, preparation)
        for share in _from_shelf(taken, solution, strength, lambda s: s.family in families)
    ]


# "hydrochloric acid (3.1)", "(see 3.1)": the reagent of that clause, not the bottle as bought.
_CLAUSE = re.compile(r"\s*\((?:see\s+|from\s+)?\d+(?:\.\d+)+\)")
_AS_BOUGHT = re.compile(r"\b(?:conc|glacial|fuming|neat|pure)", re.IGNORECASE)


def _made_here(taken: Taken, strength: Measure, facts: Facts, order: int) -> Iterator[Share]:
    """A bare "hydrochloric acid" where the document makes dilute ones: each of them."""
    own = taken.dose.material
    if own is None or own.match is None or taken.dose.amount.dimension != "volume":
        return
    if own.strengths or own.bracket or _AS_BOUGHT.search(own.words):
        return
    for solution in facts.solutions:
        if solution.order == order:
            continue
        for label, of in solution.strengths:
            if label.dimension == strength.dimension and of is not None and of.match is not None:
                if same_substance(of, own):
                    yield replace(diluted(taken, label), named=False)


def _related(material: Material, own: Material) -> bool:
    """Salt and free form of one substance: "Tris" and "Tris hydrochloride", forms of EDTA."""
    if material.match is None or own.match is None:
        return False
    names = {s.name for s in own.match.substances}
    return any(names & set(s.other_forms) for s in material.match.substances) and bool(
        {s.acid_system for s in material.match.substances}
        & {s.acid_system for s in own.match.substances}
    )


def _extra_words(material: Material) -> bool:
    """Whether the name says more than the substance found in it ("acid alcohol")."""
    written = material.match.written if material.match is not None else ""
    return bool(tokens(material.words) - tokens(written))


def _only_related(taken: Taken, material: Material) -> bool:
    """Whether a dose is a salt or the free form of the substance, not the substance itself."""
    own = taken.dose.material
    return own is not None and own.match is not None and not same_substance(material, own)


def _of_system(
    taken: Taken,
    systems: frozenset[str],
    strength: Measure,
    facts: Facts,
    order: int,
    preparation: Preparation,
) -> list[Share]:
    own = taken.dose.material
    if own is None:
        return []
    if any(s.acid_system in systems for s in candidates(own)):
        return [_per_unit(share, systems) for share in shares(taken, strength, facts)]
    return [
        share
        for solution in _shelf(taken, facts, order, preparation)
        for share in _from_shelf(taken, solution, strength, lambda s: s.acid_system in systems)
    ]


def _per_unit(share: Share, systems: frozenset[str]) -> Share:
    """A share counted in units of the acid: borax brings four of borate."""
    count = _units(share.substance.formula or "", systems) if share.substance is not None else 1.0
    if count == 1.0 or share.label is not None:
        return share
    return replace(share, quantity=share.quantity * count, working=f"{share.working} × {count:g}")


@lru_cache(maxsize=256)
def _units(formula: str, systems: frozenset[str]) -> float:
    from soplint.equilibria import EquilibriumError, acid_systems_of

    try:
        found = acid_systems_of(formula)
    except EquilibriumError:
        return 1.0
    return max((count for system, count in found.items() if system in systems), default=1.0)


def _unnamed(
    doses: list[Taken],
    material: Material | None,
    strength: Measure,
    facts: Facts,
    order: int,
    preparation: Preparation,
) -> Iterator[Bearers]:
    """A strength without a name: of the only stock, the only buffer system, the only solute."""
    told = material is not None and material.match is None and bool(tokens(material.words))
    stocks = [(t, _by_label(t, material, strength, facts, order, preparation)) for t in doses]
    kept = [s for _, s in stocks if s]
    if len(kept) == 1 and len(doses) == 1:
        yield Bearers("stock", (tuple(kept[0]),))
        return
    systems = {
        s.acid_system
        for t in doses
        if t.dose.material is not None
        for s in candidates(t.dose.material)
        if s.acid_system and s.acid_system not in SEQUESTRANTS
    }
    if len(systems) == 1 and not told:
        one = frozenset(str(s) for s in systems)
        sums = [_of_system(t, one, strength, facts, order, preparation) for t in doses]
        group = tuple(tuple(s) for s in sums if s)
        if group:
            yield Bearers("system", group)
            return
    if len(doses) == 1 and (_counts(strength) or not told):
        found = shares(doses[0], strength, facts)
        if found:
            yield Bearers("solute", (tuple(found),))


def _by_label(
    taken: Taken,
    material: Material | None,
    strength: Measure,
    facts: Facts,
    order: int,
    preparation: Preparation,
) -> list[Share]:
    """c1·V1 with the printed strength of the stock, in the unit of the strength asked for."""
    dose = taken.dose
    if dose.material is None or dose.amount.dimension != "volume":
        return []
    printed = (*dose.material.strengths, *dose.material.bracket)
    if any(m.dimension == strength.dimension for m in printed):
        return shares(taken, strength, facts)
    found: list[Share] = []
    for solution in _shelf(taken, facts, order, preparation):
        labels = [
            m
            for m, of in solution.strengths
            if m.dimension == strength.dimension and (of is None or _alike(of, material))
        ]
        if len(labels) == 1:
            found.append(diluted(taken, labels[0]))
    return found


def _alike(of: Material, material: Material | None) -> bool:
    if material is None or of.match is None or material.match is None:
        return True
    return same_substance(of, material) or bool(_systems(of) & _systems(material))


def _shelf(
    taken: Taken, facts: Facts, order: int, preparation: Preparation
) -> tuple[Solution, ...]:
    """Solutions of this document that a dose can mean, the likeliest first."""
    material = taken.dose.material
    if material is None or material.is_water or taken.dose.amount.dimension != "volume":
        return ()
    if material.match is not None and material.strengths and not material.solution:
        return ()
    return facts.meant(material, order, preparation.section)


def _from_shelf(
    taken: Taken,
    solution: Solution,
    strength: Measure,
    fits: Callable[[Substance], bool],
) -> Iterator[Share]:

    amount = taken.dose.amount
    for label, of in solution.strengths:
        if label.dimension != strength.dimension or of is None or of.match is None:
            continue
        if any(fits(s) for s in of.match.substances):
            yield diluted(taken, label)
            return
    held = [c for c in solution.components if c.substance is not None and fits(c.substance)]
    total = sum(_in_unit(c, strength) or 0.0 for c in held)
    if not held or not total:
        return
    yield Share(
        taken,
        amount.base * total,
        relative(amount, ALIQUOT) + max(c.relative for c in held),
        f"{shown(amount)} × {total:.4g} {_base_unit(strength)} ({solution.words})",
        "stock",
    )


def _in_unit(component: Component, strength: Measure) -> float | None:
    if strength.dimension in ("molarity", "molality"):
        return component.mol_per_litre
    if strength.dimension == "normality" and component.substance is not None:
        mol = component.mol_per_litre
        return None if mol is None else mol * equivalents(component.substance)
    if strength.dimension == "mass-concentration":
        return component.gram_per_litre
    if strength.dimension in ("fraction", "ppm") and component.gram_per_litre is not None:
        return component.gram_per_litre / 1000
    return None


def _base_unit(strength: Measure) -> str:
    return {"molarity": "mol/L", "normality": "N", "fraction": "g/mL"}.get(
        strength.dimension, "g/L"
    )


# --- shares of a dose that names the substance itself ------------------------------------------------
