"""The short way for the commonest shape, "Dissolve 4.87 g of": a plain number, a plain unit.

It gives what the long way over ``items`` and ``joints`` gives, or None where the shape is any
other; a test holds the two against each other.
"""

from __future__ import annotations

import re
from functools import cache

from soplint.quantities.joints import JOINT_FIRST
from soplint.quantities.leads import is_lead_word
from soplint.quantities.model import Measure
from soplint.quantities.unit_reader import OVER_FIRST
from soplint.quantities.units import Unit, unit_table

_SHAPE = re.compile(r"([0-9]{1,9})(?:\.([0-9]{1,9}))? ?([A-Za-zµμ%]+(?:/[A-Za-z]+)?)(?=[ ,;).]|$)")
_HALF = tuple(float(f"5e-{places + 1}") for places in range(10))
_PLAIN_DIMENSIONS = {
    "mass", "volume", "amount", "molarity", "normality", "fraction", "time", "length",
    "temperature", "mass-concentration",
}  # fmt: skip
_OTHER_SHAPES = {"g", "µM", "mol", "K", "°F"}  # they can mean a force, a pore, "mol %", a letter
_SEPARATORS = tuple(",;|)")
_BULLETS = ("-", "*", "•", "–")
_GO_ON = OVER_FIRST | JOINT_FIRST | frozenset("(%")
_MORE = re.compile(
    r" ?(?:[^\w\s.,;)(]|\.\.|per |to [-−.0-9]|[A-Za-zµμ]+[-−–⁻^])|[. ]\(?%|\.[A-Za-z0-9]"
)


@cache
def _plain_units() -> dict[str, Unit]:
    return {
        word: unit
        for word, unit in unit_table().items()
        if unit.dimension in _PLAIN_DIMENSIONS
        and (unit.symbol not in _OTHER_SHAPES or word == "g")
        and not unit.slip
        and word not in ("pm", "wt")
    }


def _nothing_before(chars: str, at: int) -> bool:
    """Whether what stands before the number says nothing about it."""
    if chars[at - 1] != " ":
        return False
    floor = at - 40 if at > 40 else 0
    stop = at - 1
    begin = chars.rfind(" ", floor, stop) + 1
    word = chars[begin:stop]
    if word in ("of", "to", "at") and begin > 1:
        stop = begin - 1
        word = chars[chars.rfind(" ", floor, stop) + 1 : stop]
    if word.isalpha():
        return not is_lead_word(word)
    return word[-1:] in _SEPARATORS or (word in _BULLETS and begin <= 2)


def quick_measure(chars: str, at: int) -> Measure | None:
    """The quantity whose first digit stands at ``at``, if it has the commonest shape."""
    if at and not _nothing_before(chars, at):
        return None
    found = _SHAPE.match(chars, at)
    if found is None:
        return None
    whole, decimals, word = found.groups()
    unit = _plain_units().get(word)
    if unit is None or (word == "g" and len(whole) > 2):
        return None
    end = found.end()
    if unit.dimension == "temperature" and chars[at - 2 : at - 1] in _BULLETS:
        return None
    after = chars[end : end + 2]
    if after and after[-1] in _GO_ON and _MORE.match(chars, end):
        return None
    if word == "%" and (after[1:].isalpha() or after[1:] == "("):
        return None
    if decimals is None:
        value, half, places = float(whole), 0.5, 0
        digits = len(whole) if whole[0] != "0" else len(whole.lstrip("0")) or 1
        stop = at + len(whole)
    else:
        value, places = float(f"{whole}.{decimals}"), len(decimals)
        half = _HALF[places]
        figures = whole + decimals
        digits = len(figures) if whole[0] != "0" else len(figures.lstrip("0")) or 1
        stop = at + len(whole) + 1 + places
    return Measure(
        at,
        end,
        unit.dimension,
        value,
        round(value - half, 12),
        round(value + half, 12),
        unit.symbol,
        unit.factor,
        digits,
        "plain",
        None,
        (),
        (),
        (),
        unit.offset,
        (at, stop),
        places,
    )
