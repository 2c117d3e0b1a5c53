"""Standard atomic weights of the elements, from ``data/atomic_weights.csv``.

The table is small (118 rows) and needed by every molar mass, so it is read once, with ``split``
rather than the csv module: its first five fields hold no commas.
"""

from __future__ import annotations

import os
from functools import cache
from typing import NamedTuple

DATA = os.path.join(os.path.dirname(__file__), "data")


def read_data(name: str) -> str:
    """The text of a data file of this room."""
    with open(os.path.join(DATA, name), encoding="utf-8") as file:
        return file.read()


class AtomicWeight(NamedTuple):
    """Standard atomic weight of one element, in g/mol."""

    value: float
    uncertainty: float  # expanded, as published; 0 where only a mass number exists
    kind: str  # constant, abridged, mass-number


@cache
def atomic_weights() -> dict[str, AtomicWeight]:
    """Symbol to standard atomic weight (g/mol) for all 118 elements.

    Source: Prohaska et al. 2022, Pure Appl. Chem. 94, 573.

    >>> atomic_weights()["Na"].value
    22.98976928
    """
    table: dict[str, AtomicWeight] = {}
    for line in read_data("atomic_weights.csv").splitlines():
        if line.startswith(("#", "number,")):
            continue
        _, symbol, _, value, uncertainty, kind = line.split(",", 6)[:6]
        table[symbol] = AtomicWeight(float(value), float(uncertainty or 0), kind)
    return table
