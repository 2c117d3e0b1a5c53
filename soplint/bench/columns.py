"""Tables with several volume columns: every row grows in proportion to the column's volume."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from statistics import median

from soplint.bench.numbers import relative, shown
from soplint.bench.preparation import Preparation, Taken
from soplint.bench.relation import Relation
from soplint.findings.model import Interval
from soplint.notation.rows import RecipeTable

_GOOD = ("made-up", "mark", "total", "column", "heading")
_LEAST = 0.02  # cells rounded to one or two figures scale this well at best


def column_relations(table: RecipeTable, preparations: Sequence[Preparation]) -> Iterator[Relation]:
    """Each cell against the others of its row, per litre of its column."""
    volumes = [
        p.volume.litres if p.volume is not None and p.volume.provenance in _GOOD else None
        for p in preparations
    ]
    if len({v for v in volumes if v}) < 2 or any(v is None for v in volumes):
        return
    for line in {t.text.line for p in preparations for t in p.taken}:
        cells = [_cell(p, line) for p in preparations]
        found = [(c, v) for c, v in zip(cells, volumes, strict=True) if c is not None and v]
        if len(found) >= 2 and len(found) == len(preparations):
            yield from _row([c for c, _ in found], [v for _, v in found], preparations)


def _cell(preparation: Preparation, line: int) -> Taken | None:
    found = [t for t in preparation.taken if t.text.line == line]
    return found[0] if len(found) == 1 else None


def _row(
    cells: Sequence[Taken], volumes: Sequence[float], preparations: Sequence[Preparation]
) -> Iterator[Relation]:
    amounts = [c.dose.amount for c in cells]
    if len({a.dimension for a in amounts}) != 1 or any(a.base <= 0 for a in amounts):
        return
    if max(a.base for a in amounts) == min(a.base for a in amounts):
        return  # a tablet, two drops: does not scale
    per_litre = [a.base / v for a, v in zip(amounts, volumes, strict=True)]
    for index, (cell, amount, volume) in enumerate(zip(cells, amounts, volumes, strict=True)):
        others = [q for i, q in enumerate(per_litre) if i != index]
        agreeing = max(others) <= min(others) * 1.06
        if not agreeing or (len(others) == 1 and index == 0):
            continue
        value = median(others) * volume / amount.factor
        spread = max(_LEAST, *(relative(a, 0.06) for a in amounts)) + _LEAST
        deviation = amount.nominal / value - 1
        yield Relation(
            "columns",
            cell.stated,
            cell.dose.material.words if cell.dose.material else None,
            Interval(value, amount.unit, value * (1 - spread), value * (1 + spread)),
            abs(deviation) <= spread,
            deviation,
            f"the other columns give {median(others):.4g} per litre;"
            f" × {volume * 1000:.4g} mL = {value:.4g} {amount.unit}"
            f" ({', '.join(shown(a) for a in amounts)})",
            tuple(c.stated for c in cells if c is not cell),
            preparation=preparations[index],
            volume=preparations[index].volume,
            taken=cell,
        )
