"""Dissociation from atom counts: which acid systems and strong ions make up a neutral formula."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import lru_cache
from itertools import combinations

from soplint.equilibria.dissociation import Dissociation, table_rows
from soplint.equilibria.formulas import Atoms, parse_formula

_METALS = frozenset("Na K Li Rb Cs Ag Mg Ca Sr Ba Zn Cu Cd Fe Mn Co Ni Pb Sn Hg Al La Ce".split())
_HYDRATED = frozenset(("borate", "sulfite", "silicate", "chromate", "arsenite"))
"""Systems whose neutral reagents may differ from the acid form by water (oxides)."""


_INORGANIC = frozenset(("carbonate", "cyanide", "SCN-", "Fe(CN)6 3-", "Fe(CN)6 4-", "cyanate"))


_COMPANIONS = frozenset(("ammonia", "sulfate", "Cl-", "Br-", "I-", "NO3-", "ClO4-", "SCN-"))
_COMMON = frozenset(("Cl-", "Br-", "I-", "NO3-", "ClO4-", "SCN-"))


@dataclass(frozen=True, slots=True)
class Component:
    """An acid form or a strong ion as a building block; protons may be missing from an acid."""

    name: str
    atoms: tuple[tuple[str, int], ...]  # without H and O
    hydrogen: int
    oxygen: int
    charge: int
    acid: bool


def _component(name: str, formula: str, charge: int, acid: bool) -> Component:
    atoms = parse_formula(formula)[0]
    rest = tuple((e, n) for e, n in atoms.items() if e not in "HO")
    return Component(name, rest, atoms.get("H", 0), atoms.get("O", 0), charge, acid)


@lru_cache(maxsize=1)
def components() -> tuple[Component, ...]:
    """All acid forms, then all strong ions.

    >>> components()[0].acid
    True
    """
    acids = [
        _component(row["system"], row["formula"], int(row["charge"]), True)
        for row in table_rows("acid_forms.csv")
        if row["system"] != "calcium hydroxide ion pair"
    ]
    ions = [
        _component(row["ion"], row["formula"], int(row["charge"]), False)
        for row in table_rows("strong_ions.csv")
    ]
    return (*acids, *ions)


def _counts(parts: tuple[Component, ...], atoms: Atoms) -> Iterator[tuple[int, ...]]:
    """Numbers of each part that use up every element but H and O."""
    if not parts:
        if not any(n for e, n in atoms.items() if e not in "HO"):
            yield ()
        return
    first = parts[0]
    most = min((atoms.get(e, 0) // n for e, n in first.atoms), default=1)
    for count in range(1, min(most, 12) + 1):
        left = dict(atoms)
        for e, n in first.atoms:
            left[e] -= n * count
        for rest in _counts(parts[1:], left):
            yield (count, *rest)


@dataclass(frozen=True, slots=True)
class Split:
    """A neutral formula taken apart. `missing` protons were lost by the acid forms or to water."""

    parts: tuple[tuple[Component, int], ...]
    missing: int
    water: int


def splits(atoms: Atoms, parts: tuple[Component, ...]) -> Iterator[Split]:
    """Ways to build the atoms of a neutral formula from the parts, water and protons.

    The protons missing must carry away exactly the charge of the parts.

    >>> phosphate = next(c for c in components() if c.name == "phosphate")
    >>> sodium = next(c for c in components() if c.name == "Na+")
    >>> atoms = parse_formula("Na2HPO4")[0]
    >>> [split.missing for split in splits(atoms, (phosphate, sodium))]
    [2]
    """
    for counts in _counts(parts, atoms):
        paired = tuple(zip(parts, counts, strict=True))
        water = atoms.get("O", 0) - sum(c.oxygen * n for c, n in paired)
        hydrogen = sum(c.hydrogen * n for c, n in paired) + 2 * water
        missing = hydrogen - atoms.get("H", 0)
        if missing == sum(c.charge * n for c, n in paired):
            yield Split(paired, missing, water)


def _candidates(atoms: Atoms) -> tuple[list[Component], list[Component]]:
    """Metal ions that must be there, and other parts that could be."""
    metals, others = [], []
    for part in components():
        if not part.atoms or any(atoms.get(e, 0) < n for e, n in part.atoms):
            continue
        if len(part.atoms) == 1 and part.atoms[0][0] in _METALS and not part.acid:
            metals.append(part)
        else:
            others.append(part)
    return metals, others


def _metal_sets(metals: list[Component]) -> list[tuple[Component, ...]]:
    """One ion for each metal; iron is tried in both charges."""
    sets: list[tuple[Component, ...]] = [()]
    for element in dict.fromkeys(part.atoms[0][0] for part in metals):
        ions = [part for part in metals if part.atoms[0][0] == element]
        sets = [(*chosen, ion) for chosen in sets for ion in ions]
    return sets


def _organic(part: Component) -> bool:
    return "C" in dict(part.atoms) and part.name not in _INORGANIC


def _sensible(split: Split) -> bool:
    """Water may be taken up only by oxides and hydroxides."""
    acids = [part.name for part, _ in split.parts if part.acid]
    if split.water == 0:
        return True
    if not acids:
        return split.water > 0 and all(part.charge > 0 for part, _ in split.parts)
    if acids == ["ammonia"]:
        return split.water == 1 and len(split.parts) == 1
    if acids == ["carbonate"]:
        return len(split.parts) == 1
    core = [name for name in acids if name != "ammonia"]
    return len(core) == 1 and core[0] in _HYDRATED


def _holds(split: Split, hint: str | None) -> bool:
    return hint is None or any(part.name == hint for part, _ in split.parts)


def _rank(split: Split) -> tuple[int, bool, int]:
    """Rare strong ions and second acid systems are unlikely; so is water exchanged."""
    acids = sum(part.acid and part.name != "ammonia" for part, _ in split.parts)
    rare = sum(not part.acid and not _common(part) for part, _ in split.parts)
    names = {part.name for part, _ in split.parts}
    if names & {"NO3-", "ClO4-", "SCN-"} and any(_organic(part) for part, _ in split.parts):
        rare += 1
    whole = sum(part.acid for part, _ in split.parts)
    return rare + max(acids - 1, 0), split.water != 0, whole


def _common(part: Component) -> bool:
    return part.name in _COMMON or part.atoms[0][0] in _METALS


def _choices(others: list[Component], size: int) -> Iterator[tuple[Component, ...]]:
    """Sets of `size` parts: one of any kind, the rest common companions of salts."""
    companions = [part for part in others if part.name in _COMPANIONS]
    if not size:
        yield ()
        return
    for main in others:
        for rest in combinations([part for part in companions if part is not main], size - 1):
            yield (main, *rest)


def find_split(atoms: Atoms, hint: str | None = None) -> Split | None:
    """The simplest way to take a neutral formula apart, or None.

    Fewest parts first; `hint` names an acid system that must be among them. Among acids
    of one formula the order of `acid_forms.csv` decides.

    >>> found = find_split(parse_formula("Na2B4O7")[0])
    >>> found.water if found else None
    -5
    """
    if len(atoms) > 8 or sum(atoms.values()) > 120:
        return None
    metals, others = _candidates(atoms)
    for size in range(4):
        found = [
            split
            for chosen in _metal_sets(metals)
            for parts in _choices(others, size)
            for split in splits(atoms, (*chosen, *parts))
            if split.parts and _sensible(split) and _holds(split, hint)
        ]
        if found:
            return min(found, key=_rank)
    return None


def decompose(atoms: Atoms, name: str, hint: str | None = None) -> Dissociation | None:
    """The dissociation of a neutral formula that stands in no table, or None.

    Parameters: atoms, without water of crystallisation; name, for the result; hint,
    an acid system that must be among the parts.

    >>> decompose(parse_formula("C3H5KO3")[0], "potassium lactate").ions
    (('K+', 1.0),)
    """
    split = find_split(atoms, hint)
    return None if split is None else from_split(split, name)


def from_split(split: Split, name: str) -> Dissociation:
    """A split as a dissociation.

    >>> split = find_split(parse_formula("NaHCO3")[0])
    >>> from_split(split, "NaHCO3").systems if split else None
    (('carbonate', 1.0),)
    """
    systems = tuple((part.name, float(n)) for part, n in split.parts if part.acid)
    ions = tuple((part.name, float(n)) for part, n in split.parts if not part.acid)
    return Dissociation(name, systems, ions, "dissociates", ())
