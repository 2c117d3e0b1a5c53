"""Numbers that belong together: ranges, tolerances, ratios."""

from __future__ import annotations

import re
from typing import NamedTuple

from soplint.quantities.items import Item
from soplint.quantities.late import LatePattern
from soplint.quantities.numerals import Numeral, read_numeral
from soplint.quantities.style import NumberStyle
from soplint.quantities.unit_reader import _BASIS, ReadUnit, basis_name, read_unit
from soplint.quantities.units import Unit

MAX_PARTS = 6  # of a ratio


class Joined(NamedTuple):
    """Two or more numbers as one quantity."""

    end: int
    manner: str  # tolerance, range, ratio
    low: float
    high: float
    unit: ReadUnit | None
    digits: int
    numeral_end: int
    places_like: Numeral
    start: int = -1
    parts: tuple[float, ...] = ()
    sign: str = ":"
    basis: str | None = None


_JOINT = re.compile(
    r"(?:[ \u00a0]?(?:(?P<pm>±|\+ ?/ ?[-−–]|\+-)|(?P<dash>[-–—−~]|\.{3}|…)|(?P<plus>\+))"
    r"|(?P<colon> ?[:∶](?! )| : ))[ \u00a0]?(?=[-−]?\.?[0-9])"
    r"| (?P<word>to|and|in) (?=[-−]?\.?[0-9])"
)
_NEXT_PART = LatePattern(r" ?[:∶] ?(?=\.?[0-9])")
JOINT_FIRST = frozenset("\u00a0±+-–—−~.…:∶tai")
_CHANGES = LatePattern(
    r"\b(?:dilut|add|bring|brought|ma[dk]e|fill|transfer|top|adjust|rais|reduc|concentrat|chang"
    r"|increas|decreas|pipett|dispens|pour|put|from|up)", re.IGNORECASE
)  # fmt: skip
_PARTS_NEAR = LatePattern(r"dilut|part|ratio|v/v|\bmix|by vol", re.IGNORECASE)
_SLASH_RATIO = LatePattern(r"([0-9.]+)[/⁄]([0-9.]+)$")


def join(chars: str, item: Item, style: NumberStyle) -> Joined | None:
    """Join the number with what follows it, if they make one quantity."""
    if item.numeral.kind == "fraction" and item.unit is None:
        return _slash_ratio(chars, item)
    after = chars[item.end : item.end + 1]
    if after == " ":
        after = chars[item.end + 1 : item.end + 2]
    if not after or after not in JOINT_FIRST:
        return None
    found = _JOINT.match(chars, item.end)
    if found is None:
        return None
    sign = found.lastgroup or ""
    if sign == "colon":
        return _ratio(chars, item, style) if item.unit is None else None
    second = _second(chars, found.end(), style)
    if second is None:
        return None
    numeral, unit = second
    if sign == "pm":
        return _tolerance(chars, item, numeral, unit)
    if sign == "plus":
        return _plus_ratio(chars, item, numeral, unit)
    if sign == "dash":
        return _dash_range(chars, item, numeral, unit, found)
    word = found.group("word")
    if word == "in" or (word == "to" and _is_dilution(chars, item, unit)):
        return _one_in(chars, item, numeral, unit, word)
    if word == "and" and not item.lead.between:
        return None
    return _word_range(chars, item, numeral, unit, word)


def _second(chars: str, at: int, style: NumberStyle) -> tuple[Numeral, ReadUnit | None] | None:
    negative = chars[at] in "-−"
    numeral = read_numeral(chars, at + negative, style)
    if numeral is None:
        return None
    unit = read_unit(chars, numeral.end)
    if numeral.before_comma is not None and unit is None and not style.comma_is_decimal:
        numeral = numeral.before_comma
    if unit is None and chars[numeral.end : numeral.end + 1].isalpha():
        return None
    if negative:
        numeral = numeral._replace(value=-numeral.value)
    return numeral, unit


def _tolerance(chars: str, item: Item, by: Numeral, unit: ReadUnit | None) -> Joined | None:
    value, own, start = item.numeral.value, item.unit, -1
    end = unit.end if unit is not None else by.end
    spread = by.value
    if unit is None and own is None and chars[by.end : by.end + 1] == ")":
        outside = read_unit(chars, by.end + 1)
        if outside is not None and chars[item.start - 1 : item.start] == "(":
            unit, end, start = outside, outside.end, item.start - 1
    if own is None:
        own = unit
        if unit is not None and unit.unit.symbol == "%" and item.lead.kind == "pH":
            return None
    elif unit is not None and unit.unit.symbol != own.unit.symbol:
        if unit.unit.symbol == "%":
            spread = abs(value) * by.value / 100
        else:
            factor = _between(unit.unit, own.unit)
            if factor is None:
                return None
            spread = by.value * factor
    digits = max(item.numeral.digits, 1)
    places = max(_places(item.numeral), _places(by))
    low, high = round(value - spread, places + 3), round(value + spread, places + 3)
    return Joined(end, "tolerance", low, high, own, digits, item.numeral.end, item.numeral, start)


def _places(numeral: Numeral) -> int:
    written = f"{numeral.half:.9f}".rstrip("0")
    return max(0, len(written) - written.index(".") - 2)


def _between(unit: Unit, other: Unit) -> float | None:
    """Factor from one unit into another of the same dimension, or None."""
    if unit.dimension != other.dimension or unit.base != other.base:
        return None
    return 1.0 if unit.symbol == other.symbol else unit.factor / other.factor


def _range(item: Item, second: Numeral, unit: ReadUnit | None, factor: float) -> Joined:
    first, last = item.numeral.value, second.value * factor
    digits = max(item.numeral.digits, second.digits)
    own = item.unit if item.unit is not None else unit
    end = unit.end if unit is not None else second.end
    finer = second if second.half <= item.numeral.half else item.numeral
    low, high = min(first, last), max(first, last)
    return Joined(end, "range", low, high, own, digits, second.end, finer)


def _common_factor(item: Item, unit: ReadUnit | None) -> float | None:
    """Factor of the second number into the unit of the first; None where they do not match."""
    if item.unit is None:
        return 1.0 if item.lead.kind != "pH" or unit is None else None
    return _between(unit.unit, item.unit.unit) if unit is not None else None


def _dash_range(
    chars: str, item: Item, second: Numeral, unit: ReadUnit | None, joint: re.Match[str]
) -> Joined | None:
    factor = _common_factor(item, unit)
    if factor is None:
        return None
    last = second.value * factor
    own = item.unit or unit
    if last <= item.numeral.value and not (
        own is not None and own.unit.dimension == "temperature" and last < 0
    ):
        return None
    if item.lead.kind == "label" and " " in joint.group():
        return None
    if own is None:
        if _leading_zero(chars, second):
            return None
        following = chars[second.end : second.end + 2]
        if following[:1] == "-" or item.numeral.end - item.numeral.start > 5:
            return None
    return _range(item, second, unit, factor)


def _leading_zero(chars: str, numeral: Numeral) -> bool:
    """Whether the digits look like the second half of an identifier: "26-0417"."""
    return chars[numeral.start] == "0" and chars[numeral.start + 1 : numeral.start + 2].isdigit()


def _word_range(
    chars: str, item: Item, second: Numeral, unit: ReadUnit | None, word: str
) -> Joined | None:
    factor = _common_factor(item, unit)
    if factor is None:
        return None
    last, first = second.value * factor, item.numeral.value
    own = item.unit or unit
    dimension = own.unit.dimension if own is not None else ""
    if last <= first and not (dimension == "temperature" and word == "to"):
        return None
    if word == "to" and item.unit is not None and dimension not in ("time", "temperature"):
        before = chars[max(0, item.start - 60) : item.start]
        if dimension != "mass" and _CHANGES.search(before):
            return None
        if dimension == "mass" and last > 3 * first:
            return None
    return _range(item, second, unit, factor)


def _is_dilution(chars: str, item: Item, unit: ReadUnit | None) -> bool:
    if item.unit is not None or unit is not None:
        return False
    return "dilut" in chars[max(0, item.start - 24) : item.start].lower()


def _one_in(
    chars: str, item: Item, second: Numeral, unit: ReadUnit | None, word: str
) -> Joined | None:
    first = item.numeral.value
    if item.unit is not None or unit is not None or second.value <= first or first <= 0:
        return None
    if not (first.is_integer() and second.value.is_integer()):
        return None
    if first != 1 and not _PARTS_NEAR.search(chars[max(0, item.start - 40) : second.end + 20]):
        return None
    return _as_ratio(chars, item, (first, second.value), second, "in" if word == "in" else ":")


def _plus_ratio(chars: str, item: Item, second: Numeral, unit: ReadUnit | None) -> Joined | None:
    if item.unit is not None or unit is not None:
        return None
    bracketed = (
        chars[item.start - 1 : item.start] == "(" and chars[second.end : second.end + 1] == ")"
    )
    near = chars[max(0, item.start - 30) : second.end + 20]
    if not bracketed and not _PARTS_NEAR.search(near):
        return None
    parts, last = (item.numeral.value, second.value), second
    return _as_ratio(chars, item, parts, last, "+")


def _ratio(chars: str, item: Item, style: NumberStyle) -> Joined | None:
    parts, last, end = [item.numeral.value], item.numeral, item.numeral.end
    tight = chars[end : end + 1] != " "
    while len(parts) < MAX_PARTS:
        found = _JOINT.match(chars, end) if len(parts) == 1 else _NEXT_PART.match(chars, end)
        if found is None or (len(parts) == 1 and found.lastgroup != "colon"):
            break
        if len(parts) > 1 and tight and found.group()[-1] == " ":
            break  # "1:200: 5 µL in 995 µL"
        numeral = read_numeral(chars, found.end(), style)
        if numeral is None or chars[numeral.end : numeral.end + 1].isalpha():
            break
        if numeral.before_comma is not None:
            numeral = numeral.before_comma
        parts.append(numeral.value)
        last, end = numeral, numeral.end
    if len(parts) < 2:
        return None
    return _as_ratio(chars, item, tuple(parts), last, ":")


def _slash_ratio(chars: str, item: Item) -> Joined | None:
    found = _SLASH_RATIO.match(chars[item.numeral.start : item.numeral.end])
    if found is None:
        return None
    over, under = float(found.group(1)), float(found.group(2))
    if over + under != 100 and _BASIS.match(chars, item.numeral.end) is None:
        return None
    return _as_ratio(chars, item, (over, under), item.numeral, "/")


def _as_ratio(chars: str, item: Item, parts: tuple[float, ...], last: Numeral, sign: str) -> Joined:
    basis, end = None, last.end
    found = _BASIS.match(chars, end)
    if found is not None:
        basis = basis_name(found.group("basis"))
        balanced = found.group().count("(") == found.group().count(")")
        end = found.end() if balanced else found.end("basis")
    quotient = parts[0] / parts[1] if parts[1] else parts[0]
    digits = max(item.numeral.digits, last.digits)
    return Joined(
        end, "ratio", quotient, quotient, None, digits, last.end, last, -1, parts, sign, basis
    )
