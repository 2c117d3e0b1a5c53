"""Inverse problems: recipes of a pair, adjustment to a pH, and what a change does to a pH."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from math import isfinite

from soplint.equilibria.dissociation import dissociation
from soplint.equilibria.door import (
    Resolved,
    check_amount,
    check_temperature,
    resolve,
    solve_systems,
)
from soplint.equilibria.errors import BadAmountError, UnreachableError
from soplint.equilibria.mixing import mixture
from soplint.equilibria.roots import bracketed_root
from soplint.equilibria.solution import Solution
from soplint.equilibria.water import density

_MOST_ADDED = 50.0  # mol/L, more than any adjuster holds


@dataclass(frozen=True, slots=True)
class BufferRecipe:
    """Amounts of a pair [in the basis] that give a pH, and the solution they make."""

    acid: str
    acid_amount: float
    base: str
    base_amount: float
    solution: Solution


@dataclass(frozen=True, slots=True)
class Adjustment:
    """Adjuster needed for one litre.

    `amount` in mol of adjuster formula units; `volume` in L of adjuster of the
    strength given; `solution` is the adjusted one.
    """

    adjuster: str
    amount: float
    volume: float
    solution: Solution


def check_ph(ph: float) -> float:
    """A finite pH between -2 and 16, else BadAmountError.

    >>> check_ph(7)
    7.0
    """
    if isinstance(ph, bool) or not isinstance(ph, (int, float)) or not isfinite(ph):
        raise BadAmountError(f"pH {ph!r} is not a number", "pH")
    if not -2.0 <= ph <= 16.0:
        raise BadAmountError(f"pH {ph!r} is not within -2 to 16", "pH")
    return float(ph)


def _sum(parts: list[tuple[Resolved, float]]) -> Resolved:
    """Resolved unit amounts, each times a factor, added."""
    totals: dict[str, float] = {}
    strong: dict[str, float] = {}
    notes: tuple[str, ...] = ()
    for part, factor in parts:
        notes += part.notes
        for name, value in part.totals.items():
            totals[name] = totals.get(name, 0.0) + factor * value
        for name, value in part.strong.items():
            strong[name] = strong.get(name, 0.0) + factor * value
    return Resolved(totals, strong, notes)


def _shared(acid: str, base: str) -> tuple[float, float]:
    """Molecules of the common acid system in a formula unit of each; (1, 1) when none is common."""
    one, two = dict(dissociation(acid).systems), dict(dissociation(base).systems)
    for name, count in one.items():
        if name in two:
            return count, two[name]
    return 1.0, 1.0


def buffer_recipe(
    acid: str,
    base: str,
    target_pH: float,
    concentration: float,
    temperature: float = 25.0,
    basis: str = "mol/L",
    *,
    others: Mapping[str, float] | None = None,
) -> BufferRecipe:
    """Amounts of an acid form and a base form that give a pH at a total concentration.

    The total is that of the acid system both share (n_a x + n_b y = C); without a
    common system it is the sum of the two; a strong base or acid beside a weak
    one is added to the full concentration of the weak one.

    Parameters: acid, base, formula or name; target_pH; concentration [basis];
    temperature [°C]; basis, "mol/L" or "mol/kg"; others, further substances
    present [basis].
    Returns: the two amounts and the solution.
    Validity: as for `solve`.
    Errors: UnreachableError when the pair cannot give that pH; BadAmountError,
    UnknownSubstanceError.

    >>> recipe = buffer_recipe("KH2PO4", "K2HPO4", 7.0, 0.05)
    >>> round(recipe.acid_amount, 4), round(recipe.base_amount, 4)
    (0.0211, 0.0289)
    """
    target, total = check_ph(target_pH), check_amount("concentration", concentration)
    if total == 0.0:
        raise BadAmountError("the concentration is zero", "concentration")
    temperature = check_temperature(temperature)
    one, two = resolve({acid: 1.0}), resolve({base: 1.0})
    beside = resolve(others) if others else Resolved({}, {}, ())
    weak_acid, weak_base = bool(dissociation(acid).systems), bool(dissociation(base).systems)
    in_acid, in_base = _shared(acid, base)

    def amounts(part: float) -> tuple[float, float]:
        if weak_acid and not weak_base:
            return total / in_acid, part * 12.0 * total
        if weak_base and not weak_acid:
            return (1.0 - part) * 12.0 * total, total / in_base
        return (1.0 - part) * total / in_acid, part * total / in_base

    def made(part: float) -> Solution:
        x, y = amounts(part)
        mixed = _sum([(one, x), (two, y), (beside, 1.0)])
        return solve_systems(
            mixed.totals, mixed.strong, temperature, basis, notes=mixed.notes, start=target
        )

    try:
        part = bracketed_root(lambda value: made(value).pH - target, 0.0, 1.0)
    except UnreachableError as error:
        raise UnreachableError(
            f"{acid} with {base} does not reach pH {target:g}: "
            f"it gives {made(0.0).pH:.2f} to {made(1.0).pH:.2f}",
            f"{acid} + {base}",
        ) from error
    x, y = amounts(part)
    return BufferRecipe(acid, x, base, y, made(part))


def _single(adjuster: Mapping[str, float]) -> tuple[str, float]:
    if len(adjuster) != 1:
        raise BadAmountError("the adjuster must be one substance with its strength", "adjuster")
    name, strength = next(iter(adjuster.items()))
    strength = check_amount(name, strength)
    if strength == 0.0:
        raise BadAmountError(f"the strength of {name!r} is zero", name)
    return name, strength


def adjust(
    composition: Mapping[str, float],
    target_pH: float,
    adjuster: Mapping[str, float] | None = None,
    temperature: float = 25.0,
    *,
    made_up: bool = True,
) -> Adjustment:
    """Amount and volume of acid or base that brings a solution to a pH.

    Parameters: composition, formula or name -> mol/L; target_pH; adjuster, one
    substance with its strength [mol/L], e.g. {"HCl": 1.0}; without it 1 mol/L HCl
    or NaOH, whichever works; temperature [°C]; made_up, True when the
    composition is that of the final litre (dissolve, adjust, make up), False when
    the adjuster dilutes one litre of it.
    Returns: mol of adjuster and litres of it, for one litre (final when made_up).
    Validity: as for `solve`.
    Errors: UnreachableError when the adjuster moves the pH the wrong way or
    cannot reach it; BadAmountError, UnknownSubstanceError.

    >>> round(adjust({"Tris": 0.05}, 8.0, {"HCl": 1.0}).amount, 4)
    0.029
    """
    target, temperature = check_ph(target_pH), check_temperature(temperature)
    base = resolve(composition)
    before = solve_systems(base.totals, base.strong, temperature, notes=base.notes).pH
    if adjuster is None:
        adjuster = {"HCl": 1.0} if target < before else {"NaOH": 1.0}
    name, strength = _single(adjuster)
    unit = resolve({name: 1.0})

    def made(amount: float) -> Solution:
        volume = 1.0 if made_up else 1.0 + amount / strength
        mixed = _sum([(base, 1.0 / volume), (unit, amount / volume)])
        return solve_systems(
            mixed.totals, mixed.strong, temperature, notes=mixed.notes, start=target
        )

    if abs(before - target) < 1e-9:
        return Adjustment(name, 0.0, 0.0, made(0.0))
    moved = made(1e-3).pH - before
    if moved * (target - before) < 0.0:
        raise UnreachableError(f"{name} moves the pH from {before:.2f} away from {target:g}", name)
    high = 1e-3
    while (made(high).pH - target) * (before - target) > 0.0:
        high *= 3.0
        if high > _MOST_ADDED:
            raise UnreachableError(f"{name} cannot bring pH {before:.2f} to {target:g}", name)
    amount = bracketed_root(lambda value: made(value).pH - target, 0.0, high)
    return Adjustment(name, amount, amount / strength, made(amount))


def after_addition(
    composition: Mapping[str, float],
    volume: float,
    addition: Mapping[str, float],
    addition_volume: float,
    temperature: float = 25.0,
) -> Solution:
    """The solution after another one is poured in; volumes add up.

    Parameters: composition, addition, formula or name -> mol/L; volume,
    addition_volume [mL]; temperature [°C].
    Returns: the mixed solution.
    Errors: BadAmountError, UnknownSubstanceError.

    >>> buffer = {"CH3COOH": 0.1, "CH3COONa": 0.1}
    >>> round(after_addition(buffer, 100.0, {"HCl": 1.0}, 1.0).pH, 2)
    4.56
    """
    check_amount("addition_volume", addition_volume / 1e9)
    mixed = mixture(composition, volume, addition, check_temperature(temperature))
    return mixed.solve(addition_volume)


def at_temperature(composition: Mapping[str, float], made_at: float, used_at: float) -> Solution:
    """A solution made up by volume at one temperature and used at another.

    Molality stays; constants, activity and density change.

    Parameters: composition, formula or name -> mol/L at made_at; made_at, used_at [°C].
    Returns: the solution at used_at.
    Errors: BadAmountError, UnknownSubstanceError.

    >>> tris = {"Tris": 0.05, "Tris hydrochloride": 0.05}
    >>> round(at_temperature(tris, 25.0, 5.0).pH - at_temperature(tris, 25.0, 25.0).pH, 2)
    0.6
    """
    found = resolve(composition)
    scale = 1.0 / density(check_temperature(made_at))
    totals = {name: scale * value for name, value in found.totals.items()}
    strong = {name: scale * value for name, value in found.strong.items()}
    return solve_systems(totals, strong, check_temperature(used_at), "mol/kg", notes=found.notes)


def after_dilution(
    composition: Mapping[str, float], factor: float, temperature: float = 25.0
) -> Solution:
    """The solution diluted with water.

    Parameters: composition, formula or name -> mol/L; factor, final volume over
    initial volume, at least 1; temperature [°C].
    Returns: the diluted solution.
    Errors: BadAmountError, UnknownSubstanceError.

    >>> stock = {"KH2PO4": 0.25, "Na2HPO4": 0.25}
    >>> after_dilution(stock, 10.0).pH > after_dilution(stock, 1.0).pH
    True
    """
    if not isinstance(factor, (int, float)) or not 1.0 <= factor < float("inf"):
        raise BadAmountError(f"dilution {factor!r} is not 1 or more", "factor")
    found = resolve(composition)
    totals = {name: value / factor for name, value in found.totals.items()}
    strong = {name: value / factor for name, value in found.strong.items()}
    return solve_systems(totals, strong, check_temperature(temperature), notes=found.notes)
