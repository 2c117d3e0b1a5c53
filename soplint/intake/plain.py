"""Plain text to blocks: headings, items, tables and lines by how they are typed."""

from __future__ import annotations

import re
from collections.abc import Sequence

from soplint.intake.builder import Builder
from soplint.intake.headings import Titles
from soplint.intake.inline import clean_line
from soplint.intake.layout import layout_table
from soplint.intake.numbering import Mark, bullet, printed_number
from soplint.intake.paragraphs import Place, add_lines
from soplint.intake.scan import Line

_FENCE = re.compile(r"\s*(?:`{3,}|~{3,})[\w\s{}.-]*$")
_RULE = re.compile(r"\s*([-=_*~#+.])(?:\s*\1){2,}\s*$")


def read_plain(
    builder: Builder,
    lines: Sequence[Line],
    *,
    headings: bool = True,
    least_level: int = 1,
    first_is_title: bool = False,
    by_appearance: bool = False,
) -> None:
    """Adds the blocks of ``lines``.

    Without ``headings`` what looks like one becomes a paragraph set in bold: in a fence it must
    not end the section around it.  ``first_is_title`` makes the first line the title;
    ``by_appearance`` ranks underlined headings by the order in which their rules occur.
    """
    titles = Titles(lines, first_is_title, by_appearance)
    reader = _Reader(builder, lines, titles, headings, least_level)
    reader.run()


class _Reader:
    def __init__(
        self,
        builder: Builder,
        lines: Sequence[Line],
        titles: Titles,
        headings: bool,
        least_level: int,
    ) -> None:
        self.builder, self.lines, self.titles = builder, lines, titles
        self.headings, self.least_level = headings, least_level
        self.buffer: list[Line] = []
        self.place = Place()
        self.indents: list[int] = []
        closing = [k for k, line in enumerate(lines) if "-->" in line.raw]
        self.last_comment = closing[-1] + 1 if closing else 0

    def run(self) -> None:
        index = 0
        while index < len(self.lines):
            index = self.step(index)
        self.flush()

    def step(self, index: int) -> int:
        line = self.lines[index]
        raw = line.raw
        if not raw.strip() or _FENCE.match(raw):
            self.flush()
            return index + 1
        if raw.lstrip().startswith("<!--") and (end := self.comment(index)) > index:
            self.flush()
            return end
        table = layout_table(self.lines, index)
        if table is not None:
            self.flush()
            self.builder.table(table.table, table.at)
            return table.end
        title = self.titles.at(index)
        if title is not None:
            self.flush()
            self.indents.clear()
            self.heading(title.line, title.level)
            return title.end
        if _RULE.match(raw):
            self.flush()
            return index + 1
        self.text(line)
        return index + 1

    def comment(self, index: int) -> int:
        """The index after a comment; ``index`` itself when it is never closed."""
        end = index
        while end < self.last_comment and "-->" not in self.lines[end].raw:
            end += 1
        return index if end >= self.last_comment else end + 1

    def heading(self, line: Line, level: int) -> None:
        text = clean_line(*line)
        if self.headings:
            self.builder.heading(text, max(level, self.least_level))
        else:
            self.builder.paragraph(text, bold=True)

    def text(self, line: Line) -> None:
        raw = line.raw
        stripped = raw.lstrip()
        indent = _width(raw[: len(raw) - len(stripped)])
        mark = bullet(stripped) or printed_number(stripped)
        if mark is not None and not (self.buffer and self.continues(mark, stripped)):
            self.flush()
            level = self.level(indent)
            shift = len(raw) - len(stripped) + mark.length
            self.buffer = [Line(line.number, line.column + shift, raw[shift:])]
            self.place = Place(level, Mark(mark.number, 0, mark.firm))
            return
        if not self.buffer:
            self.place = Place(self.depth(indent))
        self.buffer.append(
            line._replace(column=line.column + len(raw) - len(stripped), raw=stripped)
        )

    def continues(self, mark: Mark, stripped: str) -> bool:
        """Whether the number belongs to the sentence before; then the paragraph decides."""
        return not mark.firm and self.place.mark is None

    def level(self, indent: int) -> int:
        while self.indents and self.indents[-1] > indent:
            self.indents.pop()
        if not self.indents or self.indents[-1] < indent:
            self.indents.append(indent)
        return len(self.indents)

    def depth(self, indent: int) -> int:
        if not indent:
            self.indents.clear()
        return sum(1 for left in self.indents if left < indent)

    def flush(self) -> None:
        if self.buffer:
            add_lines(self.builder, self.buffer, self.place)
            self.buffer = []


def _width(space: str) -> int:
    return len(space.expandtabs(4))
