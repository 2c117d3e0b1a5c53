"""Where things stand and go: containers, drains, flames, fume cupboards."""

from __future__ import annotations

import re
from collections.abc import Iterator

from soplint.bench import Bench
from soplint.bench.contents import Content
from soplint.bench.streams import asides, things_in
from soplint.bench.vessels import Vessel, vessels
from soplint.checks.hazard_words import (
    HOOD,
    absence,
    at,
    excerpt,
    hazard,
    place,
    plain,
    protection,
    said,
)
from soplint.checks.registry import Judgement, rule
from soplint.notation.phrases import Dose, Material, Sentence
from soplint.substances.model import Substance

_STORES = re.compile(
    r"\b(?:store|stored|storage|keep|keeps|kept|fill into|bottle)\b", re.IGNORECASE
)
_GLASS = re.compile(
    r"\b(?:glass(?:ware)?|borosilicate|ground[- ]glass|ground stopper|ground joint|schott|duran)\b",
    re.I,
)
_PLASTIC = re.compile(
    r"\b(?:plastic|polyethylene|polypropylene|hdpe|ldpe|ptfe|pfa|pe|pp|teflon|not glass)\b", re.I
)
_SHORT = re.compile(
    r"\b(?:same day|one day|at once|immediately|fresh|discard after use|24 h)\b", re.I
)


@rule("hazards.container-resists")
def container_resists(bench: Bench) -> Iterator[Judgement]:
    """Hydrofluoric acid and strong alkali are not kept in glass."""
    done: set[tuple[int, int]] = set()
    owners = {id(s): vessel for vessel in vessels(bench) for s in vessel.sentences}
    for read in bench.blocks:
        for sentence in read.sentences:
            vessel = owners.get(id(sentence), _NOWHERE)
            chars = sentence.text.chars
            if not (_STORES.search(chars) and _GLASS.search(chars)) or _PLASTIC.search(chars):
                continue
            if _SHORT.search(chars) or _aside(sentence, _GLASS):
                continue
            attack = _attacks(sentence, vessel)
            hit = _GLASS.search(chars)
            assert hit is not None
            key = (sentence.text.line, hit.start())
            if attack is None or key in done:
                continue
            done.add(key)
            yield hazard(
                "hazards.container-resists",
                "major",
                sentence.text,
                hit.start(),
                hit.end(),
                f"{attack} attacks glass; {hit.group().lower()} is named as its container",
                working="polyethylene or fluoropolymer (incompatibilities table: hydrofluoric acid, hydroxide of 1 mol/L and above, with glass)",
            )


_NOWHERE = Vessel("", "steps")


def _attacks(sentence: Sentence, vessel: Vessel) -> str | None:
    """What in the sentence, else in its vessel, attacks glass."""
    own = [
        p.material if isinstance(p, Dose) else p
        for p in sentence.phrases
        if isinstance(p, (Dose, Material))
    ]
    named = [m for m in own if m is not None and m.match is not None and not m.is_water]
    for material in named:
        assert material.match is not None
        substance = material.match.substances[0]
        if substance.family == "HF" or substance.family == "NH4HF2":
            return substance.name.rsplit(" ", 2)[0] if "%" in substance.name else substance.name
        if substance.kind == "strong base" and _molar(material, substance) >= 1.0:
            return substance.name.split(",")[0]
    if named:
        return None
    for content in vessel.contents:
        substance_ = content.substance
        if "hydrofluoric" in content.classes:
            return "hydrofluoric acid"
        if (
            "strong-base" in content.classes
            and substance_ is not None
            and content.moles
            and vessel.volume
        ):
            if substance_.family in ("NaOH", "KOH") and content.moles / vessel.volume >= 0.99:
                return plain(content)
    return None


def _molar(material: Material, substance: Substance) -> float:
    """mol/L that is printed with a base; 0 where none is."""
    for measure in (*material.strengths, *material.bracket):
        if measure.dimension in ("molarity", "normality"):
            return measure.base
        if measure.dimension == "fraction" and substance.molar_mass:
            return measure.base * 1000 / substance.molar_mass
    return 0.0


def _aside(sentence: Sentence, pattern: re.Pattern[str]) -> bool:
    hit = pattern.search(sentence.text.chars)
    return hit is not None and any(a <= hit.start() < b for a, b in asides(sentence.text.chars))


_DRAIN = re.compile(
    r"\b(?:(?:in)?to|down|into)\s+(?:the|a)\s+(?:\w+\s+)?(?:sink|drain|sewer|basin)\b|\bsink with (?:plenty of )?water\b"
    r"|\bdown the (?:sink|drain)\b",
    re.IGNORECASE,
)
_CONSENT = re.compile(r"\bconsent|permit|licen[cs]e|authori[sz]ation|local rules", re.IGNORECASE)
_NO_DRAIN = {
    *(
        "cyanide",
        "sulfide",
        "azide",
        "hydrofluoric",
        "mercury",
        "heavy-metal",
        "dichromate",
        "nitrite",
    ),
    *("organic-solvent", "chlorinated-solvent", "strong-acid", "strong-base"),
}
_LOW, _HIGH = 6.0, 9.0  # local limits on pH unless a site gives its own (rules table)


@rule("hazards.drain-under-consent")
def drain_under_consent(bench: Bench) -> Iterator[Judgement]:
    """What goes down the drain is covered by a written consent and lies within its pH limits."""
    done: set[int] = set()
    for vessel in reversed(vessels(bench)):  # containers first: they know what was poured
        for sentence in vessel.sentences:
            chars = sentence.text.chars
            hit = _DRAIN.search(chars)
            if (
                hit is None
                or id(sentence) in done
                or _CONSENT.search(chars)
                or _warns(chars, hit.start())
            ):
                continue
            found = _poured(sentence, vessel, hit.start())
            acid = _ph_outside(sentence)
            if not found and acid is None:
                continue
            done.add(id(sentence))
            what = plain(found[0]) if found else f"a solution of pH {acid:g}"
            grade = "critical" if any(c.classes & {"cyanide", "azide"} for c in found) else "major"
            yield hazard(
                "hazards.drain-under-consent",
                grade,
                sentence.text,
                hit.start(),
                hit.end(),
                f"{what} goes to the drain and no written consent is named",
                working=f"class of the contents; pH limits {_LOW:g} to {_HIGH:g} unless the site gives its own (40 CFR 403.5, 261.22, from memory)",
            )


def _warns(chars: str, start: int) -> bool:
    return any(a <= start < b for a, b in asides(chars))


def _poured(sentence: Sentence, vessel: Vessel, end: int) -> list[Content]:
    own = [c for c in things_in(sentence.text, 0, end, 0, loose=True) if c.classes & _NO_DRAIN]
    if own:
        return own
    if vessel.kind == "stream":
        return [c for c in vessel.contents if c.classes & _NO_DRAIN and not c.stream]
    return []


def _ph_outside(sentence: Sentence) -> float | None:
    for measure in sentence.measures:
        if measure.dimension == "pH" and measure.value is not None:
            if not _LOW <= measure.value <= _HIGH:
                return measure.value
    return None


_IGNITION = re.compile(
    r"\b(?:hot ?plate|bunsen|burner|open flame|naked flame|flame|heating mantle|open air)\b", re.I
)
_SAFEGUARD = re.compile(
    r"\b(?:water bath|fume|hood|no flame|without flame|reflux|condenser|spark|explosion)", re.I
)
_FLAMMABLE = ("H224", "H225")


@rule("hazards.flammable-away-from-ignition")
def flammable_away(bench: Bench) -> Iterator[Judgement]:
    """Highly flammable liquids are not heated on an open hot plate or near a flame."""
    for read in bench.blocks:
        for sentence in read.sentences:
            chars = sentence.text.chars
            hit = _IGNITION.search(chars)
            if hit is None or _SAFEGUARD.search(chars) or _warns(chars, hit.start()):
                continue
            for phrase in sentence.phrases:
                material = phrase.material if isinstance(phrase, Dose) else phrase
                if not isinstance(material, Material) or material.match is None:
                    continue
                substance = material.match.substances[0]
                if not set(_FLAMMABLE) & set(substance.hazards) or _thin(material):
                    continue
                if not {"HEAT"} & sentence.kinds and "evaporat" not in chars.lower():
                    continue
                yield hazard(
                    "hazards.flammable-away-from-ignition",
                    "major",
                    sentence.text,
                    phrase.start,
                    phrase.end,
                    f"{substance.name} is highly flammable and is heated at a {hit.group().lower()}",
                    working=f"{', '.join(h for h in substance.hazards if h in _FLAMMABLE)} with a heating step and no bath or hood (Regulation (EC) 1272/2008)",
                )
                break


def _thin(material: Material) -> bool:
    """Whether a printed strength leaves little of the solvent."""
    shares = [m.base for m in (*material.strengths, *material.bracket) if m.dimension == "fraction"]
    return bool(shares) and max(shares) < 0.3


# family: % w/w from which the vapour matters (practice; Prudent Practices in the Laboratory, from memory)
_VOLATILE = {"HCl": 25.0, "NH3": 20.0, "HNO3": 60.0, "HBr": 40.0, "C2HF3O2": 90.0, "CH2O2": 85.0}
_LITTLE = 0.005  # L: less than this says nothing


@rule("hazards.volatile-in-fume-cupboard")
def volatile_in_cupboard(bench: Bench) -> Iterator[Judgement]:
    """Concentrated volatile acids and ammonia are handled in a fume cupboard."""
    words = protection(bench).words
    if HOOD.search(words) or (excerpt(bench) and not said(_ON_BENCH, words)):
        return
    for vessel in vessels(bench):
        for content in vessel.contents:
            substance = content.substance
            if substance is None or vessel.kind != "steps" or content.stream or content.diluted:
                continue
            limit = _VOLATILE.get(substance.family)
            if (
                limit is None
                or (content.percent or 0.0) < limit
                or (content.litres or 0.0) < _LITTLE
            ):
                continue
            yield at(
                "hazards.volatile-in-fume-cupboard",
                absence(bench, _ON_BENCH),
                content,
                f"{plain(content)} of {content.percent:.3g} % gives off corrosive vapour in {place(vessel)}; no fume cupboard is named",
                working=f"{(content.litres or 0) * 1000:.3g} mL of {limit:g} % w/w and above (Prudent Practices, from memory)",
            )
            return


_ON_BENCH = re.compile(r"\bon the (?:open )?bench\b|\bin the open\b", re.IGNORECASE)
