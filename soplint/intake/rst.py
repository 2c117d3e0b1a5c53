"""The lines of reStructuredText that are no text: directives, their options, comments."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence

from soplint.intake.builder import joined
from soplint.intake.inline import clean
from soplint.intake.model import Table, Text
from soplint.intake.scan import Line
from soplint.intake.tables import table_of

_DIRECTIVE = re.compile(r"(\s*)\.\.\s+([\w:.-]+)::(?:\s+|$)")
_EXPLICIT = re.compile(r"(\s*)\.\.(?:\s+|$)")
_OPTION = re.compile(r"\s+:[\w-]+:(?:\s|$)")
_LIST_TABLE = re.compile(r"\s*\.\.\s+list-table::")
_HEADER_ROWS = re.compile(r"\s*:header-rows:\s*(\d{1,2})\s*$")
_ROW = re.compile(r"(\s*)\*\s+-(?:\s+|$)")
_CELL = re.compile(r"(\s*)-(?:\s+|$)")
# Directives whose argument is text for the reader.
_SPEAKING = frozenset(
    "note warning caution danger attention hint important tip error admonition topic sidebar "
    "rubric table list-table csv-table container versionadded".split()
)


def readable(lines: Sequence[Line]) -> list[Line]:
    """``lines`` with blank ones in place of directives, options and comments.

    The text that a directive shows stays where it is.
    """
    shown: list[Line] = []
    hidden: int | None = None  # indentation of the comment that is being left out
    options = False
    for line in lines:
        raw = line.raw
        indent = len(raw) - len(raw.lstrip())
        if hidden is not None and raw.strip() and indent <= hidden:
            hidden = None
        directive, explicit = _DIRECTIVE.match(raw), _EXPLICIT.match(raw)
        if hidden is not None:
            shown.append(_blank(line))
        elif directive is not None:
            options = True
            keep = directive.group(2) in _SPEAKING and not _LIST_TABLE.match(raw)
            end = directive.end()
            shown.append(Line(line.number, line.column + end, raw[end:]) if keep else line)
            if not keep and not _LIST_TABLE.match(raw):
                shown[-1] = _blank(line)
        elif explicit is not None:
            hidden = indent
            shown.append(_blank(line))
        elif options and _OPTION.match(raw):
            shown.append(line if _HEADER_ROWS.match(raw) else _blank(line))
        else:
            options = False
            shown.append(
                line._replace(raw=raw.rstrip()[:-1]) if raw.rstrip()[-2:] == "::" else line
            )
    return shown


def _blank(line: Line) -> Line:
    return line._replace(raw="")


def list_table(lines: Sequence[Line], index: int) -> tuple[Table, int] | None:
    """The table of a ``list-table`` directive at ``index``: rows ``* -``, cells ``-``."""
    opening = _LIST_TABLE.match(lines[index].raw)
    if opening is None:
        return None
    indent = len(opening.group()) - len(opening.group().lstrip())
    title = lines[index]._replace(
        column=lines[index].column + opening.end(), raw=lines[index].raw[opening.end() :]
    )
    head_rows = 0
    rows: list[list[list[Line]]] = []
    end = index + 1
    for line in _indented(lines, index + 1, indent):
        end += 1
        head, row, cell = _HEADER_ROWS.match(line.raw), _ROW.match(line.raw), _CELL.match(line.raw)
        if head is not None:
            head_rows = int(head.group(1))
        elif row is not None:
            rows.append([[_rest(line, row.end())]])
        elif rows and cell is not None:
            rows[-1].append([_rest(line, cell.end())])
        elif rows and line.raw.strip():
            rows[-1][-1].append(line)
    caption = clean([title])[0]
    texts = [[_cell(cell) for cell in row] for row in rows]
    return table_of(texts, head_rows, caption if caption.chars else None), end


def _indented(lines: Sequence[Line], start: int, indent: int) -> Iterator[Line]:
    for index in range(start, len(lines)):
        raw = lines[index].raw
        if raw.strip() and len(raw) - len(raw.lstrip()) <= indent:
            return
        yield lines[index]


def _rest(line: Line, start: int) -> Line:
    return Line(line.number, line.column + start, line.raw[start:])


def _cell(lines: list[Line]) -> Text:
    texts = clean(lines)
    return joined(texts) if any(text.chars for text in texts) else texts[0]
