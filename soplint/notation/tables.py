"""Recipe tables: columns by their headings and their cells, rows as components with amounts.

``read_table`` first reads the headings, then looks at what stands in the columns, decides the kind
of the table (``layout``), and builds the rows: of a recipe (one column of amounts a variant), of a
list of reagents with facts, or of preparations (one a row).
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from soplint.intake.model import Table, Text
from soplint.notation.bare_units import bare_units
from soplint.notation.cells import Cell, read_cell
from soplint.notation.columns import columns
from soplint.notation.composition_rows import ComposedBuilder, composed
from soplint.notation.headings import Heading, read_heading
from soplint.notation.joined import SEPARATOR, join, sentence_of
from soplint.notation.layout import Layout, layout
from soplint.notation.preparation_rows import OwnVolumeBuilder, PreparationBuilder
from soplint.notation.prose_rows import ProseBuilder
from soplint.notation.read import Reading
from soplint.notation.recipe_rows import Builder
from soplint.notation.rows import RecipeTable, Row, Variant
from soplint.notation.stock_above import drawn_from
from soplint.quantities.model import Measure

# A table wider than this holds no recipe.
WIDEST = 60


def read_table(
    table: Table,
    reading: Reading,
    block: int = 0,
    strict: bool = False,
    context: Sequence[Text] = (),
) -> RecipeTable:
    """The recipe in ``table``, or what it is instead.

    Args:
        table: heading row, rows and caption as the intake made them; rows may be ragged.
        reading: number style and names of the document.
        block: index of the table's block, kept in the sentences.
        strict: whether a row that cannot be read is worth a finding, kept in the sentences.
        context: heading and lead-in above the table; they may name a unit or a volume.

    Returns:
        The table with its kind: ``recipe``, ``list`` (facts or preparations by row), ``other``.
        Never fails; a table without rows is ``other``.

    Example:
        >>> from soplint.quantities import number_style
        >>> from soplint.substances import NameIndex
        >>> head = (Text("Reagent", 1, 3), Text("Mass (g)", 1, 13))
        >>> rows = ((Text("Bicine", 3, 3), Text("8.16", 3, 13)),)
        >>> read = read_table(Table(head, rows), Reading(number_style(()), NameIndex()))
        >>> read.kind, read.rows[0].doses[0].amount.unit, read.rows[0].doses[0].material.words
        ('recipe', 'g', 'Bicine')
    """
    head, body = _shape(table)
    width = len(head)
    if not body or not width or width > WIDEST:
        return _other(table, head, body, reading, block, strict)
    joined = [join(row) for row in body]
    cells = [
        [read_cell(text, start, reading.style) for text, start in zip(row, starts, strict=True)]
        for row, (_, starts) in zip(body, joined, strict=True)
    ]
    headings = [read_heading(text, reading) for text in head]
    sunk = _sunk_head(headings, body, reading)
    if sunk is not None:
        headings, first = sunk, 1
    else:
        first = 0
    sorted_columns = columns(headings, cells[first:], reading)
    found = composed(sorted_columns) or layout(sorted_columns, table.caption)
    if found.kind == "other":
        return _other(table, head, body, reading, block, strict)
    notes = tuple(
        _plain_row(text, row, block, strict, 0)
        for (text, _), row in zip(joined[:first], cells[:first], strict=True)
    )
    texts = [text for text, _ in joined[first:]]
    return _read(
        found,
        table,
        head,
        notes,
        body[first:],
        texts,
        cells[first:],
        reading,
        block,
        strict,
        context,
    )


def _read(
    found: Layout,
    table: Table,
    head: tuple[Text, ...],
    notes: tuple[Row, ...],
    body: Sequence[tuple[Text, ...]],
    texts: Sequence[Text],
    cells: Sequence[Sequence[Cell]],
    reading: Reading,
    block: int,
    strict: bool,
    context: Sequence[Text],
) -> RecipeTable:
    """The rows of a table whose layout is known."""
    if found.kind == "prose":
        read = ProseBuilder(found, reading, block, strict)
        rows = tuple(read.row(t, c) for t, c in zip(texts, cells, strict=True))
        return RecipeTable((), notes + rows, head, table.caption, "list")
    if found.kind == "composed":
        by_amount = ComposedBuilder(found, reading, block, strict)
        rows = tuple(r for b, c in zip(body, cells, strict=True) for r in by_amount.rows(b, c))
        return RecipeTable((), notes + rows, head, table.caption, "list")
    if found.kind == "preparations" and found.name is None:
        by_row = PreparationBuilder(found, reading, block, strict, drawn_from(context, reading))
        rows = tuple(by_row.row(b, c) for b, c in zip(body, cells, strict=True))
        return RecipeTable((), notes + rows, head, table.caption, "list")
    around = (*((table.caption,) if table.caption else ()), *context)
    guessed = bare_units(found, cells, reading, around)
    builder = Builder(found, reading, guessed, block, strict)
    if found.kind == "preparations":
        own = OwnVolumeBuilder(builder)
        rows = tuple(own.row(t, c) for t, c in zip(texts, cells, strict=True))
        return RecipeTable(_variants(found), notes + rows, head, table.caption, "list")
    rows = tuple(builder.row(t, c) for t, c in zip(texts, cells, strict=True))
    return RecipeTable(_variants(found), notes + rows, head, table.caption, found.kind)


def _shape(table: Table) -> tuple[tuple[Text, ...], list[tuple[Text, ...]]]:
    """Head and rows of one width: short ones filled up with empty cells."""
    rows = [row for row in table.rows if row]
    if _is_row(table.head, rows):
        rows, table = [table.head, *rows], replace(table, head=())
    width = max([len(table.head), *(len(row) for row in rows)], default=0)
    head, body = _padded(table.head, width), [_padded(row, width) for row in rows]
    half = width // 2
    if half >= 2 and width == 2 * half and _twice(head, half):
        left = [row[:half] for row in body]
        right = [row[half:] for row in body if any(cell.chars.strip() for cell in row[half:])]
        return head[:half], left + right
    return head, body


_TO_VOLUME = re.compile(r"(?:make |fill )?(?:to|up to|ad) ~?\d[\d.,]* ?\S{1,3}$", re.IGNORECASE)


def _is_row(head: tuple[Text, ...], rows: Sequence[tuple[Text, ...]]) -> bool:
    """Whether the heading row is the first of the rows.

    "1 | Weigh 26.3 g of glycine" over "2 | ..." counts the steps, "Base: | to 2 L | water" fills up.
    """
    words = [cell.chars.strip() for cell in head]
    if any(_TO_VOLUME.match(word) for word in words) and words[0].endswith(":"):
        return True
    first = words[0].rstrip(".)") if words else ""
    below = rows[0][0].chars.strip().rstrip(".)") if rows else ""
    return first.isdecimal() and below.isdecimal() and int(below[:6]) == int(first[:6]) + 1


def _twice(head: tuple[Text, ...], half: int) -> bool:
    """Whether a narrow table was printed in two halves side by side."""
    left = [cell.chars.strip().lower() for cell in head[:half]]
    right = [cell.chars.strip().lower() for cell in head[half:]]
    return left == right and all(left)


def _padded(cells: tuple[Text, ...], width: int) -> tuple[Text, ...]:
    if len(cells) >= width:
        return cells
    last = cells[-1] if cells else Text("", 1, 1)
    line, column = last.place(len(last.chars) - 1) if last.chars else (last.line, last.column)
    return cells + (Text("", line, column + 1),) * (width - len(cells))


def _sunk_head(
    headings: Sequence[Heading], body: Sequence[tuple[Text, ...]], reading: Reading
) -> list[Heading] | None:
    """The first row as headings, where the table has none and the row reads like one."""
    if any(heading.text.chars.strip() for heading in headings) or len(body) < 2:
        return None
    first = [read_heading(text, reading) for text in body[0]]
    filled = [h for h in first if h.text.chars.strip()]
    if len(filled) < 2 or sum(h.role is not None for h in filled) * 2 <= len(filled):
        return None
    return first


def _variants(found: Layout) -> tuple[Variant, ...]:
    groups = [group[0].heading for group in found.amounts]
    name = found.name.heading if found.name is not None else None
    if name is not None and len(groups) <= 1 and found.kind == "recipe":
        if not groups or (_says_nothing(groups[0]) and not _says_nothing(name)):
            groups = [name]  # "Buffer A (500 mL) | Amount": the solution stands over the names
    return tuple(_variant(heading) for heading in groups)


def _says_nothing(heading: Heading) -> bool:
    """Whether a heading tells neither volume nor fold nor pH nor the name of a solution."""
    told = heading.volume or heading.fold or heading.ph
    return told is None and not _solution_name(heading)


def _solution_name(heading: Heading) -> str | None:
    if heading.role not in (None, "LABEL") or not heading.words:
        return None
    alone = heading.role == "LABEL" and " " not in heading.words
    return None if alone else heading.words


def _variant(heading: Heading) -> Variant:
    return Variant(heading.text, heading.volume, heading.fold, heading.ph, _solution_name(heading))


# --- tables without a recipe ---------------------------------------------------------------------------


def _other(
    table: Table,
    head: tuple[Text, ...],
    body: Sequence[tuple[Text, ...]],
    reading: Reading,
    block: int,
    strict: bool,
) -> RecipeTable:
    """A table with nothing to recompute; its quantities are kept for the count."""
    rows = []
    for row in body:
        text, starts = join(row)
        cells = [read_cell(t, s, reading.style) for t, s in zip(row, starts, strict=True)]
        rows.append(_plain_row(text, cells, block, strict, 0))
    return RecipeTable((), tuple(rows), head, table.caption, "other")


def _plain_row(text: Text, cells: Sequence[Cell], block: int, strict: bool, variants: int) -> Row:
    measures: tuple[Measure, ...] = tuple(m for cell in cells for m in cell.row_measures)
    sentence = sentence_of(text, (), measures, frozenset(), block, strict)
    return Row(text, "note", None, (None,) * variants, (None,) * variants, sentence)


__all__ = ["SEPARATOR", "WIDEST", "read_table"]
