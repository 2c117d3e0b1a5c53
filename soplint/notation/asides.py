"""Quantities that no recipe takes: package sizes, fineness of devices, speeds of a centrifuge,
counts of repeats.

They are left in the sentence as words, so that they can be counted as set aside.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from soplint.notation.terminals import Terminal

_PACKAGES = {
    "jar",
    "pack",
    "package",
    "bag",
    "sachet",
    "box",
    "bottle",
    "tin",
    "tub",
    "kit",
    "vial",
    "ampoule",
}
_REPEATED = {"WASH", "MIX", "REPEAT", "FILTER", "HEAT", "COOL", "CALIBRATE"}
_TIMES = re.compile(r"(?:[xX×]|times)$")
_THINGS = {"NAME", "WATER", "SOLUTION", "OTHER", "OF", "LPAR"}
_FINEST = 0.01  # g; a balance that reads coarser is named for its capacity
_LOWEST_SPEED = 100  # x g
# "18,000 g for 15 min", "4500 g, 20 min, 4 °C"
_SPIN = re.compile(
    r"\s*(?:,|for|at|/|\()?\s*(?:for\s+)?\d+(?:\s*[-–]\s*\d+)?\s*(?:min|s|sec|h|hours?|°C|C)\b",
    re.I,
)
# "to the nearest 0.1 mg", "read to 0.02 mL": how fine a device reads.
_FINENESS = re.compile(
    r"\b(?:nearest|readability|accura(?:te|cy)|resolution|precision|divisions?|graduat(?:ed|ion)s?"
    r"|read|rounded|tolerance|capacity|readable)(?: (?:to|of|in|within))?:? $",
    re.I,
)
# Words that only say once more that the quantity before them is a volume: "120 mL volume".
_VOLUME_WORDS = re.compile(r"(?:liters?|litres?|ml|vol\.?|volume|mark)(?: volume)?", re.I)


def asides(chars: str, found: list[Terminal]) -> list[Terminal]:
    """The terminals with such quantities turned into words."""
    result: list[Terminal] = []
    for index, terminal in enumerate(found):
        if terminal.kind == "MASS" and (
            _is_package(chars, found, index) or _is_speed(chars, terminal)
        ):
            terminal = replace(terminal, kind="WARE")
        elif terminal.kind == "MASS" and _is_fineness(found, index):
            terminal = replace(terminal, kind="WARE")
        elif terminal.kind == "ADD" and _is_device(chars, found, index):
            terminal = replace(terminal, kind="WARE")
            result[-1] = replace(result[-1], kind="WARE")
        elif terminal.kind in ("MASS", "VOLUME") and _FINENESS.search(
            chars, max(0, terminal.start - 60), terminal.start
        ):
            terminal = replace(terminal, kind="WARE")
        elif terminal.kind == "WARE" and _is_content(found, index):
            terminal = replace(terminal, kind="OTHER")
        elif terminal.kind in ("FOLD", "COUNT") and _is_repeat(chars, found, index):
            terminal = replace(terminal, kind="WARE")
        elif terminal.kind == "OTHER" and result and result[-1].kind == "VOLUME":
            if _VOLUME_WORDS.fullmatch(chars[terminal.start : terminal.end]):
                continue
        result.append(terminal)
    return result


def _is_package(chars: str, found: Sequence[Terminal], index: int) -> bool:
    """ "250 g jar": the word behind the mass is a package."""
    if index + 1 >= len(found) or found[index + 1].kind not in ("OTHER", "WARE"):
        return False
    following = chars[found[index + 1].start : found[index + 1].end].split()
    return following[0].lower().rstrip(".,s") in _PACKAGES


def _is_fineness(found: Sequence[Terminal], index: int) -> bool:
    """ "Weigh 0.25 g to 0.1 mg", "balance 0.01 g": how fine the balance reads."""
    measure = found[index].measure
    if measure is None or not index or measure.base > _FINEST or measure.digits > 1:
        return False
    if index + 1 < len(found) and found[index + 1].kind in _THINGS:
        return False
    if found[index - 1].kind == "WARE":
        return found[index - 1].measure is None
    weighed = any(terminal.kind in ("WEIGH", "WARE") for terminal in found[:index])
    return weighed and found[index - 1].kind == "TO"


def _is_device(chars: str, found: Sequence[Terminal], index: int) -> bool:
    """ "the 10 mL pipette": the word names the device whose size stands before it."""
    terminal = found[index]
    if not index or found[index - 1].kind != "VOLUME":
        return False
    if not chars.lower().startswith("pipet", terminal.start):
        return False
    return index + 1 >= len(found) or found[index + 1].kind not in ("VOLUME", "NUMBER")


def _is_content(found: Sequence[Terminal], index: int) -> bool:
    """ "250 µL of tube 1": a vessel stands for what is in it."""
    if found[index].measure is not None or index < 2 or found[index - 1].kind != "OF":
        return False
    return found[index - 2].kind in ("VOLUME", "MASS", "COUNT")


def _is_speed(chars: str, terminal: Terminal) -> bool:
    """ "18,000 g for 15 min": so many times the acceleration of gravity."""
    measure = terminal.measure
    if measure is None or measure.unit != "g" or measure.nominal < _LOWEST_SPEED:
        return False
    return _SPIN.match(chars, terminal.end) is not None


def _is_repeat(chars: str, found: Sequence[Terminal], index: int) -> bool:
    """ "invert 6 x": so many times."""
    if not _TIMES.search(chars, found[index].start, found[index].end):
        return False
    if index == 0 or found[index - 1].kind not in _REPEATED:
        return False
    return index + 1 >= len(found) or found[index + 1].kind not in _THINGS
