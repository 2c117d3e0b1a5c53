"""Phrases for laboratory water: "freshly boiled CO2-free water", "sterile ddH2O", "grade 1 water"."""

from __future__ import annotations

from .words import Line

NOUNS = frozenset({"water", "h2o", "h20"})
_BOTH = (
    "distilled bidistilled redistilled deionised deionized demineralised demineralized demin "
    "ultrapure ultra purified pure sterile sterilised sterilized autoclaved milliq mq di dd ro "
    "degassed boiled filtered chilled cold hot warm icecold tap pyrogenfree endotoxinfree "
    "nucleasefree rnasefree dnasefree particlefree hplc lcms"
)
_FIRST_ONLY = (
    "de milli mili co2 c02 carbon rnase dnase nuclease freshly double doubly triple glass grade "
    "type reagent lc depc endotoxin pyrogen particle ice molecular aqua"
)
_INNER_ONLY = (
    "free treated dioxide grade q pure ionised ionized biology culture quality ms i ii iii 1 2 3 "
    "cooled and level analytical reagent rnase dnase co2 carbon"
)
FIRST = frozenset((_BOTH + " " + _FIRST_ONLY).split())
_INNER = frozenset((_BOTH + " " + _INNER_ONLY).split())
_LONGEST = 7  # words before "water"


def water_phrase(line: Line, at: int) -> int | None:
    """Number of the word "water" (or H2O) that ends a phrase begun at word ``at``, or None."""
    last = min(at + _LONGEST, len(line.spans) - 1)
    for place in range(at + 1, last + 1):
        joint = line.joint(place - 1)
        if len(joint) > 3 or joint.strip(" -/,("):
            return None
        if line.word(place) in NOUNS:
            return place
        if line.word(place) not in _INNER or line.word(place) == line.word(place - 1):
            return None
    return None
