"""Collects the blocks of one text; the readers say what a line is, this says what becomes of it."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from soplint.intake.model import Block, Table, Text
from soplint.intake.numbering import Mark, bullet, printed_number, task
from soplint.intake.scan import BREAK

_CAPTION = re.compile(r"(?:Table|TABLE|Tab\.|Tabelle|Tableau|Tabla|Таблица)\s*\w{0,4}\s*[.:–—-]?\s")


class Builder:
    """The blocks read so far."""

    def __init__(self, strict: bool = False) -> None:
        self.blocks: list[Block] = []
        self.strict = strict

    def heading(self, text: Text, level: int) -> None:
        """A heading; its printed number is cut off."""
        text = one_line(text)
        mark = printed_number(text.chars, heading=True)
        number = None
        if mark is not None and mark.length < len(text.chars):
            number, text = mark.number, text.piece(mark.length, len(text.chars))
        if text.chars:
            level = max(1, min(6, level))
            self.blocks.append(Block("heading", text, level, number, strict=self.strict))

    def item(self, text: Text, level: int, mark: Mark | None, bold: bool = False) -> None:
        """A list item; ``mark`` was printed before it and is no part of ``text``."""
        number = mark.number if mark is not None else None
        text = strip(text, task(text.chars))
        if text.chars:
            ordered = number is not None
            number = None if number == "#" else number  # counted by the reader of the text
            self.blocks.append(Block("item", text, level, number, bold, ordered, self.strict))

    def paragraph(self, text: Text, bold: bool = False) -> None:
        """A paragraph or a line of its own."""
        if text.chars:
            self.blocks.append(Block("paragraph", text, bold=bold, strict=self.strict))

    def table(self, table: Table, at: Text) -> None:
        """A table that begins at ``at``; a caption right above it goes with it."""
        if table.caption is None and self.blocks:
            last = self.blocks[-1]
            if last.kind in ("paragraph", "heading") and is_caption(last.text.chars):
                end_line, _ = last.text.place(len(last.text.chars) - 1)
                if at.line - end_line <= 2:
                    self.blocks.pop()
                    table = replace(table, caption=last.text)
        text = table.caption or Text("", at.line, at.column)
        self.blocks.append(Block("table", text, strict=self.strict, table=table))


def is_caption(chars: str) -> bool:
    """Whether the line names a table: "Table 2. Buffer A, 500 mL"."""
    return _CAPTION.match(chars) is not None


def strip(text: Text, length: int) -> Text:
    """``text`` without its first ``length`` characters and the spaces after them."""
    if not length:
        return text
    rest = text.chars[length:]
    return text.piece(length + len(rest) - len(rest.lstrip()), len(text.chars))


def marked(text: Text) -> tuple[Mark | None, Text]:
    """The number or bullet printed before ``text``, and the text after it."""
    mark = bullet(text.chars) or printed_number(text.chars)
    return mark, text if mark is None else strip(text, mark.length)


def one_line(text: Text) -> Text:
    """``text`` with its line breaks as spaces."""
    if BREAK not in text.chars:
        return text
    return replace(text, chars=text.chars.replace(BREAK, " "))


def joined(texts: Sequence[Text]) -> Text:
    """Several texts as one, a space between them; the space stands behind the earlier one."""
    texts = [text for text in texts if text.chars]
    if len(texts) < 2:
        return texts[0] if texts else Text("", 1, 1)
    places: list[tuple[int, int]] = []
    for text in texts:
        if places:
            line, column = places[-1]
            places.append((line, column + 1))
        if text.places is None:
            line, column = text.line, text.column
            places.extend([(line, column + k) for k in range(len(text.chars))])
        else:
            places.extend(text.places)
    chars = " ".join([text.chars for text in texts])
    return Text(chars, texts[0].line, texts[0].column, tuple(places))


def cut(text: Text) -> list[Text]:
    """``text`` cut at the line breaks that its markup asks for."""
    if BREAK not in text.chars:
        return [text]
    parts: list[Text] = []
    start = 0
    for part in text.chars.split(BREAK):
        stripped = part.strip()
        if stripped:
            begin = start + part.index(stripped)
            parts.append(text.piece(begin, begin + len(stripped)))
        start += len(part) + 1
    return parts
