"""The vessels of a procedure: what the steps bring together, in their order."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field
from functools import lru_cache
from typing import TYPE_CHECKING

from soplint.bench.contents import Content, contents_of
from soplint.bench.streams import Destination, asides, destinations, stream_content, things_in
from soplint.intake.model import Text
from soplint.notation.document import ReadBlock
from soplint.notation.phrases import (
    Command,
    Dose,
    Loose,
    Material,
    Mixture,
    Sentence,
    SetPH,
    ToVolume,
    Ware,
)

if TYPE_CHECKING:
    from soplint.bench.carry_out import Bench


@dataclass(slots=True)
class Vessel:
    """One vessel (or recipe, or waste container) with its contents in order of their steps."""

    name: str
    kind: str  # steps, list, table, stream
    contents: list[Content] = field(default_factory=list)
    sentences: list[Sentence] = field(default_factory=list)
    ph: float | None = None
    litres: float | None = None  # made up to
    ware: float | None = None  # L, size of the vessel where it is printed
    section: int = 0

    @property
    def words(self) -> str:
        """Everything that the text says about the vessel, in lower case."""
        return " ".join(s.text.chars for s in self.sentences).lower()

    @property
    def volume(self) -> float | None:
        """L of liquid: made up to, or the sum of the liquids."""
        total = sum(c.litres or 0.0 for c in _once(self.contents))
        if self.litres is not None:
            return max(self.litres, total)
        return total or None


def _once(contents: list[Content]) -> list[Content]:
    """Contents, with the components of one addition counted once."""
    seen: set[tuple[int, int, int]] = set()
    kept = []
    for content in contents:
        place = (
            (*content.text.place(content.start), content.end) if content.text.chars else (0, 0, 0)
        )
        if content.diluted and place in seen:
            continue
        seen.add(place)
        kept.append(content)
    return kept


_HEAD = 40  # characters of a line that heads a list
_LISTS = re.compile(
    r"\b(reagents?|materials?|chemicals?|consumables|supplies|apparatus|equipment|protection|safety"
    r"|hazards?|precautions?|scope|purpose|records?|references?|calculation|definitions?|storage"
    r"|schutz|sicherheit|reagenzien)\b",
    re.IGNORECASE,
)
_WASTE = re.compile(
    r"\b(waste|wastes|residues?|disposal|release|clean(?:ing)?[- ]up|cans|drums)\b", re.I
)
_BOUGHT = re.compile(
    r"\b(?:supplier|cat|catalogue|cas|grade|purity|pack|lot|order|storage|source|hazards?)\b", re.I
)
_NEW = re.compile(
    r"\b(?:another|second|third|new|clean|fresh|separate|different|next)\s+(?:[\w-]+\s+){0,3}"
    r"(?:beaker|tub|tube|flask|bottle|bath|vessel|dish|tank|cylinder|jug|bucket|container)\b",
    re.IGNORECASE,
)
_RECEIVES = re.compile(
    r"\b(?:in|into|to)\s+(?:a|an|each|the first)\s+(?:[\w.,-]+\s+){0,5}?"
    r"(?:beaker|tub|tube|flask|bottle|bath|vessel|dish|tank|cylinder|jug|bucket|pot|carboy)\b",
    re.IGNORECASE,
)
_EMPTIES = re.compile(
    r"^\W*(?:then\s+)?(?:rinse|wash|flush|discard|empty|drain|pour (?:out|off|away)|clean)\b", re.I
)
_INTO = re.compile(r"\b(?:into|onto)\b", re.IGNORECASE)
_JOIN = re.compile(r"\b(?:mix|combine|pour together|unite)\b.*\b(?:both|two|all|solutions)\b", re.I)
_ENDS_AT = re.compile(
    r"\b(?:to|until|at|reaches|is|above|below)\W*(?:(?:the|a|is|pH|above|below|about|reaches)\W*)*$",
    re.I,
)
_BRINGS = {
    "ADD",
    "POUR",
    "DISSOLVE",
    "MAKE_UP",
    "DILUTE",
    "MIX",
    "WEIGH",
    "ADJUST",
    "PREPARE",
    "HEAT",
}
_BY_HAND = re.compile(
    r"\b(?:run in|top up|treat|acidif\w+|spike|charge|pour\w*|tip|empt\w+|quench\w*|soak\w*"
    r"|neutralis\w+|neutraliz\w+|etch\w*|digest\w*|react\w*|leach\w*|preserv\w+|fill\w*|containing|let .{0,40} run|mix\w*|add\w*|keep in|stored? in)\b",
    re.IGNORECASE,
)


class Walker:
    """Goes through the document and fills vessels."""

    def __init__(self, bench: Bench) -> None:
        self.bench = bench
        self.vessels: list[Vessel] = []
        self.streams: dict[str, Vessel] = {}
        self.current: Vessel | None = None
        self.heading = ""
        self.listing = False
        self.led_list = False  # items under "Reagents:" that is no heading
        self.waste = False
        self.section = 0
        self.step = 0
        self.places = _places(bench)

    def walk(self) -> list[Vessel]:
        """All vessels with at least one content, waste containers last."""
        last_kind = ""
        for index, read in enumerate(self.bench.blocks):
            block = read.block
            if block.kind == "heading":
                self._heading(block.text.chars)
            elif read.table is not None:
                if not self.listing and index not in self.bench.scope.aside:
                    self._table(read)
            elif not self.listing or _steps(read):
                alone = block.kind == "paragraph" and block.number is None
                if alone:
                    short = len(block.text.chars) <= _HEAD and not _steps(read)
                    self.led_list = short and bool(_LISTS.search(block.text.chars))
                elif self.led_list and block.number is None and not _steps(read):
                    last_kind = "item"
                    continue
                if alone or self.listing or (last_kind == "paragraph" and block.kind == "item"):
                    lead = block.text.chars if last_kind == "paragraph" or alone else ""
                    if alone or self.listing or not self._led(last_kind):
                        self._open(lead[:60] or self.heading)
                for sentence in read.sentences:
                    self.step += 1
                    self._sentence(sentence, read)
            last_kind = block.kind if block.kind != "paragraph" or block.number is None else "item"
        kept = [v for v in self.vessels if v.contents or v.sentences]
        return kept + list(self.streams.values())

    def _led(self, last_kind: str) -> bool:
        """Whether the lead-in just before opened the vessel that the items fill."""
        return last_kind == "paragraph" and self.current is not None and not self.current.contents

    def _heading(self, chars: str) -> None:
        self.heading = chars
        self.led_list = False
        self.listing = bool(_LISTS.search(chars)) and not re.search(r"\d\s*(?:mL|L)\b", chars)
        self.waste = bool(_WASTE.search(chars))
        self.section += 1
        self._open(chars)

    def _open(self, name: str) -> Vessel:
        self.current = Vessel(name.strip(), "steps", section=self.section)
        self.vessels.append(self.current)
        return self.current

    # --- one sentence -------------------------------------------------------------------------

    def _sentence(self, sentence: Sentence, read: ReadBlock) -> None:
        vessel = self.current or self._open(self.heading)
        chars = sentence.text.chars
        skip = asides(chars)
        named = [d for d in destinations(chars) if not _covered(d.start, skip)]
        if _EMPTIES.search(chars) and not _INTO.search(chars) and not named:
            self._open(vessel.name)
            return
        if named:
            self._streams(sentence, named, vessel)
            if self.waste or not _doses(sentence):
                vessel.sentences.append(sentence)
                return
        vessel = self._receiver(sentence, vessel, read)
        vessel.sentences.append(sentence)
        self._bring(sentence, vessel, read, skip, named)

    def _receiver(self, sentence: Sentence, vessel: Vessel, read: ReadBlock) -> Vessel:
        """The vessel that the sentence fills."""
        chars = sentence.text.chars
        if _JOIN.search(chars):
            for other in self.vessels[-_MOST:]:
                if other.section == self.section and other is not vessel:
                    vessel.contents = (other.contents + vessel.contents)[:_MOST]
            return vessel
        if not vessel.contents:
            return vessel
        doses = _doses(sentence)
        into = any(d.role in ("in", "into", "to") for d in doses)
        starts = any(d.role is None for d in doses)
        own = (
            bool(_NEW.search(chars))
            or (starts and bool(_RECEIVES.search(chars)))
            or ("DISSOLVE" in sentence.kinds and into and starts)
            or ("MIX" in sentence.kinds and len(doses) > 1)
            or (vessel.litres is not None and starts and not _back(chars))
        )
        return self._open(vessel.name) if own else vessel

    def _bring(
        self,
        sentence: Sentence,
        vessel: Vessel,
        read: ReadBlock,
        skip: list[tuple[int, int]],
        named: list[Destination],
    ) -> None:
        chars = sentence.text.chars
        commanded = bool(_BRINGS & sentence.kinds) or bool(_BY_HAND.search(chars))
        step = read.block.ordered or read.block.number is not None
        if step and "USE" in sentence.kinds and not {"WASH", "STORE", "TITRATE"} & sentence.kinds:
            # "Collect the medium in the tub with 500 mL of bleach": the liquid waits in it
            commanded = commanded or any(d.role in ("with", "in") for d in _doses(sentence))
        recipe = read.block.kind == "item" and not read.block.ordered and bool(_doses(sentence))
        if recipe and not commanded:
            vessel.kind = "list"
        if not (commanded or recipe):
            return
        self._stated_ph(sentence, vessel, skip)
        command = ""
        order = self.places.get((sentence.text.line, sentence.text.column), 10**6)
        for phrase in sentence.phrases:
            if isinstance(phrase, Command):
                command = phrase.kind
            elif isinstance(phrase, Ware):
                if phrase.measure.dimension == "volume":
                    vessel.ware = phrase.measure.base
            elif isinstance(phrase, ToVolume):
                self._made(sentence.text, phrase, vessel, order)
            elif isinstance(phrase, SetPH):
                self._adjusted(sentence.text, phrase, vessel, order)
            elif isinstance(phrase, Mixture):
                for material in phrase.materials:
                    self._add(sentence.text, material, vessel, order)
            elif isinstance(phrase, (Dose, Material)):
                aside = _covered(phrase.start, skip) or any(
                    d.start <= phrase.start < d.end for d in named
                )
                if not aside and command not in ("WASH", "STORE", "TITRATE", "CALIBRATE"):
                    self._phrase(sentence, phrase, command, vessel, order)
        self._words(sentence, vessel, skip, named)

    def _stated_ph(self, sentence: Sentence, vessel: Vessel, skip: list[tuple[int, int]]) -> None:
        """ "bring to pH 6.5", "until the pH is above 12": the pH that the step ends at."""
        for measure in sentence.measures:
            before = sentence.text.chars[max(0, measure.start - 40) : measure.start]
            if measure.dimension == "pH" and not _covered(measure.start, skip):
                if _ENDS_AT.search(before):
                    vessel.ph = measure.nominal

    def _phrase(
        self, sentence: Sentence, phrase: Dose | Material, command: str, vessel: Vessel, order: int
    ) -> None:
        if isinstance(phrase, Material):
            # a bare name is a content where it is poured, mixed or used to treat something
            if command not in ("ADD", "POUR", "MIX", "DISSOLVE", "ADJUST", "DILUTE", ""):
                return
            if not command and phrase.role not in ("with", "in", "into", "to"):
                return
            if phrase.match is None or phrase.match.generic or phrase.role == "from":
                return
        self._add(sentence.text, phrase, vessel, order)
        for other in phrase.alternatives if isinstance(phrase, Dose) else ():
            self._add(sentence.text, other, vessel, order)

    def _add(self, text: Text, thing: Dose | Material, vessel: Vessel, order: int) -> None:
        if isinstance(thing, Dose) and thing.amount.dimension == "amount":
            if thing.material is None or thing.material.match is None:
                return  # "neutralises 2.5 mol of acid": a load, nothing that is added
        material = thing.material if isinstance(thing, Dose) else thing
        if vessel.ph is None and isinstance(thing, Dose) and material is not None and material.ph:
            vessel.ph = material.ph.nominal  # the label pH of a buffer
        if len(vessel.contents) < _MOST:
            vessel.contents.extend(contents_of(text, thing, self.step, self.bench.facts, order))

    def _made(self, text: Text, phrase: ToVolume, vessel: Vessel, order: int) -> None:
        if phrase.volume is not None:
            vessel.litres = phrase.volume.base
        if phrase.diluent is not None:
            self._add(text, phrase.diluent, vessel, order)
        if phrase.volume is None and vessel.ware is not None:
            vessel.litres = vessel.ware

    def _adjusted(self, text: Text, phrase: SetPH, vessel: Vessel, order: int) -> None:
        if phrase.ph is not None:
            vessel.ph = phrase.ph.nominal
        things: list[Dose | Material] = [*phrase.doses, *phrase.reagents]
        for thing in things:
            self._add(text, thing, vessel, order)

    def _words(
        self,
        sentence: Sentence,
        vessel: Vessel,
        skip: list[tuple[int, int]],
        named: list[Destination],
    ) -> None:
        """Things that no phrase took up: "the cyanide sample", "zinc dust", "the bleach bath"."""
        if {"WASH", "STORE", "TITRATE"} & sentence.kinds:
            return
        text = sentence.text
        if len(vessel.contents) >= _MOST:
            return
        held = [(c.start, c.end) for c in vessel.contents if c.text is text]
        for content in things_in(text, 0, len(text.chars), self.step, loose=False):
            inside = any(a < content.end and content.start < b for a, b in held)
            away = _covered(content.start, skip) or any(
                d.start <= content.start < d.end for d in named
            )
            if not inside and not away:
                vessel.contents.append(content)

    # --- waste containers -----------------------------------------------------------------------

    def _streams(self, sentence: Sentence, named: list[Destination], vessel: Vessel) -> None:
        """What a sentence puts into named containers."""
        last = 0
        for place in named:
            start, end = last, place.start
            if place.before is not None:
                start, end = place.before
            self._into(sentence, place, start, end, vessel)
            last = place.end

    def _into(
        self, sentence: Sentence, place: Destination, start: int, end: int, vessel: Vessel
    ) -> None:
        text = sentence.text
        container = self.streams.get(place.name)
        if container is None:
            container = self.streams[place.name] = Vessel(
                place.name, "stream", section=self.section
            )
            container.contents.extend(stream_content(text, place, self.step))
        container.sentences.append(sentence)
        added = list(things_in(text, start, end, self.step, loose=True))
        order = self.places.get((text.line, text.column), 10**6)
        for phrase in sentence.phrases:
            if isinstance(phrase, Dose) and start <= phrase.start < end:
                found = list(contents_of(text, phrase, self.step, self.bench.facts, order))
                if any(c.classes for c in found):
                    added = [c for c in added if not phrase.start <= c.start < phrase.end] + found
        if not any(c.classes for c in added):
            added.extend(self._meant(text, start, end, vessel))
        container.contents.extend(added[: max(0, _MOST - len(container.contents))])

    def _meant(self, text: Text, start: int, end: int, vessel: Vessel) -> Iterator[Content]:
        """The contents of the vessel that "the lysate" or "the residues" stand for."""
        words = text.chars[start:end].lower()
        recent = self.vessels[-_MOST:]
        found = _named(words, recent)
        grave = False
        if not found and _GENERIC.search(words):
            if not self.waste or vessel.contents:
                same = [v for v in recent if v.section == self.section and v.contents]
                found = same
            if not found:
                found, grave = [v for v in recent if v.contents], True
        seen: set[str] = set()
        for number, source in enumerate(found, 1):
            neutral = source.ph is not None and source.ph >= _NEUTRAL
            for content in source.contents:
                if content.water or content.key in seen or (grave and not content.classes & _GRAVE):
                    continue
                seen.add(content.key)
                classes = content.classes - _ACIDS if neutral else content.classes
                yield Content(
                    text, start, end, content.words, classes, content.substance,
                    content.moles, content.grams, content.litres, content.percent, self.step,
                    diluted=True, origin=number,
                )  # fmt: skip

    # --- tables ---------------------------------------------------------------------------------

    def _table(self, read: ReadBlock) -> None:
        """The first amount column of a recipe table is a vessel without an order."""
        assert read.table is not None
        made = any((row.text.line, row.text.column) in self.places for row in read.table.rows)
        grid = read.block.table
        heads = " ".join(cell.chars for cell in grid.head) if grid is not None else ""
        if not made or _BOUGHT.search(heads):
            return
        vessel = self._open(self.heading)
        vessel.kind = "table"
        made_up = [
            any(isinstance(p, ToVolume) for p in r.sentence.phrases) for r in read.table.rows
        ]
        for row in read.table.rows:
            self.step += 1
            if sum(made_up) > 1:  # each row is a solution of its own
                vessel = self._open(row.text.chars.partition(" | ")[0])
                vessel.kind = "table"
            dose = row.doses[0] if row.doses else None
            if dose is not None:
                self._add(row.text, dose, vessel, 10**6)
        self._open(self.heading)


_MOST = 120  # contents of one vessel, and vessels looked back at: more is no procedure
_NEUTRAL = 5.0  # pH from which a mixture is no acid for the waste
_ACIDS = {"acid", "strong-acid"}
_GRAVE = {"azide", "cyanide", "sulfide", "hypochlorite"}
_GENERIC = re.compile(
    r"\b(?:residues?|wastes?|supernatants?|lysates?|flow-through|filtrates?|left-?overs?|remaining"
    r"|spent|contents|digests?|mixtures?|solutions?|everything|all|it|them|samples?|rinses?|washings?"
    r"|effluent|eluates?|extracts?)\b"
)
_STEM = re.compile(r"[a-z]{5,}")
_PLAIN = {
    *("collect", "empty", "discard", "residues", "residue", "waste", "solution", "solutions"),
    *("spent", "remaining", "leftover", "contents", "mixture", "mixtures", "everything", "layer"),
    *("sample", "samples", "water", "their", "there", "buffer", "reagent", "goes"),
}


def _named(words: str, vessels: list[Vessel]) -> list[Vessel]:
    """Vessels whose name shares a telling word with a text: "lysate" and "Lysis buffer"."""
    stems = _stems(words)
    return [v for v in vessels if v.contents and stems & _stems(v.name.lower())] if stems else []


@lru_cache(maxsize=512)
def _stems(words: str) -> frozenset[str]:
    return frozenset(_stem(w) for w in _STEM.findall(words[:400]) if w not in _PLAIN)


def _stem(word: str) -> str:
    return word[:3] if word.startswith("lys") else word[:6]


def _steps(read: ReadBlock) -> bool:
    """Whether a line under "Reagents" says how something is made."""
    return any(
        {"DISSOLVE", "MAKE_UP", "MIX", "ADD", "POUR"} & s.kinds for s in read.sentences
    ) or any(
        isinstance(p, (ToVolume, Loose)) and isinstance(p, ToVolume)
        for s in read.sentences
        for p in s.phrases
    )


def _back(chars: str) -> bool:
    """Whether the sentence names the vessel again: "add ... to the tub", "to the solution"."""
    return re.search(r"\b(?:to|into|in)\s+(?:the|this|it)\b", chars, re.I) is not None


def _doses(sentence: Sentence) -> list[Dose]:
    return [p for p in sentence.phrases if isinstance(p, Dose) and p.material is not None]


def _covered(place: int, stretches: list[tuple[int, int]]) -> bool:
    return any(start <= place < end for start, end in stretches)


def _places(bench: Bench) -> dict[tuple[int, int], int]:
    """Number of the preparation that each line of the text belongs to."""
    return {
        (taken.text.line, taken.text.column): order
        for order, preparation in enumerate(bench.preparations)
        for taken in preparation.taken
    }


_CACHE: list[tuple[object, list[Vessel]]] = []


def vessels(bench: Bench) -> list[Vessel]:
    """The vessels of a document; kept for the bench that was asked last."""
    if not _CACHE or _CACHE[0][0] is not bench:
        _CACHE[:] = [(bench, Walker(bench).walk())]
    return _CACHE[0][1]
