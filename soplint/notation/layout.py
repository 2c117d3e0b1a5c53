"""Which kind of table it is, and what each column does in it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace

from soplint.intake.model import Text
from soplint.notation.columns import Column
from soplint.notation.headings import TAKEN
from soplint.notation.name_column import is_prose, material_heads, name_column, no_recipe

_FACTS = ("MOLARMASS", "DENSITY", "ASSAY", "FORMULA")


@dataclass(slots=True)
class Layout:
    """The kind of a table and its columns by what they do."""

    kind: str  # recipe, list, preparations (one a row), prose (sentences), other
    columns: list[Column]
    name: Column | None = None
    label: Column | None = None
    amounts: list[list[Column]] = field(default_factory=list)  # one list a variant
    stocks: list[Column] = field(default_factory=list)
    finals: list[Column] = field(default_factory=list)
    unsure: list[Column] = field(default_factory=list)  # strengths of a stock or final
    units: dict[int, Column] = field(default_factory=dict)  # unit column of a column
    volumes: list[Column] = field(default_factory=list)  # "Made up to (mL)"

    def by_role(self, role: str) -> list[Column]:
        """Columns with ``role``, left to right."""
        return [column for column in self.columns if column.role == role]


def layout(columns: list[Column], caption: Text | None) -> Layout:
    """Decide the kind of the table and the part of each column."""
    if not columns or no_recipe(columns, caption):
        return Layout("other", columns)
    found = _recipe_or_list(columns)
    return _prose(columns) if found.kind == "other" else found


def _recipe_or_list(columns: list[Column]) -> Layout:
    heads = material_heads(columns)
    name = name_column(columns, heads)
    if name is None:
        return _preparations(columns, heads)
    found = Layout("recipe", _settled(columns, name), name)
    _fill(found)
    if not found.amounts:
        found.kind = "list" if _has_facts(found) else "other"
        if found.kind == "other" and name.stats.mostly(name.stats.taken):
            found.kind = "recipe"
        return found
    if not _recomputable(found):
        return Layout("other", columns)
    return found


def _settled(columns: Sequence[Column], name: Column) -> list[Column]:
    """The columns with roles that depend on where the names are."""
    result = []
    for column in columns:
        role = column.role
        stats = column.stats
        if column.index == name.index:
            role = "NAME"
        elif role == "NAME" or (role == "WORDS" and column.index == 0 and column.heading.words):
            role = "LABEL" if column.index < name.index else "IGNORE"
        elif role == "LABEL" and "dilution" in column.heading.words.lower():
            role = "DILUTION" if column.index > name.index else "LABEL"
        elif role == "LABEL" and column.index > name.index:
            amounts = stats.mostly(stats.taken + stats.numbers + stats.brought)
            role = "AMOUNT" if amounts else "CONC" if stats.mostly(stats.strengths) else "IGNORE"
        elif role == "NUMBERS":
            named = column.heading.words and column.index > name.index
            role = "AMOUNT" if named or not column.heading.text.chars else "IGNORE"
        elif role in ("WORDS", "EMPTY"):
            role = "IGNORE"
        result.append(replace(column, role=role))
    return result


# --- the parts of a recipe -----------------------------------------------------------------------------


def _fill(found: Layout) -> None:
    """Sort the columns of a recipe into amounts, stocks, finals and volumes."""
    found.label = next((c for c in found.columns if c.role == "LABEL"), None)
    found.stocks = found.by_role("STOCK")
    found.finals = found.by_role("FINAL")
    found.volumes = found.by_role("MAKEUP")
    amounts = _per_litre(found, found.by_role("AMOUNT"))
    _concentrations(found, found.by_role("CONC"))
    _own_volumes(found, amounts)
    found.amounts = _variants(amounts)
    _assign_units(found)


def _concentrations(found: Layout, columns: list[Column]) -> None:
    """Columns headed "concentration": the stock's or the final one, by what else there is."""
    if not columns:
        return
    if found.finals and not found.stocks:
        found.stocks.append(columns[0])
    elif found.stocks and not found.finals:
        found.finals.append(columns[0])
    elif not found.stocks and not found.finals:
        amounts = found.by_role("AMOUNT")
        found.unsure.extend(_of_fold(columns, amounts) if amounts else columns)


def _of_fold(columns: list[Column], amounts: list[Column]) -> list[Column]:
    """Of "1x (mM) | 10x (mM)" the column of the fold that is weighed, else the first."""
    folds = {c.heading.fold.nominal for c in amounts if c.heading.fold is not None}
    same = [c for c in columns if c.heading.fold is not None and c.heading.fold.nominal in folds]
    return (same or columns)[:1]


def _per_litre(found: Layout, amounts: list[Column]) -> list[Column]:
    """The amount columns; "mg / L" beside volumes taken is a strength, not an amount for 1 L."""
    others = [c for c in amounts if c.heading.per_litre is None]
    dimensions = {c.heading.unit.dimension for c in others if c.heading.unit is not None}
    if not others or dimensions != {"volume"} or any(c.heading.volume for c in others):
        return amounts
    found.columns = [_as_strength(c) for c in found.columns]
    return others


def _as_strength(column: Column) -> Column:
    """A column headed "mg / L" read as one of strengths."""
    heading = column.heading
    if heading.per_litre is None:
        return column
    told = replace(heading, unit=heading.per_litre, volume=None, per_litre=None)
    return replace(column, role="CONC", heading=told)


def _own_volumes(found: Layout, amounts: list[Column]) -> None:
    """ "Eluent | Reagent | Volume | Amount": a volume a row that a preparation of its own is made to."""
    if found.label is not None and len(amounts) >= 2 and not found.volumes:
        volumes = [c for c in amounts if _only_volumes(c)]
        counted = volumes[0].stats.taken + volumes[0].stats.numbers if volumes else 0
        if len(volumes) == 1 and volumes[0].stats.filled == counted:
            other = [c for c in amounts if c is not volumes[0]]
            full = all(c.stats.filled >= volumes[0].stats.filled for c in other)
            labelled = found.label.stats.filled >= volumes[0].stats.filled
            if full and labelled:
                amounts.remove(volumes[0])
                found.volumes.append(volumes[0])
    rows = max((c.stats.filled for c in found.columns), default=0)
    if found.volumes and amounts and 2 * found.volumes[0].stats.filled > rows and rows:
        if found.volumes[0].stats.numbers + found.volumes[0].stats.taken:
            found.kind = "preparations"


def _only_volumes(column: Column) -> bool:
    heading = column.heading
    if heading.volume is not None or heading.fold is not None or heading.role != "AMOUNT":
        return False
    return "vol" in heading.words.lower() and "mass" not in heading.words.lower()


def _variants(amounts: list[Column]) -> list[list[Column]]:
    """Amount columns by the preparation they belong to.

    "Mass (g) | Volume (mL)" are two columns of one preparation: its solids and its liquids.
    """
    groups: list[list[Column]] = []
    for column in amounts:
        heading = column.heading
        last = groups[-1] if groups else None
        plain = heading.volume is None and heading.fold is None and heading.role == "AMOUNT"
        if last and plain and _plain(last[0]) and _dimension(column) not in map(_dimension, last):
            last.append(column)
        elif last and plain and _plain(last[0]) and _complementary(column, last):
            last.append(column)
        else:
            groups.append([column])
    return groups


def _plain(column: Column) -> bool:
    heading = column.heading
    return heading.volume is None and heading.fold is None and heading.role == "AMOUNT"


def _dimension(column: Column) -> str:
    """What the column holds: by the unit of its heading, else by the word."""
    if column.heading.unit is not None:
        return column.heading.unit.dimension
    words = column.heading.words.lower()
    for word, dimension in (("mass", "mass"), ("weigh", "mass"), ("vol", "volume")):
        if words.startswith(word) or words.endswith(word):
            return dimension
    return "any"


def _complementary(column: Column, group: Sequence[Column]) -> bool:
    """Whether the columns together are filled no more than once a row."""
    return column.stats.filled + sum(c.stats.filled for c in group) <= max(
        column.stats.filled, *(c.stats.filled for c in group)
    )


def _assign_units(found: Layout) -> None:
    """Give each unit column to the nearest column of numbers before it, else after it."""
    numbers = [
        c.index
        for c in found.columns
        if c.role in ("AMOUNT", "STOCK", "FINAL", "CONC", "MAKEUP") and c.stats.numbers
    ]
    for unit in found.by_role("UNIT"):
        before = [i for i in numbers if i < unit.index and i not in found.units]
        after = [i for i in numbers if i > unit.index and i not in found.units]
        if before or after:
            found.units[before[-1] if before else after[0]] = unit


def _has_facts(found: Layout) -> bool:
    assert found.name is not None
    strengths = [*found.stocks, *found.finals, *found.unsure]
    facts = [c for c in found.columns if c.role in _FACTS and c.stats.filled]
    known = found.name.stats.named > 0
    return bool(facts or [c for c in strengths if c.stats.filled]) and (known or bool(facts))


def _recomputable(found: Layout) -> bool:
    """Whether the amounts are amounts of something: with a unit, or beside names that are known."""
    columns = [column for group in found.amounts for column in group]
    for column in columns:
        stats = column.stats
        if stats.taken + stats.brought:
            return True
        if stats.numbers and (column.index in found.units or _unit_is_taken(column)):
            return True
    known = found.name is not None and found.name.stats.named > 0
    return known and any(c.stats.numbers + c.stats.phrases for c in columns)


def _unit_is_taken(column: Column) -> bool:
    unit = column.heading.unit
    return unit is not None and unit.dimension in TAKEN


# --- rows of sentences -----------------------------------------------------------------------------


def _prose(columns: list[Column]) -> Layout:
    """ "Solution | Preparation": cells that are sentences of their own."""
    prose = [c for c in columns if is_prose(c) and c.role not in ("NAME", "LABEL")]
    if not prose:
        return Layout("other", columns)
    told = {c.index for c in prose}
    label = next((c for c in columns if c.index not in told and c.stats.worded), None)
    return Layout("prose", columns, label=label, amounts=[[c] for c in prose])


# --- one preparation a row ---------------------------------------------------------------------------


def _preparations(columns: list[Column], heads: Sequence[Column]) -> Layout:
    """A table whose headings name the components: "Buffer | Tris | NaCl | pH"."""
    columns = [_as_strength(column) for column in columns]
    found = Layout("preparations", columns)
    found.label = columns[0]
    found.volumes = [c for c in columns[1:] if c.role == "MAKEUP"]
    taken = [c for c in columns[1:] if _gives_amounts(c, heads)]
    found.amounts = [[c] for c in taken]
    found.finals = [c for c in columns[1:] if c.role in ("CONC", "FINAL", "PH") and c not in taken]
    if columns[0].role in ("CONC", "FINAL"):
        found.finals.insert(0, columns[0])  # "Standard, mg/L | Intermediate, mL"
    phrases = any(c.stats.phrases and c.stats.mostly(c.stats.phrases) for c in taken)
    composed = [c for c in found.finals if c.heading.match is not None]
    if taken and (found.volumes or found.finals or len(taken) >= 2 or phrases):
        if heads or phrases or any(c.heading.strengths for c in taken) or found.volumes:
            return found
        if found.finals and columns[0].heading.role == "LABEL" and all(map(_unit_is_taken, taken)):
            return found
    return found if len(composed) >= 2 else Layout("other", columns)


def _gives_amounts(column: Column, heads: Sequence[Column]) -> bool:
    """Whether the cells are amounts of what the heading names, or whole doses."""
    if column.role in ("MAKEUP", "CONC", "FINAL", "PH", "OTHER", "MOLARMASS", "DENSITY"):
        return False
    stats, heading = column.stats, column.heading
    if column in heads:
        return stats.mostly(stats.taken + stats.numbers + stats.brought)
    if column.role == "AMOUNT" and stats.mostly(stats.phrases):
        return True
    if column.role in ("AMOUNT", "STOCK", "LABEL", "NUMBERS"):
        own = heading.role != "AMOUNT" and (heading.words or heading.strengths)
        unit = heading.unit is not None and heading.unit.dimension in TAKEN
        return bool(own or heading.strengths) and (unit or stats.mostly(stats.taken))
    return False
