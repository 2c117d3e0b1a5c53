"""Find the quantities of a line: the door of this room."""

from __future__ import annotations

import re

from soplint.quantities.items import Item, read_item, read_word_item
from soplint.quantities.joints import Joined, join
from soplint.quantities.late import LatePattern
from soplint.quantities.model import Measure
from soplint.quantities.noise import identifier_end
from soplint.quantities.quick import quick_measure
from soplint.quantities.style import DEFAULT, NumberStyle
from soplint.quantities.unit_reader import ReadUnit
from soplint.quantities.units import Unit, unit_table
from soplint.quantities.words import lower_if_number_words, next_word

_DIGIT = re.compile(r"[0-9½⅓⅔¼¾⅕⅖⅗⅘⅙⅚⅛⅜⅝⅞⅒]")
_SPIN = LatePattern(r"spin|spun|centrifug|pellet|rcf|rpm|x ?g\b|×", re.IGNORECASE)
_WASH = LatePattern(
    r"\b(?:wash(?!\s+(?:buffer|solution|medium|saline|mix))|rins|repeat|vortex|invert|spin|extract|flush)",
    re.IGNORECASE,
)
_REPEATS = LatePattern(r"(?:with|for|in|and|at|then|after|each)\b|[.,;)]|$", re.IGNORECASE)
_FORCE_AFTER = LatePattern(
    r" ?(?:for\b|at\b|,|;|\)|\.|/|[0-9]|$|x\b|\(|to\b|max|rt\b)", re.IGNORECASE
)
_WEIGHED = LatePattern(r"weigh|add|take|dissolv|total", re.IGNORECASE)
_EXACT = frozenset(("fold", "count", "volumes"))
_PLAIN = Unit("", "number", 1.0, "", "1")
_PH = Unit("pH", "pH", 1.0, "pH", "1")
_PKA = Unit("pKa", "other", 1.0, "pKa", "1")
_REPEAT = Unit("x", "count", 1.0, "x", "1")
_PH_LIST = frozenset((", ", ",", " and ", ", and ", " or ", "/", " / ", " & "))


def find_measures(chars: str, style: NumberStyle = DEFAULT) -> list[Measure]:
    """All quantities in a line, left to right, without overlap, the longest reading first.

    Args:
        chars: the characters of one line, sentence or table cell.
        style: how the file writes its numbers, see ``number_style``.

    Returns:
        One ``Measure`` per quantity; bare numbers have the dimension ``number``.  Digits inside
        names, formulas, identifiers, dates and clock times are no quantities.

    Example:
        >>> [(m.value, m.unit, m.dimension) for m in find_measures("Add 34mls of 0.5 M HCl")]
        [(34.0, 'mL', 'volume'), (0.5, 'M', 'molarity')]
    """
    found = _DIGIT.search(chars)
    lower = lower_if_number_words(chars)
    word = next_word(lower, 0) if lower else -1
    measures: list[Measure] = []
    while found is not None or word >= 0:
        at = word if found is None or 0 <= word < found.start() else found.start()
        if found is None or at == word:
            item = read_word_item(chars, word)
        else:
            quick = quick_measure(chars, found.start())
            if quick is not None:
                measures.append(quick)
                found = _DIGIT.search(chars, quick.end)
                continue
            item = read_item(chars, found.start(), style)
        end = item if isinstance(item, int) else _measure(chars, item, style, measures)
        end = max(end, at + 1)  # whatever was read: go on, never back
        if found is not None and found.start() < end:
            found = _DIGIT.search(chars, end)
        if 0 <= word < end:
            word = next_word(lower, end)
    return measures


def _measure(chars: str, item: Item, style: NumberStyle, measures: list[Measure]) -> int:
    """Turn an item into a measure, put it on the list, and say where to go on."""
    joined = join(chars, item, style)
    if joined is None:
        if item.unit is None and item.lead.kind != "pH" and _in_identifier(chars, item.end):
            return identifier_end(chars, item.end)
        measure = _single(chars, item, style, measures)
    elif joined.manner == "ratio":
        measure = _ratio(item, joined)
    else:
        measure = _joined(chars, item, joined, measures)
    if not measures or measure.start >= measures[-1].end:
        measures.append(measure)
    return measure.end


def _in_identifier(chars: str, end: int) -> bool:
    """Whether a hyphen glues more digits to a bare number that makes no range with them."""
    return chars[end : end + 1] == "-" and chars[end + 1 : end + 2].isdigit()


def _unit(chars: str, item: Item, read: ReadUnit | None, measures: list[Measure]) -> Unit:
    """The unit that the unit sign, the lead and the line around them mean together."""
    lead = item.lead
    if item.normality:
        return unit_table()["N" if chars[item.start] == "N" else "M"]
    if read is None:
        return _unit_from_lead(chars, item, measures)
    unit = read.unit
    if unit.symbol == "X":
        return _fold_or_repeat(chars, item, read)
    if unit.symbol == "g" and item.numeral.value >= 100 and _is_force(chars, item, read.end):
        return unit_table()["×g"]
    if lead.kind == "molar-mass" and unit.dimension in ("density", "mass-concentration"):
        return unit_table()["g/mol"]
    return unit


def _unit_from_lead(chars: str, item: Item, measures: list[Measure]) -> Unit:
    kind, sign = item.lead.kind, item.lead.sign
    if kind == "pH":
        return _PH
    if kind == "molar-mass":
        return unit_table()["g/mol"]
    if kind == "density":
        return unit_table()["g/mL"]
    if kind == "pKa":
        return _PKA
    if sign and sign in "$€£" and chars[item.end : item.end + 1] != "$":
        return unit_table()[sign]
    if sign and sign in "×xX" and not _after_number(chars, item.start):
        near = chars[max(0, item.start - 60) : item.end + 20]
        return _REPEAT if _WASH.search(near) or sign == "x" else unit_table()["X"]
    if measures and measures[-1].dimension == "pH" and 0 <= item.numeral.value <= 14:
        if chars[measures[-1].end : item.start] in _PH_LIST:
            return _PH
    return _PLAIN


def _after_number(chars: str, start: int) -> bool:
    """Whether the multiplication sign before ``start`` follows another number or unit."""
    before = chars[max(0, start - 4) : start].rstrip(" ×xX")
    return bool(before) and (before[-1].isalnum() or before[-1] == ")")


def _fold_or_repeat(chars: str, item: Item, read: ReadUnit) -> Unit:
    """ "10x buffer" is a strength; "2 x 5 mL" and "wash 3x with" count repeats."""
    end = read.end
    written = chars[item.numeral.end : end].strip(" -").lower()
    if written not in ("x", "×", "✕"):
        return read.unit
    after = chars[end : end + 2].lstrip()
    if after[:1].isdigit() or (after[:1] == "." and after[1:].isdigit()):
        return _REPEAT
    rest = chars[end : end + 8].lstrip()
    if rest.startswith(("times", "wash", "rinse")) and not rest.startswith("wash b"):
        return _REPEAT
    if _REPEATS.match(rest) and _WASH.search(chars[max(0, item.start - 40) : item.start]):
        return _REPEAT
    return read.unit


def _is_force(chars: str, item: Item, end: int) -> bool:
    if _SPIN.search(chars, max(0, item.start - 100), end + 100) is None:
        return False
    before = chars[max(0, item.start - 24) : item.start]
    if before.endswith(("at ", "@ ", "@")):
        return True
    return _FORCE_AFTER.match(chars, end) is not None and _WEIGHED.search(before) is None


def _single(chars: str, item: Item, style: NumberStyle, measures: list[Measure]) -> Measure:
    numeral, read, lead = item.numeral, item.unit, item.lead
    unit = _unit(chars, item, read, measures)
    value, manner, alternatives = numeral.value, lead.manner, numeral.alternatives
    if alternatives and unit.dimension == "speed":
        value = max(value, *alternatives)
    if style.settled or unit.dimension == "speed":
        alternatives = ()
    half = numeral.half
    if unit.dimension in _EXACT:
        half = abs(value) * 0.005
    flags = numeral.flags + (read.flags if read is not None else ())
    if lead.sign == "±":
        manner, flags = _plus_minus(unit, flags)
        if unit.dimension == "temperature":
            unit = Unit(unit.symbol, "temperature-difference", unit.factor, "°C", unit.expression)
    if lead.kind == "molar-mass" and read is not None and unit.symbol != read.unit.symbol:
        flags = (*flags, "unit-slip")
    if manner == "about":
        half = max(half, 0.2) if unit is _PH else max(half, abs(value) * 0.1)
    if half >= 1e-9:  # free of the last binary digits' noise
        low, high = round(value - half, 12), round(value + half, 12)
    else:
        low, high = value - half, value + half
    start = lead.start if lead.kind == "pH" and unit is _PH and lead.adjacent else item.start
    return Measure(
        start,
        item.end,
        unit.dimension,
        value,
        low,
        high,
        unit.symbol,
        unit.factor,
        numeral.digits,
        manner,
        read.basis if read is not None else None,
        (),
        alternatives,
        flags,
        unit.offset,
        (item.start, numeral.end),
        numeral.places,
    )


def _plus_minus(unit: Unit, flags: tuple[str, ...]) -> tuple[str, tuple[str, ...]]:
    if unit is _PH or unit is _PLAIN:
        return "about", (*flags, "plus-minus")
    return "tolerance", (*flags, "plus-minus")


def _joined(chars: str, item: Item, joined: Joined, measures: list[Measure]) -> Measure:
    unit = _unit(chars, item._replace(unit=joined.unit), joined.unit, measures)
    tolerance = joined.manner == "tolerance"
    flags = item.numeral.flags + (joined.unit.flags if joined.unit is not None else ())
    start = joined.start if joined.start >= 0 else item.start
    if unit is _PH and item.lead.adjacent and item.lead.kind == "pH":
        start = item.lead.start
    return Measure(
        start,
        joined.end,
        unit.dimension,
        item.numeral.value if tolerance else None,
        joined.low,
        joined.high,
        unit.symbol,
        unit.factor,
        joined.digits,
        joined.manner,
        joined.unit.basis if joined.unit is not None else None,
        (),
        (),
        flags,
        unit.offset,
        (item.start, joined.numeral_end),
        joined.places_like.places,
    )


def _ratio(item: Item, joined: Joined) -> Measure:
    return Measure(
        item.start,
        joined.end,
        "ratio",
        None,
        joined.low,
        joined.high,
        joined.sign,
        1.0,
        joined.digits,
        item.lead.manner,
        joined.basis,
        joined.parts,
        (),
        item.numeral.flags,
        0.0,
        (item.start, joined.numeral_end),
    )
