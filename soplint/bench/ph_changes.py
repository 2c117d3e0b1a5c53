"""What becomes of a pH: at another temperature, after dilution, after acid or base is added.

Kinds of relation made here: ``ph-at``, ``ph-diluted``, ``ph-loaded``.  The pH that was set is the
anchor; only its change is computed, so that the uncertainty of the constants mostly cancels.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import TYPE_CHECKING

from soplint.bench.acidity import ALLOWANCE, NO_BUFFERS, ROOM, WIDE_ALLOWANCE
from soplint.bench.adjusting import listed
from soplint.bench.filled import (
    STRONG_ACIDS,
    STRONG_BASES,
    Bottles,
    Contents,
    Finished,
    of_label,
    of_system,
)
from soplint.bench.passages import Passage, Reading, passages, readings_of
from soplint.bench.portions import candidates
from soplint.bench.preparation import Preparation, Stated, Taken
from soplint.bench.relation import Relation
from soplint.findings.model import Interval
from soplint.notation.phrases import Dose, Material, SetPH

if TYPE_CHECKING:
    from soplint.bench.carry_out import Bench

_APART = 3.0  # K; nearer temperatures are the same
_USUAL = 0.05  # mol/L, where a sentence about a buffer prints no strength


def change_relations(bench: Bench, bottles: Bottles) -> Iterator[Relation]:
    """Every statement of the document about the change of a pH."""
    closed = {r.tested.key for r in bench.relations if r.kind == "ph"}
    for order, preparation in enumerate(bench.preparations):
        yield from _aimed_elsewhere(preparation, order, bottles)
        yield from _diluted(preparation, order, bottles, closed)
    for passage in passages(bench):
        if "pH" not in passage.chars and "ph" not in passage.chars.lower():
            continue
        readings = readings_of(passage.sentence)
        if not readings:
            continue
        loaded = _loaded(passage, readings, bench, bottles)
        if loaded is not None:
            yield loaded
            continue
        if not passage.heading:
            yield from _at_temperatures(passage, readings, bench, bottles)


# --- temperature -----------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class _Anchor:
    """A solution whose pH is known at one temperature."""

    contents: Contents
    degrees: tuple[float, ...]
    ph: Stated | None
    words: str
    preparation: Preparation | None = None


_INSTRUCTION = re.compile(
    r"\b(?:adjust\w*|calibrat\w*|standardi[sz]\w*|set the ph|bring|titrat\w*)\b", re.IGNORECASE
)


def _at_temperatures(
    passage: Passage, readings: list[Reading], bench: Bench, bottles: Bottles
) -> Iterator[Relation]:
    """ "The buffer has pH 8.6 at 4 °C and pH 7.7 at 37 °C"."""
    if all(r.degrees is None for r in readings) or _INSTRUCTION.search(passage.chars):
        return
    if any(isinstance(p, (SetPH, Dose)) for p in passage.sentence.phrases):
        return
    text = passage.sentence.text
    anchor = _of_sentence(passage, readings)
    if anchor is not None:
        readings = readings[1:]
    else:
        anchor = _of_preparation(passage, bench, bottles)
    if anchor is None:
        return
    for reading in readings:
        if reading.degrees is not None:
            relation = _moved(anchor, Stated(text, reading.ph), Stated(text, reading.degrees))
            if relation is not None:
                yield relation


def _of_sentence(passage: Passage, readings: list[Reading]) -> _Anchor | None:
    """ "50 mmol/L Tris pH 8.0 at 25 °C has pH 8.6 at 4 °C": the first pH is the anchor."""
    first = readings[0]
    if len(readings) < 2 or first.degrees is None or first.ph.value is None:
        return None
    materials = [p for p in passage.sentence.phrases if isinstance(p, Material)]
    named = [m for m in materials if _system_of(m) is not None]
    if not named and passage.before is not None:
        before = [p for p in passage.before.phrases if isinstance(p, Material)]
        named = [m for m in before if _system_of(m) is not None]
    if len({_system_of(m) for m in named}) != 1:
        return None
    molar = [m.base for m in named[0].strengths if m.dimension == "molarity"]
    strength = molar[0] if len(molar) == 1 else _USUAL
    contents = of_system(named[0], strength, first.ph.nominal, first.degrees.nominal)
    if contents is None:
        return None
    stated = Stated(passage.sentence.text, first.ph)
    return _Anchor(contents, (first.degrees.nominal,), stated, named[0].words)


def _system_of(material: Material) -> str | None:
    """The one buffer system that a name means."""
    systems = {s.acid_system for s in candidates(material) if s.acid_system}
    systems -= NO_BUFFERS
    return systems.pop() if len(systems) == 1 else None


def _of_preparation(passage: Passage, bench: Bench, bottles: Bottles) -> _Anchor | None:
    """The preparation whose steps stand before the sentence, unless it names another buffer."""
    if passage.order is None:
        return None
    preparation = bench.preparations[passage.order]
    own = _systems(preparation, passage.order, bottles)
    named = {_system_of(p) for p in passage.sentence.phrases if isinstance(p, Material)} - {None}
    if own is not None and not named <= own:
        return None
    finished = bottles.finished(passage.order)
    if finished is not None:
        contents = next(finished.contents(), None)
        if contents is None:
            return None
        setting = finished.setting
        if setting is not None:
            return _Anchor(contents, setting.degrees, setting.ph, preparation.name, preparation)
        if not _buffered(contents):
            return None
        title = preparation.title
        said = title.temperature if title is not None else None
        degrees = (said.nominal,) if said is not None else (20.0, 25.0)
        return _Anchor(contents, degrees, None, preparation.name, preparation)
    return _of_title(preparation)


def _systems(preparation: Preparation, order: int, bottles: Bottles) -> set[str | None] | None:
    finished = bottles.finished(order)
    if finished is None:
        title = preparation.title
        return {_system_of(m) for m in title.materials} if title is not None else None
    from soplint.equilibria import EquilibriumError, acid_systems_of

    found: set[str | None] = set()
    for name in finished.start[0]:
        try:
            found.update(acid_systems_of(name))
        except EquilibriumError:
            continue
    return found


def _buffered(contents: Contents) -> bool:
    """Whether a buffer system is there beside its counter-form."""
    from soplint.equilibria import EquilibriumError, solve

    try:
        solution = solve(contents)
        return bool(set(solution.totals) - NO_BUFFERS) and solution.buffer_capacity > 1e-3
    except EquilibriumError:
        return False


def _of_title(preparation: Preparation) -> _Anchor | None:
    """A buffer whose contents are not all known: by strength and pH of its title."""
    title = preparation.title
    if title is None or title.ph is None or title.ph.measure.value is None:
        return None
    if title.source == "document":
        return None
    systems = [m for m in title.materials if _system_of(m) is not None]
    if len(systems) != 1 or title.temperature is None:
        return None
    molar = [m.base for m in systems[0].strengths if m.dimension == "molarity"]
    strength = molar[0] if len(molar) == 1 else _USUAL
    degrees = title.temperature.nominal
    contents = of_system(systems[0], strength, title.ph.measure.nominal, degrees)
    if contents is None:
        return None
    return _Anchor(contents, (degrees,), title.ph, preparation.name, preparation)


def _moved(anchor: _Anchor, stated: Stated, degrees: Stated) -> Relation | None:
    """The pH of the anchor at another temperature, against the stated one."""
    from soplint.equilibria import EquilibriumError, at_temperature

    used = degrees.measure.nominal
    if stated.measure.value is None or not 0 <= used <= 60:
        return None
    if anchor.ph is not None and min(abs(used - t) for t in anchor.degrees) < _APART:
        return None
    values: list[float] = []
    try:
        made = 25.0 if anchor.degrees == ROOM else anchor.degrees[0]
        solution = at_temperature(anchor.contents, made, used)
        base = at_temperature(anchor.contents, made, made).pH
        for set_at in anchor.degrees if anchor.ph is not None else (made,):
            # set at 20 or at 25 °C: the shift counts from there
            values.append(solution.pH + base - at_temperature(anchor.contents, made, set_at).pH)
    except EquilibriumError:
        return None
    if solution.ionic_strength > 0.7:
        return None
    allowance = ALLOWANCE if solution.ionic_strength <= 0.2 else WIDE_ALLOWANCE
    allowance += abs(used - made) * _COEFFICIENT
    start = f"pH {anchor.ph.measure.nominal:g}" if anchor.ph is not None else f"pH {base:.2f}"
    at = " to ".join(f"{t:g}" for t in anchor.degrees)
    working = (
        f"charge balance of {listed(anchor.contents)} with pKa at {used:g} °C: {start} at {at} °C"
        f" becomes pH {values[-1]:.2f}"
    )
    if abs(used - made) > 1:
        working += f" ({(solution.pH - base) / (used - made):+.3f} for each °C)"
    inputs = (degrees,) if anchor.ph is None else (anchor.ph, degrees)
    return _relation(
        "ph-at", stated, anchor.words, values, allowance, working, inputs, anchor.preparation
    )


_COEFFICIENT = 0.002  # uncertainty of a temperature coefficient of pH, 1/K (Tris 0.028 ± 0.002)


def _relation(
    kind: str,
    stated: Stated,
    of: str,
    values: list[float],
    allowance: float,
    working: str,
    inputs: tuple[Stated, ...],
    preparation: Preparation | None,
) -> Relation:
    measure = stated.measure
    low, high = min(values) - allowance, max(values) + allowance
    value = min(values, key=lambda v: abs(v - measure.nominal))
    gap = max(measure.low - high, low - measure.high, 0.0)
    if gap < 1e-9:
        gap = 0.0
    return Relation(
        kind,
        stated,
        of or None,
        Interval(round(value, 2), "pH", round(low, 3), round(high, 3)),
        gap == 0.0,
        gap if measure.nominal >= value else -gap,
        f"{working} (± {allowance:.2f})",
        inputs if gap == 0.0 else (),
        preparation=preparation,
        volume=preparation.volume if preparation is not None else None,
        target=stated,
    )


def _aimed_elsewhere(preparation: Preparation, order: int, bottles: Bottles) -> Iterator[Relation]:
    """A title "pH 8.0 at 4 °C" over a pH that is set to 8.0 at 25 °C."""
    title = preparation.title
    if title is None or title.ph is None or title.temperature is None or not preparation.adjusted:
        return
    if title.source == "document" or title.temperature.start < title.ph.measure.end:
        return
    finished = bottles.finished(order)
    if finished is None or finished.setting is None or finished.setting.said is None:
        return
    setting = finished.setting
    if abs(setting.degrees[0] - title.temperature.nominal) < _APART:
        return
    contents = next(finished.contents(), None)
    if contents is not None and setting.ph.key != title.ph.key:
        anchor = _Anchor(contents, setting.degrees, setting.ph, preparation.name, preparation)
        moved = _moved(anchor, title.ph, Stated(title.text, title.temperature))
        if moved is not None:
            yield moved


# --- dilution ----------------------------------------------------------------------------------------


def _diluted(
    preparation: Preparation,
    order: int,
    bottles: Bottles,
    closed: set[tuple[int, int, int, int]],
) -> Iterator[Relation]:
    """ "The dilution has pH 7.2": mixed from solutions whose pH is known."""
    if preparation.adjusted:
        return
    stated = [
        Stated(c.text, c.claim.measure)
        for c in preparation.claimed
        if c.claim.kind == "pH" and not _elsewhere(c.text.chars, c.claim.measure.end)
    ]
    title = preparation.title
    if title is not None and title.ph is not None and title.source != "document":
        stated.append(title.ph)
    stated = [s for s in stated if s.key not in closed and s.measure.value is not None]
    doses = [t for t in preparation.taken if not t.late and not _is_water(t)]
    if not stated or not doses or not all(_from_bottle(t) for t in doses):
        return
    finished = bottles.finished(order)
    if finished is None:
        return
    sources = [bottles.brought(t, order) for t in doses]
    yield from _judged(finished, stated, doses, sources, title.ph if title else None)


_HOT = re.compile(r"\d\s*°|\bcold room\b|\bincubator\b", re.IGNORECASE)


def _elsewhere(chars: str, end: int) -> bool:
    """Whether a sentence speaks of another temperature: a matter of its own."""
    return bool(_HOT.search(chars))


def _is_water(taken: Taken) -> bool:
    return taken.dose.material is not None and taken.dose.material.is_water


def _from_bottle(taken: Taken) -> bool:
    """Whether a dose is a volume of a solution that has a pH of its own."""
    material = taken.dose.material
    if taken.dose.amount.dimension != "volume" or material is None:
        return False
    return material.ph is not None or not any(
        m.dimension in ("molarity", "fraction") for m in material.strengths
    )


def _judged(
    finished: Finished,
    stated: list[Stated],
    doses: list[Taken],
    sources: list[list[Contents] | None],
    aimed: Stated | None,
) -> Iterator[Relation]:
    from soplint.equilibria import EquilibriumError, solve

    strong = _strongest(doses, sources)
    if strong is None:
        return
    values: list[float] = []
    for contents in finished.start:
        if not _buffered(contents):
            return
        for degrees in ROOM:
            try:
                solution = solve(contents, degrees)
            except EquilibriumError:
                return
            values.append(solution.pH)
    allowance = ALLOWANCE if strong <= 0.2 else WIDE_ALLOWANCE
    working = (
        f"charge balance of {listed(finished.start[0])} after dilution, ionic strength"
        f" {solution.ionic_strength:.2g} mol/kg: pH {values[-1]:.2f}"
    )
    for one in stated:
        inputs = tuple(t.stated for t in doses)
        kind = "ph-diluted" if one is not aimed else "ph-diluted-title"
        made = _relation(
            kind, one, finished.preparation.name, values, allowance, working, inputs,
            finished.preparation,
        )  # fmt: skip
        # above the tested ionic strength the shift is not known well enough to object to
        if made.agrees or (len(doses) == 1 and strong <= 0.7):
            yield made


def _strongest(doses: list[Taken], sources: list[list[Contents] | None]) -> float | None:
    """Largest ionic strength (mol/kg) among the solutions that are mixed."""
    from soplint.equilibria import EquilibriumError, solve

    largest = 0.0
    for taken, options in zip(doses, sources, strict=True):
        if not options:
            return None
        contents = {name: mol / taken.dose.amount.base for name, mol in options[0].items()}
        if not contents:
            continue
        try:
            largest = max(largest, solve(contents).ionic_strength)
        except EquilibriumError:
            return None
    return largest


# --- acid or base added to a buffer ----------------------------------------------------------------


def _loaded(
    passage: Passage, readings: list[Reading], bench: Bench, bottles: Bottles
) -> Relation | None:
    """ "Adding 10 mL of 1 mol/L HCl to 1 L of this buffer gives pH 6.85"."""
    phrases = passage.sentence.phrases
    if any(isinstance(p, SetPH) for p in phrases):
        return None
    doses = [p for p in phrases if isinstance(p, Dose) and p.amount.dimension == "volume"]
    if len(doses) != 2 or passage.heading:
        return None
    acid = next((d for d in doses if _strong(d.material)), None)
    other = next((d for d in doses if d is not acid), None)
    if acid is None or other is None or acid.material is None or other.material is None:
        return None
    strength = [m for m in acid.material.strengths if m.dimension == "molarity"]
    stated = Stated(passage.sentence.text, readings[-1].ph)
    if len(strength) != 1 or stated.measure.value is None or other.material.is_water:
        return None
    if readings[-1].ph.start < max(acid.end, other.start):
        return None
    found = _receiver(other.material, passage, bench, bottles)
    if found is None:
        return None
    from soplint.equilibria import EquilibriumError, after_addition

    contents, words, preparation = found
    meant = candidates(acid.material)[0]
    values: list[float] = []
    for degrees in ROOM:
        try:
            solution = after_addition(
                contents, other.amount.base * 1000, {meant.family: strength[0].base},
                acid.amount.base * 1000, degrees,
            )  # fmt: skip
        except EquilibriumError:
            return None
        values.append(solution.pH)
    if solution.ionic_strength > 0.7:
        return None
    allowance = ALLOWANCE if solution.ionic_strength <= 0.2 else WIDE_ALLOWANCE
    mmol = acid.amount.base * strength[0].base * 1000
    working = (
        f"{listed(contents)}, {other.amount.base * 1000:g} mL with {mmol:.3g} mmol of"
        f" {meant.family}: charge balance gives pH {values[-1]:.2f}, capacity left"
        f" {solution.buffer_capacity:.2g} mol/L per pH unit"
    )
    text = passage.sentence.text
    inputs = (Stated(text, acid.amount), Stated(text, strength[0]), Stated(text, other.amount))
    return _relation("ph-loaded", stated, words, values, allowance, working, inputs, preparation)


def _strong(material: Material | None) -> bool:
    if material is None:
        return False
    return any(s.family in STRONG_ACIDS | STRONG_BASES for s in candidates(material))


def _receiver(
    material: Material, passage: Passage, bench: Bench, bottles: Bottles
) -> tuple[Contents, str, Preparation | None] | None:
    """The buffer that acid or base is added to: by its label, else one of this document."""
    labelled = of_label(material)
    if labelled is not None:
        return labelled, material.words, None
    named = _system_of(material)
    begun = [
        order
        for order, preparation in enumerate(bench.preparations)
        if preparation.taken
        and preparation.taken[0].text.line <= passage.sentence.text.line
        and not _is_load(preparation, passage)
    ]
    for order in reversed(begun):
        finished = bottles.finished(order)
        if finished is None:
            return None
        contents = next(finished.contents(), None)
        if contents is None:
            return None
        if named is not None and named not in (
            _systems(bench.preparations[order], order, bottles) or set()
        ):
            continue
        if not _buffered(contents):
            continue
        return contents, bench.preparations[order].name, bench.preparations[order]
    return None


def _is_load(preparation: Preparation, passage: Passage) -> bool:
    """Whether a preparation is nothing but the addition that the sentence describes."""
    return all(t.text.line == passage.sentence.text.line for t in preparation.taken)
