"""Strengths of liquids and solutions: per cent, density and molar strength; CAS check digits.

The conversions are exact definitions; the tables (densities, commercial strengths) stand in
``data/`` with source, status and uncertainty.
"""

from __future__ import annotations

import re
from bisect import bisect_left
from functools import cache
from typing import NamedTuple

from .formula import FormulaError, hill, molar_mass, parse_formula
from .model import Substance
from .tables import read_table

_TEMPERATURE_REACH = 0.5  # K: a table at 20 °C serves 19.5 to 20.5 °C


class Strength(NamedTuple):
    """One strength in which a liquid is sold."""

    name: str
    percent_w_w: float
    low: float  # assay range, % w/w
    high: float
    density: float  # g/mL at 20 °C
    mol_per_litre: float  # computed from per cent, density and molar mass
    mol_low: float  # over the assay range, at least 3 % either way
    mol_high: float
    source: str
    status: str


def mol_per_litre(percent: float, density: float, molar_mass: float) -> float:
    """Molar strength of a liquid: c = 10 w d / M.

    ``percent``: % w/w; ``density``: g/mL; ``molar_mass``: g/mol.  Returns mol/L.

    >>> round(mol_per_litre(37, 1.18, 36.458), 2)
    11.98
    """
    return 10.0 * percent * density / molar_mass


def percent_w_w(concentration: float, density: float, molar_mass: float) -> float:
    """Per cent by mass of a solution: w = c M / (10 d); the inverse of ``mol_per_litre``.

    ``concentration``: mol/L; ``density``: g/mL; ``molar_mass``: g/mol.  Returns % w/w.

    >>> round(percent_w_w(11.975, 1.18, 36.458), 1)
    37.0
    """
    return concentration * molar_mass / (10.0 * density)


def grams_per_litre(percent: float, density: float) -> float:
    """Mass of solute per litre of solution: 10 w d, in g/L (``percent`` % w/w, ``density`` g/mL).

    >>> grams_per_litre(50, 1.53)
    765.0
    """
    return 10.0 * percent * density


class _Point(NamedTuple):
    percent: float
    temperature: float
    density: float


@cache
def _densities() -> dict[str, list[_Point]]:
    """Composition (Hill) to points in rising order of per cent (of temperature for water)."""
    table: dict[str, list[_Point]] = {}
    for row in read_table("densities.csv"):
        point = _Point(
            float(row["percent_w_w"]), float(row["temperature_C"]), float(row["density_g_mL"])
        )
        table.setdefault(hill(parse_formula(row["solute"]).elements), []).append(point)
    for points in table.values():
        points.sort()
    return table


def _interpolate(pairs: list[tuple[float, float]], at: float) -> float | None:
    """Linear interpolation in rising pairs; None outside them."""
    place = bisect_left(pairs, (at,))
    if place < len(pairs) and pairs[place][0] == at:
        return pairs[place][1]
    if not 0 < place < len(pairs):
        return None
    (x0, y0), (x1, y1) = pairs[place - 1], pairs[place]
    return y0 + (y1 - y0) * (at - x0) / (x1 - x0)


def density(formula: str, percent: float, temperature: float = 20.0) -> float | None:
    """Density in g/mL of an aqueous solution of ``percent`` % w/w, interpolated in tables.

    Held for H2SO4, HNO3, HCl, H3PO4, CH3COOH, NH3 and NaOH at 20 °C, and for water (``percent``
    ignored) from 0 to 50 °C.  None outside the tables.  Error of the linear interpolation: at most
    0.005 g/mL.  Sources: ``data/densities.csv``.

    >>> round(density("HCl", 37), 4)
    1.1837
    >>> density("NaCl", 10) is None
    True
    """
    try:
        points = _densities().get(hill(parse_formula(formula).elements), [])
    except FormulaError:
        return None
    water = _densities()[hill(parse_formula("H2O").elements)]
    if points is water:
        return _interpolate([(p.temperature, p.density) for p in points], temperature)
    pairs = [
        (p.percent, p.density)
        for p in points
        if abs(p.temperature - temperature) <= _TEMPERATURE_REACH
    ]
    pure = _interpolate([(p.temperature, p.density) for p in water], temperature)
    if pairs and pure is not None and pairs[0][0] > 0:
        pairs.insert(0, (0.0, pure))
    return _interpolate(pairs, percent)


@cache
def _sold() -> dict[str, list[Strength]]:
    """Composition (Hill) to commercial strengths, strongest first."""
    table: dict[str, list[Strength]] = {}
    for row in read_table("concentrated_reagents.csv"):
        percent, heavy = float(row["percent_w_w"]), float(row["density_g_mL_20C"])
        low = min(percent, float(row["assay_low_percent"]))
        high = max(percent, float(row["assay_high_percent"]))
        mass = molar_mass(row["formula"])
        nominal = mol_per_litre(percent, heavy, mass)
        strength = Strength(
            row["name"],
            percent,
            low,
            high,
            heavy,
            nominal,
            min(0.97 * nominal, mol_per_litre(low, heavy, mass)),
            max(1.03 * nominal, mol_per_litre(high, heavy, mass)),
            row["source"],
            row["status"],
        )
        table.setdefault(hill(parse_formula(row["formula"]).elements), []).append(strength)
    for strengths in table.values():
        strengths.sort(key=lambda strength: -strength.percent_w_w)
    return table


def concentrated(substance: Substance) -> tuple[Strength, ...]:
    """The common commercial strengths of a substance, strongest first; empty if none is held.

    For a name without a printed strength ("concentrated HCl") all of them are to be tried.

    >>> from soplint.substances import lookup
    >>> [s.percent_w_w for s in concentrated(lookup("HCl").substances[0])]
    [37.2, 32.0, 25.0]
    """
    if substance.formula is None or substance.hydrate:
        return ()
    own = tuple(_sold().get(hill(parse_formula(substance.formula).elements), ()))
    return tuple(s for s in own if _same_name(s.name, substance.name))


def _same_name(sold: str, name: str) -> bool:
    """Whether a row of the strengths is this substance and not an isomer (same first word)."""
    first = re.match(r"[\w-]+", sold)
    return first is not None and name.lower().startswith(first[0].lower())


def check_cas(cas: str) -> bool:
    """Whether a CAS registry number is well formed and its check digit holds.

    The last digit is the sum of the others, each times its place from the right, modulo 10.

    >>> check_cas("7647-14-5"), check_cas("7647-14-6")
    (True, False)
    """
    found = re.fullmatch(r"([1-9]\d{1,6})-(\d\d)-(\d)", cas)
    if found is None or not cas.isascii():
        return False
    digits = found[1] + found[2]
    total = sum(place * int(digit) for place, digit in enumerate(reversed(digits), 1))
    return total % 10 == int(found[3])
