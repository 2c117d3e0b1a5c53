"""Heat of dilution, of dissolving and of neutralisation, from the amounts in a vessel."""

from __future__ import annotations

import re
from collections.abc import Iterator

from soplint.bench import Bench, Stated
from soplint.bench.contents import Content
from soplint.bench.vessels import Vessel, vessels
from soplint.checks.hazard_words import CAREFUL, at, hazard, place, plain, protection, said
from soplint.checks.registry import Disagreement, Judgement, rule
from soplint.equilibria.heats import (
    heat_of_neutralisation,
    heat_of_solution,
    integral_heat,
    rise_on_diluting,
    rise_on_neutralising,
)
from soplint.findings.model import Interval
from soplint.intake.model import Text

SILENT = 15.0  # K: below this rise the rules say nothing (issue of the hazards, no source)
_BOILS = 80.0  # K above 20 °C
_BURNS = 40.0  # °C above room temperature: what is touched burns (common practice, no source)
_WATER = 18.015
_SOLUTES = ("H2SO4", "NaOH", "KOH", "HCl")


def dilution_rise(vessel: Vessel, content: Content) -> float | None:
    """K by which diluting or dissolving one content warms the vessel, adiabatic.

    The water is that which the text adds beside it, or the volume made up to where none is named.
    None when an amount is missing or no heats are held for the substance.
    """
    substance = content.substance
    if substance is None or substance.family not in _SOLUTES or not content.moles:
        return None
    mass = content.moles * (substance.molar_mass or 0.0)
    percent = content.percent or 100.0
    if substance.family in ("NaOH", "KOH") and substance.state != "solid" and percent < 30:
        return None
    before = mass * (100.0 / percent - 1.0) if percent < 100.0 else 0.0
    water = 1000.0 * sum(
        c.litres or 0.0 for c in vessel.contents if c is not content and not c.diluted
    )
    if not any(c.water and c.litres for c in vessel.contents):
        water = 0.0  # nothing says how much water is there; the volume made up to does
    if not water and vessel.litres is not None:
        # made up: the volume less that of the concentrate, or of the solid (about 2 g/mL)
        own = 1000.0 * content.litres if content.litres else mass / 2.0
        water = max(0.0, 1000.0 * vessel.litres - own)
    if not water:
        return None
    return rise_on_diluting(substance.family, content.moles, mass, before, water)


def neutralisation_rise(vessel: Vessel) -> tuple[float, Content, Content] | None:
    """K by which strong acid and strong base warm each other, adiabatic; with the two."""
    acids = [c for c in vessel.contents if "strong-acid" in c.classes]
    bases = [c for c in vessel.contents if "strong-base" in c.classes]
    if not acids or not bases:
        return None
    given = [c.protons for c in acids]
    taken = [c.protons for c in bases]
    volume = sum(c.litres or 0.0 for c in vessel.contents)
    if any(x is None for x in (*given, *taken)) or not volume:
        return None
    moles = min(sum(x or 0.0 for x in given), sum(x or 0.0 for x in taken))
    solid = sum(c.grams or 0.0 for c in bases if c.litres is None)
    rise = rise_on_neutralising(moles, 1000.0 * volume + solid)
    for base in bases:
        substance = base.substance
        if base.litres is None and substance is not None and substance.family in ("NaOH", "KOH"):
            heat = -heat_of_solution(substance.family) * 1000.0 * (base.moles or 0.0)
            rise += heat / (4.18 * (1000.0 * volume + solid))
    return rise, acids[-1], bases[-1]


def _careful(bench: Bench, vessel: Vessel) -> bool:
    """Cooling, portions or slow addition are said, in the vessel's steps or for the whole text."""
    if CAREFUL.search(vessel.words):
        return True
    return said(_ALWAYS, protection(bench).words)


_ALWAYS = re.compile(
    r"\b(?:cool (?:during|while|all)|always (?:cool|in portions)|cool during mixing|in an ice bath)\b"
)


@rule("hazards.heat-of-dilution-controlled")
def heat_of_dilution(bench: Bench) -> Iterator[Judgement]:
    """Strong acid and alkali are diluted with cooling or in portions where it gets hot."""
    for vessel in vessels(bench):
        if vessel.kind == "stream" or neutralisation_rise(vessel) is not None:
            continue
        for content in vessel.contents:
            rise = dilution_rise(vessel, content)
            if rise is None or rise < SILENT:
                continue
            if _careful(bench, vessel):
                break
            # a list of parts states no steps: it asks for the wording only
            grade = "remark"
            if vessel.kind == "steps":
                grade = "major" if rise >= _BURNS else "minor"
            yield at(
                "hazards.heat-of-dilution-controlled",
                grade,
                content,
                f"{plain(content)} warms {place(vessel)} by about {rise:.0f} °C; no cooling or portions are named",
                working=_dilution_working(vessel, content, rise),
                computed=f"{rise:.0f} °C",
            )


def _dilution_working(vessel: Vessel, content: Content, rise: float) -> str:
    substance = content.substance
    assert substance is not None and content.moles is not None
    heat = integral_heat(substance.family, 100.0)
    boils = "; it can boil" if rise > _BOILS else ""
    return (
        f"ΔT = n·(ΔH2 - ΔH1)/(m·c): {content.moles:.3g} mol {substance.family}, "
        f"{heat:.0f} kJ/mol at high dilution, adiabatic: {rise:.0f} °C (integral heats of solution, "
        f"NBS Circular 500, from memory){boils}"
    )


@rule("hazards.heat-of-neutralisation-controlled")
def heat_of_neutralisation_controlled(bench: Bench) -> Iterator[Judgement]:
    """Acid and alkali meet with cooling or in portions, and a stated rise is the computed one."""
    for vessel in vessels(bench):
        found = neutralisation_rise(vessel)
        if found is None or vessel.kind == "stream":
            continue
        rise, acid, base = found
        working = (
            f"ΔT = n·{-heat_of_neutralisation():.1f} kJ/mol/(m·4.18 J/(g K)), adiabatic: "
            f"{plain(acid)} with {plain(base)}: {rise:.0f} °C (Goldberg, Kishore & Lennen 2002)"
        )
        claim = _claimed(vessel)
        if claim is not None:
            stated, text = claim
            high = max(stated.measure.high, stated.measure.nominal)
            if rise - high > max(3.0, 0.3 * rise):
                yield _understated(stated, text, rise, working)
                continue
        if rise >= SILENT and not _careful(bench, vessel) and claim is None:
            late = max((acid, base), key=lambda c: (c.step, c.start))
            yield at(
                "hazards.heat-of-neutralisation-controlled",
                "major" if vessel.kind == "steps" else "remark",
                late,
                f"neutralisation warms {place(vessel)} by about {rise:.0f} °C; no cooling or portions are named",
                working=working,
                computed=f"{rise:.0f} °C",
            )


_RISES = re.compile(r"\b(?:rise|rises|warms?|increases?|goes up|heats up)\b", re.IGNORECASE)


def _claimed(vessel: Vessel) -> tuple[Stated, Text] | None:
    """The temperature rise that the text states: "rises by about 2 °C"."""
    for sentence in vessel.sentences:
        found = _RISES.search(sentence.text.chars)
        if found is None:
            continue
        for measure in sentence.measures:
            between = sentence.text.chars[found.end() : measure.start]
            if measure.dimension in ("temperature", "temperature-difference") and re.fullmatch(
                r"\s*(?:itself\s+)?by\s+(?:only\s+)?(?:about|around|some|approximately|ca\.?)?\s*",
                between,
            ):
                return Stated(sentence.text, measure), sentence.text
    return None


def _understated(stated: Stated, text: Text, rise: float, working: str) -> Judgement:
    measure = stated.measure
    made = hazard(
        "hazards.heat-of-neutralisation-controlled",
        "major",
        text,
        measure.start,
        measure.end,
        f"temperature rise understated: about {rise:.0f} °C computed",
        working=working,
        computed=f"{rise:.0f} °C",
    )
    computed = Interval(rise, measure.unit, 0.8 * rise, 1.2 * rise)
    return Judgement(made.finding, (Disagreement(stated, computed, working),))


_HOT = re.compile(r"\b(?:heat|boil|digest|reflux)\w*\b|\b\d{3} ?°C", re.IGNORECASE)
_COOLED = re.compile(
    r"\b(?:cool\w*|cold|ice|room temperature|dilut\w*|dispens\w*|closed still|slowly|automat\w*"
    r"|distillation unit|below \d\d ?°)\b",
    re.IGNORECASE,
)


@rule("hazards.digest-cooled-before-alkali")
def digest_cooled(bench: Bench) -> Iterator[Judgement]:
    """A sulfuric acid digest is cooled and diluted before strong alkali is added."""
    for vessel in vessels(bench):
        acids = [c for c in vessel.contents if "sulfuric" in c.classes and (c.percent or 0) >= 50]
        for base in vessel.contents:
            strong = "strong-base" in base.classes and (base.percent or 0.0) > 20.0
            before = [a for a in acids if a.step < base.step]
            if not strong or not before:
                continue
            steps = " ".join(
                s.text.chars
                for s in vessel.sentences
                if before[0].text.line <= s.text.line <= base.text.line
            )
            if _HOT.search(steps) and not _COOLED.search(steps.replace("hot digest", "")):
                yield at(
                    "hazards.digest-cooled-before-alkali",
                    "critical",
                    base,
                    "strong alkali reaches a hot sulfuric acid digest that was neither cooled nor diluted: it boils at once",
                    working="order of steps: acid, heat, alkali (40 CFR 265 Appendix V, acid with base)",
                    others=((before[0], "the acid"),),
                )
