"""Patterns that most files never need are compiled when they are first used."""

from __future__ import annotations

import re
from functools import cache


class LatePattern:
    """A regular expression that is compiled at its first use, to keep the start-up short."""

    __slots__ = ("_flags", "_text")

    def __init__(self, text: str, flags: int = 0) -> None:
        self._text = text
        self._flags = flags

    def match(self, chars: str, start: int = 0, end: int | None = None) -> re.Match[str] | None:
        """As the method of a compiled pattern."""
        pattern = _compiled(self._text, self._flags)
        return pattern.match(chars, start) if end is None else pattern.match(chars, start, end)

    def search(self, chars: str, start: int = 0, end: int | None = None) -> re.Match[str] | None:
        """As the method of a compiled pattern."""
        pattern = _compiled(self._text, self._flags)
        return pattern.search(chars, start) if end is None else pattern.search(chars, start, end)

    def count(self, chars: str) -> int:
        """How often the pattern occurs."""
        return sum(1 for _ in _compiled(self._text, self._flags).finditer(chars))


@cache
def _compiled(text: str, flags: int) -> re.Pattern[str]:
    return re.compile(text, flags)
