"""Strengths that a preparation is said to have: title, brackets, columns, claims."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import replace
from functools import lru_cache

from soplint.bench.preparation import (
    Claimed,
    Preparation,
    Stated,
    Taken,
    Target,
)
from soplint.notation.phrases import Dose
from soplint.quantities.model import Measure

_STRENGTHS = {
    *("molarity", "molality", "normality", "mass-concentration", "fraction", "ppm"),
    "activity-concentration",
}


def targets_of(preparation: Preparation) -> Iterator[Target]:
    """Strengths that the preparation is said to have: title, brackets, columns, claims."""
    title = preparation.title
    if title is not None and _title_counts(preparation):
        yield from title.targets
    for taken in preparation.taken:
        yield from _finals(taken)
        for other in taken.dose.alternatives:
            yield from _finals(replace(taken, dose=other))
    for claimed in preparation.claimed:
        claim = claimed.claim
        if not _claim_counts(claimed) or _in_use(preparation, claimed):
            continue
        if claim.kind == "strength" and claim.measure.dimension in _STRENGTHS:
            yield Target(Stated(claimed.text, claim.measure), claim.material, "claim", claimed.fold)


# Sentences whose results come from a measurement, not from the recipe before them.
_MEASURED = re.compile(
    r"\b(example|titre|titration|reading|sample|absorbance|blank|limit|range|between|sensitivity)\b"
    r"|[A-Za-z]\w*\s*=\s*\d|\b\d+(?:\.\d+)?\s?[x×X]\b",
    re.IGNORECASE,
)


def _claim_counts(claimed: Claimed) -> bool:
    """Whether a claim speaks of the preparation as made (not of a result or another fold)."""
    if claimed.claim.material is not None or claimed.fold is not None:
        return True
    return not _speaks_of_results(claimed.text.chars)


@lru_cache(maxsize=16)
def _speaks_of_results(chars: str) -> bool:
    """Whether a sentence is one of a measurement; a sentence of many claims is searched once."""
    return _MEASURED.search(chars) is not None


_USE = re.compile(r"\b(?:use[ds]?|add|induce|working|supplement|dose|spike)\b", re.IGNORECASE)


def _in_use(preparation: Preparation, claimed: Claimed) -> bool:
    """ "IPTG 0.5 M: 1.19 g in 10 mL; add 1 µL per mL of culture for 0.5 mM": not of the stock."""
    title, measure = preparation.title, claimed.claim.measure
    if title is None or preparation.kind != "line" or not measure.base:
        return False
    labels = [t.stated.measure for t in title.targets]
    labels = [m for m in labels if m.dimension == measure.dimension and m.base]
    if not labels or all(m.base < 5 * measure.base for m in labels):
        return False
    before = claimed.text.chars[: measure.start]
    return bool(_USE.search(re.split(r"[;.]\s", before)[-1]))


def _title_counts(preparation: Preparation) -> bool:
    """A document's title speaks of a preparation only where there is just one."""
    assert preparation.title is not None
    if _uses_the_titled(preparation):
        return False
    return preparation.title.source != "document" or preparation.sole


def _uses_the_titled(preparation: Preparation) -> bool:
    """ "Stock of each acid, 20 mL: ..., 1 mL of each stock to 25 mL": the second is no stock."""
    title, volume = preparation.title, preparation.volume
    if title is None or title.volume is None or volume is None or volume.provenance != "made-up":
        return False
    batch = title.volume.measure.base
    if not batch or abs(volume.litres / batch - 1) < 0.03:
        return False
    named = [t.dose.material for t in preparation.taken if t.dose.material is not None]
    return any(
        m.solution and m.match is None and m.words and m.words.lower() in title.words.lower()
        for m in named
    )


def _finals(taken: Taken) -> Iterator[Target]:
    material = taken.dose.material
    beside = [m for m in (material.bracket if material else ()) if m.dimension == "fold"]
    fold = beside[0] if len(beside) == 1 and material and not material.strengths else None
    for measure in final_strengths(taken.dose):
        yield Target(Stated(taken.text, measure), material, "bracket", fold)
    for measure in _either(taken.dose):
        yield Target(Stated(taken.text, measure), taken.dose.material, "maybe", fold)


# Strengths beside a mass that cannot be an assay of the thing weighed.
_NO_ASSAY = ("molarity", "normality", "mass-concentration", "activity-concentration")


def final_strengths(dose: Dose) -> tuple[Measure, ...]:
    """Strengths beside a dose that mean the finished preparation, not the thing taken."""
    material = dose.material
    if material is None:
        return ()
    finals = [m for m in material.finals if m.dimension in _STRENGTHS]
    beside = [m for m in material.strengths if m.dimension in _STRENGTHS]
    bracket = [m for m in material.bracket if m.dimension in _STRENGTHS]
    if dose.amount.dimension in ("mass", "amount"):
        molar = [m for m in beside if m.dimension in _NO_ASSAY]
        return tuple([*finals, *molar, *bracket])
    if len(beside) > 1 and len({m.dimension for m in beside}) == 1:
        stock = max(beside, key=lambda m: m.base)
        finals.extend(m for m in beside if m is not stock)
    if not beside and len(bracket) > 1 and len({m.dimension for m in bracket}) == 1:
        finals.extend(bracket[1:])  # "1 mL KCl (3 M) (10 mM)": stock, then final
    if beside:
        same = [m for m in bracket if m.dimension == beside[0].dimension]
        finals.extend(m for m in same if m.base < beside[0].base)
    return tuple(finals)


def _either(dose: Dose) -> tuple[Measure, ...]:
    """Strengths behind a volume that may be the stock's or the mixture's: "50 mL acid (10 % v/v)"."""
    material = dose.material
    if material is None or dose.amount.dimension != "volume":
        return ()
    beside = [m for m in material.strengths if m.dimension in _STRENGTHS]
    bracket = [m for m in material.bracket if m.dimension in _STRENGTHS]
    return tuple(bracket if not beside and len(bracket) == 1 else ())
