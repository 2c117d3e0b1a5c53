"""Strengths of a part of a salt: "copper, 1000 mg/L" made from copper sulfate pentahydrate."""

from __future__ import annotations

import os
import re
from functools import lru_cache

from soplint.substances import FormulaError, molar_mass, parse_formula
from soplint.substances.elements import DATA, atomic_weights
from soplint.substances.model import Substance

# Ions and groups that results are reported as, by the words for them: name -> formula.
GROUPS = {
    "nitrate": "NO3",
    "nitrite": "NO2",
    "phosphate": "PO4",
    "orthophosphate": "PO4",
    "sulfate": "SO4",
    "sulphate": "SO4",
    "chloride": "Cl",
    "bromide": "Br",
    "iodide": "I",
    "fluoride": "F",
    "ammonium": "NH4",
    "ammonia": "NH3",
    "silica": "SiO2",
    "silicate": "SiO2",
    "bicarbonate": "HCO3",
    "cyanide": "CN",
    "sulfide": "S",
    "nitrogen": "N",
    "phosphorus": "P",
    "sulfur": "S",
    "chlorine": "Cl",
}
# The element whose atoms count the groups in a formula.
_KEY = re.compile(r"[A-Z][a-z]?")
_WORD = re.compile(r"[A-Za-zµ]+(?:\d+[A-Z]?[a-z]?)*")
# "NO3-N", "nitrate nitrogen", "phosphate-phosphorus": counted as the element.
_COUNTED_AS = re.compile(
    r"\b(?:NH[34]|NO[23]|PO4|SO4|(?:nitr|phosph|sul(?:f|ph))[ai]te|ammoni(?:um|a))(?:[+-]|\d[+-])?"
    r"\s?[-–/ ]\s?\(?(?P<element>N|P|S|nitrogen|phosphorus|sulfur|sulphur)\b",
    re.IGNORECASE,
)
_CHARGE = re.compile(r"(?:\(?[IVX]+\)?|\d?[+-])$")


@lru_cache(maxsize=256)
def fragment_of(words: str) -> str | None:
    """The element or group that words name first, as a formula; None for anything else.

    >>> fragment_of("Copper"), fragment_of("nitrate standard"), fragment_of("Zn")
    ('Cu', 'NO3', 'Zn')
    >>> fragment_of("NO3-N"), fragment_of("phosphate-phosphorus")
    ('N', 'P')
    """
    told, _, basis = words.partition(" as ")
    counted = _COUNTED_AS.search(basis or told)
    if counted is not None:
        return counted["element"][0].upper()
    for word in _WORD.findall(basis or told):
        lower = word.lower()
        if lower in GROUPS:
            return GROUPS[lower]
        if lower in _names():
            return _names()[lower]
        bare = _CHARGE.sub("", word)
        if bare in _symbols() and word not in ("I", "In", "As", "At", "No", "He", "Be"):
            return str(bare)
        if word in ("NO3", "NO2", "PO4", "SO4", "NH4", "SiO2"):
            return str(word)
    return None


@lru_cache(maxsize=1)
def _names() -> dict[str, str]:
    """Names of the elements in lower case -> symbol, from the table of atomic weights."""
    with open(os.path.join(DATA, "atomic_weights.csv"), encoding="utf-8") as file:
        rows = file.read().splitlines()
    split = [row.split(",", 3) for row in rows if row and row[0].isdigit()]
    return {name.lower(): symbol for _, symbol, name, _ in split}


@lru_cache(maxsize=1)
def _symbols() -> frozenset[str]:
    return frozenset(atomic_weights())


def groups_per_formula(substance: Substance, fragment: str) -> float | None:
    """How many times a fragment is in one formula unit, counted by its key element.

    None where the substance does not hold it (sulfate in a nitrate, N of ammonium for "NO3").
    """
    if substance.formula is None:
        return None
    try:
        whole = parse_formula(substance.formula).elements
        part = parse_formula(fragment).elements
    except FormulaError:
        return None
    key = next((e for e in part if e not in ("O", "H")), None)
    if key is None or not whole.get(key):
        return None
    if len(part) > 1 and fragment not in substance.formula and fragment not in ("SiO2", "NH3"):
        return None
    if fragment in ("NH4", "NH3") and "NH4" not in substance.formula:
        return None
    if any(whole.get(element, 0) < count for element, count in part.items() if element != key):
        return None
    return float(whole[key]) / float(part[key])


def share_of(substance: Substance, fragment: str) -> float | None:
    """Mass of the fragment in one gram of the substance: n·M(fragment)/M."""
    count = groups_per_formula(substance, fragment)
    if count is None or not substance.molar_mass:
        return None
    return count * molar_mass(fragment) / substance.molar_mass
