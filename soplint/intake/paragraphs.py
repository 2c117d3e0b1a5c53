"""Lines that stand together: which begin a block of their own, which go on with the one before.

Prose that an editor wrapped is one block; recipe lines typed one below the other are a block
each.  The telling signs are a printed number or bullet, a colon, how the next line begins, and
whether its first word would still have fitted on the line before.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass

from soplint.intake.builder import Builder, cut, joined, marked
from soplint.intake.inline import clean, clean_line
from soplint.intake.model import Text
from soplint.intake.numbering import Mark, ends_with_quantity, starts_with_quantity
from soplint.intake.scan import BREAK, Line
from soplint.intake.tables import pipe_segments, pipe_table

# Narrower lines than this are never taken for wrapped prose.
WRAP_WIDTH = 50
# A recipe line is not longer than this.
RECIPE_LENGTH = 110
# A joined block is closed at the next line after this many characters.
BLOCK_LENGTH = 20_000

_OPEN_END = re.compile(
    r"(?:(?:^|\s)(?:and|or|of|to|in|with|the|a|an|for|at|from|by|into|is|are|about|approx\.?|ca\.?|"
    r"than|least|most|plus|per|as|on|until|see|section|Section|step|Step|steps|table|Table|Fig\.|"
    r"No\.|e\.g\.|i\.e\.|und|mit|von|et|de|и|в)|[-+=~×*/<>≈±]|[(\[])$"
)
_CONTINUES = re.compile(r"[()\[\],;:.=%×/]|(?:and|or|of|to|in|with|und|et)\s")
# "Author: ...", "Example: ..." begin a line of their own; so does what follows "c = m / V".
_LABEL = re.compile(r"[A-ZÀ-ÞА-Я][^\W\d_]{2,15}(?: [^\W\d_]{1,12})?:(?:\s|$)")
_FORMULA = re.compile(r"[^\W\d_]\w{0,5}(?:\s?\([^()]{1,40}\))?\s?=\s")
_FIRST_WORD = re.compile(r"\S+")
_LOWER_WORD = re.compile(r"[^\W\d_]+")
_BOLD = re.compile(
    r"(?:\*\*|__|<(?:b|strong)>)(?!\s)(?P<inner>.+?)(?:\*\*|__|</(?:b|strong)>)(?:\s{0,3}[:.])?",
    re.IGNORECASE,
)


@dataclass(frozen=True, slots=True)
class _Unit:
    """One printed line: its text, whether it is all bold, whether it must begin a block."""

    text: Text
    bold: bool
    anew: bool


@dataclass(frozen=True, slots=True)
class Place:
    """Where lines stand: in an item of this depth, as the first thing after its marker."""

    depth: int = 0
    mark: Mark | None = None
    column: int = 0  # where the item's text begins; a number left of it belongs beside the item


def is_bold(raw: str) -> bool:
    """Whether the whole line is set in bold, a colon or point after it included."""
    if raw[:1] not in "*_<":
        return False
    match = _BOLD.fullmatch(raw.strip())
    return match is not None and not re.search(r"\*\*|__|</?(?:b|strong)>", match.group("inner"))


def add_lines(builder: Builder, lines: list[Line], place: Place) -> None:
    """Adds ``lines`` that no blank line parts: tables, items, paragraphs."""
    if len(lines) == 1:
        _add_line(builder, lines[0], place)
        return
    if not any("|" in line.raw for line in lines):
        _add_text(builder, lines, place)
        return
    for is_table, segment in pipe_segments(lines):
        if is_table:
            table = pipe_table(segment)
            builder.table(table, Text("", segment[0].number, segment[0].column))
        else:
            _add_text(builder, segment, place)
            place = Place(place.depth)


def _add_line(builder: Builder, line: Line, place: Place) -> None:
    text = clean_line(*line)
    bold = is_bold(line.raw)
    if BREAK not in text.chars:
        _add_group(builder, [_Unit(text, bold, True)], place)
        return
    for part in cut(text):
        _add_group(builder, [_Unit(part, bold, True)], place)
        place = Place(place.depth)


def _add_text(builder: Builder, lines: list[Line], place: Place) -> None:
    column = lines[0].column
    for group in _groups(_units(lines), place.mark is not None):
        _add_group(builder, group, place)
        place = Place(place.depth, column=column)


def _add_group(builder: Builder, group: Sequence[_Unit], place: Place) -> None:
    text = group[0].text if len(group) == 1 else joined([unit.text for unit in group])
    bold = group[0].bold and len(group) == 1
    mark, rest = marked(text)
    if place.mark is not None:
        if mark is None or place.mark.number is not None:
            builder.item(text, place.depth, place.mark, bold)
        else:
            builder.item(rest, place.depth, mark, bold)
    elif mark is not None:
        beside = place.depth and text.column < place.column
        builder.item(rest, place.depth if beside else place.depth + 1, mark, bold)
    else:
        builder.paragraph(text, bold)


def _units(lines: list[Line]) -> Iterator[_Unit]:
    anew = True
    for line, text in zip(lines, clean(lines), strict=True):
        bold = is_bold(line.raw)
        for part in cut(text):
            if part.chars:
                yield _Unit(part, bold, anew or bold)
                anew = True
        anew = bold or line.raw.endswith(("  ", "\\"))


def _groups(units: Iterable[_Unit], listed: bool) -> Iterator[list[_Unit]]:
    units = list(units)
    width = max((len(unit.text.chars) for unit in units), default=0)
    group: list[_Unit] = []
    length = 0
    in_item = listed
    for unit in units:
        if group:
            mark = _mark_after(group[-1].text.chars, unit.text, in_item, width)
            begins = unit.anew or length > BLOCK_LENGTH or mark is not None
            inside = listed and unit.text.column >= units[0].text.column
            if begins or starts_anew(group[-1].text.chars, unit.text.chars, width, inside):
                yield group
                group, length = [], 0
        if not group:
            in_item = listed or marked(unit.text)[0] is not None
        group.append(unit)
        length += len(unit.text.chars)
    if group:
        yield group


def _mark_after(before: str, text: Text, in_item: bool, width: int) -> Mark | None:
    """The number or bullet of a later line, unless it is part of the sentence before it."""
    mark, rest = marked(text)
    if mark is None or _OPEN_END.search(before[-12:]):
        return None
    if mark.number is None and rest.chars[:1].islower() and not in_item and before[-1:] != ":":
        return mark if text.chars[:1] in "•●▪◦‣" else None
    if mark.firm or in_item or before[-1:] in ".:;!?" or not _full(before, text.chars, width):
        return mark
    return None


def starts_anew(before: str, chars: str, width: int, listed: bool = False) -> bool:
    """Whether the line ``chars`` begins a block of its own after the line ``before``.

    ``width`` is that of the widest line around; ``listed`` lines stand in a list item, where a
    small letter goes on with the line before.

    >>> starts_anew("5 g NaCl", "10 g KCl", 10), starts_anew("Weigh the salt and", "stir.", 60)
    (True, False)
    """
    if before[-1:] == ":":
        return True
    if _OPEN_END.search(before[-12:]) or _CONTINUES.match(chars) or _unclosed(before):
        return False
    if _LABEL.match(chars) or _FORMULA.match(before):
        return True
    if listed and (before[-1:] == "," or _begins_low(chars)):
        return False
    recipe = is_recipe_line(before)
    if recipe and is_recipe_line(chars):
        return True
    if _begins_low(chars):
        return recipe and starts_with_quantity(before) and not _full(before, chars, width)
    return not _full(before, chars, width)


def is_recipe_line(chars: str) -> bool:
    """Whether the line is a dose of its own: short, a quantity at its start or its end."""
    if len(chars) > RECIPE_LENGTH or ". " in chars:
        return False
    return starts_with_quantity(chars) or ends_with_quantity(chars)


def _begins_low(chars: str) -> bool:
    word = _LOWER_WORD.match(chars)
    return word is not None and word.group().islower()


def _full(before: str, chars: str, width: int) -> bool:
    """Whether the first word of ``chars`` had no room left on the line before it."""
    word = _FIRST_WORD.match(chars)
    return width >= WRAP_WIDTH and word is not None and len(before) + len(word.group()) >= width


def _unclosed(chars: str) -> bool:
    return chars.rfind("(") > chars.rfind(")")
