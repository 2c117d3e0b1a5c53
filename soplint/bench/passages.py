"""Sentences in their place: the section they stand in and the preparation they speak of."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import TYPE_CHECKING

from soplint.bench.preparation import Preparation
from soplint.notation.phrases import Claim, Sentence
from soplint.quantities.model import Measure

if TYPE_CHECKING:
    from soplint.bench.carry_out import Bench


@dataclass(frozen=True, slots=True)
class Passage:
    """A sentence with the preparation whose steps stand before it in the same section."""

    sentence: Sentence
    section: int
    order: int | None  # number of that preparation; None where none stands before it
    heading: bool
    before: Sentence | None  # the sentence before it in the same block, for what "it" is

    @property
    def chars(self) -> str:
        """The characters of the sentence."""
        return self.sentence.text.chars


def passages(bench: Bench) -> Iterator[Passage]:
    """Every sentence of the document that is no table and stands in no section set aside."""
    begins = sorted(
        (place, order)
        for order, preparation in enumerate(bench.preparations)
        if (place := _begin(preparation)) is not None
    )
    section = 0
    for index, block in enumerate(bench.blocks):
        heading = block.block.kind == "heading"
        section += heading
        if block.table is not None or index in bench.scope.aside:
            continue
        before: Sentence | None = None
        for sentence in block.sentences:
            if not sentence.text.chars.strip():
                continue
            end = sentence.text.place(len(sentence.text.chars) - 1)
            order = None
            for place, number in begins:
                if place > end:
                    break
                if bench.preparations[number].section == section:
                    order = number
            yield Passage(sentence, section, order, heading, before)
            before = sentence


def passages_of(bench: Bench, order: int) -> list[Passage]:
    """The sentences that stand in the steps of a preparation or behind them, in order."""
    return [p for p in passages(bench) if p.order == order and not p.heading]


def _begin(preparation: Preparation) -> tuple[int, int] | None:
    """Line and column of the first step of a preparation."""
    places = [t.text.place(t.dose.start) for t in preparation.taken]
    places += [m.text.place(m.to.start) for m in preparation.made]
    return min(places, default=None)


# --- a pH with its temperature ------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Reading:
    """A pH that a sentence states, with the temperature it belongs to."""

    ph: Measure
    degrees: Measure | None


_AT = re.compile(r"^[\s,(]*(?:(?:if|when)?\s*(?:measured|read|set)?\s*(?:at|@)\s+)?[\s(]*$", re.I)
_LEAD = re.compile(r"(?:\b(?:at|to|in the cold room at|@)\s+)$", re.IGNORECASE)


def readings_of(sentence: Sentence) -> list[Reading]:
    """Every pH of a sentence; "at 37 °C the pH is 7.26" and "pH 7.26 at 37 °C" alike."""
    chars = sentence.text.chars
    values = {(m.start, m.end): m for m in sentence.measures if m.dimension == "pH"}
    for phrase in sentence.phrases:
        if isinstance(phrase, Claim) and phrase.kind == "pH":
            values[(phrase.measure.start, phrase.measure.end)] = phrase.measure
    degrees = [m for m in sentence.measures if m.dimension == "temperature"]
    used: set[int] = set()
    found: list[Reading] = []
    for key in sorted(values):
        ph = values[key]
        after = next((d for d in degrees if d.start >= ph.end), None)
        if after is not None and _AT.match(chars[ph.end : after.start]):
            used.add(after.start)
            found.append(Reading(ph, after))
            continue
        before = [d for d in degrees if d.end <= ph.start and d.start not in used]
        lead = before[-1] if before and _LEAD.search(chars[: before[-1].start]) else None
        if lead is not None and any(lead.end < other.start < ph.start for other in values.values()):
            lead = None
        if lead is not None:
            used.add(lead.start)
        found.append(Reading(ph, lead))
    return found
