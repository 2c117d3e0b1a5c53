"""Quantities written down: in the manner of the text for corrections, plainly for workings."""

from __future__ import annotations

import math

from soplint.quantities.model import Measure


def format_number_like(value: float, like: Measure, comma: bool = False) -> str:
    """A value with the decimals that ``like`` is written with, for the place of its numeral.

    Where so few decimals would cost more than one per cent of the value, more are given.

    Args:
        value: the number, in the unit of ``like``.
        like: the quantity whose digits it follows.
        comma: whether to write a decimal comma.

    Example:
        >>> from soplint.quantities import find_measures
        >>> format_number_like(9.1949, find_measures("4.87 g")[0])
        '9.19'
    """
    places = max(like.places, 0)
    text = _fixed(value, places)
    while places < 12 and value and abs(float(text) - value) > 0.01 * abs(value):
        places += 1
        text = _fixed(value, places)
    if abs(value) >= 1e15 or (value and abs(value) < 1e-12):
        text = f"{value:.3g}"
    return text.replace(".", ",") if comma else text


def format_like(value: float, like: Measure, comma: bool = False) -> str:
    """A value with the unit of ``like`` and as many decimals as that is written with.

    Args:
        value: the number, in the unit of ``like``.
        like: the quantity that it is to stand for.
        comma: whether to write a decimal comma.

    Example:
        >>> from soplint.quantities import find_measures
        >>> format_like(9.1949, find_measures("4.87 g")[0])
        '9.19 g'
        >>> format_like(8.06, find_measures("pH 7.4")[0])
        'pH 8.1'
    """
    return with_unit(format_number_like(value, like, comma), like.unit)


def with_unit(number: str, unit: str) -> str:
    """A number with its unit in the usual order and spacing.

    Example:
        >>> with_unit("8.0", "pH"), with_unit("10", "X"), with_unit("5", "%")
        ('pH 8.0', '10X', '5 %')
    """
    if unit in ("pH", "pKa"):
        return f"{unit} {number}"
    if unit in ("X", "x"):
        return f"{number}{unit}"
    return f"{number} {unit}" if unit else number


def show(value: float, unit: str, digits: int = 4) -> str:
    """A value and its unit for a working: so many significant digits, no trailing zeros.

    Numbers from 1e-4 to below 1e6 are written without an exponent.

    Args:
        value: the number, in ``unit``.
        unit: symbol of the unit; "" for a bare number.
        digits: significant digits.

    Example:
        >>> show(0.0500000001, "mol/L"), show(1234.5678, "mL"), show(2.5e-7, "mol/L")
        ('0.05 mol/L', '1235 mL', '2.5e-7 mol/L')
    """
    return with_unit(plain_number(value, digits), unit)


def plain_number(value: float, digits: int = 4) -> str:
    """A number with so many significant digits and no trailing zeros.

    Example:
        >>> plain_number(121.135993), plain_number(100.0), plain_number(0.0)
        ('121.1', '100', '0')
    """
    if value == 0 or not math.isfinite(value):
        return "0" if value == 0 else str(value)
    rounded = float(f"{value:.{digits - 1}e}")
    if 1e-4 <= abs(rounded) < 1e6:
        places = max(0, digits - 1 - math.floor(math.log10(abs(rounded))))
        text = f"{rounded:.{places}f}"
        return text.rstrip("0").rstrip(".") if "." in text else text
    mantissa, _, exponent = f"{value:.{digits - 1}e}".partition("e")
    if "." in mantissa:
        mantissa = mantissa.rstrip("0").rstrip(".")
    return f"{mantissa}e{int(exponent)}"


def _fixed(value: float, places: int) -> str:
    text = f"{value:.{places}f}"
    return text.lstrip("-") if float(text) == 0 else text
