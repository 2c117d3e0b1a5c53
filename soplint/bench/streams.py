"""Named containers and what a sentence sends into them; clauses that only warn."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

from soplint.bench.contents import Content
from soplint.bench.hazard_tables import classes_of, word_classes
from soplint.intake.model import Text
from soplint.notation.document import _names


@dataclass(frozen=True, slots=True)
class Destination:
    """A named container: "the acid waste", "the bleach tub"."""

    name: str
    start: int
    end: int
    before: tuple[int, int] | None = None  # where its contents are named, if not in front of it


_VESSEL = (
    r"(?:wastes?|cans?|drums?|tubs?|baths?|bottles?|containers?|canisters?|tanks?|bins?|jars?"
    r"|carboys?|streams?|buckets?|sinks?|drains?)"
)
_TO = re.compile(
    r"\b(?:into|in|to|down|goes to)\s+(?:the same|the|an?|its|their|our|one|a single)\s+"
    rf"(?P<name>(?:[\w-]+\s+){{0,4}}?{_VESSEL}(?:\s+(?:{_VESSEL}|line)){{0,2}})\b",
    re.IGNORECASE,
)
_BLEACH = re.compile(
    r"\b(?:into|in)\s+(?:the\s+|fresh\s+)?(?:\d[\d.,]*\s?%\s+)?(?P<name>bleach|hypochlorite)\b"
    rf"(?!\s+{_VESSEL})",
    re.IGNORECASE,
)
_TOGETHER = re.compile(r"\b(?:together|the same|one|a single)\b", re.IGNORECASE)
_LABELLED = re.compile(
    rf"^\W*(?P<name>(?:[\w-]+\s+){{1,3}}?{_VESSEL}(?:\s+{_VESSEL})?)\s*[:=]\s*", re.IGNORECASE
)
_ENDS_IN = re.compile(
    rf":\s*(?:the\s+|an?\s+)?(?P<name>(?:[\w-]+\s+){{1,3}}?{_VESSEL}(?:\s+{_VESSEL})?)\b",
    re.IGNORECASE,
)
_DISCARDS = re.compile(r"\b(?:discard|collect|empt|dispos|tip|pour)\w*", re.IGNORECASE)
_WASTE = re.compile(r"\bwaste|\bcan\b|\bdrum\b|\bbin\b|\bstream\b", re.IGNORECASE)
# A clause that warns, forbids or keeps apart is no action.
_WARNS = re.compile(
    r"\b(?:never|not|don't|cannot|without|avoid|no|nothing|none|neither|nor|away from|kept? away|stay away|apart|separate(?:ly)?"
    r"|instead of|rather than|free of|keep .{0,40}\bout\b|forbidden|prohibited|different|opposite"
    r"|other side|far from|sets free|instead|otherwise|nie|kein\w*|nicht)\b",
    re.IGNORECASE,
)
_CLAUSE = re.compile(
    r"[^;:()]+?(?:[;:()]|,\s+(?=never|not|no\b|but|keep|without|away)|\.\s|$)", re.I
)


def asides(chars: str) -> list[tuple[int, int]]:
    """Stretches of a sentence that only warn: "Add the buffer; never add bleach".

    >>> asides("Pour it into the tub, never into the acid.")
    [(22, 42)]
    """
    return [m.span() for m in _CLAUSE.finditer(chars) if _WARNS.search(m.group())]


def destinations(chars: str) -> list[Destination]:
    """The named containers that a sentence fills, in order."""
    labelled = _LABELLED.match(chars)
    if labelled is not None and (_classes(labelled["name"]) or _WASTE.search(labelled["name"])):
        return [
            Destination(
                _bare(labelled["name"]), labelled.start("name"), labelled.end("name"),
                (labelled.end(), len(chars)),
            )
        ]  # fmt: skip
    found = [
        Destination(_bare(m["name"]), m.start("name"), m.end("name"))
        for pattern in (_TO, _ENDS_IN, *((_BLEACH,) if _DISCARDS.search(chars) else ()))
        for m in pattern.finditer(chars)
        if _classes(m["name"])
        or re.search(r"\bwaste\b|\bdrain\b|\bsink\b", m["name"], re.I)
        or (_TOGETHER.search(chars) and _DISCARDS.search(chars))
    ]
    return sorted((d for d in found if not _uses(chars, d.start)), key=lambda place: place.start)


def _uses(chars: str, start: int) -> bool:
    """Whether things are soaked or stored there rather than poured: "in the bleach bath"."""
    before = chars[:start].lower()
    verbs = re.findall(
        r"\b(?:soak|dip|immerse|place|put|stand|stands|stood|keep|kept|leave|heat|warm|evaporate|store"
        r"|stored|cool|water|pour|collect|empt\w+|discard|tip|goes|go|add|drain|dispose\w*|transfer)\b",
        before,
    )
    return bool(verbs) and verbs[-1] in (
        *("soak", "dip", "immerse", "stand", "stands", "stood", "heat", "warm", "evaporate"),
        *("cool", "keep", "kept", "leave", "store", "stored", "water", "place", "put"),
    )


def _bare(name: str) -> str:
    words = re.sub(r"\s+", " ", name.strip().lower())
    return re.sub(r"^.*\b(?:in|into|to|the|an?)\s", "", words)


def _classes(name: str) -> bool:
    return any(True for _ in _found(name))


def _found(chars: str) -> Iterator[tuple[int, int, frozenset[str], str]]:
    """Names and words of a text with their classes."""
    held: list[tuple[int, int]] = []
    for match in _names().find(chars):
        if match.generic or not match.substances:
            continue
        held.append((match.start, match.end))
        classes = classes_of(match.substances[0])
        if classes:
            yield match.start, match.end, classes, chars[match.start : match.end]
    lowered = chars.lower()
    for start, end, classes in word_classes(chars):
        if not any(a < end and start < b for a, b in held):
            yield start, end, classes, chars[start:end]
    for word, klass in _STREAM_WORDS:
        for found in re.finditer(rf"\b{word}\b", lowered):
            if not any(a < found.end() and found.start() < b for a, b in held):
                yield found.start(), found.end(), klass, found.group()


# Adjectives of containers.
_STREAM_WORDS = (
    (r"acid(?:s|ic)?(?=\s+(?:\w+\s+)?(?:waste|can|drum|tub|bath|bottle|container|canister|tank|bin|stream|carboy))",
     frozenset({"acid", "strong-acid"})),
    (r"(?:alkali|alkaline|caustic|base)(?=\s+(?:\w+\s+)?(?:waste|can|drum|tub|bath|bottle|container|tank))",
     frozenset({"strong-base"})),
    (r"(?:solvent|organic)(?=\s+(?:\w+\s+)?(?:waste|can|drum|bottle|container|canister|tank|bin))",
     frozenset({"organic-solvent"})),
    (r"halogenated(?=\s)", frozenset({"chlorinated-solvent", "organic-solvent"})),
)  # fmt: skip


def stream_content(text: Text, place: Destination, step: int) -> Iterator[Content]:
    """What the name of a container says that it holds."""
    name = text.chars[place.start : place.end]
    for start, end, classes, words in _found(name):
        yield Content(
            text, place.start + start, place.start + end, words, classes, step=step, stream=True
        )


def things_in(text: Text, start: int, end: int, step: int, loose: bool) -> Iterator[Content]:
    """Things that a stretch of text names; ``loose``: also names of the catalogue."""
    chars = text.chars[start:end]
    skip = asides(text.chars)
    if loose:
        for first, last, classes, words in _found(chars):
            if not any(a <= start + first < b for a, b in skip):
                yield Content(text, start + first, start + last, words, classes, step=step)
        return
    for first, last, classes in word_classes(chars):
        words = chars[first:last]
        if words.lower() not in ("acid", "acids"):
            yield Content(text, start + first, start + last, words, classes, step=step)
