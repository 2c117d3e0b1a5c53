"""Whether a table can hold a recipe, and which of its columns names the components."""

from __future__ import annotations

from collections.abc import Sequence

from soplint.intake.model import Text
from soplint.notation.columns import Column
from soplint.notation.headings import words_role
from soplint.notation.stock_above import is_stock

# Share of the names in the first column that the catalogue must know before a heading that names a
# substance is taken for the name of a solution ("Phosphate buffer") and not for a component.
_KNOWN = 0.5


def is_prose(column: Column) -> bool:
    """Whether the cells are phrases: quantities among words."""
    stats = column.stats
    return column.role != "OTHER" and stats.mostly(stats.phrases) and stats.worded > 0


def no_recipe(columns: Sequence[Column], caption: Text | None) -> bool:
    """Whether the headings say that the table holds results, settings, limits ..."""
    first = next((c for c in columns if c.heading.role or c.heading.words), None)
    if first is not None and first.heading.role == "OTHER" and first.index <= 1:
        named = columns[0].index != first.index and columns[0].stats.mostly(columns[0].stats.named)
        if not named:
            return True
    others = [c for c in columns if c.heading.role == "OTHER"]
    known = any(c.role in ("NAME", "AMOUNT") or is_prose(c) for c in columns)
    if others and not known:
        return True
    return 2 * len(others) > len(columns) or (
        caption is not None and words_role(caption.chars) == "OTHER" and bool(others)
    )


def material_heads(columns: Sequence[Column]) -> list[Column]:
    """Columns whose heading names a material that the cells give amounts or strengths of."""
    found = []
    for column in columns[1:]:
        heading, stats = column.heading, column.stats
        if heading.match is None or heading.role not in (None, "LABEL"):
            continue
        if stats.mostly(stats.numbers + stats.taken + stats.strengths + stats.brought):
            found.append(column)
    return found


def name_column(columns: Sequence[Column], heads: Sequence[Column]) -> Column | None:
    """The column that names the components, or None where the headings name them."""
    best = _best_name(columns)
    if best is None:
        return None
    if heads and best.stats.named < _KNOWN * max(1, best.stats.filled):
        if len(heads) >= 2 or best.role in ("LABEL", "WORDS"):
            return None
    if best.role in ("LABEL", "WORDS") and _makes_up(columns) and not best.stats.named:
        return None
    if best.role == "LABEL" and not best.stats.named and any(map(_of_stock, columns)):
        return None
    return best


def _of_stock(column: Column) -> bool:
    """Whether the cells are volumes of a stock that the heading names: "Working standard (mL)"."""
    unit = column.heading.unit
    volumes = column.stats.numbers and unit is not None and unit.dimension == "volume"
    return bool(volumes) and column.index > 0 and is_stock(column.heading.words)


def _makes_up(columns: Sequence[Column]) -> bool:
    return any(c.role == "MAKEUP" for c in columns)


def _best_name(columns: Sequence[Column]) -> Column | None:
    rows = max((c.stats.filled for c in columns), default=0)
    headed = [c for c in columns if c.role == "NAME" and c.stats.filled]
    solutes = [c for c in headed if c.heading.words.lower() not in ("solvent", "solvents")]
    first = next((c for c in columns if c.role in ("WORDS", "LABEL")), None)
    if solutes or (headed and (first is None or not first.stats.mostly(first.stats.named))):
        return max(solutes or headed, key=lambda c: (_share(c), -c.index))
    wordy = [
        c
        for c in columns
        if c.role in ("WORDS", "LABEL", "FORMULA", "STOCK") and c.stats.mostly(c.stats.worded)
    ]
    return max(wordy, key=lambda c: (c.stats.named / max(1, rows), -c.index)) if wordy else None


def _share(column: Column) -> float:
    return column.stats.named / max(1, column.stats.filled)
