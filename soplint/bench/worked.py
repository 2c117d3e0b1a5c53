"""Arithmetic that is written out: "(138.2 g/mol) × (20 mmol/L) × 50 mL / 1000 = 0.138 g".

The printed numbers are put into the printed operations; units are carried along as exponents of
gram, litre and mol.  Where the units of both sides agree, the numbers must; where they do not
(left out, or a symbol), only agreement counts.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from math import log10

from soplint.bench.preparation import Stated
from soplint.bench.relation import Relation
from soplint.findings.model import Interval
from soplint.notation.phrases import Sentence
from soplint.quantities import lookup_unit
from soplint.quantities.model import Measure

_TOKEN = re.compile(
    r"\s*(?:(?P<number>\d+(?:,\d{3})+(?:\.\d+)?|\d*\.\d+|\d+,\d+|\d+)(?:\s*(?:×|x|\*)\s*10\^(?P<power>-?\d+))?"
    r"|(?P<unit>[a-zA-Zµ%°]+(?:/(?=[a-zA-Zµ])[a-zA-Zµ]+)?)"
    r"|(?P<sign>[()\[\]+×*·÷/−–-]))"
)
_EQUATION = re.compile(r"=\s*(?=[\d.])")
_DEEPEST, _LONGEST = 12, 300
# Exponents of gram, litre and mol of a unit's dimension.
_EXPONENTS = {
    "mass": (1, 0, 0),
    "volume": (0, 1, 0),
    "amount": (0, 0, 1),
    "molarity": (0, -1, 1),
    "mass-concentration": (1, -1, 0),
    "molar-mass": (1, 0, -1),
    "fraction": (0, 0, 0),
    "number": (0, 0, 0),
}
_DENSITY = 1000.0  # g/mL in g/L


@dataclass(frozen=True, slots=True)
class _Value:
    number: float
    exponents: tuple[int, int, int]


class _Unclear(Exception):
    """The left side is no arithmetic of printed numbers."""


def worked_relations(sentence: Sentence) -> Iterator[Relation]:
    """Every "... = number" of a sentence whose left side is arithmetic."""
    chars = sentence.text.chars
    for equals in _EQUATION.finditer(chars):
        result = next((m for m in sentence.measures if m.start == equals.end()), None)
        if result is None or result.value is None or not result.base:
            continue
        left = re.split(r"[:;=→]|(?<=[a-z])\.\s|,\s", chars[: equals.start()][-_LONGEST:])[-1]
        if not re.search(r"[×x*÷/+]|\s[−-]\s", left) or len(re.findall(r"\d+", left)) < 2:
            continue
        try:
            value = _Reader(left).whole()
        except (_Unclear, ZeroDivisionError, OverflowError):
            continue
        relation = _compare(sentence, result, value, left.strip())
        if relation is not None:
            yield relation


def _compare(sentence: Sentence, result: Measure, value: _Value, left: str) -> Relation | None:
    exponents = (1, -1, 0) if result.dimension == "density" else _EXPONENTS.get(result.dimension)
    factor = result.factor * (_DENSITY if result.dimension == "density" else 1.0)
    same = exponents == value.exponents
    given = value.number / factor
    half = (result.high - result.low) / 2 + abs(given) * 0.005
    agrees = abs(given - result.nominal) <= half
    bare = value.exponents == (0, 0, 0) and not same
    if not agrees and not (same or (bare and not _power_of_ten(given / result.nominal))):
        return None
    return Relation(
        "worked",
        Stated(sentence.text, result),
        None,
        Interval(given, result.unit or "1", given - half, given + half),
        agrees,
        result.nominal / given - 1 if given else 0.0,
        f"{left} = {given:.4g} {result.unit}".rstrip(),
        exact=True,
    )


def _power_of_ten(ratio: float) -> bool:
    """Whether only a conversion of units lies between two numbers (their units were left out)."""
    if ratio <= 0:
        return False
    power = log10(ratio)
    return abs(power - round(power)) < 0.01 and round(power) != 0


class _Reader:
    """Recursive descent over sums, products and brackets."""

    def __init__(self, text: str) -> None:
        self.tokens = self._tokens(text)
        self.at = 0

    @staticmethod
    def _tokens(text: str) -> list[re.Match[str]]:
        found, position = [], 0
        text = text.rstrip()
        while position < len(text):
            token = _TOKEN.match(text, position)
            if token is None or token.end() == position:
                raise _Unclear
            found.append(token)
            position = token.end()
        return found

    def whole(self) -> _Value:
        """The value of the whole left side."""
        value = self._sum(0)
        if self.at != len(self.tokens):
            raise _Unclear
        return value

    def _sign(self) -> str | None:
        if self.at >= len(self.tokens):
            return None
        token = self.tokens[self.at]
        return token["sign"] or ("x" if token["unit"] in ("x", "X") else None)

    def _sum(self, depth: int) -> _Value:
        if depth > _DEEPEST:
            raise _Unclear
        value = self._product(depth)
        while (sign := self._sign()) is not None and sign in "+−–-":
            self.at += 1
            other = self._product(depth)
            if other.exponents != value.exponents:
                raise _Unclear
            change = other.number if sign == "+" else -other.number
            value = _Value(value.number + change, value.exponents)
        return value

    def _product(self, depth: int) -> _Value:
        value = self._factor(depth)
        while (sign := self._sign()) is not None and sign in "×*·÷/x":
            self.at += 1
            other = self._factor(depth)
            up = -1 if sign in "÷/" else 1
            number = value.number / other.number if up < 0 else value.number * other.number
            one, two = value.exponents, other.exponents
            value = _Value(
                number, (one[0] + up * two[0], one[1] + up * two[1], one[2] + up * two[2])
            )
        return value

    def _factor(self, depth: int) -> _Value:
        if self.at >= len(self.tokens):
            raise _Unclear
        token = self.tokens[self.at]
        self.at += 1
        if token["sign"] in ("(", "["):
            value = self._sum(depth + 1)
            if self._sign() not in (")", "]"):
                raise _Unclear
            self.at += 1
            return value
        if token["number"] is None:
            raise _Unclear
        return self._with_unit(_number(token))

    def _with_unit(self, number: float) -> _Value:
        token = self.tokens[self.at] if self.at < len(self.tokens) else None
        if token is None or token["unit"] is None or token["unit"] in ("x", "X"):
            return _Value(number, (0, 0, 0))
        unit = lookup_unit(token["unit"])
        if unit is None or (unit.dimension not in _EXPONENTS and unit.dimension != "density"):
            raise _Unclear
        self.at += 1
        if unit.dimension == "density":
            return _Value(number * unit.factor * _DENSITY, (1, -1, 0))
        return _Value(number * unit.factor, _EXPONENTS[unit.dimension])


def _number(token: re.Match[str]) -> float:
    written = token["number"]
    if re.fullmatch(r"\d+(?:,\d{3})+(?:\.\d+)?", written):
        written = written.replace(",", "")
    value = float(written.replace(",", "."))
    power = int(token["power"]) if token["power"] else 0
    return value * 10.0 ** max(-30, min(30, power))
