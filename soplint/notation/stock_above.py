"""The stock that all rows of a table are made from, where the text above the table names it.

"Standards from chloride stock, 1000 mg/L", "Pipette the volume of 10 mg/L copper standard into a
100 mL flask and make up to the mark": a column "Stock (mL)" then says how much of it is taken.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass

from soplint.intake import sentences
from soplint.intake.model import Text
from soplint.notation.phrases import Assigned, Claim, Dose, Material, Phrase, ToVolume, Ware
from soplint.notation.read import Reading, read_sentence
from soplint.quantities.model import Measure

_STOCK = re.compile(
    r"(?:stock|standard|intermediate|working|concentrate|mother|parent)", re.IGNORECASE
)
_KINDS = (
    "molarity",
    "normality",
    "mass-concentration",
    "ppm",
    "fraction",
    "activity-concentration",
)
_LONGEST = 300


@dataclass(frozen=True, slots=True)
class Above:
    """A stock with its strength and, if said, the volume every row is made up to; in ``text``."""

    text: Text
    stock: Material
    volume: Measure | None = None


def drawn_from(context: Sequence[Text], reading: Reading) -> Above | None:
    """The one stock of a strength that the text above a table names, the nearest first."""
    for text in reversed(context):
        if len(text.chars) > _LONGEST or not _STOCK.search(text.chars):
            continue
        for piece in reversed(sentences(text)):
            phrases = read_sentence(piece, reading, always=True).phrases
            stocks = [m for m in map(_material, phrases) if m is not None and _is_stock(m)]
            if len(stocks) == 1:
                return Above(piece, stocks[0], _volume(phrases))
    return None


def is_stock(words: str) -> bool:
    """Whether a heading names a stock and nothing else: "Stock", "Volume of working standard"."""
    return bool(_STOCK.search(words)) and len(words.split()) <= 4


def _material(phrase: Phrase) -> Material | None:
    if isinstance(phrase, Assigned):
        return None
    if isinstance(phrase, Material):
        return phrase
    return phrase.material if isinstance(phrase, (Dose, Claim)) else None


def _is_stock(material: Material) -> bool:
    strengths = [m for m in material.strengths if m.dimension in _KINDS]
    return len(strengths) == 1 and bool(_STOCK.search(material.words))


def _volume(phrases: Sequence[Phrase]) -> Measure | None:
    """ "into a 100 mL flask ... to the mark", "made up to 100 mL"."""
    made = [p for p in phrases if isinstance(p, ToVolume)]
    if len(made) != 1 or any(isinstance(p, Dose) for p in phrases):
        return None  # a sentence with amounts makes the stock itself
    if made[0].volume is not None:
        return made[0].volume
    wares = [p.measure for p in phrases if isinstance(p, Ware)]
    return wares[0] if len(wares) == 1 else None
