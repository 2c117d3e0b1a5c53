"""The door of the room: one text in, one sentence of typed phrases out."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass

from soplint.intake.model import Text
from soplint.notation.build import parts
from soplint.notation.lexicon import terminals
from soplint.notation.meaning import meaning
from soplint.notation.parser import parse
from soplint.notation.phrases import Dose, Phrase, Sentence, ToVolume
from soplint.notation.refine import refine
from soplint.notation.stretches import Stretches
from soplint.quantities import NumberStyle, find_measures
from soplint.quantities.model import Measure
from soplint.substances import NameIndex
from soplint.substances.model import Match


@dataclass(frozen=True, slots=True)
class Reading:
    """What a whole document decides before its sentences are read."""

    style: NumberStyle
    names: NameIndex


def read_sentence(
    text: Text, reading: Reading, block: int = 0, strict: bool = False, always: bool = False
) -> Sentence:
    """The typed phrases of one sentence.

    A sentence without a quantity and without a command about a substance holds no recipe and does
    not reach the parser, unless ``always`` (headings, whose names count).  Never fails.
    """
    measures = find_measures(text.chars, reading.style)
    if not measures and not always and not _may_command(text.chars):
        return Sentence(text, (), (), frozenset(), block, strict)
    names = reading.names.find(text.chars)
    measures = _apart(text.chars, measures, names, reading.style)
    found = terminals(text.chars, measures, names)
    found = refine(text.chars, found)
    tree, kept = parse(found)
    phrases = _entry(text.chars, meaning(parts(text.chars, tree, kept)))
    kinds = frozenset(terminal.kind for terminal in kept)
    refined = tuple(t.measure for t in kept if t.measure is not None)
    seen = {(m.start, m.end) for m in refined}
    rest = tuple(m for m in measures if (m.start, m.end) not in seen)
    whole = tuple(sorted((*refined, *rest), key=lambda m: m.start))
    return Sentence(text, tuple(phrases), whole, kinds, block, strict)


_VOLUME_ENTRY = re.compile(
    r"\W*(?:(?:final|total|batch|prepared)\s+)?(?:volume|batch size|amount|quantity)"
    r"(?:\s+(?:to (?:make|prepare)|prepared|made))?\s*[:=]\s*",
    re.IGNORECASE,
)


def _entry(chars: str, phrases: list[Phrase]) -> list[Phrase]:
    """ "Volume: 250 mL" on a line of its own is the volume of what the section makes."""
    only = phrases[0] if len(phrases) == 1 else None
    if not isinstance(only, Dose) or only.amount.dimension != "volume":
        return phrases
    if only.material is not None and (only.material.match or only.material.strengths):
        return phrases
    if not _VOLUME_ENTRY.fullmatch(chars, 0, only.amount.start):
        return phrases
    return [ToVolume(only.start, only.end, only.amount, said_final=True)]


def _apart(
    chars: str, measures: list[Measure], names: Sequence[Match], style: NumberStyle
) -> list[Measure]:
    """The quantities, read again where one begins inside a name: "Tween 20 500 µL"."""
    if not names or not measures:
        return measures
    places = Stretches((m.start, m.end) for m in measures)
    cut = [
        name
        for name in names
        if any(
            name.start < start < name.end < end
            for start, end in places.meeting(name.start, name.end)
        )
    ]
    for name in cut:
        chars = chars[: name.start] + "n" * (name.end - name.start) + chars[name.end :]
    return find_measures(chars, style) if cut else measures


_COMMAND_WORDS = (
    "add", "pour", "water", "mark", "volume", "fill", "make up", "top", "transfer", "adjust",
    "neutrali", "collect", "discard", "dissolve", "mix", "combine", "place", "dilute", "bring",
)  # fmt: skip


def _may_command(chars: str) -> bool:
    lower = chars.lower()
    return any(word in lower for word in _COMMAND_WORDS)
