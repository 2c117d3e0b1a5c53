"""The tables of the hazards: classes of substances, pairs of classes, gases."""

from __future__ import annotations

import csv
import os
import re
from dataclasses import dataclass
from functools import lru_cache

from soplint.substances.model import Substance


@dataclass(frozen=True, slots=True)
class Pair:
    """Two classes (or three) that react dangerously in one vessel."""

    class_a: str  # as the source names it
    class_b: str
    severity: str
    hazard: str
    product: str
    condition: str
    first: str  # keys of classes; empty: no rule finds the row from contents
    second: str
    third: str
    needs: str
    gas: str
    rule: str
    source: str
    status: str


@dataclass(frozen=True, slots=True)
class Gas:
    """A gas that a pair sets free, and which amounts of it matter."""

    key: str
    name: str
    sources: tuple[str, ...]  # classes that it comes from
    moles: float  # mol for each mol of the source
    acid_moles: float  # mol of H+ that one mol uses, 0 where acid does not limit
    pka: float | None
    grave: float  # L: from here on the gravest class
    trace: float  # L: below it no finding
    listed: bool  # never below minor
    source: str


def _rows(name: str) -> list[dict[str, str]]:
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), "data", name)
    with open(path, encoding="utf-8", newline="") as file:
        return list(csv.DictReader(line for line in file if not line.startswith("#")))


@lru_cache(maxsize=1)
def pairs_table() -> tuple[Pair, ...]:
    """The pairs that can be found from the contents of a vessel."""
    return tuple(
        Pair(*(row[name] or "" for name in _PAIR_COLUMNS))
        for row in _rows("incompatibilities.csv")
        if row["first"] and row["rule"]
    )


_PAIR_COLUMNS = (
    *("class_a", "class_b", "severity", "hazard", "product", "condition", "first", "second"),
    *("third", "needs", "gas", "rule", "source", "status"),
)


@lru_cache(maxsize=1)
def gases() -> dict[str, Gas]:
    """The gases by key."""
    return {
        row["gas"]: Gas(
            key=row["gas"],
            name=row["name"],
            sources=tuple(row["source_class"].split()),
            moles=float(row["moles"]),
            acid_moles=float(row["acid_moles"]),
            pka=float(row["pKa"]) if row["pKa"] else None,
            grave=float(row["grave_L"]),
            trace=float(row["trace_L"]),
            listed=row["listed"] == "yes",
            source=row["source"],
        )
        for row in _rows("gases.csv")
    }


@lru_cache(maxsize=1)
def _members() -> dict[str, dict[str, frozenset[str]]]:
    """by -> key -> classes."""
    found: dict[str, dict[str, set[str]]] = {"kind": {}, "family": {}, "word": {}}
    for row in _rows("hazard_classes.csv"):
        found[row["by"]].setdefault(row["key"], set()).add(row["class"])
    return {by: {k: frozenset(v) for k, v in keys.items()} for by, keys in found.items()}


@lru_cache(maxsize=512)
def classes_of(substance: Substance) -> frozenset[str]:
    """The classes of one substance, by its reagent class and composition.

    >>> from soplint.substances import lookup
    >>> sorted(classes_of(lookup("potassium cyanide").substances[0]))
    ['cyanide']
    """
    kinds, families = _members()["kind"], _members()["family"]
    found: set[str] = set(families.get(substance.family, ()))
    found |= kinds.get(substance.kind, frozenset())
    found |= kinds.get(substance.kind.split(" (")[0], frozenset())
    return frozenset(found)


@lru_cache(maxsize=1)
def _words() -> re.Pattern[str]:
    words = sorted(_members()["word"], key=len, reverse=True)
    return re.compile(
        r"(?<![\w-])(?:" + "|".join(re.escape(w) for w in words if w != "acid") + r")(?![\w-])"
        r"|(?:(?<=^)|(?<=\bthe )|(?<=\bwith )|(?<=\bof )|(?<=\bin )|(?<=\binto )|(?<=\ban )"
        r"|(?<=\bany )|(?<=\bdilute )|(?<=\bwaste )|(?<=\bspent )|(?<=\bmineral )|(?<=\bstrong )"
        r"|(?<=\bcolumn )|(?<=\brinse )|(?<=\band )|(?<=, ))acid(?![\w-])",
        re.IGNORECASE,
    )


def word_classes(chars: str) -> list[tuple[int, int, frozenset[str]]]:
    """Words of a text that stand for a class without being a name of the catalogue.

    >>> [sorted(c) for _, _, c in word_classes("into the acid waste")]
    [['acid', 'strong-acid']]
    >>> word_classes("acid-resistant gloves")
    []
    """
    table = _members()["word"]
    return [(m.start(), m.end(), table[m.group().lower()]) for m in _words().finditer(chars)]


def known_words() -> frozenset[str]:
    """All words that the table holds."""
    return frozenset(_members()["word"])
