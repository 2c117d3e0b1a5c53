"""The name cell of a row: a reagent, the water to volume, the total, an instruction."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace

from soplint.notation.cells import TO_WORDS, Cell
from soplint.notation.headings import TAKEN
from soplint.notation.phrases import Command, Dose, Material, Phrase, SetPH, ToVolume
from soplint.notation.read import Reading, read_sentence
from soplint.notation.shift import material_at, measure_at, phrase_at
from soplint.quantities.model import Measure


@dataclass(frozen=True, slots=True)
class Named:
    """What a name cell says; offsets count in the row."""

    kind: str = "component"  # component, total, complement, pH, note
    material: Material | None = None
    volume: Measure | None = None  # printed in the name cell: "Total: 40 mL", "Water to 1 L"
    dose: Dose | None = None  # printed in the name cell: "Bicine 8.2 g"
    phrases: tuple[Phrase, ...] = ()  # instructions: "Adjust pH to 7.5 with HCl"
    measures: tuple[Measure, ...] = ()
    kinds: frozenset[str] = frozenset()


_TOTAL = re.compile(
    r"\W*(?:(?:grand|final|overall|end|reaction|combined)\s+)?"
    r"(?:total|sum|Σ|summe|gesamt\w*|итого|всего|сумма|(?:конечный |общий )?объ[её]м|разом|final|end)"
    r"(?:\s+(?:reaction|final|mix|solution|buffer|batch|of all))?"
    r"(?:\s*(?:vol(?:ume)?|volumen|amount|mass|weight|quantity|sum)\b\.?)?\W*",
    re.IGNORECASE,
)
_PH = re.compile(
    r"\W*(?:(?:final|target|adjust(?:ed)?|set|the)\s+)?ph(?:\s+(?:value|to))?\W*", re.IGNORECASE
)
_TO_AT_END = re.compile(
    r"[\s,;(:–-]+(?:(?:up|fill|make|make up|fill up|bring|bring up|top up|add|added)\s+)?"
    r"(?:to|ad|auf|до|q\.?\s?s\.?(?:\s?(?:to|ad))?)"
    r"(?:\s+(?:make|the|a))?(?:\s+(?:final|total))?(?:\s+(?:vol(?:ume)?|mark|line))?\.?[\s:).]*$"
    r"|[\s,;(:–-]+(?:fill up|make up|top up|for volume|q\.?s\.?)[\s:).]*$",
    re.IGNORECASE,
)
_LETTER = re.compile(r"\s+([A-Za-z]|[IVX]{1,4})(?![^\W_])")
# Maker's tokens behind a name: "(cat. QX1145)", ", art. no. 55-112".
_ORDER = re.compile(r"[\s,;(]+(?:cat|catalog|catalogue|art|order|lot)\b\.?.*$", re.IGNORECASE)


def read_name(cell: Cell, reading: Reading) -> Named:
    """What the name cell says."""
    chars = cell.text.chars
    if cell.shape in ("blank", "long"):
        return Named("note", measures=cell.row_measures)
    outside = _outside(cell)
    if _TOTAL.fullmatch(outside):
        volume = _volume(cell)
        return Named("total", volume=volume, measures=cell.row_measures, kinds=frozenset({"FINAL"}))
    if _PH.fullmatch(outside):
        return Named("pH", measures=cell.row_measures, kinds=frozenset({"PHWORD"}))
    complement = _complement(cell, chars, reading)
    return complement or _component(cell, reading)


def is_total(cell: Cell) -> bool:
    """Whether the name cell is that of a total row."""
    return cell.shape not in ("blank", "long") and _TOTAL.fullmatch(_outside(cell)) is not None


def is_complement(cell: Cell) -> bool:
    """Whether the name cell ends in "to": "Water to"."""
    chars = cell.text.chars
    if cell.shape in ("blank", "long"):
        return False
    return bool(_TO_AT_END.search(chars) or (chars.strip() and TO_WORDS.fullmatch(chars)))


def _outside(cell: Cell) -> str:
    """The characters of the cell that belong to no quantity."""
    pieces, at = [], 0
    for measure in cell.measures:
        pieces.append(cell.text.chars[at : measure.start])
        at = max(at, measure.end)
    pieces.append(cell.text.chars[at:])
    return " ".join(pieces)


def _volume(cell: Cell) -> Measure | None:
    found = next((m for m in reversed(cell.measures) if m.dimension == "volume"), None)
    return measure_at(found, cell.start) if found else None


def _complement(cell: Cell, chars: str, reading: Reading) -> Named | None:
    """ "Water to", "ddH2O up to 40 mL", "Make up to": the row that brings to volume, or None."""
    last = cell.measures[-1] if cell.measures else None
    end, volume = len(chars), None
    if last is not None and last.dimension == "volume" and not chars[last.end :].strip(" ).:"):
        end, volume = last.start, measure_at(last, cell.start)
    head = chars[:end].rstrip(" ~")
    whole = TO_WORDS.fullmatch(head)
    if whole is not None and head.strip():
        return Named(
            "complement", None, volume, measures=cell.row_measures, kinds=frozenset({"TO"})
        )
    found = _TO_AT_END.search(head)
    if found is None or (found.group().strip(" .:)").lower() in ("to", "ad") and not head.strip()):
        return None
    inner = _component(replace(cell, text=cell.text.piece(0, found.start())), reading)
    if inner.material is None or inner.phrases:
        return None
    return Named(
        "complement",
        inner.material,
        volume,
        measures=cell.row_measures,
        kinds=inner.kinds | {"TO"},
    )


# --- components ------------------------------------------------------------------------------------


def _component(cell: Cell, reading: Reading) -> Named:
    if cell.shape == "words":
        plain = _plain_name(cell, reading)
        if plain is not None:
            return plain
    sentence = read_sentence(cell.text, reading, always=True)
    phrases = sentence.phrases
    measures = tuple(
        measure_at(m, cell.start) for m in sentence.measures if m.dimension != "number"
    )
    moved = tuple(phrase_at(phrase, cell.start) for phrase in phrases)
    instructions = tuple(p for p in moved if isinstance(p, SetPH))
    if instructions:
        rest = tuple(p for p in moved if not isinstance(p, Command))
        return Named("note", None, None, None, rest, measures, sentence.kinds)
    to_volume = next((p for p in moved if isinstance(p, ToVolume)), None)
    if to_volume is not None:
        diluent = to_volume.diluent or next((p for p in moved if isinstance(p, Material)), None)
        return Named("complement", diluent, to_volume.volume, None, (), measures, sentence.kinds)
    dose = next((p for p in moved if isinstance(p, Dose) and p.amount.dimension in TAKEN), None)
    material = _material(cell, moved)
    if material is not None and _ORDER.search(material.words):
        material = replace(material, words=_ORDER.sub("", material.words))
    return Named("component", material, None, dose, (), measures, sentence.kinds)


def _plain_name(cell: Cell, reading: Reading) -> Named | None:
    """A cell that is the name of a substance and nothing else: most of them, read without parsing."""
    chars = cell.text.chars
    found = reading.names.find(chars)
    if len(found) != 1 or found[0].start or found[0].end != len(chars) or not found[0].substances:
        return None
    water = found[0].substances[0].name == "water"
    material = material_at(Material(0, len(chars), chars, found[0]), cell.start)
    return Named("component", material, kinds=frozenset({"WATER" if water else "NAME"}))


def _material(cell: Cell, moved: tuple[Phrase, ...]) -> Material | None:
    """One material of all that the name cell says."""
    found = [p for p in moved if isinstance(p, Material)]
    found.extend(p.material for p in moved if isinstance(p, Dose) and p.material is not None)
    found.sort(key=lambda m: m.start)
    worded = [m for m in found if m.words]
    commanded = any(isinstance(p, Command) for p in moved)
    if len(worded) == 1 and len(found) == 1 and (not commanded or worded[0].match is not None):
        return _full_name(cell, worded[0])
    start, end = cell.start, cell.start + len(cell.text.chars)
    words = _all_words(cell, worded, commanded)
    if not words:
        return None
    families = {
        m.match.substances[0].family: m.match for m in worded if m.match and m.match.substances
    }
    strengths = tuple(m for part in found for m in part.strengths)
    return Material(
        start,
        end,
        words,
        next(iter(families.values())) if len(families) == 1 else None,
        any(m.solution for m in worded),
        strengths,
        next((m.ph for m in found if m.ph), None),
        next((m.temperature for m in found if m.temperature), None),
        tuple(m for part in found for m in part.bracket),
        tuple(m for part in found for m in part.finals),
        next((m.molar_mass for m in found if m.molar_mass), None),
        next((m.density for m in found if m.density), None),
    )


def _full_name(cell: Cell, material: Material) -> Material:
    """ "Solution A": the letter is part of the name, though the grammar drops an "a"."""
    if material.match is not None and not material.solution:
        return material
    behind = cell.text.chars[material.end - cell.start :]
    found = _LETTER.match(behind)
    if found is None:
        return material
    end = material.end + found.end()
    return replace(material, words=f"{material.words} {found.group(1)}", end=end)


def _all_words(cell: Cell, worded: list[Material], commanded: bool) -> str:
    """The words of a name that the grammar has broken up, as written."""
    if len(worded) == 1 and not commanded:
        return worded[0].words
    chars = cell.text.chars
    if worded and not commanded:
        chars = chars[worded[0].start - cell.start : worded[-1].end - cell.start]
        cut = [m for m in cell.measures if m.end <= worded[-1].end - cell.start]
        offset = worded[0].start - cell.start
    else:
        cut, offset = list(cell.measures), 0
    pieces, at = [], 0
    for measure in cut:
        if measure.dimension == "number" or measure.start - offset < at:
            continue
        pieces.append(chars[at : measure.start - offset])
        at = measure.end - offset
    pieces.append(chars[at:])
    words = re.sub(r"\(\s*\)|\[\s*\]", " ", " ".join(pieces))
    return re.sub(r"\s+", " ", words).strip(" ,;:()[]-–")
