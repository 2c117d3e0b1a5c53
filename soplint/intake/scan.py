"""The pass over raw characters: pieces of readable text out, each with its offset.

``Scan`` holds what the handlers of ``inline`` share; ``texts`` turns its pieces into lines whose
characters know their places.
"""

from __future__ import annotations

from typing import NamedTuple

from soplint.intake.characters import READ_AS
from soplint.intake.model import Text
from soplint.intake.raised import raised

LINE_END = "\r"  # between the lines of one call; no source line can hold it
BREAK = "\n"  # a line break asked for by markup, <br>


class Line(NamedTuple):
    """A stretch of one source line: its number, the column it starts in, its characters."""

    number: int
    column: int
    raw: str


class Piece(NamedTuple):
    """Characters that stand one for one from offset ``at`` on; unless literal, all at ``at``."""

    chars: str
    at: int
    literal: bool


class Delimiter:
    """A run of ``*`` or ``_`` that may open or close emphasis."""

    __slots__ = ("piece", "char", "count", "opens", "closes")

    def __init__(self, piece: int, char: str, count: int, opens: bool, closes: bool) -> None:
        self.piece, self.char, self.count = piece, char, count
        self.opens, self.closes = opens, closes


class Scan:
    """One raw string, the pieces read so far, delimiters waiting for their partner."""

    __slots__ = ("raw", "pieces", "delimiters", "skips", "found")

    def __init__(self, raw: str) -> None:
        self.raw = raw
        self.pieces: list[Piece] = []
        self.delimiters: list[Delimiter] = []
        self.skips: dict[int, int] = {}  # offset of a mark -> offset after what it closes
        self.found: dict[str, int] = {}

    def literal(self, start: int, end: int) -> int:
        """Takes the characters as they stand; returns ``end``."""
        self.pieces.append(Piece(self.raw[start:end], start, True))
        return end

    def put(self, chars: str, at: int) -> None:
        """Takes ``chars`` for what stands at ``at``."""
        if chars:
            self.pieces.append(Piece(chars, at, False))

    def line_end(self, at: int) -> int:
        """Goes on with the next line; returns the offset of its start."""
        self.pieces.append(Piece(LINE_END, at, False))
        return at + 1

    def skip(self, start: int, end: int) -> int:
        """Leaves out what stands from ``start`` to ``end`` but for the ends of lines."""
        at = self.raw.find(LINE_END, start, end)
        while at >= 0:
            self.line_end(at)
            at = self.raw.find(LINE_END, at + 1, end)
        return end

    def verbatim(self, start: int, end: int) -> None:
        """Takes characters as they stand but for spaces, dashes and the like."""
        begin = start
        for at in range(start, end):
            char = self.raw[at]
            if char == LINE_END or char in READ_AS:
                if begin < at:
                    self.literal(begin, at)
                if char == LINE_END:
                    self.line_end(at)
                else:
                    self.put(READ_AS[char], at)
                begin = at + 1
        if begin < end:
            self.literal(begin, end)

    def take_back(self, count: int) -> None:
        """Takes back the last ``count`` characters, read as they stood."""
        piece = self.pieces.pop()
        self.pieces.append(Piece(piece.chars[: len(piece.chars) - count], piece.at, True))

    def ending(self) -> str:
        """The last piece, when its characters stand in the source as they are."""
        return self.pieces[-1].chars if self.pieces and self.pieces[-1].literal else ""

    def find(self, token: str, start: int) -> int:
        """``raw.find``, remembered, so that asking from left to right stays linear."""
        known = self.found.get(token, -2)
        if known == -2 or 0 <= known < start:
            known = self.raw.find(token, start)
            self.found[token] = known
        return known

    def raise_(self, content: str, at: int, follow: int) -> None:
        """Takes a superscript; ``follow`` is the offset after it."""
        before = "".join([piece.chars for piece in self.pieces[-3:]])[-4:]
        self.put(raised(content, before, self.raw[follow : follow + 1]), at)


def texts(lines: list[Line], pieces: list[Piece]) -> list[Text]:
    """The pieces cut at the line ends, each offset turned into a place."""
    found: list[Text] = []
    own: list[Piece] = []
    index, start = 0, 0
    for piece in pieces:
        if piece.chars == LINE_END and not piece.literal:
            found.append(_text(lines[index], start, own))
            own, start, index = [], piece.at + 1, index + 1
        elif piece.chars:
            own.append(piece)
    found.append(_text(lines[index], start, own))
    found.extend(Text("", line.number, line.column) for line in lines[index + 1 :])
    return found


def _text(line: Line, start: int, pieces: list[Piece]) -> Text:
    chars = "".join([piece.chars for piece in pieces])
    head = len(chars) - len(chars.lstrip())
    shown = chars.strip()
    if not shown:
        return Text("", line.number, line.column)
    shift = line.column - start
    if all(piece.literal for piece in pieces) and len(chars) == (
        pieces[-1].at + len(pieces[-1].chars) - pieces[0].at
    ):
        return Text(shown, line.number, pieces[0].at + shift + head)
    places: list[tuple[int, int]] = []
    for piece in pieces:
        at = piece.at + shift
        if piece.literal:
            places.extend([(line.number, at + k) for k in range(len(piece.chars))])
        else:
            places.extend([(line.number, at)] * len(piece.chars))
    number, column = places[head]
    kept = tuple(places[head : head + len(shown)])
    if all(place[1] == column + k for k, place in enumerate(kept)):
        return Text(shown, number, column)
    return Text(shown, number, column, kept)
