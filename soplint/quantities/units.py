"""The unit table: symbols and spellings, dimensions, factors to the base unit of each dimension.

The table in ``data/units.csv`` is generated from pint (see ``generate.py``); pint itself is
loaded only for a unit that the table does not hold.
"""

from __future__ import annotations

import os
import re
from dataclasses import dataclass
from functools import lru_cache

_TABLE = os.path.join(os.path.dirname(__file__), "data", "units.csv")
_DIMENSIONLESS = frozenset({"fraction", "ppm"})


@dataclass(frozen=True, slots=True)
class Unit:
    """One unit of the table.

    ``value * factor + offset`` is the value in ``base``; the offset is 0 except for °F and K.
    """

    symbol: str  # canonical: "mL", "µL", "mol/L"
    dimension: str
    factor: float
    base: str
    expression: str  # as pint understands it
    offset: float = 0.0
    slip: bool = False  # this spelling of it is a slip of the pen ("m1" for "ml")


class UnitError(ValueError):
    """A unit is unknown, or two units measure different things."""


@lru_cache(maxsize=1)
def unit_table() -> dict[str, Unit]:
    """All spellings of the table with their units.

    Example:
        >>> unit_table()["mcg"].symbol
        'µg'
    """
    table: dict[str, Unit] = {}
    with open(_TABLE, encoding="utf-8") as lines:
        for line in lines:
            if line.startswith("#") or line.startswith("spelling,"):
                continue
            spelling, symbol, dimension, factor, offset, base, slip, expression = line.rstrip(
                "\n"
            ).split(",")
            table[spelling] = Unit(
                symbol, dimension, float(factor), base, expression, float(offset), slip == "slip"
            )
    return table


def lookup_unit(symbol: str) -> Unit | None:
    """The unit that a symbol or spelling stands for, or None where the table has none.

    Words of four letters and more are found in any case.

    Example:
        >>> lookup_unit("Litres").symbol
        'L'
        >>> lookup_unit("furlong") is None
        True
    """
    table = unit_table()
    unit = table.get(symbol)
    if unit is None and len(symbol) >= 4:
        unit = table.get(symbol.lower())
    return unit


def convert(value: float, unit: str, to: str) -> float:
    """Convert a value between two units of the same dimension.

    Args:
        value: the number, in ``unit``.
        unit: symbol or spelling of the unit it is in.
        to: symbol or spelling of the unit wanted.

    Returns:
        The value in ``to``.

    Raises:
        UnitError: one of the units is unknown, or they measure different things.

    Example:
        >>> convert(250.0, "mL", "L")
        0.25
    """
    source, target = known_unit(unit), known_unit(to)
    if source.symbol == target.symbol:
        return value
    same = source.dimension == target.dimension or (
        source.dimension in _DIMENSIONLESS and target.dimension in _DIMENSIONLESS
    )
    if not same or source.base != target.base:
        raise UnitError(f"{unit} is {source.dimension}, {to} is {target.dimension}")
    if source.offset == target.offset:
        return value * source.factor / target.factor
    return (value * source.factor + source.offset - target.offset) / target.factor


def known_unit(symbol: str) -> Unit:
    """The unit of a symbol, from the table or else from pint.

    Raises:
        UnitError: neither knows it.
    """
    unit = lookup_unit(symbol) or unit_by_pint(symbol)
    if unit is None:
        raise UnitError(f"unknown unit: {symbol}")
    return unit


_ASKABLE = re.compile(r"(?!.*\d{3})(?!.*\*\*.*\*\*.*\*\*)[A-Za-zµμ°·/*^ ()0-9.-]{1,32}")

# Dimensionality as pint writes it, and the dimension and base unit of the table.
_BY_DIMENSIONALITY = {
    "[mass]": ("mass", "g"),
    "[length] ** 3": ("volume", "L"),
    "[substance]": ("amount", "mol"),
    "[substance] / [length] ** 3": ("molarity", "mol/L"),
    "[substance] / [mass]": ("molality", "mol/kg"),
    "[mass] / [length] ** 3": ("mass-concentration", "g/L"),
    "[mass] / [substance]": ("molar-mass", "g/mol"),
    "[time]": ("time", "s"),
    "[length]": ("length", "m"),
    "[length] ** 2": ("area", "m**2"),
    "[length] / [time]": ("speed", "m/s"),
    "[mass] / [length] / [time] ** 2": ("pressure", "kPa"),
    "[mass] * [length] ** 2 / [time] ** 2": ("energy", "J"),
    "[mass] * [length] ** 2 / [time] ** 3": ("power", "W"),
}


@lru_cache(maxsize=256)
def unit_by_pint(symbol: str) -> Unit | None:
    """Ask pint for a unit that the table does not hold; None where pint does not know it.

    Loads pint, which takes about a quarter of a second the first time.  Only short expressions of
    letters, small exponents and products are passed on, so that no text can make it compute long.
    """
    if not _ASKABLE.fullmatch(symbol) or not any(char.isalpha() for char in symbol):
        return None
    registry = _registry()
    try:
        quantity = registry.Quantity(1.0, symbol)  # type: ignore[attr-defined]
        dimension, base = _BY_DIMENSIONALITY.get(str(quantity.dimensionality), ("other", ""))
        target = base or str(quantity.to_base_units().units)
        factor = float(quantity.to(target).magnitude)
    except Exception:  # pint raises many kinds; each means that it cannot read the unit
        return None
    return Unit(symbol, dimension, factor, target.replace("**", ""), symbol)


@lru_cache(maxsize=1)
def _registry() -> object:
    import pint

    return pint.UnitRegistry()
