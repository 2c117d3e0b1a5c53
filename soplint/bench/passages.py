"""Sentences in their place: the section they stand in and the preparation they speak of."""

from __future__ import annotations

import re
from bisect import bisect_right
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from soplint.bench.filled import Bottles
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


def passages(bench: Bench) -> Sequence[Passage]:
    """Every sentence of the document that is no table and stands in no section set aside."""
    return _index(bench).every


def passages_of(bench: Bench, order: int) -> Sequence[Passage]:
    """The sentences that stand in the steps of a preparation or behind them, in order."""
    return _index(bench).by_order.get(order, ())


def bottles_of(bench: Bench) -> Bottles:
    """The solutions of the document, filled once for all who ask."""
    return _index(bench).bottles


@dataclass(frozen=True, slots=True)
class _Index:
    bench: Bench
    every: tuple[Passage, ...]
    by_order: dict[int, list[Passage]]
    bottles: Bottles


_last: list[_Index] = []  # of the document under review: every rule asks for it


def _index(bench: Bench) -> _Index:
    if not _last or _last[0].bench is not bench:
        every = tuple(_walk(bench))
        by_order: dict[int, list[Passage]] = {}
        for passage in every:
            if passage.order is not None and not passage.heading:
                by_order.setdefault(passage.order, []).append(passage)
        bottles = Bottles(bench.preparations, bench.facts, bench.blocks)
        _last[:] = [_Index(bench, every, by_order, bottles)]
    return _last[0]


def _walk(bench: Bench) -> Iterator[Passage]:
    begins: dict[int, list[tuple[tuple[int, int], int]]] = {}
    for order, preparation in enumerate(bench.preparations):
        place = _begin(preparation)
        if place is not None:
            begins.setdefault(preparation.section, []).append((place, order))
    for found in begins.values():
        found.sort()
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
            here = begins.get(section, [])
            number = bisect_right(here, (end, len(bench.preparations)))
            order_here = here[number - 1][1] if number else None
            yield Passage(sentence, section, order_here, heading, before)
            before = sentence


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
