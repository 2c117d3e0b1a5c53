"""Markdown to blocks, from the line maps of markdown-it-py's block parser.

Only the block structure is taken from the parser: its inline pass gives no places.  Tables are
found in the paragraphs (``tables``), because the parser drops cells beyond the heading row and
knows no table without one.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from functools import lru_cache
from typing import TYPE_CHECKING

from soplint.intake.builder import Builder, joined
from soplint.intake.grids import grid_table, simple_table
from soplint.intake.headings import without_closing_hashes
from soplint.intake.html import add_html
from soplint.intake.inline import clean, clean_line
from soplint.intake.model import Text
from soplint.intake.numbering import Mark
from soplint.intake.paragraphs import Place, add_lines
from soplint.intake.plain import read_plain
from soplint.intake.scan import Line

if TYPE_CHECKING:
    from markdown_it import MarkdownIt
    from markdown_it.token import Token

# Lists and quotes inside one another, counted as the parser does (two for a list).
NESTING = 40
# Above this many lines, or lines that open many quotes, the plain reader takes over: it is faster.
MOST_LINES = 20_000
MOST_DEEP_QUOTES = 500

_STRICT_FENCE = re.compile(r"[{.\s]*(?:procedure)\b", re.IGNORECASE)
_CLOSING_FENCE = re.compile(r"[>\s]*(`{3,}|~{3,})\s*")
_ATX = re.compile(r"#{1,6}[ \t]*")
_GLUED_ATX = re.compile(r"(#{2,6})(?=[^\s#])|(#)(?=[A-Z][a-z])")
_DEFINITION = re.compile(r"\[[^\[\]]{1,200}\]:\s*(?:<|https?:|mailto:|#|\.{0,2}/)\S*")
_QUOTE = re.compile(r"(?:\s{0,3}>)+ ?")
_DEEP_QUOTE = re.compile(r"(?:[ \t]*>){6}")


_DRAWN = re.compile(r" {0,3}(?:={2,}(?:\s+={2,})+|\+(?:[-=]{2,}\+)+)\s*$")
_FENCE = re.compile(r" {0,3}(`{3,}|~{3,})")
_TABLE = "\ue000"  # info of the fence put around a drawn table; no author writes it


@lru_cache(maxsize=1)
def _parser() -> MarkdownIt:
    from markdown_it import MarkdownIt

    parser = MarkdownIt("commonmark", {"maxNesting": NESTING})
    # Indented code is a recipe far more often than code; link definitions are left as lines.
    parser.block.ruler.disable(["code", "reference"])
    return parser


def read_markdown(builder: Builder, lines: Sequence[str], skip: int) -> str | None:
    """Adds the blocks of ``lines`` from index ``skip`` on; gives a note when read as plain text."""
    body = lines[skip:]
    deep = sum(1 for line in body if _DEEP_QUOTE.match(line))
    if len(body) > MOST_LINES or deep > MOST_DEEP_QUOTES:
        _read_simply(builder, lines, skip)
        return (
            "read line by line, without nesting and strict fences: too many lines or nested quotes"
        )
    tokens: list[Token] = []
    parser = _parser()
    try:
        parser.block.parse("\n".join(_fenced_tables(body)), parser, {}, tokens)
        _Walk(builder, lines, skip, tokens).run()
    except RecursionError:
        builder.blocks.clear()
        _read_simply(builder, lines, skip)
        return "read line by line, without nesting and strict fences: nested too deeply"
    return None


def _fenced_tables(body: Sequence[str]) -> Sequence[str]:
    """``body`` with the rules around drawn tables made fences, so that no rule makes a heading.

    A table between rules of ``=`` or drawn with ``+---+`` begins and ends with a rule.
    """
    if not any(_DRAWN.match(line) for line in body):
        return body
    lines = [Line(k + 1, 1, line) for k, line in enumerate(body)]
    shown = list(body)
    index, fence = 0, ""
    while index < len(lines):
        mark = _FENCE.match(body[index])
        if mark is not None and mark.group(1)[0] == (fence or mark.group(1)[0]):
            fence = "" if fence else mark.group(1)[0]
        found = None if fence else grid_table(lines, index) or simple_table(lines, index)
        if found is None or found[1] - index < 3:
            index += 1
            continue
        shown[index], shown[found[1] - 1] = f"~~~ {_TABLE}", "~~~"
        index = found[1]
    return shown


def _read_simply(builder: Builder, lines: Sequence[str], skip: int) -> None:
    read_plain(builder, [_unquoted(k + 1, lines[k]) for k in range(skip, len(lines))])


def _unquoted(number: int, line: str) -> Line:
    match = _QUOTE.match(line)
    length = match.end() if match else 0
    return Line(number, length + 1, line[length:])


class _Walk:
    """One pass over the block tokens."""

    def __init__(
        self, builder: Builder, lines: Sequence[str], skip: int, tokens: list[Token]
    ) -> None:
        self.builder, self.lines, self.skip, self.tokens = builder, lines, skip, tokens
        self.depth = 0
        self.waiting: list[Mark | None] = []  # markers of open items without text so far
        self.heading: tuple[int, str] | None = None
        self.level = 1  # of the last heading
        self.read_to = skip  # lines before this index are read or need not be
        self.too_deep = any(token.level >= NESTING - 1 for token in tokens)

    def run(self) -> None:
        for token in self.tokens:
            handler = _TOKENS.get(token.type)
            if handler is not None:
                handler(self, token)
        self.catch_up(len(self.lines))

    def catch_up(self, index: int) -> None:
        """Reads lines that the parser left out because they are nested too deeply."""
        if self.too_deep and self.read_to < index:
            lost = [_unquoted(k + 1, self.lines[k]) for k in range(self.read_to, index)]
            read_plain(self.builder, lost)
        self.read_to = max(self.read_to, index)

    def source(self, token: Token) -> list[Line]:
        """The source lines of ``token`` with the columns in which its content begins."""
        start, end = _map(token)
        start, end = start + self.skip, min(end + self.skip, len(self.lines))
        self.catch_up(start)
        self.read_to = max(self.read_to, end)
        contents = token.content.split("\n")
        found = []
        for offset, index in enumerate(range(start, end)):
            content = contents[offset].strip() if offset < len(contents) else ""
            found.append(_located(index + 1, self.lines[index], content))
        return found

    def inline(self, token: Token) -> None:
        if self.heading is not None:
            self.add_heading(token, *self.heading)
            return
        lines = [line for line in self.source(token) if not _DEFINITION.match(line.raw)]
        mark = self.take_mark()
        if len(lines) == 1 and mark is None and (glued := _GLUED_ATX.match(lines[0].raw)):
            number, column, raw = lines[0]
            end = glued.end()
            self.builder.heading(clean_line(number, column + end, raw[end:]), end)
        elif lines:
            add_lines(self.builder, lines, Place(self.depth, mark))

    def take_mark(self) -> Mark | None:
        if not self.waiting:
            return None
        mark, self.waiting[-1] = self.waiting[-1], None
        return mark

    def add_heading(self, token: Token, level: int, markup: str) -> None:
        lines = self.source(token)
        self.take_mark()
        self.level = level
        if markup[:1] == "#":
            number, column, raw = lines[0]
            match = _ATX.match(raw)
            start = match.end() if match else 0
            title = without_closing_hashes(raw[start:])
            self.builder.heading(clean_line(number, column + start, title), level)
            return
        lines = [line for line in lines if line.raw.strip() and not set(line.raw) <= set("=- \t")]
        if markup == "-" and len(lines) > 1:
            # Several lines over a rule: the author drew a line, the parser sees a heading.
            add_lines(self.builder, lines, Place(self.depth))
            return
        if lines[:-1]:
            add_lines(self.builder, lines[:-1], Place(self.depth))
        if lines:
            self.builder.heading(joined(clean(lines[-1:])), level)

    def fence(self, token: Token) -> None:
        start, end = _map(token)
        first, last = start + self.skip, min(end + self.skip, len(self.lines))
        self.catch_up(first)
        self.read_to = max(self.read_to, last)
        closing = _CLOSING_FENCE.fullmatch(self.lines[last - 1])
        closed = last - first > 1 and closing is not None and closing.group(1)[0] == token.markup[0]
        body = [_unquoted(k + 1, self.lines[k]) for k in range(first + 1, last - closed)]
        strict = _STRICT_FENCE.match(token.info) is not None
        self.take_mark()
        if token.info.strip() == _TABLE and self.drawn(first, last):
            return
        inner = Builder(strict=strict)
        read_plain(inner, body, headings=strict or not closed, least_level=self.level + 1)
        self.builder.blocks.extend(inner.blocks)

    def drawn(self, first: int, last: int) -> bool:
        """Adds the drawn table on these lines."""
        lines = [Line(k + 1, 1, self.lines[k]) for k in range(first, last)]
        found = grid_table(lines, 0) or simple_table(lines, 0)
        if found is not None:
            self.builder.table(found[0], Text("", first + 1, 1))
        return found is not None

    def html(self, token: Token) -> None:
        self.take_mark()
        add_html(self.builder, self.source(token))

    def open_heading(self, token: Token) -> None:
        self.heading = (int(token.tag[1:]), token.markup)

    def close_heading(self, token: Token) -> None:
        self.heading = None

    def open_list(self, token: Token) -> None:
        self.depth += 1

    def close_list(self, token: Token) -> None:
        self.depth -= 1

    def open_item(self, token: Token) -> None:
        self.waiting.append(Mark(token.info or None, 0, True))

    def close_item(self, token: Token) -> None:
        self.waiting.pop()


_TOKENS = {
    "inline": _Walk.inline,
    "fence": _Walk.fence,
    "html_block": _Walk.html,
    "heading_open": _Walk.open_heading,
    "heading_close": _Walk.close_heading,
    "bullet_list_open": _Walk.open_list,
    "bullet_list_close": _Walk.close_list,
    "ordered_list_open": _Walk.open_list,
    "ordered_list_close": _Walk.close_list,
    "list_item_open": _Walk.open_item,
    "list_item_close": _Walk.close_item,
}


def _map(token: Token) -> tuple[int, int]:
    assert token.map is not None
    return token.map[0], token.map[1]


def _located(number: int, line: str, content: str) -> Line:
    """``content`` is the line without what containers put before it; keeps trailing spaces."""
    trimmed = line.rstrip()
    column = len(trimmed) - len(content)
    if not content or not trimmed.endswith(content):
        column = len(line) - len(line.lstrip())
    return Line(number, column + 1, line[column:])
