"""Blocks of HTML inside Markdown: headings, items and table cells by their tags."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence

from soplint.intake.builder import Builder, joined
from soplint.intake.inline import clean
from soplint.intake.model import Text
from soplint.intake.numbering import Mark
from soplint.intake.paragraphs import Place, add_lines
from soplint.intake.scan import Line
from soplint.intake.tables import table_of

_TAG = re.compile(r"<(/?)(table|tr|td|th|caption|h[1-6]|li)(?:\s[^<>]{0,400})?>", re.IGNORECASE)
_HIDDEN = re.compile(r"\s*<(?:script|style)\b", re.IGNORECASE)
_CLOSING_TAGS = re.compile(r"(?:\s|</?[A-Za-z][^<>]{0,400}>)*")


def add_html(builder: Builder, lines: Sequence[Line]) -> None:
    """Adds the readable content of an HTML block; comments, scripts and styles are left out."""
    if _HIDDEN.match(lines[0].raw):
        return
    lines = _after_comment(lines)
    walk = _Walk(builder)
    for line in lines:
        for tag, stretch in _stretches(line):
            if tag is not None:
                walk.tag(tag.group(2).lower(), closing=bool(tag.group(1)), at=line)
            walk.lines.append(stretch)
    walk.close()


def _after_comment(lines: Sequence[Line]) -> Sequence[Line]:
    """The lines behind a comment that opens the block; all of them when it is not closed."""
    if not lines[0].raw.lstrip().startswith("<!--"):
        return lines
    for index, line in enumerate(lines):
        end = line.raw.find("-->")
        if end >= 0:
            rest = Line(line.number, line.column + end + 3, line.raw[end + 3 :])
            return [rest, *lines[index + 1 :]]
    return lines


def _stretches(line: Line) -> Iterator[tuple[re.Match[str] | None, Line]]:
    """The line cut at the tags that matter: each with the characters that follow it."""
    start, tag = 0, None
    for following in _TAG.finditer(line.raw):
        yield tag, Line(line.number, line.column + start, line.raw[start : following.start()])
        start, tag = following.end(), following
    yield tag, Line(line.number, line.column + start, line.raw[start:])


class _Walk:
    """What the open tag is, and the lines read since it was opened."""

    def __init__(self, builder: Builder) -> None:
        self.builder = builder
        self.lines: list[Line] = []
        self.inside = ""  # "", "cell", "caption", "li", "h1" ... "h6"
        self.rows: list[list[Text]] | None = None
        self.head_rows = 0
        self.at = Line(1, 1, "")
        self.caption: Text | None = None

    def tag(self, name: str, closing: bool, at: Line) -> None:
        self.flush()
        self.inside = ""
        if name == "table":
            self.end_table()
            if not closing:
                self.rows, self.head_rows, self.at = [], 0, at
        elif closing:
            return
        elif name == "tr" and self.rows is not None:
            self.rows.append([])
        elif name in ("td", "th") and self.rows is not None:
            if not self.rows:
                self.rows.append([])
            if name == "th" and not self.rows[-1] and len(self.rows) == self.head_rows + 1:
                self.head_rows += 1
            self.inside = "cell"
        else:
            self.inside = name

    def flush(self) -> None:
        """Hands on the lines read inside the tag that ends here."""
        lines, self.lines = self.lines, []
        if self.inside == "cell" and self.rows is not None:
            texts = clean(lines)
            text = joined(texts)
            self.rows[-1].append(text if text.chars else texts[0])
            return
        lines = [line for line in lines if not _is_markup(line.raw)]
        if not lines:
            return
        if self.inside == "caption":
            self.caption = joined(clean(lines))
        elif self.inside[:1] == "h":
            self.builder.heading(joined(clean(lines)), int(self.inside[1]))
        else:
            mark = Mark(None, 0, True) if self.inside == "li" else None
            add_lines(self.builder, lines, Place(1 if mark else 0, mark))

    def end_table(self) -> None:
        rows, self.rows = self.rows, None
        if rows and any(rows):
            table = table_of(rows, self.head_rows or None, self.caption)
            self.builder.table(table, Text("", self.at.number, self.at.column))
        self.caption = None

    def close(self) -> None:
        self.flush()
        self.end_table()


def _is_markup(raw: str) -> bool:
    """Whether nothing but spaces and tags stands on the line."""
    match = _CLOSING_TAGS.match(raw)
    return match is not None and match.end() == len(raw)
