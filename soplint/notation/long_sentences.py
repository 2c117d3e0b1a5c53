"""Sentences without an end: what is longer than any sentence of prose is cut before it is read.

The phrases of a sentence are compared with one another, so that the time of a sentence may grow
with the square of its length.  A procedure's sentence has a few hundred characters; a list pasted
without line ends has thousands.  Cut at a separator, every piece is read like a sentence of its
own and all of its quantities are listed; what one piece says about another is not understood.
"""

from __future__ import annotations

import re
from collections.abc import Iterator

from soplint.intake.model import Text
from soplint.notation.stretches import Stretches
from soplint.quantities import NumberStyle, find_measures

LONGEST = 4_000  # characters read as one sentence
_OVERLAP = 60  # characters around a cut in which a quantity is looked for
# Where a sentence may be cut, best first; each only in the last half of the piece.
_SEPARATORS = (
    re.compile(r"[;.!?]\s+"),
    re.compile(r",\s+"),
    re.compile(r"[)\]]\s*"),
)
# Without a separator: before a quantity, with the words that lead up to it.
_LEAD = re.compile(r"(?:\b(?:add|make|up|to|at|in|of|with|about|is|ph)\s+)*$", re.IGNORECASE)
_LAST_RESORT = (re.compile(r"\s+"), re.compile(r"[^\w.,]"))


def pieces(text: Text, style: NumberStyle) -> Iterator[Text]:
    """The sentence itself, or its pieces of at most ``LONGEST`` characters; nothing is left out.

    A stretch without any separator (a formula, figures without end) stays whole, however long.

    >>> from soplint.quantities import number_style
    >>> long = Text("5 g NaCl, " * 1000, 1, 1)
    >>> cut = [piece.chars for piece in pieces(long, number_style([long.chars]))]
    >>> len(cut), "".join(cut) == long.chars, cut[1][:8], max(map(len, cut)) <= LONGEST
    (3, True, '5 g NaCl', True)
    """
    start, end = 0, len(text.chars)
    while end - start > LONGEST:
        at = _cut(text.chars, start, style)
        if at is None:
            break
        yield text.piece(start, at)
        start = at
    yield text if not start else text.piece(start, end)


def _cut(chars: str, start: int, style: NumberStyle) -> int | None:
    """Where the piece that begins at ``start`` ends; None where nothing can be cut."""
    low, high = start + LONGEST // 2, start + LONGEST
    measures = Stretches(
        (low - _OVERLAP + m.start, low - _OVERLAP + m.end)
        for m in find_measures(chars[low - _OVERLAP : high + _OVERLAP], style)
    )
    for separator in _SEPARATORS:
        if (last := _last(separator, chars, low, high, measures)) is not None:
            return last
    for first, _ in measures.meeting(low + _OVERLAP, high):
        lead = _LEAD.search(chars, first - _OVERLAP // 2, first)
        if lead is not None and chars[lead.start() - 1].isspace():
            return lead.start()
    for separator in _LAST_RESORT:
        if (last := _last(separator, chars, low, high, measures)) is not None:
            return last
    return _next_space(chars, high)


def _last(
    separator: re.Pattern[str], chars: str, low: int, high: int, measures: Stretches
) -> int | None:
    """Where the last separator ends that stands in no quantity."""
    last: int | None = None
    for found in separator.finditer(chars, low, high):
        at = found.end()
        if not any(first < at < end for first, end in measures.meeting(at - 1, at + 1)):
            last = at
    return last


def _next_space(chars: str, start: int) -> int | None:
    found = re.compile(r"\s+").search(chars, start)
    return found.end() if found is not None and found.end() < len(chars) else None
