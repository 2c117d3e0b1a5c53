"""Tables in plain text: by pipes, by tabs, by columns that stand one under the other."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass

from soplint.intake.grids import grid_table, simple_table
from soplint.intake.inline import clean_line
from soplint.intake.model import Table, Text
from soplint.intake.numbering import bullet, printed_number
from soplint.intake.rst import list_table
from soplint.intake.scan import Line
from soplint.intake.tables import pipe_segments, pipe_table, table_of

# Longer lines are never rows of a table laid out by spaces.
LONGEST_ROW = 300
# A table laid out by spaces has at least so many lines.
LEAST_ROWS = 3

_GAP = re.compile(r"\S(?:\s{2,}|\t)(?=\S)")
_DASHES = frozenset(" \t=-")


@dataclass(frozen=True, slots=True)
class Found:
    """A table, where it begins, and the index of the line after it."""

    table: Table
    at: Text
    end: int


def layout_table(lines: Sequence[Line], index: int) -> Found | None:
    """The table that begins with the line at ``index``, if any."""
    raw = lines[index].raw
    first = raw.lstrip()[:1]
    at = Text("", lines[index].number, lines[index].column + len(raw) - len(raw.lstrip()))
    found: tuple[Table, int] | None = None
    if first == "+":
        found = grid_table(lines, index)
    elif first == ".":
        found = list_table(lines, index)
    elif first == "=":
        found = simple_table(lines, index)
    if found is None and "|" in raw:
        found = _piped(lines, index)
    if found is None and "\t" in raw.strip():
        found = _tabbed(lines, index)
    if found is None and _GAP.search(raw):
        found = _aligned(lines, index)
    return None if found is None else Found(found[0], at, found[1])


def _piped(lines: Sequence[Line], index: int) -> tuple[Table, int] | None:
    end = index
    while end < len(lines) and "|" in lines[end].raw:
        end += 1
    run = [_shifted(line) for line in lines[index:end]]
    is_table, rows = next(pipe_segments(run))
    return (pipe_table(rows), index + len(rows)) if is_table else None


def _shifted(line: Line) -> Line:
    stripped = line.raw.lstrip()
    return Line(line.number, line.column + len(line.raw) - len(stripped), stripped.rstrip())


def _tabbed(lines: Sequence[Line], index: int) -> tuple[Table, int] | None:
    end = index
    while end < len(lines) and _tab_row(lines[end].raw):
        end += 1
    if end - index < 2:
        return None
    rows = [
        _cut(line, [m.span() for m in re.finditer(r"\t+", line.raw.rstrip())])
        for line in lines[index:end]
    ]
    return table_of(rows, None), end


def _tab_row(raw: str) -> bool:
    stripped = raw.strip()
    if "\t" not in stripped:
        return False
    first = stripped.split("\t", 1)[0]
    return not (bullet(first + " x") or re.fullmatch(r"\(?(?:\d+(?:\.\d+)*|[a-z])[.):]?", first))


def _cut(line: Line, gaps: list[tuple[int, int]]) -> list[Text]:
    """The cells of a row between ``gaps``, given as offsets in the line."""
    starts = [0, *(end for _, end in gaps)]
    ends = [*(start for start, _ in gaps), len(line.raw)]
    return [
        clean_line(line.number, line.column + start, line.raw[start:end])
        for start, end in zip(starts, ends, strict=True)
    ]


def _aligned(lines: Sequence[Line], index: int) -> tuple[Table, int] | None:
    """Rows whose gaps of two spaces or more stand one under the other."""
    end = index
    common = -1
    while end < len(lines) and _is_row(lines[end].raw):
        blank = _blanks(lines[end].raw)
        if not _columns(common & blank):
            break
        common &= blank
        end += 1
    rows = [line for line in lines[index:end] if not _is_rule(line.raw)]
    if len(rows) < LEAST_ROWS:
        return None
    gaps = _columns(common)
    head_rows = next((k for k in range(1, end - index) if _is_rule(lines[index + k].raw)), None)
    return table_of([_cut(line, _within(gaps, len(line.raw))) for line in rows], head_rows), end


def _is_row(raw: str) -> bool:
    if len(raw) > LONGEST_ROW or "\t" in raw:
        return False
    if _is_rule(raw):
        return True
    stripped = raw.lstrip()
    return (
        _GAP.search(stripped) is not None and not bullet(stripped) and not printed_number(stripped)
    )


def _is_rule(raw: str) -> bool:
    return _DASHES.issuperset(raw) and ("---" in raw or "===" in raw)


def _blanks(raw: str) -> int:
    """Bits of the offsets where the line is blank; everything after its end is blank too."""
    if _is_rule(raw):
        return -1
    bits = 0
    trimmed = raw.rstrip()
    for offset, char in enumerate(trimmed):
        if char != " ":
            bits |= 1 << offset
    return ~bits


def _columns(blank: int) -> list[tuple[int, int]]:
    """Gaps at least two wide between columns that hold text, as offsets."""
    if blank == -1:
        return [(0, 0)]
    text = ~blank
    width = text.bit_length()
    shown = format(text, "b")[::-1]
    first = shown.index("1")
    return [
        (match.start() + first, match.end() + first)
        for match in re.finditer(r"0{2,}(?=1)", shown[first:width])
    ]


def _within(gaps: list[tuple[int, int]], length: int) -> list[tuple[int, int]]:
    return [(min(start, length), min(end, length)) for start, end in gaps]
