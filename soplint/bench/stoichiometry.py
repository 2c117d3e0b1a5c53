"""How many reactive units a substance takes up in a titration, and a titrant gives.

The tables ``data/titrants.csv`` and ``data/stoichiometry.csv`` hold one row per reaction.  A
reaction that is not there has no number: nothing is guessed for it.
"""

from __future__ import annotations

import csv
import os
from functools import lru_cache

from soplint.substances.model import Substance

_DATA = os.path.join(os.path.dirname(os.path.abspath(__file__)), "data")


def _rows(name: str) -> list[dict[str, str]]:
    with open(os.path.join(_DATA, name), encoding="utf-8", newline="") as file:
        return list(csv.DictReader(line for line in file if not line.startswith("#")))


@lru_cache(maxsize=1)
def _titrants() -> dict[str, tuple[tuple[str, float], ...]]:
    found: dict[str, tuple[tuple[str, float], ...]] = {}
    for row in _rows("titrants.csv"):
        kind = (row["kind"], float(row["units"]))
        found[row["family"]] = (*found.get(row["family"], ()), kind)
    return found


@lru_cache(maxsize=1)
def _analytes() -> dict[tuple[str, str], tuple[float, ...]]:
    return {
        (row["family"], kind): tuple(float(number) for number in row["numbers"].split(";"))
        for row in _rows("stoichiometry.csv")
        for kind in row["reacts_with"].split()
    }


@lru_cache(maxsize=1)
def _names() -> dict[str, str]:
    return {
        name.strip().lower(): row["family"]
        for row in _rows("stoichiometry.csv")
        for name in row["names"].split(";")
        if name.strip()
    }


def named_analyte(words: str) -> str | None:
    """Formula of a substance that is titrated but not held in the catalogue.

    >>> named_analyte("arsenic trioxide"), named_analyte("zinc")
    ('As2O3', None)
    """
    return _names().get(words.strip().lower())


def kinds_of_titrant(titrant: Substance | None) -> tuple[tuple[str, float], ...]:
    """Kinds of titration a titrant serves, each with its reactive units per mol; () if unknown."""
    return _titrants().get(titrant.family, ()) if titrant is not None else ()


def units_of_analyte(family: str, kind: str) -> tuple[float, ...]:
    """Reactive units of one mol of the analyte; several where the end point decides, () if unknown.

    >>> units_of_analyte("C6H8O7", "base"), units_of_analyte("C6H8O7", "silver")
    ((3.0,), ())
    """
    return _analytes().get((family, kind), ())
