"""How much acid or base a pH needs, against what the text says of it.

Kinds of relation made here: ``adjuster`` (the stated quantity of acid or base), ``ph-start`` (the
pH that is expected before it is set) and ``room`` (water taken, against what fits below the mark).
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, replace

from soplint.bench.acidity import ALLOWANCE, DILUTE, NO_BUFFERS, WIDE_ALLOWANCE
from soplint.bench.filled import Adjuster, Bottles, Finished, Setting, adjuster_of
from soplint.bench.portions import portions
from soplint.bench.preparation import Stated, Taken
from soplint.bench.relation import Relation
from soplint.findings.model import Interval
from soplint.notation.phrases import Dose, Material

ABOUT, PLAIN = 0.30, 0.10  # how far a guiding quantity may lie off (design: 10 % to 30 %)
STRONG_SOLUTION = 0.30  # allowance of pH above the tested ionic strength, for amounts only
SOLID_ML_PER_G = 0.6  # low end of 0.6 to 0.9 mL/g, common practice


@dataclass(frozen=True, slots=True)
class Need:
    """mol of adjuster for one litre of the final volume that brings the pH, with its range."""

    name: str
    low: float
    value: float
    high: float
    allowance: float
    working: str


def need_of(finished: Finished, name: str) -> Need | None:
    """What a pH needs of an adjuster, over all readings, temperatures and the allowance of the pH.

    None where the adjuster does not reach the pH.
    """
    from soplint.equilibria import EquilibriumError, adjust

    setting = finished.setting
    if setting is None:
        return None
    ph = setting.ph.measure.nominal
    values: list[float] = []
    allowance = ALLOWANCE
    for start in finished.start:
        for degrees in setting.degrees:
            try:
                exact = adjust(start, ph, {name: 1.0}, degrees)
            except EquilibriumError:
                continue
            allowance = allowance_of(exact.solution)
            values.append(exact.amount)
            for aim in (ph - allowance, ph + allowance):
                try:
                    values.append(adjust(start, aim, {name: 1.0}, degrees).amount)
                except EquilibriumError:
                    values.append(0.0)  # the pH is there without it
    if not values:
        return None
    at = " to ".join(f"{t:g}" for t in setting.degrees)
    working = (
        f"charge balance: {values[0]:.4g} mol of {name} for 1 L bring the contents to"
        f" pH {ph:g} at {at} °C"
    )
    return Need(name, min(values), values[0], max(values), allowance, working)


def allowance_of(solution: object) -> float:
    """Allowance of a computed pH by ionic strength, the uncertainty of its constants added."""
    from soplint.equilibria import Solution
    from soplint.equilibria.validity import OUTSIDE_STRENGTH

    assert isinstance(solution, Solution)
    strength = solution.ionic_strength
    plain = ALLOWANCE if strength <= DILUTE else WIDE_ALLOWANCE
    if strength > OUTSIDE_STRENGTH:
        plain = STRONG_SOLUTION
    return plain + solution.pk_uncertainty


# --- stated quantities of adjuster ------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Guide:
    """A quantity of acid or base that the text states, in mol under each reading."""

    stated: Stated
    adjuster: Adjuster
    moles: tuple[float, ...]
    part: bool  # added before the pH is set: the rest follows


def guides(finished: Finished, bottles: Bottles) -> Iterator[Guide]:
    """Every quantity of adjuster that a preparation states."""
    setting = finished.setting
    if setting is None:
        return
    if setting.adjusted is not None and len(setting.adjusters) == 1:
        adjuster = setting.adjusters[0]
        text = setting.adjusted.text
        for dose in setting.adjusted.set_ph.doses:
            told, place = dose.material, bottles.text_of(dose, text)
            other = adjuster_of(told, bottles.facts) if told is not None and told.words else None
            if other is None or other.name == adjuster.name:
                dose = replace(dose, material=told if other is not None else adjuster.material)
                yield from _guide(Taken(place, dose, 0), other or adjuster, bottles)
        for measure in adjuster.material.bracket:
            if measure.dimension in ("volume", "mass"):
                dose = Dose(measure.start, measure.end, measure, _bare(adjuster.material))
                yield from _guide(Taken(text, dose, 0), adjuster, bottles)
        yield from _aside(finished, adjuster, bottles)
    for taken in finished.guiding:
        found = adjuster_of(taken.dose.material, bottles.facts) if taken.dose.material else None
        if found is not None:
            yield from _guide(taken, found, bottles, part=setting.adjusted is not None)


_TAKES = re.compile(r"\b(?:takes?|needs?|requires?|uses?)\s+(?:about|approx\w*\.?|ca\.?|~)?\s*$")


def _aside(finished: Finished, adjuster: Adjuster, bottles: Bottles) -> Iterator[Guide]:
    """ "(takes about 23 mL)": said beside the instruction and bound to nothing."""
    from soplint.quantities import find_measures

    setting = finished.setting
    assert setting is not None and setting.adjusted is not None
    text, set_ph = setting.adjusted.text, setting.adjusted.set_ph
    if set_ph.doses:
        return
    for measure in find_measures(text.chars):
        if measure.start < set_ph.end or measure.dimension != "volume":
            continue
        if _TAKES.search(text.chars[: measure.start]):
            dose = Dose(measure.start, measure.end, measure, _bare(adjuster.material))
            yield from _guide(Taken(text, dose, 0), adjuster, bottles)


def _bare(material: Material) -> Material:
    """The material without the amounts in its brackets."""
    kept = tuple(m for m in material.bracket if m.dimension not in ("volume", "mass"))
    return replace(material, bracket=kept)


def _guide(
    taken: Taken, adjuster: Adjuster, bottles: Bottles, part: bool = False
) -> Iterator[Guide]:
    amount = taken.dose.amount
    if amount.manner in ("at-most", "at-least") or amount.value is None or amount.base <= 0:
        return
    moles = tuple(p.moles for p in portions(taken, bottles.facts) if p.moles)
    if moles:
        yield Guide(taken.stated, adjuster, moles, part)


def adjuster_relations(finished: Finished, bottles: Bottles) -> Iterator[Relation]:
    """Stated quantities of adjuster against what the pH needs."""
    seen = set()
    for guide in guides(finished, bottles):
        if guide.stated.key in seen:
            continue
        seen.add(guide.stated.key)
        need = need_of(finished, guide.adjuster.name)
        if need is None or need.high <= 0:
            continue
        relation = _tested(guide, need, finished)
        if relation is not None:
            yield relation


def _tested(guide: Guide, need: Need, finished: Finished) -> Relation | None:
    measure = guide.stated.measure
    setting = finished.setting
    assert setting is not None and measure.value is not None
    spread = ABOUT if measure.manner == "about" or guide.part else PLAIN
    best: tuple[float, float] | None = None  # distance from agreement as a factor, mol
    for moles in guide.moles:
        stated = moles / finished.litres
        low, high = need.low / (1 + spread), need.high * (1 + spread)
        factor = 1.0
        if stated < low:
            factor = stated / low
        elif stated > high:
            factor = stated / high
        if best is None or abs(factor - 1) < abs(best[0] - 1):
            best = factor, moles
    assert best is not None
    factor, moles = best
    if guide.part and factor < 1:
        return None  # a first portion: the rest is added when the pH is set
    scale = measure.value / moles * finished.litres  # stated unit for 1 mol per final litre
    agrees = abs(factor - 1) < 1e-9
    value = need.value * scale
    return Relation(
        "adjuster",
        guide.stated,
        guide.adjuster.material.words or guide.adjuster.name,
        Interval(value, measure.unit, need.low * scale, need.high * scale),
        agrees,
        0.0 if agrees else measure.value / value - 1 if value else 1.0,
        f"{need.working}; for {finished.litres * 1000:g} mL {need.value * finished.litres:.4g} mol,"
        f" {value:.3g} {measure.unit} (pH ± {need.allowance:.2f}:"
        f" {need.low * scale:.3g} to {need.high * scale:.3g} {measure.unit})",
        (setting.ph,) if agrees else (),
        preparation=finished.preparation,
        volume=finished.preparation.volume,
        target=setting.ph,
    )


# --- the pH before it is set --------------------------------------------------------------------------

_BEFORE = re.compile(
    r"\b(?:before|initial|starting|untreated|at first|is then|then (?:is|reads?))\b", re.IGNORECASE
)
START_ABOUT, START_PLAIN = 1.0, 0.5  # how far an expected starting pH may lie off


def start_relations(finished: Finished) -> Iterator[Relation]:
    """ "The pH is about 5.2 before adjustment": the contents as they are then."""
    from soplint.equilibria import EquilibriumError, solve

    setting = finished.setting
    if setting is None or setting.adjusted is None or finished.guiding:
        return
    for claimed in finished.preparation.claimed:
        measure = claimed.claim.measure
        if claimed.claim.kind != "pH" or claimed.step > setting.adjusted.step:
            continue
        if measure.value is None or not _BEFORE.search(claimed.text.chars):
            continue
        try:
            values = [solve(start, 25.0).pH for start in finished.start]
        except EquilibriumError:
            continue
        allowed = START_ABOUT if measure.manner == "about" else START_PLAIN
        value = min(values, key=lambda v: abs(v - measure.nominal))
        gap = max(abs(value - measure.nominal) - allowed, 0.0)
        yield Relation(
            "ph-start",
            Stated(claimed.text, measure),
            finished.preparation.name or None,
            Interval(round(value, 2), "pH", round(value - allowed, 2), round(value + allowed, 2)),
            gap == 0,
            gap,
            f"charge balance of {listed(finished.start[0])} at 25 °C: pH {value:.2f}",
            preparation=finished.preparation,
            volume=finished.preparation.volume,
        )


def listed(contents: dict[str, float]) -> str:
    """Contents for a working: "50 mmol/L C4H11NO3 + 29 mmol/L HCl"."""
    return " + ".join(f"{mol * 1000:.4g} mmol/L {name}" for name, mol in contents.items())


# --- room below the mark ------------------------------------------------------------------------------


def room_relations(finished: Finished, bottles: Bottles) -> Iterator[Relation]:
    """Water that is taken, against what the solids and the adjuster leave of the final volume."""
    preparation, setting = finished.preparation, finished.setting
    volume = preparation.volume
    if setting is None or volume is None or volume.provenance not in ("made-up", "mark"):
        return
    if finished.guiding:
        return
    if setting.adjusted is None or setting.adjusted.after_volume or len(setting.adjusters) != 1:
        return
    liquids = [t for t in preparation.taken if t.dose.amount.dimension == "volume" and not t.late]
    waters = [t for t in liquids if t.dose.material is not None and t.dose.material.is_water]
    if len(waters) != 1 or len(liquids) != 1 or len(preparation.made) != 1:
        return
    water = waters[0]
    litres = _adjuster_litres(finished, bottles)
    if litres is None or water.dose.amount.manner == "about":
        return
    grams = sum(t.dose.amount.base for t in preparation.taken if t.dose.amount.dimension == "mass")
    solids = grams * SOLID_ML_PER_G / 1000
    room = finished.litres - solids - litres
    fits = water.dose.amount.base <= room * 1.005
    unit = water.dose.amount
    yield Relation(
        "room",
        water.stated,
        "water",
        Interval(None, unit.unit, 0.0, room / unit.factor),
        fits,
        0.0 if fits else water.dose.amount.base / room - 1,
        f"{finished.litres * 1000:g} mL − {grams:.4g} g × {SOLID_ML_PER_G:g} mL/g −"
        f" {litres * 1000:.3g} mL of {setting.adjusters[0].material.words}"
        f" = {room * 1000:.4g} mL at most",
        preparation=preparation,
        volume=volume,
    )


def _adjuster_litres(finished: Finished, bottles: Bottles) -> float | None:
    """Least volume of the adjuster named that the pH needs, in L; None for a solid or unknown one."""
    setting = finished.setting
    assert setting is not None
    adjuster = setting.adjusters[0]
    printed = any(m.dimension in ("molarity", "fraction") for m in adjuster.material.strengths)
    if not adjuster.strengths or not printed:
        return None
    need = need_of(finished, adjuster.name)
    if need is None:
        return None
    return need.low * finished.litres / max(adjuster.strengths)


def adjuster_volume(finished: Finished) -> tuple[float, float] | None:
    """Volume of adjuster as a share of the final volume, at the strongest and the strength named.

    Where no strength is printed, the strongest is the common concentrate of the acid or 10 mol/L
    of a base, and the other one is 1 mol/L.
    """
    setting = finished.setting
    if setting is None:
        return None
    names = [a.name for a in setting.adjusters] or ["HCl", "NaOH"]
    for name in names:
        need = need_of(finished, name)
        if need is None or need.high <= 0:
            continue
        known = next((a.strengths for a in setting.adjusters if a.name == name), ())
        strongest = max(known, default=12.0 if name == "HCl" else 10.0)
        usual = max(known, default=1.0)
        return need.low / strongest, need.low / usual
    return None


def wrong_way(finished: Finished) -> tuple[Setting, Adjuster, float] | None:
    """A pH that the adjuster leads away from: the setting, the adjuster and the pH it starts at."""
    from soplint.equilibria import EquilibriumError, solve

    setting = finished.setting
    if setting is None or not setting.adjusters or finished.guiding:
        return None
    ph = setting.ph.measure.nominal
    starts: list[float] = []
    for start in finished.start:
        if not _holds_ph(start):
            return None
        for degrees in setting.degrees:
            try:
                starts.append(solve(start, degrees).pH)
            except EquilibriumError:
                return None
            for adjuster in setting.adjusters:
                little = dict(start)
                little[adjuster.name] = little.get(adjuster.name, 0.0) + 1e-3
                try:
                    moved = solve(little, degrees).pH - starts[-1]
                except EquilibriumError:
                    return None
                if moved * (ph - starts[-1]) >= 0:
                    return None  # one of the adjusters named leads towards it
    nearest = min(starts, key=lambda value: abs(value - ph))
    if abs(nearest - ph) < _CLEAR:
        return None
    return setting, setting.adjusters[0], nearest


_WEAK = 2e-3  # mol/L; below this traces and the air decide the pH


def _holds_ph(contents: dict[str, float]) -> bool:
    """Whether a buffer is there in strength, and no metal beside a complexing agent."""
    from soplint.equilibria import EquilibriumError, solve

    try:
        solution = solve(contents)
    except EquilibriumError:
        return False
    buffers = sum(v for name, v in solution.totals.items() if name not in NO_BUFFERS)
    chelating = solution.totals.get("edta", 0.0) > 0.0
    metals = any(solution.charges[ion] > 1 for ion in solution.strong)
    return (buffers >= _WEAK or chelating) and not (chelating and metals)


_CLEAR = 0.7  # nearer to the target the start may lie on either side of it
