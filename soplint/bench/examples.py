"""Formulas of the text and the worked examples that put numbers into them.

"c = m × 1000 / (204.22 × (V − V0))" with "Example: m = 0.5012 g, V = 24.63 mL, V0 = 0.03 mL gives
c = 0.0998 mol/L": the printed numbers go into the printed formula, in the units that they are printed
in, and must give the printed result within its rounding.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from soplint.bench.preparation import Stated
from soplint.bench.relation import Relation
from soplint.findings.model import Interval
from soplint.notation.phrases import Sentence
from soplint.quantities.model import Measure

_SYMBOL = r"[A-Za-z][A-Za-z]?[0-9₀-₉]{0,2}(?:\([A-Za-z0-9₀-₉]{1,12}\))?"
_TOKEN = re.compile(
    rf"\s*(?:(?P<number>\d+(?:[.,]\d+)?)|(?P<symbol>{_SYMBOL})(?![A-Za-z])|(?P<sign>[()\[\]+×*·÷/−–-]))"
)
_FORMULA = re.compile(
    rf"(?:(?P<name>{_SYMBOL})(?:\s+in\s+[^=]{{1,40}})?|[A-Za-z][^=]{{3,80}})\s*=\s*(?P<right>[^=]{{3,200}})"
)
_ASSIGNED = re.compile(rf"(?<![A-Za-z0-9])(?P<name>{_SYMBOL})\s*=\s*(?P<value>\d+(?:[.,]\d+)?)")
_RESULT = re.compile(
    rf"\b(?:gives?|yields?|results? in|then)\b\s+(?:(?P<name>{_SYMBOL})\s*(?:=|is)\s*)?(?=\d)"
)
_DEEPEST = 12
# Results of intermediate steps are rounded before they go on.
_ROUNDING = 0.002


@dataclass(frozen=True, slots=True)
class Formula:
    """A formula of the text: what it gives, its right side and the symbols in it."""

    name: str | None
    right: str
    symbols: frozenset[str]
    section: int


class _Unclear(Exception):
    """The text is no formula of printed numbers and symbols."""


def example_relations(sections: Sequence[Sequence[Sentence]]) -> Iterator[Relation]:
    """Every worked example of the document, put into the formula before it.

    A formula of another section may have been changed by words ("with 121.14 in place of"): there
    only agreement counts.
    """
    formulas: list[Formula] = []
    for section, sentences in enumerate(sections):
        for sentence in sentences:
            chars = sentence.text.chars
            if "=" not in chars:
                continue
            relation, own = _example(sentence, formulas, section)
            if relation is None:  # the formula may stand before the example in the same sentence
                formulas.extend(_formulas(chars, section))
                relation, own = _example(sentence, formulas, section)
            if relation is not None and (own or relation.agrees):
                yield relation


def _formulas(chars: str, section: int) -> Iterator[Formula]:
    for found in _FORMULA.finditer(chars):
        right = re.split(r"[,;:]\s|\.\s|\s(?:where|with|in which)\b", found["right"])[0].rstrip(
            " ."
        )
        try:
            reader = _Reader(right, {})
        except _Unclear:
            continue
        if reader.symbols and len(reader.tokens) >= 3:
            yield Formula(found["name"], right, frozenset(reader.symbols), section)


def _example(
    sentence: Sentence, formulas: Sequence[Formula], section: int
) -> tuple[Relation | None, bool]:
    """The relation of an example and whether its formula stands in the same section."""
    chars = sentence.text.chars
    said = _RESULT.search(chars)
    if said is None or not formulas:
        return None, False
    result = next((m for m in sentence.measures if m.start == said.end()), None)
    values = {
        m["name"]: float(m["value"].replace(",", "."))
        for m in _ASSIGNED.finditer(chars[: said.start()])
    }
    if result is None or result.value is None or not result.value or not values:
        return None, False
    fitting = [f for f in formulas if f.symbols <= set(values)]
    named = [f for f in fitting if said["name"] and f.name == said["name"]]
    if not named:  # a result without its symbol: of a formula in words that takes every value
        fitting = [f for f in fitting if f.name is None and f.symbols == set(values)]
    tried = [(_put_in(sentence, f, values, result), f) for f in reversed(named or fitting)]
    found = [(r, f.section == section) for r, f in tried if r is not None]
    agreeing = [pair for pair in found if pair[0].agrees]
    best = agreeing or found
    return best[0] if best else (None, False)


def _put_in(
    sentence: Sentence, formula: Formula, values: dict[str, float], result: Measure
) -> Relation | None:
    try:
        value = _Reader(formula.right, values).whole()
    except (_Unclear, ZeroDivisionError, OverflowError):
        return None
    if result.unit == "%" and abs(value * 100 / result.nominal - 1) < 0.05:
        value *= 100
    half = (result.high - result.low) / 2 + abs(value) * _ROUNDING
    put = ", ".join(f"{name} = {values[name]:g}" for name in sorted(formula.symbols))
    return Relation(
        "example",
        Stated(sentence.text, result),
        formula.name,
        Interval(value, result.unit or "1", value - half, value + half),
        abs(value - result.nominal) <= half,
        result.nominal / value - 1 if value else 0.0,
        f"{formula.right} with {put} = {value:.5g}",
        exact=True,
    )


class _Reader:
    """Recursive descent over numbers, symbols, signs and brackets."""

    def __init__(self, text: str, values: dict[str, float]) -> None:
        self.values = values
        self.symbols: set[str] = set()
        self.tokens: list[re.Match[str]] = []
        self.at = 0
        position, text = 0, text.rstrip()
        while position < len(text):
            token = _TOKEN.match(text, position)
            if token is None:
                raise _Unclear
            if token["symbol"] is not None and token["symbol"] not in ("x", "X"):
                self.symbols.add(token["symbol"])
            self.tokens.append(token)
            position = token.end()

    def whole(self) -> float:
        """The value of the right side."""
        value = self._sum(0)
        if self.at != len(self.tokens):
            raise _Unclear
        return value

    def _sign(self) -> str:
        if self.at >= len(self.tokens):
            return ""
        token = self.tokens[self.at]
        return token["sign"] or ("×" if token["symbol"] in ("x", "X") else "")

    def _sum(self, depth: int) -> float:
        if depth > _DEEPEST:
            raise _Unclear
        value = self._product(depth)
        while (sign := self._sign()) and sign in "+−–-":
            self.at += 1
            other = self._product(depth)
            value = value + other if sign == "+" else value - other
        return value

    def _product(self, depth: int) -> float:
        value = self._factor(depth)
        while (sign := self._sign()) and sign in "×*·÷/":
            self.at += 1
            other = self._factor(depth)
            value = value / other if sign in "÷/" else value * other
        return value

    def _factor(self, depth: int) -> float:
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
        if token["number"] is not None:
            return float(token["number"].replace(",", "."))
        if token["symbol"] in self.values:
            return self.values[token["symbol"]]
        raise _Unclear
