"""What the heading cell of a table says about its column: role, unit, volume, fold, name."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from pathlib import Path

from soplint.intake.model import Text
from soplint.notation.read import Reading
from soplint.quantities import NumberStyle, find_measures
from soplint.quantities.model import Measure
from soplint.substances.model import Match

_WORDS_FILE = Path(__file__).with_name("data") / "headings.txt"

TAKEN = frozenset({"mass", "volume", "amount", "count", "activity"})
STRENGTHS = frozenset(
    {
        *("molarity", "molality", "normality", "mass-concentration", "fraction", "ppm", "fold"),
        *("activity-concentration", "osmolality"),
    }
)
FACTS = frozenset({"molar-mass", "density"})
_UNITS_OF_COLUMNS = TAKEN | STRENGTHS | FACTS | {"temperature", "time", "speed"}

# A heading longer than this is prose; its words are not looked up.
LONGEST = 120


@dataclass(frozen=True, slots=True)
class Heading:
    """A heading cell, read.  Offsets count in ``text``."""

    text: Text
    role: str | None = None  # NAME, AMOUNT ... of ``headings.txt``; None: its words say nothing
    words: str = ""  # without quantities, units and brackets
    unit: Measure | None = None  # one of the unit that bare numbers of the column are in
    volume: Measure | None = None
    fold: Measure | None = None
    ph: Measure | None = None
    strengths: tuple[Measure, ...] = ()
    match: Match | None = None  # a substance named in it
    per_litre: Measure | None = None  # the whole heading is "g / L": the unit, read as a strength


def read_heading(text: Text, reading: Reading) -> Heading:
    """The heading cell ``text``, read; ``Heading(text)`` for a cell that says nothing.

    >>> from soplint.quantities import number_style
    >>> from soplint.substances import NameIndex
    >>> heading = read_heading(Text("Mass (g)", 1, 1), Reading(number_style(()), NameIndex()))
    >>> heading.role, heading.unit.unit
    ('AMOUNT', 'g')
    """
    chars = text.chars
    if not chars.strip() or len(chars) > LONGEST:
        return Heading(text)
    measures = find_measures(chars, reading.style)
    volume = next((m for m in measures if m.dimension == "volume"), None)
    litre = _per_litre(chars, reading.style) if volume is None else None
    words = _bare(chars, measures)
    role = _role(chars, words)
    whole_unit = role != "UNIT" and _is_unit(words, reading.style)
    alone = litre is not None and not _has_words(words, litre[2])
    if litre is not None and not alone and role != "AMOUNT":
        litre = None  # "K (mg/L)", "Final (g/L)": a strength, not an amount for a litre
    unit = litre[0] if litre else _unit(chars, measures, reading.style)
    if role == "UNIT":
        unit = None  # the word "Unit" is no enzyme unit
    if litre:
        volume = litre[1]
    if unit is not None and (whole_unit or alone):
        words, role = "", None
    words = _LAST_JOINT.sub("", words)
    if unit is not None and words:
        pieces = _SPLIT.split(words)
        if len(pieces) > 1 and _is_unit(pieces[-1], reading.style):
            words = words[: words.rindex(pieces[-1])].rstrip(_EDGES)  # "Intermediate, mL"
    if _is_unit(words, reading.style):
        words = ""  # "mg in 250 mL"
    names = reading.names.find(chars) if role in (None, "LABEL", "MAKEUP") else ()
    return Heading(
        text,
        role,
        words,
        unit,
        volume,
        next((m for m in measures if m.dimension == "fold"), None),
        next((m for m in measures if m.dimension == "pH"), None),
        tuple(m for m in measures if m.dimension in STRENGTHS and m.dimension != "fold"),
        next((name for name in names if name.substances), None),
        per_litre=unit_sample(litre[2].strip(), reading.style) if alone and litre else None,
    )


# --- units ---------------------------------------------------------------------------------------

_PER_LITRE = re.compile(
    r"(?<![\d.,] )(?<![\w.,])(?P<unit>[^\W\d_]{1,12})?\s*(?:/|\bper\b|\bje\b|\bpro\b|\bна\b)\s*"
    r"(?P<volume>L|l|ltr|lit(?:re|er)|Liter|л|литр)\b(?!\s*\d)",
    re.IGNORECASE,
)
_POWER_LITRE = re.compile(
    r"(?<![\d.,] )(?<![\w.,])(?P<unit>[^\W\d_]{1,6})(?:\s+|\s*[·*.]\s*)(?P<volume>[Ll])\s*\^?\s*(?:[-−–]1|⁻¹)"
)


def _per_litre(chars: str, style: NumberStyle) -> tuple[Measure | None, Measure, str] | None:
    """Unit, litre and matched words of "g / L", "Amount per litre", "mg L^-1"."""
    found = _PER_LITRE.search(chars) or _POWER_LITRE.search(chars)
    if found is None:
        return None
    unit = unit_sample(found.group("unit") or "", style)
    if unit is not None and unit.dimension not in TAKEN:
        return None
    if unit is not None and unit.dimension in ("amount", "count"):
        return None  # "mmol/L" is a concentration
    if (
        unit is None
        and found.group("unit")
        and not found.group(0)[len(found.group("unit"))].isspace()
    ):
        return None  # "foo/L"; "Amount per litre" is one
    start, end = found.span("volume")
    return unit, Measure(start, end, "volume", 1.0, 1.0, 1.0, "L", 1.0, 1), found.group(0)


def _has_words(words: str, unit_words: str) -> bool:
    return any(char.isalnum() for char in words.replace(unit_words.strip(), "", 1))


def _unit(chars: str, measures: Sequence[Measure], style: NumberStyle) -> Measure | None:
    """The unit of the column's bare numbers, or None."""
    for candidate in _unit_candidates(chars, measures):
        sample = unit_sample(candidate, style)
        if sample is not None:
            return sample
    return None


_BRACKET = re.compile(r"[(\[{]([^()\[\]{}]*)[)\]}]")
_SPLIT = re.compile(r"\s*[,:;]\s*|\s+/\s+|\s+(?:in|as|en|в)\s+")
_BEFORE_VOLUME = re.compile(
    r"\s*(?:/|\b(?:for|in|per|to|на|для|pro|je)\b|[(,:])\s*$", re.IGNORECASE
)
_LAST_UNIT = re.compile(r"(?:^|\s)(g|mg|kg|[µμu][gLl]|mL|ml|мл|мкл|мг|г|[mµμun]M|мМ|%)$")


def _unit_candidates(chars: str, measures: Sequence[Measure]) -> list[str]:
    """Pieces of the heading that may be a unit, the most likely first."""
    found = [m.group(1) for m in reversed(list(_BRACKET.finditer(chars)))]
    for measure in measures:
        if measure.dimension == "volume":
            before = _BEFORE_VOLUME.sub("", _BRACKET.sub(" ", chars[: measure.start]))
            before = before.rstrip(" ([")
            found.append(before)
            found.extend(reversed(_SPLIT.split(before)))
            found.append(chars[measure.end :])
    bare = _bare(chars, measures)
    found.append(bare)
    pieces = _SPLIT.split(chars)
    if len(pieces) > 1:
        found.extend(_BRACKET.sub(r"\1", piece) for piece in reversed(pieces))
    last = _LAST_UNIT.search(bare)
    if last:
        found.append(last.group(1))
    first = re.match(r"([^\W\d_]{1,4})\s+(?:for|per|in|на|of)\b", bare)
    if first:
        found.append(first.group(1))
    return [candidate.strip() for candidate in found if candidate.strip()]


def unit_sample(words: str, style: NumberStyle) -> Measure | None:
    """One of the unit that ``words`` spell, or None where they spell no unit of a table column.

    >>> from soplint.quantities import number_style
    >>> unit_sample("mmol L^-1", number_style(())).dimension
    'molarity'
    """
    if not words or len(words) > 24 or words[0].isdigit():
        return None
    return _sample(re.sub(r"\s*/\s*", "/", words.strip()), style)


@lru_cache(maxsize=2048)
def _sample(words: str, style: NumberStyle) -> Measure | None:
    chars = "1 " + words
    found = [m for m in find_measures(chars, style) if m.start == 0]
    if not found or found[0].end < len(chars.rstrip(" .")):
        return None
    return found[0] if found[0].dimension in _UNITS_OF_COLUMNS else None


def in_unit(number: Measure, unit: Measure) -> Measure:
    """The bare ``number`` as a quantity of the same unit as ``unit``."""
    return replace(
        number,
        dimension=unit.dimension,
        unit=unit.unit,
        factor=unit.factor,
        basis=unit.basis,
        offset=unit.offset,
    )


def _is_unit(words: str, style: NumberStyle) -> bool:
    return unit_sample(words, style) is not None


# --- words ---------------------------------------------------------------------------------------

_TOKEN = re.compile(r"[^\W_]+|#")
_LAST_JOINT = re.compile(r"\s+(?:for|per|in|to|на|для)$", re.IGNORECASE)
_EDGES = " \t,:;/=-–—·*[](){}"


def _bare(chars: str, measures: Sequence[Measure]) -> str:
    """The heading without quantities and brackets."""
    pieces, at = [], 0
    for measure in measures:
        if measure.dimension == "number" or measure.start < at:
            continue
        pieces.append(chars[at : measure.start])
        at = measure.end
    pieces.append(chars[at:])
    joined = _BRACKET.sub(" ", " ".join(pieces)).strip(_EDGES)
    return re.sub(r"\s+", " ", joined)


Phrases = dict[str, list[tuple[tuple[str, ...], str, bool]]]


@lru_cache(maxsize=1)
def _phrases() -> Phrases:
    """Phrases of the word file by their first word, longest first."""
    table: Phrases = {}
    for line in _WORDS_FILE.read_text(encoding="utf-8").splitlines():
        if not line or line.startswith("#"):
            continue
        role, _, listed = line.partition(":")
        for phrase in listed.split("|"):
            whole = phrase.strip().startswith("=")
            words = tuple(_TOKEN.findall(phrase.lower()))
            if words:
                table.setdefault(words[0], []).append((words[1:], role, whole))
    for choices in table.values():
        choices.sort(key=lambda choice: -len(choice[0]))
    return table


def _role(chars: str, bare: str) -> str | None:
    """Role of the longest phrase in the heading; brackets count only when nothing stands outside."""
    tokens = _TOKEN.findall(bare.lower()) or _TOKEN.findall(chars.lower())
    best: tuple[int, str] | None = None
    for index, token in enumerate(tokens):
        for rest, role, whole in _phrases().get(token, ()):
            length = 1 + len(rest)
            if tuple(tokens[index + 1 : index + length]) != rest:
                continue
            if whole and length != len(tokens):
                continue
            if best is None or length > best[0] or (length == best[0] and best[1] == "LABEL"):
                best = (length, role)
            break
    return best[1] if best else None


def words_role(words: str) -> str | None:
    """Role of the heading words ``words`` (used for captions and rows that may be headings)."""
    return _role(words, words)
