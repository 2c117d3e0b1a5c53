"""Looking up one name, as typed by a user or standing alone in a table cell."""

from __future__ import annotations

import re
from dataclasses import replace
from functools import cache

from .catalogue import catalogue
from .index import NameIndex
from .model import Match

_PERCENT = re.compile(r"[\s,(]*(\d+(?:[.,]\d+)?)\s*%\s*(?:\(?w/w\)?)?\)?", re.IGNORECASE)
_SOLUTION = re.compile(r"\bsolution\b", re.IGNORECASE)
_LONGEST = 400
_SAME_STRENGTH = 2.0  # per cent w/w: "36 %" means the 37 % row


@cache
def _index() -> NameIndex:
    return NameIndex()


def lookup(name: str) -> Match | None:
    """What a free-text name means, or None.

    The whole name must be understood; a printed strength picks the commercial solution nearest to
    it.  Start and end are places in ``name``.

    >>> lookup("hydrochloric acid 32 %").substances[0].strength
    32.0
    >>> lookup("sulphuric acid").substances[0].formula
    'H2SO4'
    >>> lookup("no such thing") is None
    True
    """
    text = name[:_LONGEST]
    exact = catalogue().named(text.strip())
    if exact is not None:
        return Match(0, len(name), (exact,), True, False, name)
    strength = _PERCENT.search(text)
    plain = _PERCENT.sub(_blank, text)
    for chars in dict.fromkeys((text, plain, _SOLUTION.sub(_blank, plain))):
        found = _index().find(chars)
        if len(found) != 1:
            continue
        rest = chars[: found[0].start] + chars[found[0].end :]
        if not rest.strip(" .,;:()[]"):
            return _at_strength(replace(found[0], written=name), strength and strength[1])
    return None


def _blank(found: re.Match[str]) -> str:
    return " " * len(found[0])


def _at_strength(match: Match, percent: str | None) -> Match:
    """The match narrowed to the row of the printed strength, if there is one."""
    if not percent:
        return match
    value = float(percent.replace(",", "."))
    near = [
        substance
        for substance in match.substances
        if substance.strength is not None and abs(substance.strength - value) <= _SAME_STRENGTH
    ]
    near.sort(key=lambda substance: abs((substance.strength or 0.0) - value))
    return replace(match, substances=tuple(near), form_named=True) if near else match
