"""Tables of cells set apart by pipes, and what makes a row the heading row."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence

from soplint.intake.builder import joined, one_line
from soplint.intake.inline import clean_line
from soplint.intake.model import Table, Text
from soplint.intake.numbering import starts_with_quantity
from soplint.intake.scan import Line

# Rows are filled up with empty cells to the width of the widest one, up to this many columns.
FILLED_WIDTH = 64

_DELIMITER = frozenset("|-:+ \t")
_PIPE = re.compile(r"(?<!\\)\|")
_NUMBER = re.compile(r"[~≈<>≤≥(]?\s?[-+]?[.,]?\d")
_UNIT_CELL = re.compile(
    r"[(\[][^()\[\]]{1,20}[)\]]|[kmµun]?(?:[gLlMN]|mol)(?:/m?[Ll])?|%|°C|h|min|s"
)


def pipe_segments(lines: Sequence[Line]) -> Iterator[tuple[bool, list[Line]]]:
    """``lines`` cut into stretches of table rows (True) and of other lines (False)."""
    other: list[Line] = []
    index = 0
    while index < len(lines):
        end = _table_end(lines, index)
        if end == index:
            other.append(lines[index])
            index += 1
            continue
        if other:
            yield False, other
            other = []
        yield True, list(lines[index:end])
        index = end
    if other:
        yield False, other


def _table_end(lines: Sequence[Line], start: int) -> int:
    """The index after the last row of a table that begins at ``start``; ``start`` for none."""
    first = lines[start].raw
    if "|" not in first:
        return start
    following = lines[start + 1].raw if start + 1 < len(lines) else ""
    if "|" not in following:
        return start
    fenced = first.startswith("|") and following.startswith("|")
    if not (fenced or is_delimiter(following) or is_delimiter(first)):
        return _unmarked_end(lines, start)
    end = start + 2
    while end < len(lines) and "|" in lines[end].raw:
        end += 1
    return end


def _unmarked_end(lines: Sequence[Line], start: int) -> int:
    """Rows without any delimiter count from three lines with equally many pipes on."""
    pipes = len(_PIPE.findall(lines[start].raw))
    end = start
    while end < len(lines) and len(_PIPE.findall(lines[end].raw)) == pipes:
        following = lines[end + 1].raw if end + 1 < len(lines) else ""
        if end > start and is_delimiter(following):
            break
        end += 1
    return end if end - start >= 3 else start


def is_delimiter(raw: str) -> bool:
    """Whether the line is the rule between heading row and body: ``|---|:-:|``."""
    return "|" in raw and "-" in raw and _DELIMITER.issuperset(raw)


def pipe_table(lines: Sequence[Line]) -> Table:
    """The table in ``lines``, each a row of cells between pipes."""
    rows: list[list[Text]] = []
    head_rows: int | None = None
    for line in lines:
        if is_delimiter(line.raw):
            if head_rows is None:
                head_rows = len(rows)
        else:
            rows.append(_cells(line))
    return table_of(rows, head_rows)


def _cells(line: Line) -> list[Text]:
    raw = line.raw.rstrip()
    bounds = [match.start() for match in _PIPE.finditer(raw)]
    if not bounds or raw[: bounds[0]].strip():
        bounds.insert(0, -1)
    if raw[bounds[-1] + 1 :].strip() or len(bounds) == 1:
        bounds.append(len(raw))
    return [
        clean_line(line.number, line.column + left + 1, raw[left + 1 : right])
        for left, right in zip(bounds, bounds[1:], strict=False)
    ]


def table_of(rows: list[list[Text]], head_rows: int | None, caption: Text | None = None) -> Table:
    """A table of ``rows``; without a known number of heading rows the cells decide."""
    rows = [row for row in rows if row]
    if head_rows is None:
        head_rows = 1 if _looks_like_head(rows) else 0
    if head_rows and len(rows) > head_rows and _holds_units(rows[head_rows]):
        head_rows += 1
    _fill(rows)
    head = tuple(one_line(cell) for cell in _merged(rows[:head_rows]))
    if not any(cell.chars for cell in head):
        head = ()
    body = tuple(tuple(row) for row in rows[head_rows:])
    return Table(head, body, caption)


def _looks_like_head(rows: list[list[Text]]) -> bool:
    if len(rows) < 2 or len(rows[0]) < 2:
        return False
    if any(_NUMBER.match(cell.chars) for cell in rows[0]) and any(
        starts_with_quantity(cell.chars) for cell in rows[0]
    ):
        return False
    return any(_NUMBER.match(cell.chars) for row in rows[1:6] for cell in row)


def _holds_units(row: list[Text]) -> bool:
    """Whether the row is the second line of a heading: nothing but units in it."""
    shown = [cell.chars for cell in row if cell.chars]
    return bool(shown) and all(_UNIT_CELL.fullmatch(chars) for chars in shown)


def _merged(head: list[list[Text]]) -> tuple[Text, ...]:
    if len(head) < 2:
        return tuple(head[0]) if head else ()
    width = max(len(row) for row in head)
    columns = [[row[k] for row in head if k < len(row)] for k in range(width)]
    return tuple(joined(cells) if any(c.chars for c in cells) else cells[0] for cells in columns)


def _fill(rows: list[list[Text]]) -> None:
    width = max((len(row) for row in rows), default=0)
    if width > FILLED_WIDTH:
        return
    for row in rows:
        if len(row) < width:
            last = row[-1]
            line, column = (
                last.place(max(0, len(last.chars) - 1)) if last.chars else (last.line, last.column)
            )
            row.extend([Text("", line, column + 1)] * (width - len(row)))
