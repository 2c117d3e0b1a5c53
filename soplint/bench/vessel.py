"""Every vessel step by step: what goes in, the volume, the temperature and the pH after it.

``vessels`` walks through the steps of each preparation in their order.  A pH is computed only where
everything in the vessel is known; before the make-up the volume is the sum of the liquids and
0.6 mL for each gram of solid.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from soplint.bench.adjusting import SOLID_ML_PER_G
from soplint.bench.filled import Bottles, Contents, Finished, set_to
from soplint.bench.numbers import shown
from soplint.bench.passages import bottles_of
from soplint.bench.preparation import Adjusted, Made, Preparation, Taken

if TYPE_CHECKING:
    from soplint.bench.carry_out import Bench

ROOM_TEMPERATURE = 25.0  # °C, where the text states none


@dataclass(frozen=True, slots=True)
class Step:
    """One step: its line, what is done, and the vessel after it."""

    line: int
    does: str
    litres: float | None
    degrees: float
    ph: float | None
    holds: tuple[tuple[str, float], ...]  # mol by name; empty where a part is unknown
    note: str = ""


@dataclass(frozen=True, slots=True)
class Vessel:
    """A preparation with its steps."""

    name: str
    line: int
    steps: tuple[Step, ...]


@dataclass(slots=True)
class _State:
    contents: Contents | None = field(default_factory=dict)
    litres: float = 0.0
    degrees: float = ROOM_TEMPERATURE
    note: str = ""
    wet: bool = False  # a liquid is there


def vessels(bench: Bench) -> Iterator[Vessel]:
    """The vessels of a document, in its order."""
    bottles = bottles_of(bench)
    for order, preparation in enumerate(bench.preparations):
        steps = tuple(_steps(preparation, order, bottles))
        if steps:
            yield Vessel(preparation.name or "(unnamed)", steps[0].line, steps)


def _steps(preparation: Preparation, order: int, bottles: Bottles) -> Iterator[Step]:
    state = _State()
    events: list[tuple[int, int, Taken | Adjusted | Made]] = [
        *((t.step, t.dose.start, t) for t in preparation.taken if not t.late),
        *((a.step, a.set_ph.start, a) for a in preparation.adjusted),
        *((m.step, m.to.start, m) for m in preparation.made),
    ]
    finished = bottles.finished(order)
    for _, _, event in sorted(events, key=lambda e: (e[0], e[1])):
        if isinstance(event, Taken):
            does = _take(event, state, order, bottles)
        elif isinstance(event, Adjusted):
            does = _adjust(event, state, finished)
        else:
            does = _make_up(event, state, preparation)
        yield _after(event.text.line, does, state)


def _take(taken: Taken, state: _State, order: int, bottles: Bottles) -> str:
    dose, material = taken.dose, taken.dose.material
    words = material.words if material is not None and material.words else "of it"
    if dose.amount.dimension == "volume":
        state.litres += dose.amount.base
        state.wet = True
    elif dose.amount.dimension == "mass":
        state.litres += dose.amount.base * SOLID_ML_PER_G / 1000
    options = bottles.brought(taken, order)
    if options is None:
        state.contents, state.note = None, f"contents of {words} not known"
    elif state.contents is not None:
        for name, mol in options[0].items():
            state.contents[name] = state.contents.get(name, 0.0) + mol
    return f"{shown(dose.amount)} {words}"


def _adjust(adjusted: Adjusted, state: _State, finished: Finished | None) -> str:
    set_ph = adjusted.set_ph
    with_ = " or ".join(r.words for r in set_ph.reagents)
    does = f"pH set{f' with {with_}' if with_ else ''}"
    setting = finished.setting if finished is not None else None
    if setting is None or setting.adjusted is not adjusted:
        state.contents, state.note = None, "amount of adjuster not known"
        return does
    state.degrees = setting.degrees[0] if setting.said is not None else ROOM_TEMPERATURE
    if not state.contents or state.litres <= 0:
        return does
    dilute = {name: mol / state.litres for name, mol in state.contents.items()}
    found = set_to(dilute, setting.ph.measure.nominal, setting)
    if found is None:
        state.contents, state.note = None, "the adjuster does not reach the pH"
        return does
    before = state.litres
    for name, mol in found.items():
        more = (mol - dilute.get(name, 0.0)) * before
        if more > 1e-12:
            does += f", {more * 1000:.3g} mmol of {name}"
            known = [s for a in setting.adjusters if a.name == name for s in a.strengths]
            state.litres += more / max(known) if known else 0.0
    state.contents = {name: mol * before for name, mol in found.items()}
    return does


def _make_up(made: Made, state: _State, preparation: Preparation) -> str:
    volume = made.to.volume
    litres = volume.base if volume is not None else None
    if litres is None and preparation.volume is not None:
        litres = preparation.volume.litres
    if litres is not None and litres > 0:
        state.litres, state.wet = litres, True
        return f"made up to {litres * 1000:g} mL"
    return "made up to the mark"


def _after(line: int, does: str, state: _State) -> Step:
    litres = state.litres if state.litres > 0 and state.wet else None
    ph: float | None = None
    holds = tuple(state.contents.items()) if state.contents else ()
    if state.contents and litres is not None:
        from soplint.equilibria import EquilibriumError, solve

        try:
            solution = solve({n: m / litres for n, m in state.contents.items()}, state.degrees)
            ph = solution.pH if solution.ionic_strength <= 2.0 else None
        except EquilibriumError as error:
            return Step(line, does, litres, state.degrees, None, holds, str(error))
    return Step(line, does, litres, state.degrees, ph, holds, state.note)
