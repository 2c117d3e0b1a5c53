"""Numerals: the digits, powers, fractions and number words of a line, without their units."""

from __future__ import annotations

import re
from typing import NamedTuple

from soplint.quantities.late import LatePattern
from soplint.quantities.style import NumberStyle

MAX_DIGITS = 30  # a longer run of digits is no quantity


class Numeral(NamedTuple):
    """A number as written."""

    start: int
    end: int
    value: float
    half: float  # half a unit of the last digit; 0.5 % of the value where digits say nothing
    digits: int  # significant figures, trailing zeros counted
    kind: str  # digits, power, fraction, word
    flags: tuple[str, ...] = ()
    alternatives: tuple[float, ...] = ()  # the other reading of "1,250"
    places: int = 0  # decimals as written
    before_comma: Numeral | None = None  # the number it is if the comma only separates: "6,50 mM"


VULGAR = {
    "½": 0.5, "⅓": 1 / 3, "⅔": 2 / 3, "¼": 0.25, "¾": 0.75, "⅕": 0.2, "⅖": 0.4, "⅗": 0.6,
    "⅘": 0.8, "⅙": 1 / 6, "⅚": 5 / 6, "⅛": 0.125, "⅜": 0.375, "⅝": 0.625, "⅞": 0.875, "⅒": 0.1,
}  # fmt: skip
_HALF = tuple(float(f"5e-{places + 1}") for places in range(12))
_TAIL_FIRST = frozenset("x×X*·⋅∙eE^/⁄⁻⁺⁰¹²³⁴⁵⁶⁷⁸⁹0123456789") | frozenset(VULGAR)
_SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺−–", "0123456789-+--")
_BODY = re.compile(r"([0-9]*)((?:,[0-9]+){0,5})(\.[0-9]+)?")
_SPACED = LatePattern(r"(?:[ \u00a0\u2009\u202f'’][0-9]{3})+(?![0-9])")
_POWER = LatePattern(
    r" ?[x×X*·⋅∙] ?10 ?(?:(?:\^|\*\*) ?[{(]?([-−–+]?[0-9]{1,3})[})]?|([⁻⁺]?[⁰¹²³⁴⁵⁶⁷⁸⁹]{1,3}))"
)
_E_POWER = LatePattern(r"[eE]([-−–+]?[0-9]{1,3})(?!\w)")
_TEN_POWER = LatePattern(r"(?:\^|\*\*) ?[{(]?([-−–+]?[0-9]{1,3})[})]?|([⁻⁺]?[⁰¹²³⁴⁵⁶⁷⁸⁹]{1,3})")
_LOST_POWER = LatePattern(
    r" ?[x×X] ?10(?:([0-9])(?= ?(?:cells?|CFU|cfu|spores)\b)|([-−–][1-9])(?![0-9.,]))"
)
_FRACTION = LatePattern(r"[/⁄]([1-9][0-9]{0,3})(?![0-9]|[/.,][0-9])")
_MIXED = LatePattern(r" ([0-9]{1,2})[/⁄]([1-9][0-9]?)(?![\w/.])")


def read_numeral(chars: str, start: int, style: NumberStyle) -> Numeral | None:
    """Read the number whose first digit, point or vulgar fraction stands at ``start``.

    Returns None where the digits are too many to be a number.

    Example:
        >>> read_numeral("3.4 x 10^5 cells", 0, NumberStyle()).value
        340000.0
    """
    if chars[start] in VULGAR:
        return _exact(start, start + 1, VULGAR[chars[start]])
    body = _BODY.match(chars, start)
    assert body is not None  # every part of the pattern is optional
    head, commas, point = body.groups()
    end = body.end()
    if end == start or end - start > MAX_DIGITS:
        return None
    if commas:
        return _with_commas(chars, start, end, style)
    if head and (point is None or len(point) <= len(_HALF)):
        places = len(point) - 1 if point else 0
        written = body.group()
        digits = len(written) - (places > 0) if head[0] != "0" else _significant(written)
        numeral = Numeral(
            start, end, float(written), _HALF[places], digits, "digits", (), (), places
        )
    else:
        numeral = decimal(start, end, head, point[1:] if point else "")
    following = chars[end : end + 1]
    if following == " ":
        following = chars[end + 1 : end + 2]
    if following and following in _TAIL_FIRST:
        return _with_tail(chars, numeral, head if not point else "")
    return numeral


def _significant(written: str) -> int:
    return len(written.replace(".", "").lstrip("0")) or 1


def decimal(start: int, end: int, head: str, places: str, exponent: int = 0) -> Numeral:
    """A plain decimal number from its digits before and after the point, times 10^exponent."""
    value = float(f"{head or '0'}.{places or '0'}e{exponent}")
    significant = (head + places).lstrip("0")
    digits = len(significant) or 1
    half = float(f"5e{exponent - len(places) - 1}")
    flags = () if head else ("leading-dot",)
    return Numeral(start, end, value, half, digits, "digits", flags, (), len(places))


def _exact(start: int, end: int, value: float) -> Numeral:
    return Numeral(start, end, value, abs(value) * 0.005, 2, "fraction")


def _with_commas(chars: str, start: int, end: int, style: NumberStyle) -> Numeral | None:
    text = chars[start:end]
    head, *groups = text.split(",")
    last, _, places = groups[-1].partition(".")
    in_threes = all(len(group.partition(".")[0]) == 3 for group in groups) and len(head) <= 3
    plain = decimal(start, start + len(head), head, "") if head else None
    if head and in_threes and head[0] != "0" and (len(groups) > 1 or places):
        joined = head + "".join(groups[:-1]) + last
        return _with_tail(chars, decimal(start, end, joined, places), "")
    if len(groups) == 1 and not places and "." not in text:
        point = decimal(start, end, head, last)
        if in_threes and head and head[0] != "0":
            return _ambiguous(point, decimal(start, end, head + last, ""), style)
        numeral = _with_tail(chars, point, "")
        return numeral if head[:1] == "0" else numeral._replace(before_comma=plain)
    return plain


def _ambiguous(point: Numeral, thousands: Numeral, style: NumberStyle) -> Numeral:
    taken, other = (point, thousands) if style.comma_is_decimal else (thousands, point)
    return taken._replace(alternatives=(other.value,))


def _with_tail(chars: str, numeral: Numeral, integer: str) -> Numeral:
    """The numeral with a power of ten, a fraction bar or a half sign behind it, if there is one."""
    end = numeral.end
    lost = False
    power = _POWER.match(chars, end) or _E_POWER.match(chars, end)
    if power is None and integer == "10":
        power = _TEN_POWER.match(chars, end)
        if power is not None:
            numeral = numeral._replace(value=1.0, half=0.5, digits=1)
    if power is None:
        power = _LOST_POWER.match(chars, end)
        lost = power is not None
    if power is not None:
        return _raised(chars, numeral, power, ("lost-power",) if lost else ())
    return _with_fraction(chars, numeral, integer) if integer else numeral


def _raised(chars: str, numeral: Numeral, power: re.Match[str], flags: tuple[str, ...]) -> Numeral:
    written = next(group for group in power.groups() if group is not None)
    exponent = int(written.translate(_SUPERSCRIPTS))
    if abs(exponent) > 99:
        return numeral
    return numeral._replace(
        end=power.end(),
        value=_times_ten_to(numeral.value, exponent),
        half=_times_ten_to(numeral.half, exponent),
        kind="power",
        flags=numeral.flags + flags,
    )


def _times_ten_to(value: float, exponent: int) -> float:
    written = repr(value)
    return value * 10.0**exponent if "e" in written else float(f"{written}e{exponent}")


def _with_fraction(chars: str, numeral: Numeral, integer: str) -> Numeral:
    end = numeral.end
    bar = _FRACTION.match(chars, end)
    if bar is not None and len(integer) <= 3:
        return _exact(numeral.start, bar.end(), numeral.value / int(bar.group(1)))
    sign = chars[end : end + 1]
    at = end + 1 if sign == " " else end
    if chars[at : at + 1] in VULGAR and len(integer) <= 2:
        return _exact(numeral.start, at + 1, numeral.value + VULGAR[chars[at]])
    mixed = _MIXED.match(chars, end)
    if mixed is not None and len(integer) <= 2:
        over, under = int(mixed.group(1)), int(mixed.group(2))
        if over < under:
            return _exact(numeral.start, mixed.end(), numeral.value + over / under)
    return numeral


def with_space_groups(chars: str, numeral: Numeral) -> Numeral | None:
    """The numeral read on over spaces that group thousands ("1 000"), or None.

    Whether the spaces do group is for the caller to judge: only a unit behind them tells.
    """
    integer = chars[numeral.start : numeral.end]
    if numeral.kind != "digits" or not integer.isdigit() or len(integer) > 3 or integer[0] == "0":
        return None
    groups = _SPACED.match(chars, numeral.end)
    if groups is None or groups.end() - numeral.start > MAX_DIGITS:
        return None
    joined = integer + "".join(char for char in groups.group() if char.isdigit())
    places = re.compile(r"[.,]([0-9]{1,6})(?![0-9])").match(chars, groups.end())
    end = places.end() if places else groups.end()
    return decimal(numeral.start, end, joined, places.group(1) if places else "")
