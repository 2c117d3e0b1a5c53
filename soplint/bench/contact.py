"""What meets what in a vessel: pairs of the table, and how many pairs could be assessed."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from itertools import combinations
from typing import TYPE_CHECKING

from soplint.bench.contents import Content
from soplint.bench.hazard_tables import Gas, Pair, gases, pairs_table
from soplint.bench.vessels import Vessel, vessels

if TYPE_CHECKING:
    from soplint.bench.carry_out import Bench

_MOLAR_VOLUME = 24.47  # L/mol of an ideal gas at 25 °C and 101.325 kPa (R T / p, CODATA 2018)
_BASES = {"strong-base": 1.0, "ammonia": 1.0, "carbonate": 1.0, "amine": 1.0}


@dataclass(frozen=True, slots=True)
class Contact:
    """A pair of the table that meets in one vessel."""

    pair: Pair
    vessel: Vessel
    first: Content
    second: Content
    gas: Gas | None
    litres: float | None  # of gas at 25 °C, None when an amount is missing

    @property
    def late(self) -> Content:
        """The content that came last: the step that makes the contact."""
        both = [c for c in (self.first, self.second) if not c.stream] or [self.first]
        return max(both, key=lambda c: (c.step, c.start))

    @property
    def early(self) -> Content:
        """The other one."""
        return self.second if self.late is self.first else self.first


def contacts(bench: Bench) -> list[Contact]:
    """All contacts of a document, one for each pair of things in each vessel."""
    if not _CACHE or _CACHE[0][0] is not bench:
        _CACHE[:] = [(bench, [c for v in vessels(bench) for c in _contacts(v)])]
    return _CACHE[0][1]


_CACHE: list[tuple[object, list[Contact]]] = []


def pairs(bench: Bench) -> tuple[int, int]:
    """Pairs of things in one vessel: how many the table could assess, how many not.

    A pair counts as assessed when a row of the table names the classes of both, whether it
    speaks or not.  Water is no partner.
    """
    rows = {(p.first, p.second) for p in pairs_table()}
    assessed = left = 0
    for vessel in vessels(bench):
        things = {c.key: c for c in vessel.contents if not c.water}
        both = sum(
            any((a, b) in rows or (b, a) in rows for a in one.classes for b in other.classes)
            for one, other in combinations([c for c in things.values() if c.classes], 2)
        )
        assessed += both
        left += len(things) * (len(things) - 1) // 2 - both
    return assessed, left


def unknown(vessel: Vessel) -> tuple[Content, ...]:
    """The things in a vessel that neither the catalogue nor the table knows."""
    return tuple(c for c in vessel.contents if not c.known)


def _of(pair: Pair, one: Content, other: Content) -> bool:
    return pair.first in one.classes and pair.second in other.classes


def _contacts(vessel: Vessel) -> Iterator[Contact]:
    seen: set[tuple[str, str, str]] = set()
    # the same thing added again and again meets the others once
    held = list({(c.key, c.stream, c.origin): c for c in vessel.contents if c.classes}.values())
    present = frozenset(k for c in held for k in c.classes)
    for pair in pairs_table():
        if not {pair.first, pair.second} <= present or (pair.third and pair.third not in present):
            continue
        for one in held:
            for other in held:
                if one is other or one.key == other.key or 0 < one.origin == other.origin:
                    continue
                if not _of(pair, one, other):
                    continue
                mark = (pair.rule, pair.first + pair.second, "")
                if mark in seen or not _holds(pair.needs, vessel, one, other):
                    continue
                if "hypochlorite" in (pair.first, pair.second) and _quenched(held, one, other):
                    continue
                gas = gases().get(pair.gas)
                litres = _gas(gas, vessel, pair)
                if gas is not None and litres is not None and litres < gas.trace:
                    continue
                seen.add(mark)
                yield Contact(pair, vessel, one, other, gas, litres)


def _quenched(held: list[Content], one: Content, other: Content) -> bool:
    """Whether iodide, thiosulfate or sulfite had taken up the hypochlorite before the other came."""
    last = max(one.step, other.step)
    bleach = min(c.step for c in (one, other) if "hypochlorite" in c.classes)
    return any("quenching" in c.classes and bleach <= c.step <= last for c in held)


# --- conditions --------------------------------------------------------------------------------

HOT = re.compile(
    r"\b(?:hot|boil\w*|heat\w*|reflux\w*|evaporat\w*|fum(?:es|ing)|ignit\w*|distil\w*)\b"
)


def _holds(needs: str, vessel: Vessel, one: Content, other: Content) -> bool:
    if not needs:
        return True
    for choice in needs.split(" or "):
        if all(_one(need.strip(), vessel, one, other) for need in choice.split(" and ")):
            return True
    return False


def _one(need: str, vessel: Vessel, one: Content, other: Content) -> bool:
    if need.startswith("pH<"):
        return acidic(vessel, float(need[3:]), one)
    if need.startswith("acid>="):
        return _strong(vessel, "acid", float(need[6:]), one)
    if need.startswith("base>="):
        return _strong(vessel, "strong-base", float(need[6:]), one)
    if need.startswith("peroxide>="):
        return _strong(vessel, "peroxide", float(need[10:]), one)
    if need == "hot":
        return bool(HOT.search(vessel.words))
    if need == "closed":
        return closing(vessel) is not None
    if need == "uncooled":
        return not re.search(r"\bcool|\bice|slowly|dropwise|portion|below 2", vessel.words)
    if need == "alkaline":
        return _alkaline(vessel)
    return need == "waste" and vessel.kind == "stream"


def acidic(vessel: Vessel, limit: float, acid: Content | None = None) -> bool:
    """Whether the pH of the vessel lies below ``limit``: as stated, else by acid against base."""
    if vessel.ph is not None:
        return vessel.ph < limit
    if vessel.kind == "stream" or acid is None:
        return True
    given = _equivalents(vessel, {"acid": 1.0})
    taken = _equivalents(vessel, _BASES)
    if given is None or taken is None or not taken:
        return True
    if any("carbonate" in c.classes for c in vessel.contents):
        return True  # the carbonate is the partner itself
    return given >= taken


def _alkaline(vessel: Vessel) -> bool:
    """Strong base in excess, warm or concentrated, and no still to take the gas."""
    if vessel.ph is not None:
        return vessel.ph > 11
    if vessel.kind == "stream" or re.search(r"distil|still|steam|trap|absor|buffer", vessel.words):
        return False
    given = _equivalents(vessel, {"strong-base": 1.0})
    taken = _equivalents(vessel, {"acid": 1.0})
    return bool(given) and taken is not None and given is not None and given > taken


def _equivalents(vessel: Vessel, classes: dict[str, float]) -> float | None:
    """mol of H+ or OH- of some classes; None when an amount is not known."""
    total = 0.0
    for content in vessel.contents:
        if content.classes & classes.keys():
            if content.protons is None:
                return None
            total += content.protons
    return total


def _strong(vessel: Vessel, klass: str, limit: float, one: Content) -> bool:
    """Whether a class stands in the vessel with ``limit`` mol/L or more (waste: as poured)."""
    for content in vessel.contents:
        if klass not in content.classes or (content.stream and one is not content):
            continue
        molar = strength(vessel, content)
        if molar is None and vessel.kind == "stream":
            return True  # as strong as it comes
        if molar is not None and molar >= limit:
            return True
    return False


def strength(vessel: Vessel, content: Content) -> float | None:
    """mol/L of a content in its vessel; of the liquid itself where the vessel's volume is not known."""
    substance = content.substance
    if content.moles is not None and vessel.volume:
        return content.moles / vessel.volume
    if content.percent is not None and substance is not None and substance.molar_mass:
        return content.percent * 10 / substance.molar_mass
    return None


# --- gas -----------------------------------------------------------------------------------------


def _gas(gas: Gas | None, vessel: Vessel, pair: Pair) -> float | None:
    """L of gas at most: by the scarcer of source and acid, and by the pH where it is stated."""
    if gas is None or vessel.kind == "stream":
        return None
    source = _moles(vessel, next((k for k in gas.sources if _has(vessel, k)), ""))
    if source is None:
        return None
    moles = source * gas.moles
    if gas.acid_moles:
        acid = _equivalents(vessel, {"acid": 1.0})
        if acid is not None and acid > 0:
            moles = min(moles, acid / gas.acid_moles)
    elif pair.first not in gas.sources:
        partner = _moles(vessel, pair.first)
        if partner is not None:
            moles = min(moles, partner)
    if gas.pka is not None and vessel.ph is not None:
        moles /= 1 + 10 ** (vessel.ph - gas.pka)
    return gas_litres(moles)


def gas_litres(moles: float) -> float:
    """Litres of an ideal gas at 25 °C and 101.325 kPa, V = n R T / p.

    >>> round(gas_litres(0.5), 2)
    12.23
    """
    return moles * _MOLAR_VOLUME


def _has(vessel: Vessel, klass: str) -> bool:
    return any(klass in c.classes for c in vessel.contents)


def _moles(vessel: Vessel, klass: str) -> float | None:
    amounts = [c.moles for c in vessel.contents if klass in c.classes]
    if not amounts or any(a is None for a in amounts):
        return None
    return sum(a for a in amounts if a is not None)


# --- closure -------------------------------------------------------------------------------------

_CLOSES = re.compile(
    r"\b(?:cap|caps|capped|close|closed|closing|seal|sealed|stopper|stoppered)\b"
    r"[^.;]{0,40}?\b(?:tight|tightly|firmly|hermetically|it|bottle|vessel|flask|tube|vial|jar|cap|lid)\b"
    r"|\b(?:and|then)\s+(?:cap|close|seal|stopper)\s*(?=[.,;]|$)"
    r"|\bcrimp\w*\b|\btightly (?:closed|capped|sealed)\b|\bclosed (?:bottle|flask|tube|vessel|container)\b",
    re.IGNORECASE,
)
_VENTS = re.compile(
    r"\b(?:vent\w*|relief|loose\w*|never|not|no|open|outlet|trap|absorber|gas[- ]?tight syringe|distil\w*"
    r"|apparatus|until the (?:gas|foam)|microwave|balloon|still)\b",
    re.IGNORECASE,
)


def closing(vessel: Vessel, line: int = 0) -> tuple[int, int, int] | None:
    """Where a vessel is closed, from a line of the text on: number of the sentence, start, end."""
    for number, sentence in enumerate(vessel.sentences):
        if sentence.text.line < line or _VENTS.search(sentence.text.chars):
            continue
        found = _CLOSES.search(sentence.text.chars)
        if found is not None:
            return number, found.start(), found.end()
    return None
