"""The pH of a preparation, computed from everything in it, and the range that its buffers cover."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from itertools import islice, product

from soplint.bench.facts import Facts
from soplint.bench.portions import Portion, candidates, portions
from soplint.bench.preparation import Preparation, Stated, Taken
from soplint.bench.relation import Relation
from soplint.findings.model import Interval
from soplint.quantities.model import Measure

# Design, section 5: allowance of a computed pH by ionic strength (mol/kg).
DILUTE, CONCENTRATED = 0.2, 0.7
ALLOWANCE, WIDE_ALLOWANCE = 0.10, 0.20
ROOM = (20.0, 25.0)  # °C, when the text states no temperature
_MOST_READINGS = 24
# Single salts that set a pH by themselves: primary standards (Buck et al. 2002, Pure Appl. Chem. 74, 2169).
STANDARDS = {"C8H5KO4", "Na2B4O7", "C4H5KO6", "NaHCO3", "C4H3KO8", "C6H7KO7"}
# Systems that are present for another purpose than to hold the pH.
# Substances that are dissolved for no other purpose than to hold a pH.
BUFFER_SUBSTANCES = {
    *("tris", "hepes", "mes", "mops", "mopso", "pipes", "bes", "tes", "bicine", "tricine", "ches"),
    *("caps", "capso", "taps", "tapso", "aces", "ada", "bis-tris", "epps", "heppso", "dipso"),
    *("ampso", "amp", "ampd", "bis-tris propane", "cacodylate", "glycylglycine"),
}
NO_BUFFERS = {
    *("edta", "azide", "fluoride", "sulfate", "calcium hydroxide ion pair", "hypochlorite"),
    *("cyanide", "sulfide"),  # kept alkaline so that no gas is set free
}


@dataclass(frozen=True, slots=True)
class Mixture:
    """The contents of a preparation in mol/L by formula or name, under one reading."""

    contents: dict[str, float]
    working: str
    systems: frozenset[str]
    acids: int  # doses that bring an acid system or a strong acid or base
    strong: bool  # a strong acid or base is among them


def mixtures(preparation: Preparation, facts: Facts, order: int) -> Iterator[Mixture]:
    """The composition under each reading; nothing where a part of it is unknown."""
    volume = preparation.volume
    if volume is None or volume.litres <= 0:
        return
    parts: list[list[tuple[dict[str, float], str, frozenset[str], bool]]] = []
    for taken in preparation.taken:
        if taken.dose.amount.manner == "about" and _is_adjuster(taken):
            return
        options = _contents(taken, facts, order, preparation)
        if options is None:
            return
        if options:
            parts.append(options)
    for chosen in islice(product(*parts), _MOST_READINGS):
        total: dict[str, float] = {}
        for contents, _, _, _ in chosen:
            for name, mol in contents.items():
                total[name] = total.get(name, 0.0) + mol / volume.litres
        systems = frozenset(s for _, _, found, _ in chosen for s in found)
        working = "; ".join(text for _, text, _, counts in chosen if text and counts)
        strong = any(counts and not found for _, _, found, counts in chosen)
        acids = sum(counts for *_, counts in chosen)
        yield Mixture(total, working, systems, acids, strong)


def _is_adjuster(taken: Taken) -> bool:
    """Whether a dose is a strong acid or base: "about" so much of it settles no pH."""
    material = taken.dose.material
    return material is not None and any(s.family in _STRONG for s in candidates(material))


def _contents(
    taken: Taken, facts: Facts, order: int, preparation: Preparation
) -> list[tuple[dict[str, float], str, frozenset[str], bool]] | None:
    """What a dose brings, in mol by name; [] for water and neutral things, None when unknown."""
    material = taken.dose.material
    if material is None:
        return [] if taken.solvent or taken.dose.amount.dimension == "mass" else None
    if material.is_water:
        return []
    meant = candidates(material)
    if not meant or (material.match and material.match.generic):
        return _of_solution(taken, facts, order, preparation)
    found = []
    for portion in portions(taken, facts):
        if portion.moles is None or portion.substance is None:
            continue
        name = portion.substance.formula or portion.substance.name
        systems, acid = _acid_systems(portion)
        if systems is None:
            return None
        found.append(({name: portion.moles}, portion.working, systems, acid))
    if found:
        return found
    neutral = all(s.acid_system is None and s.kind not in _ACIDIC for s in meant)
    return [] if neutral and meant[0].formula is None else None


_ACIDIC = {"strong acid", "strong base", "acid", "weak organic acid"}


def _acid_systems(portion: Portion) -> tuple[frozenset[str] | None, bool]:
    """Acid systems of a portion and whether it takes part in the acid-base balance."""
    from soplint.equilibria.dissociation import dissociation
    from soplint.equilibria.errors import EquilibriumError

    assert portion.substance is not None
    for name in (portion.substance.formula, portion.substance.name):
        if name is None:
            continue
        try:
            found = dissociation(name)
        except EquilibriumError:
            continue
        strong = portion.substance.kind.startswith("strong") or portion.substance.family in _STRONG
        systems = frozenset(system for system, _ in found.systems)
        return systems, bool(systems) or strong
    return None, False


_STRONG = {"HCl", "NaOH", "KOH", "HNO3", "H2SO4", "HClO4", "HBr", "LiOH"}


def _of_solution(
    taken: Taken, facts: Facts, order: int, preparation: Preparation
) -> list[tuple[dict[str, float], str, frozenset[str], bool]] | None:
    material = taken.dose.material
    if material is None or taken.dose.amount.dimension != "volume":
        return None
    solution = facts.solution(material, order, preparation.section)
    if solution is None or not solution.components or solution.ph is not None:
        return None
    contents: dict[str, float] = {}
    systems: set[str] = set()
    for component in solution.components:
        if component.substance is None or component.mol_per_litre is None:
            return None
        name = component.substance.formula or component.substance.name
        mol = component.mol_per_litre * taken.dose.amount.base
        contents[name] = contents.get(name, 0.0) + mol
        if component.substance.acid_system:
            systems.add(component.substance.acid_system)
    return [(contents, solution.words, frozenset(systems), True)]


# --- computed against stated pH -----------------------------------------------------------------------


def ph_relations(preparation: Preparation, facts: Facts, order: int) -> Iterator[Relation]:
    """The stated pH of a preparation whose pH is not adjusted, against the computed one."""
    if any(a.set_ph.ph is not None or a.set_ph.reagents for a in preparation.adjusted):
        return
    stated = list(_stated_ph(preparation))
    if not stated or not preparation.taken or preparation.volume is None:
        return
    found = [m for m in mixtures(preparation, facts, order) if _is_buffer(m, preparation)]
    for ph, temperature in stated:
        relation = _ph(preparation, ph, temperature, found)
        if relation is not None:
            yield relation


def _stated_ph(preparation: Preparation) -> Iterator[tuple[Stated, Measure | None]]:
    title = preparation.title
    if title is not None and title.ph is not None:
        if title.source != "document" or preparation.sole:
            yield title.ph, title.temperature
    for claimed in preparation.claimed:
        if claimed.claim.kind == "pH":
            yield Stated(claimed.text, claimed.claim.measure), title.temperature if title else None


def _is_buffer(mixture: Mixture, preparation: Preparation) -> bool:
    if not mixture.systems - NO_BUFFERS:
        return False
    if _has_pair(preparation) or mixture.strong:
        return True
    families = {
        s.family
        for t in preparation.taken
        if t.dose.material is not None
        for s in candidates(t.dose.material)
    }
    return mixture.acids == 1 and bool(families & STANDARDS)


def _has_pair(preparation: Preparation) -> bool:
    """Whether two doses bring two forms of one buffer system."""
    forms: dict[str, set[str]] = {}
    for taken in preparation.taken:
        material = taken.dose.material
        if material is None:
            continue
        meant = candidates(material)
        if not meant:
            forms.setdefault("", set()).add(material.words)
        for substance in meant[:1]:
            if substance.acid_system and substance.acid_system not in NO_BUFFERS:
                forms.setdefault(substance.acid_system, set()).add(substance.family)
    return any(len(found) >= 2 for found in forms.values())


def _ph(
    preparation: Preparation,
    stated: Stated,
    temperature: Measure | None,
    found: list[Mixture],
) -> Relation | None:
    from soplint.equilibria import EquilibriumError, solve

    degrees = ROOM if temperature is None else (temperature.nominal,)
    measure = stated.measure
    first: Relation | None = None
    for mixture in found:
        try:
            solutions = [solve(mixture.contents, t) for t in degrees]
        except EquilibriumError:
            continue
        strength = max(s.ionic_strength for s in solutions)
        if strength > CONCENTRATED:
            continue
        allowance = ALLOWANCE if strength <= DILUTE else WIDE_ALLOWANCE
        allowance += max(s.pk_uncertainty for s in solutions)
        values = [s.pH for s in solutions]
        low, high = min(values) - allowance, max(values) + allowance
        agrees = low <= measure.high + 1e-9 and measure.low <= high + 1e-9
        value = min(values, key=lambda v: abs(v - measure.nominal))
        gap = max(measure.low - high, low - measure.high, 0.0)
        at = " to ".join(f"{t:g}" for t in degrees)
        relation = Relation(
            "ph",
            stated,
            preparation.name or None,
            Interval(round(value, 2), "pH", round(low, 3), round(high, 3)),
            agrees,
            gap if measure.nominal >= value else -gap,
            f"charge balance of {_listed(mixture.contents)} at {at} °C,"
            f" ionic strength {strength:.2g} mol/kg: pH {value:.2f} (± {allowance:.2f})",
            tuple(t.stated for t in preparation.taken if not _neutral(t)),
            reading=mixture.working,
            preparation=preparation,
            volume=preparation.volume,
            target=stated,
        )
        if agrees:
            return relation
        first = first or relation
    return first


def exchanged_ph(preparation: Preparation, facts: Facts, order: int) -> Iterator[float]:
    """pH with the amounts of the two forms of a buffer exchanged: by mol and as written."""
    from soplint.equilibria import EquilibriumError, acid_systems_of, solve

    swapped = _with_amounts_exchanged(preparation)
    for one in (preparation, swapped):
        if one is None:
            continue
        for mixture in mixtures(one, facts, order):
            contents = dict(mixture.contents)
            try:
                forms = [name for name in contents if set(acid_systems_of(name)) - NO_BUFFERS]
                if one is preparation:
                    if len(forms) != 2:
                        continue
                    first, second = forms
                    contents[first], contents[second] = contents[second], contents[first]
                yield solve(contents, 25.0).pH
            except EquilibriumError:
                continue


def _with_amounts_exchanged(preparation: Preparation) -> Preparation | None:
    """The preparation with the written amounts of its two buffer components exchanged."""
    pair = [
        index
        for index, taken in enumerate(preparation.taken)
        if taken.dose.material is not None
        and not taken.dose.material.is_water
        and not taken.solvent
    ]
    if len(pair) != 2:
        return None
    first, second = (preparation.taken[i] for i in pair)
    if first.dose.amount.dimension != second.dose.amount.dimension:
        return None
    taken = list(preparation.taken)
    taken[pair[0]] = replace(first, dose=replace(first.dose, amount=second.dose.amount))
    taken[pair[1]] = replace(second, dose=replace(second.dose, amount=first.dose.amount))
    return replace(preparation, taken=taken)


def _neutral(taken: Taken) -> bool:
    material = taken.dose.material
    return material is None or material.is_water


def _listed(contents: dict[str, float]) -> str:
    return " + ".join(f"{mol * 1000:.4g} mmol/L {name}" for name, mol in contents.items())


# --- the useful range -----------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Reach:
    """How far a target pH lies from the nearest pKa' of the buffer systems present."""

    stated: Stated
    system: str
    pka: float
    distance: float
    strength: float  # mol/kg
    temperature: float


def reach_of(preparation: Preparation, facts: Facts, order: int) -> Reach | None:
    """The distance of the buffer's pH from its nearest pKa', or None where it is no named buffer."""
    stated = _aimed_ph(preparation)
    if stated is None or not _called_buffer(preparation):
        return None
    systems = _systems_present(preparation, facts, order)
    if not systems:
        return None
    from soplint.equilibria import EquilibriumError, system_pkas

    title = preparation.title
    given = title.temperature if title else None
    for adjusted in preparation.adjusted:
        given = adjusted.set_ph.temperature or given
    temperature = given.nominal if given is not None and 0 <= given.nominal <= 60 else 25.0
    strength = _ionic_strength(preparation, facts, order)
    ph = stated.measure.nominal
    nearest: tuple[float, str, float] | None = None
    for system in systems:
        try:
            for value in system_pkas(system, temperature, strength):
                distance = abs(ph - value)
                if nearest is None or distance < nearest[0]:
                    nearest = (distance, system, value)
        except EquilibriumError:
            return None
    if nearest is None:
        return None
    return Reach(stated, nearest[1], nearest[2], nearest[0], strength, temperature)


def _aimed_ph(preparation: Preparation) -> Stated | None:
    title = preparation.title
    if title is not None and title.ph is not None and title.source != "document":
        return title.ph
    for adjusted in preparation.adjusted:
        if adjusted.set_ph.ph is not None:
            return Stated(adjusted.text, adjusted.set_ph.ph)
    return title.ph if title is not None and preparation.sole else None


def _called_buffer(preparation: Preparation) -> bool:
    title = preparation.title
    if title is None:
        return False
    words = f"{title.words} {' '.join(m.words for m in title.materials)}".lower()
    if any(word in words for word in ("buffer", "eluent", "mobile phase")):
        return True
    if any(m.match and m.match.generic for m in title.materials) or _set_by_partner(preparation):
        return True
    return title.ph is not None and any(
        s.acid_system in BUFFER_SUBSTANCES for m in title.materials for s in candidates(m)
    )


def _set_by_partner(preparation: Preparation) -> bool:
    """Whether a salt is set with the acid of its own system: sodium formate with formic acid."""
    own = {
        s.acid_system
        for t in preparation.taken
        if t.dose.material is not None
        for s in candidates(t.dose.material)
        if s.acid_system
    }
    return any(
        s.acid_system in own
        for adjusted in preparation.adjusted
        for reagent in adjusted.set_ph.reagents
        for s in candidates(reagent)
    )


def _systems_present(preparation: Preparation, facts: Facts, order: int) -> frozenset[str] | None:
    """Buffer systems of the title and the doses; None when an unknown solution may bring more."""
    systems: set[str] = set()
    title = preparation.title
    for named in title.materials if title else ():
        systems.update(s.acid_system for s in candidates(named) if s.acid_system)
    for taken in preparation.taken:
        material = taken.dose.material
        if material is None or material.is_water:
            continue
        meant = candidates(material)
        systems.update(s.acid_system for s in meant if s.acid_system)
        if not meant and taken.dose.amount.dimension == "volume":
            solution = facts.solution(material, order, preparation.section)
            if solution is None:
                return None
            systems.update(
                c.substance.acid_system
                for c in solution.components
                if c.substance is not None and c.substance.acid_system
            )
    for adjusted in preparation.adjusted:
        for reagent in adjusted.set_ph.reagents:
            # triethylamine set with phosphoric acid: the phosphate buffers as well
            systems.update(s.acid_system for s in candidates(reagent) if s.acid_system)
    return frozenset(systems - NO_BUFFERS)


def _ionic_strength(preparation: Preparation, facts: Facts, order: int) -> float:
    """Ionic strength from the contents where they are known, else from the stated strength."""
    from soplint.equilibria import EquilibriumError, solve

    for mixture in mixtures(preparation, facts, order):
        try:
            return min(solve(mixture.contents).ionic_strength, CONCENTRATED)
        except EquilibriumError:
            break
    title = preparation.title
    molar = [
        t.stated.measure.base
        for t in (title.targets if title else ())
        if t.stated.measure.dimension == "molarity"
    ]
    return min(max(molar, default=0.1), CONCENTRATED)
