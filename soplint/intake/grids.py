"""Grid and simple tables as reStructuredText draws them."""

from __future__ import annotations

import re
from collections.abc import Sequence

from soplint.intake.builder import joined
from soplint.intake.inline import clean_line
from soplint.intake.model import Table, Text
from soplint.intake.scan import Line
from soplint.intake.tables import table_of

_GRID_RULE = re.compile(r"\s*\+(?:[-=]{2,}\+)+\s*$")
_SIMPLE_RULE = re.compile(r"\s*={2,}(?:\s+={2,})*\s*$")
_COLUMN = re.compile(r"[=-]+")


def grid_table(lines: Sequence[Line], index: int) -> tuple[Table, int] | None:
    """A table drawn with ``+---+`` and ``|``; cells may run over several lines."""
    if not _GRID_RULE.match(lines[index].raw):
        return None
    rows: list[list[Text]] = []
    group: list[list[Text]] = []
    head_rows: int | None = None
    end = index
    while end < len(lines):
        raw = lines[end].raw.strip()
        if raw.startswith("+"):
            if group:
                rows.append(_stacked(group))
                group = []
            if "=" in raw and set(raw) <= set("+=") and rows and head_rows is None:
                head_rows = len(rows)
        elif raw.startswith("|"):
            group.append(_pipe_cells(lines[end]))
        else:
            break
        end += 1
    if group:
        rows.append(_stacked(group))
    return (table_of(rows, head_rows), end) if rows else None


def _pipe_cells(line: Line) -> list[Text]:
    bounds = [match.start() for match in re.finditer(r"[|+]", line.raw.rstrip())]
    bounds = [at for at in bounds if line.raw[at] == "|"]
    return [
        clean_line(line.number, line.column + left + 1, line.raw[left + 1 : right])
        for left, right in zip(bounds, bounds[1:], strict=False)
    ]


def _stacked(group: list[list[Text]]) -> list[Text]:
    """The lines of a row put together, cell by cell."""
    width = max(len(row) for row in group)
    columns = [[row[k] for row in group if k < len(row)] for k in range(width)]
    return [joined(cells) if any(c.chars for c in cells) else cells[0] for cells in columns]


def simple_table(lines: Sequence[Line], index: int) -> tuple[Table, int] | None:
    """A table between rules of ``=``: columns stand under the stretches of the rule."""
    rule = lines[index].raw
    if not _SIMPLE_RULE.match(rule):
        return None
    bounds = [match.span() for match in _COLUMN.finditer(rule)]
    if len(bounds) < 2:
        return None
    ends = _rules_below(lines, index, bounds)
    if not ends:
        return None
    head_rows = None
    rows: list[list[Text]] = []
    for at in range(index + 1, ends[-1]):
        if at in ends:
            head_rows = len(rows)
            continue
        raw = lines[at].raw
        if not raw.strip() or not raw.replace("-", "").strip():
            continue
        row = _columns(lines[at], bounds)
        if rows and not row[0].chars and at - 1 not in ends:
            rows[-1] = _stacked([rows[-1], row])
        else:
            rows.append(row)
    return (table_of(rows, head_rows), ends[-1] + 1) if rows else None


def _rules_below(lines: Sequence[Line], index: int, bounds: list[tuple[int, int]]) -> list[int]:
    """Indices of the rules that close the heading and the table."""
    found: list[int] = []
    for at in range(index + 1, len(lines)):
        raw = lines[at].raw
        if _SIMPLE_RULE.match(raw):
            found.append(at)
            after = lines[at + 1].raw.strip() if at + 1 < len(lines) else ""
            if len(found) == 2 or not after:
                return found
        elif not raw.strip() and at > index + 400:
            break
    return found


def _columns(line: Line, bounds: list[tuple[int, int]]) -> list[Text]:
    starts = [start for start, _ in bounds]
    starts[0] = 0
    ends = [*starts[1:], len(line.raw)]
    return [
        clean_line(line.number, line.column + min(start, len(line.raw)), line.raw[start:end])
        for start, end in zip(starts, ends, strict=True)
    ]
