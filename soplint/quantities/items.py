"""One number of a line with what stands before and behind it, before numbers are joined."""

from __future__ import annotations

from typing import NamedTuple

from soplint.quantities.late import LatePattern
from soplint.quantities.leads import Lead, read_lead
from soplint.quantities.noise import identifier_end, in_name, not_a_quantity, token_end
from soplint.quantities.numerals import VULGAR, Numeral, read_numeral, with_space_groups
from soplint.quantities.style import NumberStyle
from soplint.quantities.unit_reader import ReadUnit, read_unit
from soplint.quantities.units import unit_table
from soplint.quantities.words import read_word


class Item(NamedTuple):
    """A numeral, the unit behind it and the lead before it."""

    numeral: Numeral
    unit: ReadUnit | None
    lead: Lead
    start: int  # of the numeral or its sign
    end: int  # of the unit, or of the numeral without one
    normality: bool = False  # "N/50"


_OF_VOLUME = LatePattern(r" (?:the )?(?:final |total )*(?:volume|water)")
_SPACES = " \u00a0\u2009\u202f"
_MINUS = "-−–"
_HYDRATE_DOTS = "·•∙⋅"
_TIMES = ("x", "X", "×")
_OPERATORS = ("=", "×", "*", "/", "·", "+")
_FACTOR = LatePattern(r" ?(?:\(|[A-Za-z](?![A-Za-z0-9]))")
_AFTER_POINT = {"mL", "µL", "mg", "kg", "mM", "mmol", "mol/L", "°C", "g/L", "g/mol"}
_GLUED_BEFORE = {"ph", "рн", "рh", "pн", "mw", "fw", "mr", "x", "pka"}
_GLUED_ABOUT = {"ca", "approx", "about"}  # not "Ca", as in "Ca2+"
_ATTACHED_UNITS = {"mass", "volume", "molarity", "mass-concentration", "fraction", "normality"}


def read_item(chars: str, at: int, style: NumberStyle) -> Item | int:
    """Read the number whose first digit stands at ``at``, or say where to go on reading."""
    start, attached = at, False
    if at:
        before = chars[at - 1]
        if before.isalnum() or before == "_" or before == "^":
            if not _key_before(chars, at):
                return token_end(chars, at)
        elif before == "." and chars[at] not in VULGAR:
            start = _point_start(chars, at)
        elif before in _MINUS or before == "/":
            attached = at > 1 and (chars[at - 2].isalnum() or chars[at - 2] in ")]_")
    numeral = read_numeral(chars, start, style)
    if numeral is None:
        return identifier_end(chars, at)
    unit = read_unit(chars, numeral.end)
    if unit is not None and (
        _is_title(chars, start, numeral, unit) or _is_product(chars, start, numeral, unit)
    ):
        unit = None
    lead = read_lead(chars, start)
    if numeral.before_comma is not None:
        if unit is None and in_name(chars, numeral.end):
            return identifier_end(chars, at)
        numeral, unit = _settle_comma(chars, numeral, unit, lead, style)
    if unit is None:
        grouped = _grouped(chars, numeral, lead) or _with_point(chars, numeral)
        if grouped is not None:
            numeral, unit = grouped
    if unit is None and attached and chars[at - 1] == "/":
        return _over_number(chars, at, numeral, lead)
    if attached and (
        unit is None or (chars[at - 1] != "/" and unit.unit.dimension not in _ATTACHED_UNITS)
    ):
        return identifier_end(chars, at)
    if unit is None:
        end = not_a_quantity(chars, start, numeral.end, numeral.value)
        if end:
            return end
        labelled = lead.kind == "label" and not lead.sign and not _RATIO.match(chars, numeral.end)
        if labelled or lead.sign == "#":
            return identifier_end(chars, at)
    elif not _fits(numeral, unit):
        unit = None
    return _signed(
        chars,
        Item(numeral, unit, lead, start, unit.end if unit is not None else numeral.end),
        attached,
    )


# "buffer 20:15:65": parts of a mixture, not the number of a buffer.
_RATIO = LatePattern(r":\d+(?:\.\d+)?:\d")


def _is_title(chars: str, start: int, numeral: Numeral, unit: ReadUnit) -> bool:
    """Whether a number that opens a line counts the sections: "7.2 Wash", "8 Second stage"."""
    if start or unit.unit.dimension in _ATTACHED_UNITS:
        return False
    word = chars[numeral.end : unit.end].strip()
    return len(word) > 3 and word.isalpha() and word.istitle()


def _is_product(chars: str, start: int, numeral: Numeral, unit: ReadUnit) -> bool:
    """Whether the sign behind the number multiplies: "m × 1000 / (204.22 × V)"."""
    if unit.unit.symbol != "X" or chars[numeral.end] != " ":
        return False
    if chars[numeral.end : unit.end].strip() not in _TIMES:
        return False
    if chars[max(0, start - 2) : start].strip()[-1:] in _OPERATORS:
        return True
    if chars[max(0, start - 3) : start].replace(" ", "").endswith("/("):
        return True
    if numeral.places > 1 or numeral.value > 10_000:
        return True
    return _FACTOR.match(chars, unit.end) is not None


def read_word_item(chars: str, at: int) -> Item | int:
    """Read the number word at ``at``; it counts only with a unit behind it."""
    numeral = read_word(chars, at)
    if numeral is None:
        return at + 1
    unit = read_unit(chars, numeral.end)
    if unit is None and chars.startswith("fold", numeral.end):
        unit = ReadUnit(unit_table()["X"], numeral.end + 4)
    if unit is None and numeral.value < 1 and _OF_VOLUME.match(chars, numeral.end):
        end = at + len(chars[at : numeral.end].removesuffix(" of"))
        return Item(numeral._replace(end=end), None, read_lead(chars, at), at, end)
    written = chars[numeral.end : unit.end].strip() if unit is not None else ""
    if unit is None or (len(written) < 2 and written not in ("L", "l", "g")):
        return numeral.end
    if unit.unit.dimension in ("money", "count") and unit.unit.symbol != "drop":
        return unit.end
    return Item(numeral, unit, read_lead(chars, at), at, unit.end)


def _key_before(chars: str, at: int) -> bool:
    begin = at
    while begin > 0 and at - begin < 8 and chars[begin - 1].isalpha():
        begin -= 1
    if begin and (chars[begin - 1].isalnum() or chars[begin - 1] == "_"):
        return False
    word = chars[begin:at]
    return word in _GLUED_ABOUT or word.lower() in _GLUED_BEFORE


def _point_start(chars: str, at: int) -> int:
    """Where the number starts whose first digit follows a full stop: ".05" or "approx.5"."""
    if at >= 2 and (chars[at - 2].isalnum() or chars[at - 2] in ").]"):
        return at
    return at - 1


def _settle_comma(
    chars: str, numeral: Numeral, unit: ReadUnit | None, lead: Lead, style: NumberStyle
) -> tuple[Numeral, ReadUnit | None]:
    """A decimal comma, or a comma that separates two numbers ("pH 6,50 mM")."""
    first = numeral.before_comma
    assert first is not None
    if lead.kind == "pH":
        keep = unit is None and numeral.value <= 14
    elif unit is not None or lead.kind in ("molar-mass", "density", "pKa"):
        keep = True
    else:
        alone = (
            len(chars) <= numeral.end - numeral.start + 4
            and chars.strip(" |~") == (chars[numeral.start : numeral.end])
        )
        keep = style.comma_is_decimal or alone
    return (numeral, unit) if keep else (first, None)


def _grouped(chars: str, numeral: Numeral, lead: Lead) -> tuple[Numeral, ReadUnit] | None:
    """The number read over spaces between thousands, where a unit follows."""
    after = chars[numeral.end : numeral.end + 1]
    if not after or after not in " \u00a0\u2009\u202f'’" or lead.kind == "label":
        return None
    grouped = with_space_groups(chars, numeral)
    unit = read_unit(chars, grouped.end) if grouped is not None else None
    if grouped is None or unit is None:
        return None
    if after == " " and grouped.value < 10_000_000:
        group = chars[grouped.end - 3 : grouped.end]
        last = float(group) if grouped.value.is_integer() and group.isdigit() else 0.0
        if last:
            grouped = grouped._replace(alternatives=(last,))
    return grouped, unit


def _with_point(chars: str, numeral: Numeral) -> tuple[Numeral, ReadUnit] | None:
    """A number with a bare decimal point: "25. mL"."""
    if chars[numeral.end : numeral.end + 1] != "." or numeral.kind != "digits" or numeral.places:
        return None
    unit = read_unit(chars, numeral.end + 1)
    if unit is None or unit.unit.symbol not in _AFTER_POINT:
        return None
    return numeral._replace(end=numeral.end + 1), unit


def _over_number(chars: str, at: int, numeral: Numeral, lead: Lead) -> Item | int:
    """A number under a slash: "N/50" is a normality, "TE/2" is a name."""
    letter = chars[at - 2]
    before = chars[max(0, at - 5) : at - 2]
    alone = not before[-1:].isalnum() and not before.rstrip()[-1:].isnumeric()
    if letter in "NM" and alone and numeral.value >= 1:
        value = 1 / numeral.value
        inverse = numeral._replace(value=value, half=value * 0.005, digits=2, kind="fraction")
        return Item(inverse, None, lead, at - 2, numeral.end, normality=True)
    if chars[at - 2].isdigit():
        return Item(numeral, None, lead, at, numeral.end)
    return identifier_end(chars, at)


def _fits(numeral: Numeral, unit: ReadUnit) -> bool:
    """Whether a one-letter scale of temperature can be meant at that value."""
    if unit.unit.symbol == "K":
        return numeral.value >= 100
    return unit.unit.symbol != "°F" or numeral.value >= 30 or unit.end - numeral.end > 2


def _signed(chars: str, item: Item, attached: bool) -> Item:
    at = item.start
    if attached or at == 0 or chars[at - 1] not in _MINUS or item.numeral.kind == "word":
        return item
    dimension = item.unit.unit.dimension if item.unit is not None else ""
    if dimension in ("", "temperature", "voltage", "energy", "other"):
        numeral = item.numeral._replace(value=-item.numeral.value)
        return item._replace(numeral=numeral, start=at - 1)
    return item
