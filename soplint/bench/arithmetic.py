"""Arithmetic of printed numbers: sums, products, brackets, units, decimal commas.

One reading of "12.5 % × 40 g" is carried through three times: the numbers as they are printed
(500), with per cents as hundredths (5), and in gram, litre, mol and second (5 g).
"""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass
from math import isfinite, log, log10, sqrt

from soplint.quantities import lookup_unit

_TOKEN = re.compile(
    r"\s*(?:(?P<number>\d{1,3}(?:[ \u00a0\u2009\u202f]\d{3})+(?!\d)(?:[.,]\d+)?"
    r"|\d{1,3}(?:,\d{3})+(?![\d,])(?:\.\d+)?|\d+[.,]\d+|[.]\d+|\d+)"
    r"(?:\s*(?:[×x*·∙⋅]\s*10\^(?P<power>[-−–]?\d{1,2})|[eE](?P<e>[-−]?\d{1,2})(?![\d.])))?"
    r"(?:\^(?P<raised>[-−]?\d{1,2}))?"
    r"|(?P<root>√|(?:log10|log|lg|ln|sqrt)(?=\s*\())"
    r"|(?P<unit>[a-zA-Zµμ%°‰]+[²³]?(?:/(?=[a-zA-Zµμ])[a-zA-Zµμ]+[²³]?)?)"
    r"|(?P<sign>[()\[\]+×✕*·∙⋅÷/−–-]))"
)
_TIMES, _OVER, _MINUS = "×✕*·∙⋅x", "÷/", "−–-"
_DEEPEST = 12
Exponents = tuple[int, int, int, int]
_PLAIN: Exponents = (0, 0, 0, 0)
# Exponents of gram, litre, mol and second of a unit's dimension.
_EXPONENTS: dict[str, Exponents] = {
    "mass": (1, 0, 0, 0),
    "volume": (0, 1, 0, 0),
    "amount": (0, 0, 1, 0),
    "time": (0, 0, 0, 1),
    "molarity": (0, -1, 1, 0),
    "mass-concentration": (1, -1, 0, 0),
    "density": (1, -1, 0, 0),
    "molar-mass": (1, 0, -1, 0),
    "fraction": _PLAIN,
    "ppm": _PLAIN,
    "count": _PLAIN,
    "number": _PLAIN,
}
_DENSITY = 1000.0  # g/mL in g/L
_COUNTED = re.compile(
    r"(?:samples?|vials?|tubes?|plates?|wells?|flasks?|vessels?|portions?|replicates?|runs?"
    r"|injections?|tests?|parts?|bottles?|ampoules?|doses?|aliquots?)"
)
_FUNCTIONS: dict[str, Callable[[float], float]] = {
    "log": log10,
    "lg": log10,
    "log10": log10,
    "ln": log,
    "sqrt": sqrt,
    "√": sqrt,
}
# Factors between neighbouring units that are written without their unit.
_CONVERSIONS = (10.0, 100.0, 1000.0, 1e4, 1e6, 1e-3, 1e-6, 60.0, 24.0, 3600.0)


class Unclear(Exception):
    """The text is no arithmetic of printed numbers."""


@dataclass(frozen=True, slots=True)
class Value:
    """A value on its way through the operations."""

    number: float  # of the digits as printed
    share: float  # with every per cent as a hundredth
    base: float  # in gram, litre, mol, second
    exponents: Exponents | None  # None: of an unknown unit, or of unequal terms


def unit_exponents(dimension: str) -> Exponents | None:
    """Exponents of gram, litre, mol and second; None for a dimension that has none here."""
    return _EXPONENTS.get(dimension)


def unit_scale(dimension: str, factor: float) -> float:
    """What a number in this unit is multiplied with to be in gram, litre, mol and second."""
    return factor * (_DENSITY if dimension == "density" else 1.0)


def comma_readings(text: str) -> tuple[bool, ...]:
    """Whether a comma before three digits is a decimal comma: one answer, or both."""
    if not re.search(r"\d,\d{3}(?!\d)", text) or re.search(r"\d\.\d", text):
        return (False,)
    if re.search(r"\d,(?:\d{1,2}|\d{4,})(?!\d)|(?<!\d)0,\d", text):
        return (True,)
    return (False, True)


class Arithmetic:
    """Recursive descent over one expression.

    ``nudged`` raises one number by half its last digit, to see what its rounding does.
    """

    def __init__(self, text: str, decimal_comma: bool = False, nudged: int = -1) -> None:
        self.tokens = _tokens(text)
        self.at = 0
        self.decimal_comma = decimal_comma
        self.nudged = nudged
        self.numbers: list[float] = []
        self.bare: list[float] = []  # numbers that have no unit
        self.places: list[int] = []
        self.signs: list[str] = []
        self.has_unit = self.has_percent = self.has_bracket = False
        self.tight_minus = self.tight = False
        self.value = self._sum(0)
        if self.at != len(self.tokens) or not self.signs and not self.has_bracket:
            raise Unclear
        if not (isfinite(self.value.number) and isfinite(self.value.base)):
            raise Unclear

    @property
    def conversions(self) -> tuple[float, ...]:
        """Powers of ten and factors of time that stand without a unit."""
        return tuple(n for n in self.bare if n in _CONVERSIONS)[:4]

    def _sign(self) -> str:
        if self.at >= len(self.tokens):
            return ""
        token = self.tokens[self.at]
        return token["sign"] or ("x" if token["unit"] in ("x", "X") else "")

    def _take(self, sign: str) -> None:
        token = self.tokens[self.at]
        start, chars = token.start("sign" if token["sign"] else "unit"), token.string
        tight = 0 < start < len(chars) - 1 and not (chars[start - 1] + chars[start + 1]).count(" ")
        self.tight = self.tight or tight
        if sign in _MINUS and tight:
            self.tight_minus = True
        self.signs.append(sign)
        self.at += 1

    def _sum(self, depth: int) -> Value:
        if depth > _DEEPEST:
            raise Unclear
        value = self._product(depth)
        while (sign := self._sign()) and sign in "+" + _MINUS:
            self._take(sign)
            other = self._product(depth)
            up = 1 if sign == "+" else -1
            value = Value(
                value.number + up * other.number,
                value.share + up * other.share,
                value.base + up * other.base,
                value.exponents if value.exponents == other.exponents else None,
            )
        return value

    def _product(self, depth: int) -> Value:
        value = self._factor(depth)
        while (sign := self._sign()) and sign in _TIMES + _OVER:
            self._take(sign)
            value = _combined(value, self._factor(depth), -1 if sign in _OVER else 1)
        return value

    def _factor(self, depth: int) -> Value:
        if self.at >= len(self.tokens):
            raise Unclear
        token = self.tokens[self.at]
        self.at += 1
        if token["root"] is not None:
            if depth > _DEEPEST:
                raise Unclear
            inner = self._factor(depth + 1)
            if inner.share <= 0:
                raise Unclear
            number = _FUNCTIONS[token["root"]](inner.share)
            self.has_bracket = True
            return Value(number, number, number, _PLAIN if inner.exponents == _PLAIN else None)
        if token["sign"] in ("(", "["):
            self.has_bracket = True
            value = self._sum(depth + 1)
            if self._sign() not in (")", "]"):
                raise Unclear
            self.at += 1
            return value
        if token["number"] is None:
            raise Unclear
        return self._with_unit(self._number(token))

    def _number(self, token: re.Match[str]) -> float:
        written = re.sub(r"[\s\u00a0\u2009\u202f]", "", token["number"])
        thousands = re.fullmatch(r"[1-9]\d{0,2}(?:,\d{3})+(?:\.\d+)?", written)
        if thousands and not (self.decimal_comma and written.count(",") == 1):
            written = written.replace(",", "")
        written = written.replace(",", ".")
        places = len(written.partition(".")[2])
        value = float(written)
        if self.nudged == len(self.numbers):
            value += 0.5 * 10.0**-places
        value *= 10.0 ** _power(token["power"] or token["e"])
        if token["raised"]:
            value **= _power(token["raised"])
        self.numbers.append(value)
        self.places.append(places)
        return value

    def _with_unit(self, number: float) -> Value:
        token = self.tokens[self.at] if self.at < len(self.tokens) else None
        if token is None or token["unit"] is None or token["unit"] in ("x", "X"):
            self.bare.append(number)
            return Value(number, number, number, _PLAIN)
        self.at += 1
        word = token["unit"]
        if word == "%":
            self.has_percent = True
            return Value(number, number / 100, number / 100, _PLAIN)
        if _COUNTED.fullmatch(word):
            return Value(number, number, number, _PLAIN)
        self.has_unit = True
        scale, exponents = _unit(word)
        return Value(number, number, number * scale, exponents)


def _tokens(text: str) -> list[re.Match[str]]:
    found, position = [], 0
    text = text.strip()
    while position < len(text):
        token = _TOKEN.match(text, position)
        if token is None or token.end() == position:
            raise Unclear
        found.append(token)
        position = token.end()
    return found


def _power(written: str | None) -> int:
    power = int((written or "0").replace("−", "-").replace("–", "-"))
    return max(-30, min(30, power))


def _combined(one: Value, two: Value, up: int) -> Value:
    exponents: Exponents | None = None
    if one.exponents is not None and two.exponents is not None:
        a, b = one.exponents, two.exponents
        exponents = (a[0] + up * b[0], a[1] + up * b[1], a[2] + up * b[2], a[3] + up * b[3])
    if up < 0:
        number, share, base = one.number / two.number, one.share / two.share, one.base / two.base
    else:
        number, share, base = one.number * two.number, one.share * two.share, one.base * two.base
    return Value(number, share, base, exponents)


def _unit(word: str) -> tuple[float, Exponents | None]:
    """Scale to gram, litre, mol, second and exponents; unknown: no exponents, agreement only."""
    unit = lookup_unit(word)
    if unit is not None and unit.dimension in _EXPONENTS:
        return unit_scale(unit.dimension, unit.factor), _EXPONENTS[unit.dimension]
    upper, slash, lower = word.partition("/")
    if slash:
        over, under = lookup_unit(upper), lookup_unit(lower)
        if over is not None and under is not None:
            a, b = _EXPONENTS.get(over.dimension), _EXPONENTS.get(under.dimension)
            if a is not None and b is not None:
                both = (a[0] - b[0], a[1] - b[1], a[2] - b[2], a[3] - b[3])
                return over.factor / under.factor, both
    if unit is None:
        raise Unclear
    return 1.0, None
