"""Number words: "two litres", "half a litre", "one and a half", "tenfold"."""

from __future__ import annotations

import re

from soplint.quantities.late import LatePattern
from soplint.quantities.numerals import Numeral

_UNITS = {
    "one": 1, "two": 2, "three": 3, "four": 4, "five": 5, "six": 6, "seven": 7, "eight": 8,
    "nine": 9, "ten": 10, "eleven": 11, "twelve": 12, "fifteen": 15, "twenty": 20, "thirty": 30,
    "forty": 40, "fifty": 50, "sixty": 60, "hundred": 100, "thousand": 1000,
}  # fmt: skip
_PARTS = {"half": 2, "third": 3, "quarter": 4, "fifth": 5, "eighth": 8, "tenth": 10}
_ALL = "|".join((*_UNITS, *_PARTS))
_STARTS = LatePattern(rf"(?:{_ALL})(?=[ -]|fold)")
_READ = LatePattern(
    rf"(?P<whole>{'|'.join(_UNITS)})(?:[ -](?P<small>one|two|three|four|five|six|seven|eight|nine))?"
    rf"(?:(?P<and> and a half)|[ -](?P<part>hal(?:f|ves)|thirds?|quarters?|fifths?|eighths?|tenths?)"
    r"(?: of)?(?: an?)?)?"
    rf"|(?P<alone>{'|'.join(_PARTS)})(?: of)?(?: an?)?",
    re.IGNORECASE,
)


_PLAIN_WORDS = frozenset((*_UNITS, *_PARTS))


def lower_if_number_words(chars: str) -> str:
    """The line in lower case if it may hold a number word, else "": most lines hold none."""
    lower = chars.lower()
    if "fold" not in lower:
        words = lower.replace("(", " ").replace("-", " ").split()
        if _PLAIN_WORDS.isdisjoint(words):
            return ""
    return lower if len(lower) == len(chars) else chars


def next_word(lower: str, at: int) -> int:
    """Where the next number word begins in a line in lower case; -1 where there is none."""
    found = _STARTS.search(lower, at)
    while found is not None:
        start = found.start()
        if start == 0 or not (lower[start - 1].isalnum() or lower[start - 1] in "-_"):
            return start
        found = _STARTS.search(lower, found.end())
    return -1


def read_word(chars: str, start: int) -> Numeral | None:
    """Read the number word that begins at ``start``; whether it counts depends on its unit.

    Example:
        >>> read_word("one and a half litres", 0).value
        1.5
    """
    found = _READ.match(chars, start)
    if found is None:
        return None
    end = found.end()
    alone = found.group("alone")
    if alone is not None:
        value = 1 / _PARTS[alone.lower()]
        return Numeral(start, end, value, value * 0.1, 1, "word")
    value = float(_UNITS[found.group("whole").lower()])
    small, part = found.group("small"), found.group("part")
    if small is not None:
        if value < 20 or value > 90:
            return Numeral(start, start + len(found.group("whole")), value, 0.5, 1, "word")
        return Numeral(start, end, value + _UNITS[small.lower()], 0.5, 2, "word")
    if part is not None:
        key = "half" if part.lower() == "halves" else part.lower().rstrip("s")
        value /= _PARTS[key]
        return Numeral(start, end, value, value * 0.005, 2, "word")
    if found.group("and") is not None:
        return Numeral(start, end, value + 0.5, 0.05, 2, "word")
    return Numeral(start, end, value, 0.5 if value < 13 else value * 0.05, 1, "word")
