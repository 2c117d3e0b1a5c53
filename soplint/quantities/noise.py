"""Digits that are no quantity: formulas, hydrates, locants, identifiers, dates, clock times."""

from __future__ import annotations

import re

from soplint.quantities.late import LatePattern

_MONTHS = (
    r"(?:Jan(?:uary)?|Feb(?:ruary)?|Mar(?:ch)?|Apr(?:il)?|May|June?|July?|Aug(?:ust)?"
    r"|Sept?(?:ember)?|Oct(?:ober)?|Nov(?:ember)?|Dec(?:ember)?)"
)
_DATE = LatePattern(
    r"[12][0-9]{3}-[01][0-9](?:-[0-3][0-9])?(?![0-9])"
    r"|[0-3]?[0-9][./][0-3]?[0-9][./](?:[12][0-9]{3}|[0-9]{2})(?![0-9])"
    r"|[01]?[0-9]/[12][0-9]{3}(?![0-9])"
    r"|[0-3]?[0-9](?:st|nd|rd|th)? " + _MONTHS + r"\.?(?:,? [0-9]{4})?(?!\w)"
    r"|[0-9]+(?:\.[0-9]+){2,}"
    r"|[0-9]{2,7}-[0-9]{2}-[0-9](?![0-9])"
)
_CLOCK = LatePattern(
    r"(?P<hour>[01]?[0-9]|2[0-4]):(?P<minute>[0-5][0-9])(?P<second>:[0-5][0-9])?(?![0-9:.])"
    r"(?P<after> ?(?:am|pm|a\.m|p\.m|AM|PM|h(?:rs?)?|min|o'clock|Uhr)(?!\w))?"
)
_CLOCK_BEFORE = LatePattern(r"(?:\bat|until|till|before|after|since|from|to|time:?) $")
_RATIO_NEAR = LatePattern(r"dilut|ratio|v/v|w/w|mix|part|mobile|eluent|split", re.IGNORECASE)
_HYDRATE = re.compile(r" ?[xX*·•∙⋅.]? ?(?:H2O|H20|H₂O|h2o|D2O|HOH|Н2О|Н2O|H2О)(?![0-9])")
_TOKEN = re.compile(r"\w+(?:\.[0-9]+)*")
_DASHED = LatePattern(r"[\w.]*\w(?:[-–/][\w.]*\w)*")
_IN_NAME = LatePattern(r"[-‑][A-Za-z(\[]|['′’](?![0-9])")


def token_end(chars: str, start: int) -> int:
    """End of the run of letters and digits at ``start``, decimals included."""
    found = _TOKEN.match(chars, start)
    return found.end() if found else start + 1


def identifier_end(chars: str, start: int) -> int:
    """End of an identifier at ``start``, with the parts that hyphens and slashes join to it."""
    found = _DASHED.match(chars, start)
    return found.end() if found else start + 1


def not_a_quantity(chars: str, start: int, end: int, value: float) -> int:
    """Where the digits from ``start`` to ``end`` without a unit are no quantity: the end of it all.

    Returns 0 where they may be a number.

    Example:
        >>> not_a_quantity("CuSO4 * 5H2O", 8, 9, 5.0)
        12
    """
    after = chars[end : end + 1]
    if not after:
        return 0
    if value <= 24 and (found := _HYDRATE.match(chars, end)):
        return found.end()
    if after.isalpha() or after == "_":
        return token_end(chars, end)
    if after in "-‑'′’" and _IN_NAME.match(chars, end):
        return identifier_end(chars, end + 1)
    if after in "-./ abcdefghijklmnopqrstuvwxyz" and (date := _DATE.match(chars, start)):
        return date.end()
    if after == ":":
        return _clock_end(chars, start)
    return 0


def in_name(chars: str, end: int) -> bool:
    """Whether digits that end at ``end`` are locants of a name: "1,10-phenanthroline"."""
    return _IN_NAME.match(chars, end) is not None


def _clock_end(chars: str, start: int) -> int:
    found = _CLOCK.match(chars, start)
    if found is None:
        return 0
    if found.group("after") or found.group("second") and len(found.group("hour")) == 2:
        return found.end()
    if _CLOCK_BEFORE.search(chars, max(0, start - 8), start):
        return found.end()
    hour, minute = found.group("hour"), found.group("minute")
    if len(hour) < 2 or int(hour) + int(minute) == 100:
        return 0
    near = chars[max(0, start - 40) : found.end() + 40]
    return 0 if _RATIO_NEAR.search(near) else found.end()
