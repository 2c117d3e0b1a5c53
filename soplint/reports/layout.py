"""The page that a report is laid out on: its width and whether it can show bold."""

from __future__ import annotations

import os
from dataclasses import dataclass
from typing import TextIO

NARROWEST = 40


@dataclass(frozen=True, slots=True)
class Page:
    """Width in columns (None: lines are never broken) and whether bold may be used."""

    width: int | None = None
    bold: bool = False

    def strong(self, text: str) -> str:
        """``text`` in bold where the page can show it."""
        return f"\x1b[1m{text}\x1b[0m" if self.bold else text


def page_for(stream: TextIO | None) -> Page:
    """The page of a stream: a terminal has a width and bold, a file or pipe has neither."""
    if stream is None or not stream.isatty():
        return Page()
    try:
        width: int | None = max(NARROWEST, os.get_terminal_size(stream.fileno()).columns)
    except (OSError, ValueError):
        width = None
    return Page(width, bold=not os.environ.get("NO_COLOR") and os.environ.get("TERM") != "dumb")


def width(text: str) -> int:
    """Columns that ``text`` takes on a terminal: wide characters two, combining ones none.

    >>> width("µL"), width("純水")
    (2, 4)
    """
    if text.isascii():
        return len(text)
    from unicodedata import combining, east_asian_width

    return sum(
        0 if combining(char) else 2 if east_asian_width(char) in "WF" else 1 for char in text
    )


def padded(text: str, columns: int) -> str:
    """``text`` filled up with spaces to ``columns``."""
    return text + " " * (columns - width(text))


def wrapped(text: str, columns: int | None, indent: int = 0) -> list[str]:
    """``text`` broken at plain spaces into lines of at most ``columns`` minus ``indent`` columns.

    A word that is longer than a line stays whole; without ``columns`` nothing is broken.

    >>> wrapped("0.1 mol/L × 1 L", 12)
    ['0.1 mol/L ×', '1 L']
    """
    if columns is None or width(text) + indent <= columns:
        return [text]
    room = max(columns - indent, 1)
    lines: list[str] = []
    for word in text.split(" "):
        if lines and width(lines[-1]) + 1 + width(word) <= room:
            lines[-1] += " " + word
        else:
            lines.append(word)
    return lines
