"""Pairs of substances that react dangerously in one vessel or one waste container."""

from __future__ import annotations

import re
from collections.abc import Iterator

from soplint.bench import Bench
from soplint.bench.contact import Contact, closing, contacts
from soplint.bench.streams import asides
from soplint.bench.vessels import Vessel, vessels
from soplint.checks.hazard_words import (
    PURPOSE,
    Protection,
    at,
    hazard,
    place,
    plain,
    protection,
)
from soplint.checks.registry import Judgement, rule
from soplint.findings.model import SEVERITIES
from soplint.notation.phrases import Sentence

_OWN = {  # these rules speak about waste containers themselves
    "hazards.azide-apart-from-acid-and-metal",
    "hazards.cyanide-alkaline",
    "hazards.sulfide-alkaline",
    "hazards.hypochlorite-alone",
}
_LITTLE_HYDROGEN = 1.0  # L, convention (gases.csv)
_OPEN_REMARK = 1.0  # L of carbon dioxide from which a remark is worth its line


def severity(contact: Contact, shield: Protection) -> str | None:
    """Class of a contact; None: nothing to say.

    A list or table without a volume made up may name separate things: at most minor, it asks for
    the wording.
    """
    grade = _grade(contact, shield)
    vessel = contact.vessel
    if vessel.kind in ("list", "table") and vessel.litres is None and grade != "remark":
        return "minor" if grade else None
    return grade


def _grade(contact: Contact, shield: Protection) -> str | None:
    """Class by gas, amount and protection (issue of the hazards, point 3)."""
    gas, litres = contact.gas, contact.litres
    vessel = contact.vessel
    if contact.pair.rule == "hazards.peroxide-controlled" and shield.hood:
        if _DROPS.search(vessel.words):
            return "remark"  # a digestion by design, named as such
    if gas is not None and gas.listed:
        if contact.vessel.kind != "stream" and _controlled(contact.vessel, shield):
            return "minor"
        return "major" if litres is not None and litres < gas.grave else "critical"
    if gas is not None and gas.key == "CO2":
        return "remark" if litres is None or litres >= _OPEN_REMARK else None
    if gas is not None and gas.key == "H2" and litres is not None and litres < _LITTLE_HYDROGEN:
        return "remark"
    if gas is not None and gas.key == "NH3" and shield.hood:
        return "minor"
    return contact.pair.severity.split()[0]


_DROPS = re.compile(r"\b(?:dropwise|in drops|small portions|drop by drop)\b")


def _controlled(vessel: Vessel, shield: Protection) -> bool:
    """Purpose, trap and fume cupboard are all stated."""
    return bool(PURPOSE.search(vessel.words)) and shield.trap and shield.hood


def _rule(contact: Contact) -> str:
    if contact.vessel.kind == "stream" and contact.pair.rule not in _OWN:
        return "hazards.waste-streams-apart"
    return contact.pair.rule


def speak(bench: Bench, name: str) -> Iterator[Judgement]:
    """One finding for each place, the gravest."""
    shield = protection(bench)
    best: dict[tuple[int, int, int], tuple[str, Contact]] = {}
    for contact in contacts(bench):
        if _rule(contact) != name:
            continue
        grade = severity(contact, shield)
        late = contact.late
        spot = (*late.text.place(late.start), late.end)
        if grade is None:
            continue
        held = best.get(spot)
        if held is None or SEVERITIES.index(grade) < SEVERITIES.index(held[0]):
            best[spot] = (grade, contact)
    for grade, contact in best.values():
        yield _judgement(name, grade, contact)


def _judgement(name: str, grade: str, contact: Contact) -> Judgement:
    gas, litres, pair = contact.gas, contact.litres, contact.pair
    product = gas.name if gas is not None else pair.product
    met = f"{plain(contact.early)} and {plain(contact.late)} meet in {place(contact.vessel)}"
    much = (
        f", up to {litres:.3g} L of gas at 25 °C" if litres is not None and gas is not None else ""
    )
    source = f"{pair.class_a} with {pair.class_b}: {pair.hazard} ({pair.source}; {pair.status})"
    if pair.condition:
        source += f"; {pair.condition}"
    ph = f"; stated pH {contact.vessel.ph:g}" if contact.vessel.ph is not None else ""
    return at(
        name,
        grade,
        contact.late,
        f"{met}: {product}{much}",
        working=source + ph,
        others=((contact.early, "meets it"),),
        computed=f"{litres:.3g} L" if litres is not None else None,
        see=(gas.source,) if gas is not None and gas.source else (),
    )


@rule("hazards.no-toxic-gas")
def no_toxic_gas(bench: Bench) -> Iterator[Judgement]:
    """Nothing meets in a vessel that sets free toxic gas."""
    yield from speak(bench, "hazards.no-toxic-gas")
    yield from _autoclaved(bench)


_AUTOCLAVE = re.compile(r"\bautoclav(?:e|ed|ing)\b(?!\s+(?:bag|tape|bottle|waste))", re.IGNORECASE)
_NEVER_HOT = {"hypochlorite", "azide", "cyanide", "sulfide"}


def _autoclaved(bench: Bench) -> Iterator[Judgement]:
    """What sets free toxic gas in steam does not go into the autoclave."""
    for vessel in vessels(bench):
        held = [c for c in vessel.contents if c.classes & _NEVER_HOT]
        for sentence in vessel.sentences if held else ():
            found = _AUTOCLAVE.search(sentence.text.chars)
            before = [c for c in held if c.text.line <= sentence.text.line]
            if found is None or not before or _covered(sentence, found.start()):
                continue
            yield hazard(
                "hazards.no-toxic-gas",
                "critical",
                sentence.text,
                found.start(),
                found.end(),
                f"{plain(before[0])} goes into the autoclave: toxic gas in hot steam",
                working="autoclave with hypochlorite, azide or cyanide (published university incident reports; partly confirmed)",
                others=((before[0], "is in it"),),
            )


def _covered(sentence: Sentence, start: int) -> bool:
    return any(a <= start < b for a, b in asides(sentence.text.chars))


@rule("hazards.oxidiser-apart-from-organic")
def oxidiser_apart(bench: Bench) -> Iterator[Judgement]:
    """Oxidisers do not meet organic substances."""
    yield from speak(bench, "hazards.oxidiser-apart-from-organic")


@rule("hazards.azide-apart-from-acid-and-metal")
def azide_apart(bench: Bench) -> Iterator[Judgement]:
    """Azide meets no acid, no heavy metal and no chlorinated solvent."""
    yield from speak(bench, "hazards.azide-apart-from-acid-and-metal")


@rule("hazards.hypochlorite-alone")
def hypochlorite_alone(bench: Bench) -> Iterator[Judgement]:
    """Hypochlorite meets no acid, ammonia, guanidine, urea or alcohol."""
    yield from speak(bench, "hazards.hypochlorite-alone")
    yield from _carried_over(bench)


_BATH = re.compile(
    r"\b(?:in(?:to)?|to)\s+(?:the|an?|\d[\d.,]*\s?%)\s+(?P<what>bleach|hypochlorite|acid|ammonia)\b",
    re.IGNORECASE,
)
_DIPS = re.compile(r"\b(?:soak|dip|immers|transfer|put|place|move)\w*", re.IGNORECASE)
_RINSES = re.compile(r"\b(?:rins|wash|water|drain)\w*", re.IGNORECASE)
_NO_RINSE = re.compile(r"\bwithout (?:rins|wash)", re.IGNORECASE)


def _carried_over(bench: Bench) -> Iterator[Judgement]:
    """Things go from a bleach bath to an acid bath, or back, without a rinse that is said."""
    last: str | None = None
    for read in bench.blocks:
        if read.block.kind == "heading":
            last = None
            continue
        for sentence in read.sentences:
            chars = sentence.text.chars
            bare = _NO_RINSE.search(chars)
            found = _BATH.search(chars) if _DIPS.search(chars) else None
            if found is None or (_covered(sentence, found.start()) and not bare):
                last = None if _RINSES.search(chars) else last
                continue
            what = found["what"].lower()
            bleach = what in ("bleach", "hypochlorite")
            met = last is not None and bleach != (last in ("bleach", "hypochlorite"))
            if met and (bare or not _RINSES.search(chars[: found.start()])):
                yield hazard(
                    "hazards.hypochlorite-alone",
                    "major" if bare else "minor",
                    sentence.text,
                    found.start(),
                    found.end(),
                    f"things go from {last} to {what} and no rinse is named between: chlorine or chloramines from what clings to them",
                    working="order of the baths; say the rinse (Regulation (EC) 1272/2008, EUH031)",
                )
            last = None if _RINSES.search(chars[found.end() :]) else what


@rule("hazards.cyanide-alkaline")
def cyanide_alkaline(bench: Bench) -> Iterator[Judgement]:
    """Cyanide stays above pH 10.5."""
    yield from speak(bench, "hazards.cyanide-alkaline")


@rule("hazards.sulfide-alkaline")
def sulfide_alkaline(bench: Bench) -> Iterator[Judgement]:
    """Sulfide stays above pH 9."""
    yield from speak(bench, "hazards.sulfide-alkaline")


@rule("hazards.waste-streams-apart")
def waste_streams_apart(bench: Bench) -> Iterator[Judgement]:
    """Streams that react are not collected in one container."""
    yield from speak(bench, "hazards.waste-streams-apart")


@rule("hazards.peroxide-controlled")
def peroxide_controlled(bench: Bench) -> Iterator[Judgement]:
    """Strong hydrogen peroxide meets no acetone, metal salt or closed cap."""
    for found in speak(bench, "hazards.peroxide-controlled"):
        if not _closed_at(bench, found):
            yield found


def _closed_at(bench: Bench, found: Judgement) -> bool:
    """Whether the finding about the closed vessel already speaks about this contact."""
    return any(
        contact.late.text.span(contact.late.start, contact.late.end) == found.finding.span
        and _shut(contact) is not None
        for contact in contacts(bench)
        if contact.gas is not None
    )


def _shut(contact: Contact) -> tuple[int, int, int] | None:
    """Where the vessel is closed once both are in it: sentence, start, end."""
    if contact.vessel.kind == "stream":
        return None
    return closing(contact.vessel, contact.late.text.line)


_SLIGHT = 0.1  # bar of overpressure below which a closed vessel is left alone (convention)


@rule("hazards.gas-can-escape")
def gas_can_escape(bench: Bench) -> Iterator[Judgement]:
    """A vessel in which gas is set free stays open or vented."""
    said: set[int] = set()
    for contact in contacts(bench):
        if contact.gas is None or contact.gas.key not in ("CO2", "H2", "O2", "Cl2", "NO2"):
            continue
        shut = _shut(contact)
        if shut is None or id(contact.vessel) in said:
            continue
        pressure, how = _pressure(contact)
        if pressure is not None and pressure < _SLIGHT:
            continue
        said.add(id(contact.vessel))
        number, start, end = shut
        yield hazard(
            "hazards.gas-can-escape",
            "critical",
            contact.vessel.sentences[number].text,
            start,
            end,
            f"{plain(contact.early)} and {plain(contact.late)} set free {contact.gas.name} in a closed vessel{how}",
            working=f"{contact.pair.class_a} with {contact.pair.class_b} ({contact.pair.source}; {contact.pair.status})",
            others=((contact.late, "sets gas free"),),
            computed=f"{contact.litres:.3g} L" if contact.litres is not None else None,
        )
    for found in speak(bench, "hazards.gas-can-escape"):
        if not _closed_at(bench, found):
            yield found


def _pressure(contact: Contact) -> tuple[float | None, str]:
    """Overpressure in bar, V_gas / V_headspace, where the size of the vessel is printed."""
    litres, vessel = contact.litres, contact.vessel
    if litres is None:
        return None, ""
    if vessel.ware is None or vessel.ware <= (vessel.volume or 0.0):
        return None, f": up to {litres:.3g} L"
    head = vessel.ware - (vessel.volume or 0.0)
    return (
        litres / head,
        f": {litres:.3g} L into {head * 1000:.3g} mL, {litres / head:.2g} bar over",
    )
