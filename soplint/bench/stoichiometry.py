"""How many reactive units a substance takes up in a titration, and a titrant gives."""

from __future__ import annotations

import csv
import os
from functools import lru_cache

from soplint.substances.model import Substance

# Reactive units of one formula unit of a titrant, and what kind of titration it is.
TITRANTS = {
    "NaOH": ("base", 1.0),
    "KOH": ("base", 1.0),
    "HCl": ("acid", 1.0),
    "HNO3": ("acid", 1.0),
    "HClO4": ("acid", 1.0),
    "H2SO4": ("acid", 2.0),
    "AgNO3": ("silver", 1.0),
    "C10H14N2Na2O8": ("edta", 1.0),
    "C10H16N2O8": ("edta", 1.0),
}
UNKNOWN = (1.0, 2.0, 3.0, 0.5)  # tried where the reaction is not in the table


@lru_cache(maxsize=1)
def _table() -> dict[tuple[str, str], tuple[float, ...]]:
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), "data", "stoichiometry.csv")
    with open(path, encoding="utf-8", newline="") as file:
        rows = csv.DictReader(line for line in file if not line.startswith("#"))
        return {
            (row["family"], row["reacts_with"]): tuple(
                float(number) for number in row["numbers"].split(";")
            )
            for row in rows
        }


def units_of_titrant(titrant: Substance | None) -> tuple[str | None, float]:
    """Kind of titration and reactive units per mol of the titrant; (None, 1) when unknown."""
    if titrant is None:
        return None, 1.0
    return TITRANTS.get(titrant.family, (None, 1.0))


def units_of_analyte(family: str, kind: str | None) -> tuple[float, ...]:
    """Reactive units one mol of the analyte takes up; several where the end point decides.

    >>> units_of_analyte("C6H8O7", "base")
    (3.0,)
    """
    if kind is None:
        return UNKNOWN
    return _table().get((family, kind), UNKNOWN)
