"""The door of the room: one text in, one sentence of typed phrases out."""

from __future__ import annotations

from dataclasses import dataclass

from soplint.intake.model import Text
from soplint.notation.build import parts
from soplint.notation.lexicon import terminals
from soplint.notation.meaning import meaning
from soplint.notation.parser import parse
from soplint.notation.phrases import Sentence
from soplint.notation.refine import refine
from soplint.quantities import NumberStyle, find_measures
from soplint.substances import NameIndex


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
    found = terminals(text.chars, measures, reading.names.find(text.chars))
    found = refine(text.chars, found)
    tree, kept = parse(found)
    phrases = meaning(parts(text.chars, tree, kept))
    kinds = frozenset(terminal.kind for terminal in kept)
    refined = tuple(t.measure for t in kept if t.measure is not None)
    seen = {(m.start, m.end) for m in refined}
    rest = tuple(m for m in measures if (m.start, m.end) not in seen)
    whole = tuple(sorted((*refined, *rest), key=lambda m: m.start))
    return Sentence(text, tuple(phrases), whole, kinds, block, strict)


_COMMAND_WORDS = (
    "add", "pour", "water", "mark", "volume", "fill", "make up", "top", "transfer", "adjust",
    "neutrali", "collect", "discard", "dissolve", "mix", "combine", "place", "dilute", "bring",
)  # fmt: skip


def _may_command(chars: str) -> bool:
    lower = chars.lower()
    return any(word in lower for word in _COMMAND_WORDS)
