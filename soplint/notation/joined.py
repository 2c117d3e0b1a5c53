"""The text of a row, its cells joined, every character at its place; and its sentence."""

from __future__ import annotations

from collections.abc import Sequence

from soplint.intake.model import Text
from soplint.notation.phrases import Phrase, Sentence
from soplint.quantities.model import Measure

SEPARATOR = " | "


def join(cells: Sequence[Text]) -> tuple[Text, list[int]]:
    """The cells joined by ``" | "`` and the offset of each.

    >>> text, starts = join((Text("KBr", 3, 3), Text("12 g", 3, 9)))
    >>> text.chars, starts, text.place(6)
    ('KBr | 12 g', [0, 6], (3, 9))
    """
    if not cells:
        return Text("", 1, 1), []
    chars: list[str] = []
    places: list[tuple[int, int]] = []
    starts: list[int] = []
    length = 0
    for index, cell in enumerate(cells):
        if index:
            chars.append(SEPARATOR)
            line, column = places[-1] if places else (cell.line, cell.column)
            places.extend([(line, column + 1)] * len(SEPARATOR))
            length += len(SEPARATOR)
        starts.append(length)
        chars.append(cell.chars)
        length += len(cell.chars)
        if cell.places is None:
            places.extend((cell.line, cell.column + at) for at in range(len(cell.chars)))
        else:
            places.extend(cell.places)
    first = cells[0]
    return Text("".join(chars), first.line, first.column, tuple(places) or None), starts


def sentence_of(
    text: Text,
    phrases: tuple[Phrase, ...],
    measures: tuple[Measure, ...],
    kinds: frozenset[str],
    block: int,
    strict: bool,
) -> Sentence:
    """A sentence of the phrases and the quantities of a row, each quantity once and in order."""
    unique = {(m.start, m.end): m for m in measures}
    ordered = tuple(unique[key] for key in sorted(unique))
    return Sentence(text, phrases, ordered, kinds, block, strict)
