"""What a found name or formula means: the substances it can stand for, best first."""

from __future__ import annotations

import re
from dataclasses import replace
from functools import lru_cache
from typing import NamedTuple

from .catalogue import Catalogue, catalogue, complete, with_water
from .formula import Formula, FormulaError, hill, molar_mass, parse_formula
from .model import Substance
from .naming import LOOK_ALIKE

NOT_MEANT = {
    "HI",
    "CO",
    "NO",
    "COCl2",
}  # a greeting, "Co", "No.", and phosgene for cobalt chloride
_NEARLY_STRONGEST = 0.7  # of the strongest strength by % w/w: what "concentrated" can mean


class Found(NamedTuple):
    """A name or formula found in text, before the words around it are read."""

    start: int  # in the line, or in the run of a formula
    end: int
    targets: tuple[int, ...]  # rows (0 and up) and families (-1 and down) of the catalogue
    kind: str  # "", "g" generic, "n" blocked, "f" formula
    flags: tuple[str, ...] = ()
    made: tuple[Substance, ...] = ()  # of a formula outside the catalogue


class Meaning(NamedTuple):
    """The substances of a match and whether the form is settled."""

    substances: tuple[Substance, ...]
    form_named: bool


def from_formula(formula: str, parsed: Formula, written: str) -> Substance:
    """A substance that is known by its formula only; every number is computed."""
    return Substance(
        name=written,
        formula=formula,
        molar_mass=parsed.molar_mass,
        family=formula,
        hydrate=0.0,
        state="solid",
        kind="",
        acid_system=None,
        density=None,
        strength=100.0,
        strength_low=None,
        strength_high=None,
        solubility=None,
        cas=None,
        hazards=(),
        other_forms=(),
        status="computed",
    )


def _balanced(run: str) -> str:
    """``run`` up to its first closing bracket without an opening one."""
    depth = 0
    for place, char in enumerate(run):
        if char in "([":
            depth += 1
        elif char in ")]":
            depth -= 1
            if depth < 0:
                return run[:place]
    return run


def read_formula(run: str) -> Found | None:
    """The compound at the start of a run of formula characters, or None.

    Known compositions of the catalogue count in any spelling; others must be a neutral row of
    common ions (``inorganic.ions``).

    >>> read_formula("K2S2O8)").end
    6
    >>> read_formula("Dissolve") is None
    True
    """
    run = _balanced(run)
    while run:
        found = _compound(run)
        if found is not None:
            return found
        cut = max(run.rfind("("), run.rfind("["))
        run = run[:cut] if cut > 0 else ""
    return None


def _compound(run: str) -> Found | None:
    flags: tuple[str, ...] = ()
    formula = run
    if not run.isascii():
        formula = run.translate(LOOK_ALIKE)
        flags = ("look-alike",)
    if formula in NOT_MEANT or formula.isdigit():
        return None
    try:
        parsed = parse_formula(formula)
    except FormulaError:
        return None
    if parsed.slips:
        flags += parsed.slips
        formula = re.sub(r"(?<=[A-Za-z])0|(?<=\d)0(?=[1-9]$)", "O", formula)
    if sum(parsed.elements.values()) < 2 or parsed.charge or parsed.water:
        return None
    return _known(run, formula, parsed, flags) or _salt(run, formula, parsed, flags)


def _known(run: str, formula: str, parsed: Formula, flags: tuple[str, ...]) -> Found | None:
    """A composition of the catalogue; capitals alone ("KOH") must be the written formula itself."""
    data = catalogue()
    targets = data.compositions.get(hill(parsed.elements))
    if not targets:
        return None
    plain = formula.isupper() and formula.isalpha()
    if plain and not any(
        m.formula and m.formula.split("·")[0] == formula for t in targets for m in data.members(t)
    ):
        return None
    return Found(0, len(run), tuple(targets), "f", flags)


def _salt(run: str, formula: str, parsed: Formula, flags: tuple[str, ...]) -> Found | None:
    """A neutral row of ions; or, flagged, a metal salt whose charges do not cancel."""
    if formula.isupper() and formula.isalpha():
        return None
    from .inorganic import ions, neutralised  # rare: reads a table of its own

    read = ions(formula)
    if read is None:
        return None
    if read.neutral:
        return Found(0, len(run), (), "f", flags, (from_formula(formula, parsed, formula),))
    right = neutralised(read)
    if right is None or read.cations[0][0] in ("H", "NH4"):
        return None
    targets = catalogue().compositions.get(hill(parse_formula(right).elements))
    if not targets:
        return None
    return Found(0, len(run), tuple(targets), "f", (*flags, "unbalanced"))


@lru_cache(maxsize=4096)
def hydrates_known(targets: tuple[int, ...]) -> frozenset[float]:
    """Mol water per mol of all catalogue forms that the targets can mean."""
    data = catalogue()
    return frozenset(member.hydrate for target in targets for member in _family(data, target))


@lru_cache(maxsize=4096)
def sold_concentrated(targets: tuple[int, ...]) -> bool:
    """Whether "conc." can go with the name: some form is a liquid or solution, and not water."""
    data = catalogue()
    members = [member for target in targets for member in data.members(target)]
    return any(m.state in ("solution", "liquid") and m.name != "water" for m in members)


def _family(data: Catalogue, target: int) -> tuple[Substance, ...]:
    members = data.members(target)
    return data.family_of(members[0]) if target >= 0 else members


@lru_cache(maxsize=4096)
def meaning(
    targets: tuple[int, ...], kind: str, named: bool, water: float | None, before: str
) -> Meaning:
    """Substances of the targets under the words around the name.

    ``named``: hydrate water was written, ``water`` its number (None: "hydrate", "xH2O");
    ``before``: "anhydrous", "concentrated" or "".
    """
    data = catalogue()
    if before == "anhydrous" and not named:
        named, water = True, 0.0
    if named:
        found = _with_named_water(data, targets, water)
    else:
        found = [m for target in targets for m in complete_target(data, target)]
    if before == "concentrated":
        found = _concentrated(found) or found
    if kind == "f" and not named:
        found.sort(key=lambda m: m.state == "solid" and m.hydrate > 0)
    substances = tuple(dict.fromkeys(found))
    if named and water is None:  # "hydrate": settled if there is one, unless its water is unknown
        settled = len(substances) == 1 and substances[0].hydrate > 0
    else:
        settled = named or len(substances) == 1
    return Meaning(substances, settled)


def complete_target(data: Catalogue, target: int) -> tuple[Substance, ...]:
    """All forms of a family, or the one row."""
    members = data.members(target)
    return members if target >= 0 else complete(members)


def _with_named_water(
    data: Catalogue, targets: tuple[int, ...], water: float | None
) -> list[Substance]:
    """The forms with the water that was named; computed when the catalogue has none."""
    members = [m for target in targets for m in _family(data, target) if m.formula]
    if water is None:
        return [m for m in members if m.hydrate] or members
    found = [m for m in members if m.hydrate == water]
    if water == 0:
        spoken = [m for m in found if "anhydrous" in m.name]
        found = spoken or [m for m in found if m.state != "solution"] or found
    if not found and members:
        solid = next((m for m in members if m.state == "solid"), members[0])
        found = [with_water(solid, water)]
    return found or [m for target in targets for m in data.members(target)]


def _concentrated(found: list[Substance]) -> list[Substance]:
    """The commercial solutions and pure liquids among ``found``, without the weak ones."""
    sold = [m for m in found if m.density is not None and m.strength and m.state != "solid"]
    if not sold:
        return []
    strongest = max(m.strength or 0.0 for m in sold)
    return [m for m in sold if (m.strength or 0.0) >= _NEARLY_STRONGEST * strongest]


def made_with_water(found: Found, named: bool, water: float | None, before: str) -> Meaning:
    """Meaning of a formula outside the catalogue: as written, with the water that was named."""
    base = found.made[0]
    if not named or not water or before == "anhydrous":
        return Meaning(found.made, True)
    count = "" if water == 1 else f"{water:g}"
    formula = f"{base.formula}·{count}H2O"
    return Meaning((_hydrated(base, formula, water),), True)


def _hydrated(base: Substance, formula: str, water: float) -> Substance:
    return replace(
        base, name=formula, formula=formula, molar_mass=molar_mass(formula), hydrate=water
    )
