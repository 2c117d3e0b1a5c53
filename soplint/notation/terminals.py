"""A sentence as terminals of the grammar: typed words with their places."""

from __future__ import annotations

from dataclasses import dataclass

from soplint.quantities.model import Measure
from soplint.substances.model import Match

# Terminal of a quantity, by its dimension; dimensions that are missing here say nothing about a
# recipe (lengths, speeds, pressures ...) and are folded into OTHER.
BY_DIMENSION = {
    "mass": "MASS",
    "volume": "VOLUME",
    "amount": "AMOUNT",
    "count": "COUNT",
    "volumes": "VOLUMES",
    "activity": "ACTIVITY",
    "number": "NUMBER",
    "molarity": "STRENGTH",
    "molality": "STRENGTH",
    "normality": "STRENGTH",
    "mass-concentration": "STRENGTH",
    "ppm": "STRENGTH",
    "activity-concentration": "STRENGTH",
    "osmolality": "STRENGTH",
    "fraction": "PERCENT",
    "fold": "FOLD",
    "pH": "PH",
    "temperature": "TEMPERATURE",
    "ratio": "RATIO",
    "molar-mass": "MOLARMASS",
    "density": "DENSITY",
    "time": "TIME",
}


@dataclass(frozen=True, slots=True)
class Terminal:
    """One word of the sentence as the grammar sees it."""

    kind: str
    start: int
    end: int
    measure: Measure | None = None
    match: Match | None = None
