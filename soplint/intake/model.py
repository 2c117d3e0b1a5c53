"""What the intake hands on: a document of blocks whose every character knows its place."""

from __future__ import annotations

from dataclasses import dataclass, field


@dataclass(frozen=True, slots=True, order=True)
class Span:
    """A stretch of source text: lines and columns from 1, columns in code points, end exclusive."""

    line: int
    column: int
    end_line: int
    end_column: int


@dataclass(frozen=True, slots=True)
class Text:
    """Readable characters of a line, sentence or cell, with the place of each in the source.

    ``chars`` is free of markup (emphasis marks, links, code ticks, HTML tags and entities, LaTeX
    and pandoc sub- and superscripts are resolved; non-breaking spaces are spaces).
    ``places`` holds (line, column) for every character, or None when the characters stand on
    ``line`` from ``column`` on without a gap.
    """

    chars: str
    line: int
    column: int
    places: tuple[tuple[int, int], ...] | None = None

    def place(self, offset: int) -> tuple[int, int]:
        """Line and column of the character at ``offset``."""
        if self.places is None:
            return self.line, self.column + offset
        return self.places[offset]

    def span(self, start: int, end: int) -> Span:
        """Source span of the characters ``start`` to ``end`` (end exclusive)."""
        line, column = self.place(start)
        last_line, last_column = self.place(max(start, end - 1))
        return Span(line, column, last_line, last_column + 1)

    def piece(self, start: int, end: int) -> Text:
        """The characters ``start`` to ``end`` as a text of their own."""
        if start >= len(self.chars):
            start = end = len(self.chars)
            line, column = self.place(start - 1) if start else (self.line, self.column)
            return Text("", line, column + 1)
        line, column = self.place(start)
        places = None if self.places is None else self.places[start:end]
        return Text(self.chars[start:end], line, column, places)


@dataclass(frozen=True, slots=True)
class Block:
    """One heading, list item, paragraph, lead-in, table or fenced line group, in document order.

    ``kind`` is ``heading``, ``item``, ``paragraph`` or ``table``.  A bold line of its own and a
    line that ends in a colon stay paragraphs: whether they lead a recipe is the bench's business,
    so ``bold`` says only that the whole line was emphasised.
    """

    kind: str
    text: Text
    level: int = 0  # heading level 1..6; nesting depth of an item, 1 for the outermost
    number: str | None = None  # "5.1", "a", as printed before the text (not part of ``text``)
    bold: bool = False
    ordered: bool = False
    strict: bool = False  # every sentence with a quantity must be readable
    table: Table | None = None


@dataclass(frozen=True, slots=True)
class Table:
    """Rows of cells; ``head`` is the heading row (or rows, merged cell by cell), possibly empty."""

    head: tuple[Text, ...]
    rows: tuple[tuple[Text, ...], ...]
    caption: Text | None = None


@dataclass(frozen=True, slots=True)
class Document:
    """One reviewed text."""

    path: str  # as given, relative, with "/"
    sha256: str  # of the raw bytes
    encoding: str  # "utf-8", "utf-16", "latin-1" ...
    notes: tuple[str, ...]  # what a reader should know: "read as Latin-1: byte 0xE9 on line 3 ..."
    title: str | None
    lines: tuple[str, ...]  # source lines without their ends
    blocks: tuple[Block, ...]
    strict: bool = False  # the whole text is in the notation (.sop)
    front_matter: dict[str, str] = field(default_factory=dict)

    def source(self, span: Span) -> str:
        """The exact source text of ``span``, line ends as "\\n"."""
        if span.line == span.end_line:
            return self.lines[span.line - 1][span.column - 1 : span.end_column - 1]
        first = self.lines[span.line - 1][span.column - 1 :]
        between = self.lines[span.line : span.end_line - 1]
        last = self.lines[span.end_line - 1][: span.end_column - 1]
        return "\n".join((first, *between, last))


class Unreadable(Exception):
    """The bytes are no text that can be reviewed; the message says why, with byte or line."""
