"""Arithmetic that is written out: "(138.2 g/mol) × (20 mmol/L) × 50 mL / 1000 = 0.138 g".

The printed numbers are put into the printed operations and compared with the printed number of the
result.  Numbers without units give the result in whatever unit is printed behind it; where units
stand on the left and agree with the unit of the result they are converted; where they do not
agree (left out, or of a kind unknown here), only agreement counts.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from itertools import product
from math import floor, log10, prod

from soplint.bench.arithmetic import (
    Arithmetic,
    Unclear,
    comma_readings,
    unit_exponents,
    unit_scale,
)
from soplint.bench.preparation import Stated
from soplint.bench.relation import Relation
from soplint.findings.model import Interval
from soplint.notation.phrases import Sentence
from soplint.quantities.model import Measure

_EQUALS = re.compile(r"(?<![<>!=≤≥:])[=≈≅](?!=)")
_NEARLY = re.compile(r"\s*(?:(?:about|approximately|approx\.?|ca\.?|circa|[~≈])\s*)?")
# Behind a number: the expression goes on, it is no result yet.
_GOES_ON = re.compile(r"\s*(?:[×*·∙⋅÷/+^±]|x\s*\d|[-−–]\s*\d|:\s*\d|\d)")
_OF_MORE = re.compile(r"\s*(?:(?:in|per|to)\s+(?:a\b|\d)|per\b)")
_CUT = re.compile(r"(?<!\d):|:(?!\d)|[;→]|(?<=[A-Za-z0-9)%])\.\s|,\s")
_REMARK = re.compile(r"(?<=[A-Za-z0-9%])\s*\([A-Za-z][A-Za-z ]*\)")
_INTRODUCES = re.compile(
    r"(?:is|are|was|hence|thus|so|then|therefore|gives?|means|needs?|requires?|weigh|take|use"
    r"|calculation|mass|volume|amount|example|recovery|content|total|result)$",
    re.IGNORECASE,
)
_LONGEST = 300
_ROUNDING = 0.005  # of intermediate results that were not printed in full
_NUDGED = 0.015  # beyond this the rounding of the printed numbers is no excuse
_COARSE = 0.02  # a result rounded to its figures before the zeros: "1488 = 1500"


@dataclass(frozen=True, slots=True)
class _Equality:
    """An expression of the text and the number that it is said to give."""

    left: str
    result: Measure
    certain: bool  # the whole of the left side was read
    earlier: tuple[float, ...]  # results printed before it in the sentence


def worked_relations(sentence: Sentence) -> Iterator[Relation]:
    """Every "... = number" of a sentence whose left side is arithmetic."""
    for equality in _equalities(sentence):
        try:
            relation = _compare(sentence, equality)
        except (Unclear, ZeroDivisionError, OverflowError):
            continue
        if relation is not None:
            yield relation


def _equalities(sentence: Sentence) -> Iterator[_Equality]:
    chars = sentence.text.chars
    signs = list(_EQUALS.finditer(chars))
    starting = {m.start: m for m in sentence.measures} if signs else {}
    before = 0
    earlier: list[float] = []
    for sign in signs:
        piece, before = chars[before : sign.start()][-_LONGEST:], sign.end()
        nearly = _NEARLY.match(chars, sign.end())
        result = starting.get(nearly.end()) if nearly else None
        if result is None or result.value is None or not result.value:
            continue
        if result.manner in ("at-most", "at-least") or _GOES_ON.match(chars, result.end):
            continue
        read = _left(piece)
        if read is not None:
            left, certain = read
            certain = certain and not (
                _OF_MORE.match(chars, result.end) and re.search(r"[A-Za-z]", left)
            )
            yield _Equality(left, result, certain, tuple(earlier))
        earlier.append(result.value)


def _left(piece: str) -> tuple[str, bool] | None:
    """The arithmetic at the end of a piece of text, and whether nothing of it may be missing."""
    start = 0
    for cut in _CUT.finditer(piece):
        if cut[0] == ":" and re.search(r"\d\s+$", piece[: cut.start()]):
            return None  # a ratio, "1 : 10"
        start = cut.end()
    piece = _REMARK.sub("", piece[start:])
    piece = piece[_unmatched(piece) :].strip()
    if len(re.findall(r"\d+", piece)) < 2:
        return None
    starts = [0] + [m.end() for m in re.finditer(r"(?<=[A-Za-z])\s+(?=[(\[\d.])", piece)]
    for at in starts:
        try:
            Arithmetic(piece[at:])
        except (Unclear, ZeroDivisionError, OverflowError):
            continue
        lead = piece[:at].rstrip()
        if re.search(r"(?:^|[^A-Za-z])[xX]$", lead):
            return None
        certain = not lead or (
            _INTRODUCES.search(lead) is not None and not re.search(r"[×*/÷+]", lead)
        )
        return piece[at:], certain
    return None


def _unmatched(piece: str) -> int:
    """Where the text begins behind its last bracket that is not closed."""
    depth = 0
    for at in range(len(piece) - 1, -1, -1):
        if piece[at] in ")]":
            depth += 1
        elif piece[at] in "([":
            depth -= 1
            if depth < 0:
                return at + 1
    return 0


def _compare(sentence: Sentence, equality: _Equality) -> Relation | None:
    """The relation of an equality; None where it neither agrees nor surely disagrees."""
    result, left = equality.result, equality.left
    readings = [Arithmetic(left, comma) for comma in comma_readings(left)]
    both = [(read, *_values(read, result)) for read in readings]
    for _, strict, loose in both:
        for value in strict + loose:
            if _agrees(value, result):
                return _relation(sentence, equality, value, True)
    sure = [(read, value) for read, strict, _ in both for value in strict]
    if not sure or not equality.certain or any(_doubtful(read, result) for read in readings):
        return None
    if any(not value or _excused(read, value, sentence, equality) for read, value in sure):
        return None
    nearest = min((value for _, value in sure), key=lambda v: abs(log10(abs(result.nominal / v))))
    return _relation(sentence, equality, nearest, False)


def _values(read: Arithmetic, result: Measure) -> tuple[list[float], list[float]]:
    """What the left side gives in the unit of the result: for certain, and by looser readings."""
    value, percent = read.value, result.unit == "%"
    scale = unit_scale(result.dimension, result.factor)
    if not read.has_unit:
        strict = [value.number]
        if read.has_percent:
            strict.append(value.share)
            strict += [value.share * 100] if percent else []
        elif percent and 100.0 not in read.conversions:
            strict.append(value.number * 100)
        return strict, [value.share / scale]
    loose = [value.number, value.share, value.base / scale]
    if percent:
        loose += [value.share * 100, value.base / 10]
    if value.exponents is None or value.exponents != unit_exponents(result.dimension):
        return [], loose
    plain = value.base / scale
    powers = product((-1, 0, 1), repeat=len(read.conversions))
    factors = {prod(c**p for c, p in zip(read.conversions, ps, strict=True)) for ps in powers}
    strict = [plain * factor for factor in factors]
    decimal = abs(log10(scale) - round(log10(scale))) < 1e-6
    converts = not result.unit or (not decimal and result.dimension != "time")  # kg × 2.2 = lb
    return strict, [value.number] if converts else []


def _half(value: float, result: Measure) -> float:
    return (result.high - result.low) / 2 + abs(value) * _ROUNDING


def _agrees(value: float, result: Measure) -> bool:
    return abs(value - result.nominal) <= _half(value, result) * (1 + 1e-9)


def _doubtful(read: Arithmetic, result: Measure) -> bool:
    """Figures that need not be arithmetic: dates, ranges, numbers of documents, ratios of parts."""
    if read.tight_minus and not read.has_bracket:
        return True
    if result.dimension in ("length", "area") and not read.has_unit:
        return True  # "150 × 4.6" is the size of a column
    if read.has_unit or read.has_percent or any(read.places):
        return False
    numbers = read.numbers
    if set(read.signs) == {"+"}:
        return min(numbers) <= 10
    if set(read.signs) == {"/"} and max(numbers) < 1000 and len(numbers) == 2:
        unit = bool(result.unit and result.unit != "%")
        return numbers[0] == 1 or sum(numbers) == 100 or (unit and read.tight)
    return set(read.signs) == {"/"} and read.tight


def _excused(read: Arithmetic, value: float, sentence: Sentence, equality: _Equality) -> bool:
    """Whether a reasonable writer prints this result for the value."""
    result = equality.result
    if _agrees(-value, result) or _rounded_coarsely(value, result):
        return True
    if _rounded_before(read, value, equality):
        return True
    if len(read.numbers) == 2 and result.unit == "%" and "/" in read.signs:
        if any(_agrees(100 * n / sum(read.numbers), result) for n in read.numbers):
            return True  # parts of a whole
    if not read.has_unit and result.dimension == "time":
        return any(
            _agrees(value * f, result) for f in (60, 24, 3600, 1440, 1 / 60, 1 / 24, 1 / 3600)
        )
    return _silent_conversion(read, value, sentence, equality)


def _silent_conversion(
    read: Arithmetic, value: float, sentence: Sentence, equality: _Equality
) -> bool:
    """Whether only a conversion of units lies between both sides, whose units were left out."""
    result = equality.result
    ratio = result.nominal / value
    if ratio <= 0:
        return False
    power = round(log10(ratio))
    if power == 0 or not _agrees(value * 10.0**power, result):
        return False
    if read.has_unit:
        hidden = [n for n in read.bare if n not in read.conversions]
        return power % 3 == 0 and len(hidden) > 1
    if result.unit == "%":
        return 100.0 not in read.conversions
    if power == 1 and result.dimension == "molarity" and not read.conversions and "/" in read.signs:
        return True  # density × per cent / molar mass: 1000 / 100 was left out
    own = round(log10(result.factor)) if result.factor > 0 else 0
    chars = sentence.text.chars
    if "%" in chars[: result.start] or "%" in chars[result.end :]:
        return True
    return power % 3 == 0 or (own % 3 != 0 and (power - own) % 3 == 0)


def _rounded_coarsely(value: float, result: Measure) -> bool:
    """ "24 × 62 = 1500": the figures before the zeros are right."""
    whole = round(abs(result.nominal))
    if whole < 100 or whole % 10 or abs(result.nominal / value - 1) > _COARSE:
        return False
    figures = len(str(whole).rstrip("0"))
    unit = 10.0 ** (floor(log10(abs(value))) - figures + 1)
    return figures > 1 and round(abs(value) / unit) * unit == whole


def _rounded_before(read: Arithmetic, value: float, equality: _Equality) -> bool:
    """Whether the rounding of the printed numbers explains the difference."""
    result, spread = equality.result, 0.0
    slight = abs(result.nominal / value - 1) < _NUDGED
    for place, number in enumerate(read.numbers):
        if not (number in equality.earlier or (slight and read.places[place] > 0)):
            continue
        try:
            nudged = Arithmetic(equality.left, read.decimal_comma, place).value.base
        except (Unclear, ZeroDivisionError, OverflowError):
            return False
        spread += abs(nudged / read.value.base - 1) * abs(value)
    return abs(value - result.nominal) <= _half(value, result) + spread


def _relation(sentence: Sentence, equality: _Equality, value: float, agrees: bool) -> Relation:
    result, half = equality.result, _half(value, equality.result)
    return Relation(
        "worked",
        Stated(sentence.text, result),
        None,
        Interval(value, result.unit, value - half, value + half),
        agrees,
        result.nominal / value - 1 if value else 0.0,
        f"{equality.left} = {value:.4g} {result.unit}".rstrip(),
        exact=True,
    )
