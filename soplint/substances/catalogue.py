"""The catalogue at run time: substances, families and forms, from the prepared index.

Substances are made only when a text needs them, so start-up costs one JSON file (about 3 ms).
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Iterator
from dataclasses import replace
from functools import cache
from typing import Any

from .elements import read_data
from .formula import molar_mass, parse_formula
from .model import Substance
from .naming import HYDRATE_WORDS, key

Entry = tuple[tuple[int, ...], str, tuple[str, ...]]  # targets, kind, exact spellings


class Catalogue:
    """All substances with their names; a family is a non-negative number with its members."""

    def __init__(self, prepared: dict[str, Any]) -> None:
        self._rows: list[list[Any]] = prepared["substances"]
        self._made: dict[int, Substance] = {}
        self._stems: dict[str, str] = prepared["stems"]
        self._by_name: dict[str, int] | None = None
        self.families: list[list[int]] = prepared["families"]
        self.names: dict[str, int | list[Any]] = prepared["names"]
        self.compositions: dict[str, list[int]] = prepared["compositions"]
        self.firsts: frozenset[str] = frozenset(prepared["firsts"])

    def __len__(self) -> int:
        return len(self._rows)

    def __iter__(self) -> Iterator[Substance]:
        return (self.substance(number) for number in range(len(self._rows)))

    def substance(self, number: int) -> Substance:
        """The substance of one row."""
        made = self._made.get(number)
        if made is None:
            values: list[Any] = [tuple(v) if isinstance(v, list) else v for v in self._rows[number]]
            made = self._made[number] = Substance(*values)
        return made

    def entry(self, name_key: str) -> Entry:
        """What a name key stands for."""
        stored = self.names[name_key]
        if isinstance(stored, int):
            return (stored,), "", ()
        return tuple(stored[0]), stored[1], tuple(stored[2])

    def members(self, target: int) -> tuple[Substance, ...]:
        """The substances of a target: one row (0 and up) or a whole family (-1 and down)."""
        if target >= 0:
            return (self.substance(target),)
        return tuple(self.substance(number) for number in self.families[-1 - target])

    def family_of(self, substance: Substance) -> tuple[Substance, ...]:
        """The rows of the family that ``substance`` belongs to; itself when it has none."""
        stem = self._stems.get(substance.family)
        if stem is None:
            return (substance,)
        targets, _, _ = self.entry(key(stem))
        for target in targets:
            members = self.members(target)
            if members and members[0].family == substance.family:
                return members
        return (substance,)

    def named(self, name: str) -> Substance | None:
        """The substance whose full catalogue name is ``name``."""
        if self._by_name is None:
            self._by_name = {row[0].lower(): number for number, row in enumerate(self._rows)}
        number = self._by_name.get(name.lower())
        return None if number is None else self.substance(number)

    def same_system(self, acid_system: str) -> Iterator[Substance]:
        """All substances of one acid system."""
        place = list(Substance.__slots__).index("acid_system")
        for number, row in enumerate(self._rows):
            if row[place] == acid_system:
                yield self.substance(number)

    def stem(self, substance: Substance) -> str:
        """Name of the family: without hydrate, strength and state."""
        return self._stems.get(substance.family, substance.name)


@cache
def catalogue() -> Catalogue:
    """The catalogue, loaded once."""
    return Catalogue(json.loads(read_data("index.json")))


def with_water(substance: Substance, water: float) -> Substance:
    """The hydrate of ``substance`` with ``water`` mol water per mol, computed from the formula.

    Density, solubility, CAS number and strength range of the row do not carry over.

    >>> round(with_water(catalogue().named("magnesium chloride, anhydrous"), 4).molar_mass, 2)
    167.27
    """
    base = substance.formula or ""
    parts = [part for part in base.split("·") if not part.endswith("H2O") or part == base]
    anhydrous = "·".join(parts)
    stem = catalogue().stem(substance)
    if water:
        count = "" if water == 1 else f"{water:g}"
        formula = f"{anhydrous}·{count}H2O"
        name = f"{stem} {HYDRATE_WORDS.get(water, f'{water:g}-hydrate')}"
    else:
        formula, name = anhydrous, f"{stem}, anhydrous"
    return replace(
        substance,
        name=name,
        formula=formula,
        molar_mass=molar_mass(formula),
        hydrate=parse_formula(formula).water,
        density=None,
        strength=100.0,
        strength_low=None,
        strength_high=None,
        solubility=None,
        cas=None,
        status="computed",
    )


def complete(members: Iterable[Substance]) -> tuple[Substance, ...]:
    """``members`` with the anhydrous form, computed, if only hydrates are in the catalogue."""
    known = tuple(members)
    crystals = [m for m in known if m.formula and m.hydrate and m.state == "solid"]
    if not crystals or any(m.hydrate == 0 for m in known):
        return known
    return (*known, with_water(crystals[0], 0))


def hydrates(substance: Substance) -> tuple[Substance, ...]:
    """All common hydrates of a substance, the anhydrous form included, fewest water first.

    >>> [round(s.hydrate) for s in hydrates(catalogue().named("calcium chloride dihydrate"))]
    [0, 2, 6]
    """
    members = complete(catalogue().family_of(substance))
    solids = [m for m in members if m.state != "solution"] or list(members)
    return tuple(sorted(solids, key=lambda m: m.hydrate))


def forms(substance: Substance) -> tuple[Substance, ...]:
    """Other forms of a substance: hydrates first, then salts, free acid, free base, strengths.

    Related are the members of its family, the forms its row names, and every substance of the same
    acid system.  The substance itself is not among them.

    >>> "Tris hydrochloride" in [form.name for form in forms(catalogue().named("Tris base"))]
    True
    """
    data = catalogue()
    found: dict[str, Substance] = {}
    for member in complete(data.family_of(substance)):
        found.setdefault(member.name, member)
    for name in substance.other_forms:
        other = data.named(name)
        if other is not None:
            found.setdefault(other.name, other)
    if substance.acid_system:
        for other in data.same_system(substance.acid_system):
            found.setdefault(other.name, other)
            if other.hydrate and other.family != substance.family:
                for member in complete(data.family_of(other)):
                    found.setdefault(member.name, member)
    found.pop(substance.name, None)
    return tuple(found.values())
