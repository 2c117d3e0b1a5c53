"""Turn the characters of a sentence into terminals of the grammar.

The spellings are data (``grammar/lexicon.txt``); quantities and names of substances are found by
their own rooms, and whatever stands between them is looked up word by word.  A word without a
say becomes part of one OTHER terminal, so that no unknown word can break a sentence.
"""

from __future__ import annotations

import os
import re
from collections.abc import Sequence
from dataclasses import replace
from functools import lru_cache

from soplint.notation.stretches import Stretches
from soplint.notation.terminals import BY_DIMENSION, Terminal
from soplint.places import folder
from soplint.quantities.model import Measure
from soplint.substances.model import Match

_WORD = re.compile(
    r"[wvmWVM]\s?/\s?[wvmWVM](?:\s?/\s?[wvmWVM])*(?![\w/])|w/(?=\s)|[^\W\d_](?:[\w'’]|\.(?=\w))*(?:\([IV]+\))?\.?|->|-->|=>|→|\S"
)
_BASIS = re.compile(r"[wvm]\s?/\s?[wvm]", re.IGNORECASE)  # "w/v"; settled by refine
_SEPARATORS = {
    ",": "COMMA",
    ";": "SEMICOLON",
    ":": "COLON",
    "–": "DASH",
    "—": "DASH",
    "-": "DASH",
    "/": "SLASH",
    "→": "ARROW",
    "->": "ARROW",
    "-->": "ARROW",
    "=>": "ARROW",
    "=": "EQUALS",
    "+": "PLUS",
    "x": "TIMES",  # settled by refine: the sign of an arithmetic, or a word like any other
    "×": "TIMES",
    "*": "TIMES",
    "&": "AND",
    "@": "AT",
    "(": "LPAR",
    "[": "LPAR",
    ")": "RPAR",
    "]": "RPAR",
}

# Symbols of quantities, as they stand before "=": "m", "V2", "c(NaOH)", "V_total".
_SYMBOL = re.compile(r"[A-Za-wyzρβγφσ](?:_\w{1,12}|\d{1,2}|[₀-₉]{1,2})?")
_ASSIGNS = re.compile(r"\s*(?:\([^()=]{1,40}\))?\s*=")
# What may stand before a symbol; after a word it is the name of something: "buffer A = ...".
_BEFORE_SYMBOL = {
    *("COMMA", "SEMICOLON", "COLON", "DASH", "AND", "LPAR", "GIVES", "THEN", "WITH", "EQUALS"),
    *("IS", "PREPARE", "OR"),
}

Spellings = dict[str, list[tuple[tuple[str, ...], str]]]


@lru_cache(maxsize=1)
def spellings() -> Spellings:
    """The lexicon by first word, longest spelling first: ``{"make": [(("up",), "MAKE_UP"), ...]}``."""
    table: Spellings = {}
    with open(os.path.join(folder("grammar"), "lexicon.txt"), encoding="utf-8") as file:
        lines = file.read().splitlines()
    for line in lines:
        if not line or line.startswith("#"):
            continue
        kind, _, listed = line.partition(":")
        for spelling in listed.split("|"):
            words = tuple(spelling.strip().lower().split())
            if words:
                table.setdefault(words[0], []).append((words[1:], kind))
    for choices in table.values():
        choices.sort(key=lambda choice: -len(choice[0]))
    return table


def terminals(chars: str, measures: Sequence[Measure], names: Sequence[Match]) -> list[Terminal]:
    """The terminals of a sentence, left to right; brackets are balanced.

    ``measures`` and ``names`` are those found in ``chars``.  Where they overlap, a name that holds
    the whole quantity wins ("Tween 20"), else the quantity.
    """
    fixed = _settle(measures, names)
    found: list[Terminal] = []
    at = 0
    for item in fixed:
        _words(chars, at, item.start, found)
        found.append(item)
        at = item.end
    _words(chars, at, len(chars), found)
    return _balance(found)


def _settle(measures: Sequence[Measure], names: Sequence[Match]) -> list[Terminal]:
    """Quantities and names in order, without overlaps."""
    kept: list[Terminal] = []
    places = Stretches((m.start, m.end) for m in measures)
    for name in names:
        kind = "WATER" if name.substances and name.substances[0].name == "water" else "NAME"
        if any(
            not (name.start <= start and end <= name.end)
            for start, end in places.meeting(name.start, name.end)
        ):
            continue
        kept.append(Terminal(kind, name.start, name.end, match=name))
    taken = Stretches((t.start, t.end) for t in kept)
    for measure in measures:
        if not any(taken.meeting(measure.start, measure.end)):
            kind = BY_DIMENSION.get(measure.dimension, "OTHER")
            kept.append(Terminal(kind, measure.start, measure.end, measure=measure))
    kept.sort(key=lambda item: item.start)
    return kept


def _words(chars: str, start: int, end: int, found: list[Terminal]) -> None:
    """Append the terminals of the words between ``start`` and ``end``."""
    if start >= end:
        return
    words = [(m.group(), m.start(), m.end()) for m in _WORD.finditer(chars, start, end)]
    table = spellings()
    index = 0
    while index < len(words):
        word, low, high = words[index]
        if _is_symbol(chars, word, high, found):
            found.append(Terminal("SYMBOL", low, high))
            index += 1
            continue
        separator = "BASIS" if _BASIS.match(word) else _SEPARATORS.get(word)
        if separator:
            if word != "-" or _stands_alone(chars, low, high):
                found.append(Terminal(separator, low, high))
            index += 1
            continue
        kind, used = _look_up(words, index, table)
        high = words[index + used - 1][2]
        index += used
        if kind == "SKIP":
            if not (used == 1 and word == "A" and low):
                continue
            kind = "OTHER"  # "buffer A", not the article
        if kind == "OTHER" and not word[0].isalpha():
            continue  # quotation marks, bullets and other debris
        last = found[-1] if found else None
        if kind == "OTHER" and last and last.kind == "OTHER" and last.measure is None:
            found[-1] = replace(last, end=high)
        else:
            found.append(Terminal(kind, low, high))


def _is_symbol(chars: str, word: str, high: int, found: list[Terminal]) -> bool:
    """Whether a word is the symbol of a quantity whose value follows: "V = 20.78 mL"."""
    if not _SYMBOL.fullmatch(word) or not _ASSIGNS.match(chars, high):
        return False
    return not found or found[-1].kind in _BEFORE_SYMBOL or found[-1].measure is not None


def _stands_alone(chars: str, low: int, high: int) -> bool:
    """Whether a hyphen has a space on at least one side: a dash, not part of a word."""
    before = chars[low - 1 : low] if low else " "
    return before.isspace() or chars[high : high + 1].isspace() or high >= len(chars)


def _look_up(words: list[tuple[str, int, int]], index: int, table: Spellings) -> tuple[str, int]:
    """Terminal of the longest spelling that begins at ``index`` and the number of words it takes."""
    for first in _forms(words[index][0]):
        for rest, kind in table.get(first, ()):
            at, ok = index + 1, True
            for part in rest:
                if at < len(words) and words[at][0] == "-":
                    at += 1
                if at >= len(words) or part not in _forms(words[at][0]):
                    ok = False
                    break
                at += 1
            if ok:
                return kind, at - index
    return "OTHER", 1


def _forms(word: str) -> tuple[str, ...]:
    """A word in lower case, with and without its closing full stop."""
    lower = word.lower()
    return (lower, lower[:-1]) if lower.endswith(".") and len(lower) > 1 else (lower,)


def _balance(found: list[Terminal]) -> list[Terminal]:
    """Drop brackets without a partner; the grammar knows only balanced ones."""
    open_at: list[int] = []
    drop: set[int] = set()
    for index, item in enumerate(found):
        if item.kind == "LPAR":
            open_at.append(index)
        elif item.kind == "RPAR":
            if open_at:
                open_at.pop()
            else:
                drop.add(index)
    drop.update(open_at)
    return [item for index, item in enumerate(found) if index not in drop] if drop else found
