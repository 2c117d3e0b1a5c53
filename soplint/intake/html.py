"""Blocks of HTML inside Markdown: headings, items and table rows by their tags."""

from __future__ import annotations

import re

from soplint.intake.builder import Builder
from soplint.intake.inline import Line, clean_line
from soplint.intake.model import Text
from soplint.intake.numbering import Mark
from soplint.intake.paragraphs import Place, add_lines
from soplint.intake.tables import table_of

_HEADING = re.compile(r"\s*<h([1-6])(?:\s[^<>]*)?>(.*?)(?:</h[1-6]>.*)?$", re.IGNORECASE)
_ITEM = re.compile(r"\s*(?:<[uo]l(?:\s[^<>]*)?>\s*)?<li(?:\s[^<>]*)?>", re.IGNORECASE)
_CELL_TAG = re.compile(r"<(/?)(table|tr|td|th)(?:\s[^<>]{0,400})?>", re.IGNORECASE)
_HIDDEN = re.compile(r"<(script|style)\b", re.IGNORECASE)


def add_html(builder: Builder, lines: list[Line]) -> None:
    """Adds the readable content of an HTML block; comments, scripts and styles are left out."""
    if _HIDDEN.match(lines[0].raw.lstrip()):
        return
    pending: list[Line] = []
    for index, line in enumerate(lines):
        if re.match(r"\s*<table\b", line.raw, re.IGNORECASE):
            _flush(builder, pending)
            end = _table_end(lines, index)
            _add_table(builder, lines[index:end])
            add_html_rest = lines[end:]
            if add_html_rest:
                _add_rows(builder, add_html_rest)
            return
        pending.append(line)
    _flush(builder, pending)


def _add_rows(builder: Builder, lines: list[Line]) -> None:
    _flush(builder, list(lines))


def _table_end(lines: list[Line], start: int) -> int:
    for index in range(start, len(lines)):
        if "</table" in lines[index].raw.lower():
            return index + 1
    return len(lines)


def _flush(builder: Builder, lines: list[Line]) -> None:
    """Adds lines outside tables, once comments are out of them."""
    if lines and lines[0].raw.lstrip().startswith("<!--") and "-->" in lines[-1].raw:
        tail = lines[-1].raw.rsplit("-->", 1)
        lines[:] = [Line(lines[-1].number, lines[-1].column + len(tail[0]) + 3, tail[1])]
    group: list[Line] = []
    for line in lines:
        heading, item = _HEADING.match(line.raw), _ITEM.match(line.raw)
        if heading or item:
            if group:
                add_lines(builder, group, Place())
                group = []
        if heading:
            at = heading.start(2)
            text = clean_line(line.number, line.column + at, heading.group(2))
            builder.heading(text, int(heading.group(1)))
        elif item:
            rest = Line(line.number, line.column + item.end(), line.raw[item.end() :])
            add_lines(builder, [rest], Place(1, Mark(None, 0, True)))
        elif line.raw.strip():
            group.append(line)
    if group:
        add_lines(builder, group, Place())
    lines.clear()


def _add_table(builder: Builder, lines: list[Line]) -> None:
    """Rows and cells by their tags; a cell's lines are joined by line breaks."""
    rows: list[list[Text]] = []
    head_rows = 0
    for line in lines:
        tags = list(_CELL_TAG.finditer(line.raw))
        for index, tag in enumerate(tags):
            name = tag.group(2).lower()
            if tag.group(1):
                continue
            if name == "tr":
                rows.append([])
            elif name in ("td", "th") and rows:
                end = tags[index + 1].start() if index + 1 < len(tags) else len(line.raw)
                raw = line.raw[tag.end() : end]
                rows[-1].append(clean_line(line.number, line.column + tag.end(), raw))
                if name == "th" and len(rows) == head_rows + 1 and len(rows[-1]) == 1:
                    head_rows += 1
    if any(rows):
        builder.table(table_of(rows, head_rows or None), Text("", lines[0].number, lines[0].column))
