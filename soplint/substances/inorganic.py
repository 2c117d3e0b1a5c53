"""Does a formula outside the catalogue look like a compound?  A neutral row of common ions does.

"K2S2O8" and "CsCl" are read as cations followed by one kind of anion whose charges cancel; words
and abbreviations that happen to consist of element symbols ("PBS", "CO", "USP") are not.
"""

from __future__ import annotations

import re
from functools import cache
from itertools import product
from math import gcd
from typing import NamedTuple

from .tables import read_table


class Ions(NamedTuple):
    """The ions of a formula: cations with count and charge, then the anion."""

    cations: tuple[tuple[str, int, int], ...]
    anion: str
    anions: int
    anion_charge: int

    @property
    def neutral(self) -> bool:
        """Whether the charges cancel."""
        positive = sum(count * charge for _, count, charge in self.cations)
        return positive + self.anions * self.anion_charge == 0


@cache
def _charges() -> dict[str, tuple[int, ...]]:
    return {
        record["ion"]: tuple(int(charge) for charge in record["charges"].split())
        for record in read_table("ions.csv")
    }


@cache
def _pattern() -> re.Pattern[str]:
    """Cations with counts, then an anion, bare or bracketed."""
    cations = sorted((i for i, c in _charges().items() if c[0] > 0), key=len, reverse=True)
    anions = sorted((i for i, c in _charges().items() if c[0] < 0), key=len, reverse=True)
    positive, negative = "|".join(cations), "|".join(map(re.escape, anions))
    one = rf"(?:\((?:{positive})\)|(?:{positive}))(?![a-z])\d*"
    return re.compile(
        rf"(?P<cations>(?:{one}){{1,4}})"
        rf"(?:[(\[](?P<held>{negative})[)\]](?P<many>\d*)|(?P<bare>{negative})(?P<count>\d*))"
    )


@cache
def _cation() -> re.Pattern[str]:
    cations = sorted((i for i, c in _charges().items() if c[0] > 0), key=len, reverse=True)
    return re.compile(rf"\(?({'|'.join(cations)})\)?(\d*)")


def ions(formula: str) -> Ions | None:
    """The ions of an anhydrous formula; neutral if any combination of common charges cancels.

    >>> ions("K2S2O8").neutral, ions("ZnCl").neutral
    (True, False)
    >>> ions("PBS") is None
    True
    """
    found = _pattern().fullmatch(formula)
    if found is None:
        return None
    anion = found["held"] or found["bare"]
    count = found["many"] if found["held"] else found["count"]
    cations = [(name, int(number or 1)) for name, number in _cation().findall(found["cations"])]
    first: Ions | None = None
    for *positive, negative in product(
        *(_charges()[name] for name, _ in cations), _charges()[anion]
    ):
        tried = Ions(
            tuple((name, n, charge) for (name, n), charge in zip(cations, positive, strict=True)),
            anion,
            int(count or 1),
            negative,
        )
        if tried.neutral:
            return tried
        first = first or tried
    return first


def neutralised(found: Ions) -> str | None:
    """The simplest neutral formula of the same two ions: "ZnCl" -> "ZnCl2"; None for more ions."""
    if len(found.cations) != 1:
        return None
    cation, _, positive = found.cations[0]
    common = gcd(positive, found.anion_charge)
    cations, anions = -found.anion_charge // common, positive // common
    held = (
        f"({found.anion})"
        if anions > 1 and len(re.findall("[A-Z]", found.anion)) > 1
        else found.anion
    )
    first = f"({cation})" if cations > 1 and len(re.findall("[A-Z]", cation)) > 1 else cation
    return f"{first}{cations if cations > 1 else ''}{held}{anions if anions > 1 else ''}"
