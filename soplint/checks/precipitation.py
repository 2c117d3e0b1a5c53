"""Salts that fall out: ions that do not go together, more than dissolves."""

from __future__ import annotations

import re
from collections.abc import Iterator

from soplint.bench import Bench, Preparation
from soplint.bench.acidity import ROOM
from soplint.bench.adjusting import listed
from soplint.bench.filled import Finished
from soplint.bench.numbers import shown
from soplint.bench.passages import bottles_of, passages_of
from soplint.bench.portions import candidates, portions
from soplint.bench.preparation import Taken
from soplint.checks.registry import Judgement, rule
from soplint.checks.telling import about_passage, about_quantity
from soplint.findings.model import Interval, Related

_MINOR, _MAJOR = 0.7, 1.0  # lg(IAP/Ksp): fivefold, tenfold
# Solids that form within minutes; apatites, calcite and struvite stay away for days in real solutions
# (M9 medium holds 2 mmol/L magnesium beside ammonium and phosphate).
_QUICK = {
    "CaHPO4.2H2O (brushite)",
    "CaSO4.2H2O gypsum",
    "BaSO4",
    "BaCO3",
    "SrSO4",
    "CaF2",
    "CaC2O4.H2O",
    "PbSO4",
}
_HOLDERS = ("edta", "egta", "dtpa", "citrate", "nitrilotriacetate", "pyrophosphate", "tartrate")
_MEANT = re.compile(
    r"precipitat|turbid|cloud|suspen|slurr|filter off|crystal|sediment|milk of|gravimetr|deposit",
    re.IGNORECASE,
)


@rule("buffers.ions-stay-dissolved")
def ions_stay_dissolved(bench: Bench) -> Iterator[Judgement]:
    """Calcium, magnesium and barium stay in solution beside phosphate, sulfate and fluoride."""
    from soplint.equilibria import EquilibriumError, saturation, solve

    bottles = bottles_of(bench)
    for order, preparation in enumerate(bench.preparations):
        if not any(_brings_metal(t) for t in preparation.taken):
            continue
        finished = bottles.finished(order)
        if finished is None or _is_meant(bench, order, preparation):
            continue
        worst: tuple[float, str, str] | None = None
        for contents in finished.contents():
            try:
                solution = solve(contents)
            except EquilibriumError:
                continue
            if any(name in solution.totals for name in _HOLDERS):
                break
            found = [s for s in saturation(solution) if s.solid.name in _QUICK]
            index = found[0].index if found else -9.0
            if worst is None or index < worst[0]:
                words = f"pH {solution.pH:.2f}, {listed(contents)}"
                worst = index, found[0].solid.name if found else "", words
        if worst is not None and worst[0] > _MINOR:
            yield _falls_out(finished, *worst)


def _brings_metal(taken: Taken) -> bool:
    material = taken.dose.material
    if material is None or material.is_water:
        return False
    return any(
        s.formula is not None and re.match(r"(?:Ca|Mg|Ba|Sr|Pb)(?![a-z])", s.formula)
        for s in candidates(material)[:1]
    )


def _is_meant(bench: Bench, order: int, preparation: Preparation) -> bool:
    """Whether the text speaks of a solid: it is meant, or known."""
    title = preparation.title
    if title is not None and _MEANT.search(title.words):
        return True
    return any(_MEANT.search(p.chars) for p in passages_of(bench, order))


def _falls_out(finished: Finished, index: float, solid: str, words: str) -> Judgement:
    taken = [t for t in finished.preparation.taken if _brings_metal(t)]
    stated = taken[-1].stated
    others = tuple(
        Related(t.stated.span, shown(t.stated.measure), "with this in one vessel")
        for t in finished.preparation.taken
        if t is not taken[-1] and t.dose.material is not None and not t.dose.material.is_water
    )
    working = (
        f"{words}: lg(ion activity product / Ksp) of {solid} = {index:.2f},"
        f" {10**index:.3g} times what stays dissolved; add the metal last, diluted, or less of it"
    )
    return about_passage(
        "buffers.ions-stay-dissolved", "major" if index > _MAJOR else "minor", stated.text,
        taken[-1].dose.start, taken[-1].dose.end,
        f"{solid} precipitates: {10**index:.2g} times saturated",
        working, others,
    )  # fmt: skip


# --- solubility --------------------------------------------------------------------------------------------

_COLD, _SURE, _FAR = 1.3, 1.6, 2.0  # at 25 °C up to half as much again dissolves as at 20 °C
# Solubilities that hold for another form, another solvent or a complex only.
_UNSURE = {"SDS", "iodine", "benzoic acid", "EDTA (H4)", "CaSO4", "oxalic acid"}
_WARM = re.compile(
    r"\b(?:warm\w*|heat\w*|hot|boil\w*|saturat\w*|excess|suspen\w*|slurr\w*|undissolved|reflux"
    r"|crystal\w*|until dissolved at|bath)\b",
    re.IGNORECASE,
)
_KEPT_COLD = re.compile(r"\b(?:2|4|5|8)\s*°\s*C\b|refrigerat|\bfridge\b|cold room", re.IGNORECASE)


@rule("amounts.solubility-not-exceeded")
def solubility_not_exceeded(bench: Bench) -> Iterator[Judgement]:
    """No more of a salt is taken than dissolves in the water."""
    bottles = bottles_of(bench)
    for order, preparation in enumerate(bench.preparations):
        volume = preparation.volume
        if volume is None or volume.provenance not in ("made-up", "mark"):
            continue
        if preparation.adjusted or _several(preparation) or volume.litres <= 0:
            continue
        title = preparation.title
        if title is not None and _WARM.search(title.words):
            continue
        if any(_WARM.search(p.chars) for p in passages_of(bench, order)):
            continue
        if bottles.finished(order) is None:
            continue
        cold = any(_KEPT_COLD.search(p.chars) for p in passages_of(bench, order))
        for taken in preparation.taken:
            found = _ratio(taken, volume.litres, bench)
            if found is not None and found[0] > (_COLD if cold else _SURE):
                yield _too_much(taken, *found)


def _several(preparation: Preparation) -> bool:
    """Whether acids, bases or a solvent beside water change what dissolves."""
    acidic = 0
    for taken in preparation.taken:
        material = taken.dose.material
        if taken.late or material is None or material.is_water:
            continue
        if taken.dose.amount.dimension != "mass":
            return True
        acidic += any(s.acid_system is not None or "strong" in s.kind for s in candidates(material))
    return acidic > 1


def _ratio(taken: Taken, litres: float, bench: Bench) -> tuple[float, str, float, float] | None:
    """Amount over solubility at 20 °C, the least over the readings, with substance and g/L."""
    from soplint.equilibria import EquilibriumError, solubility

    if taken.late or taken.dose.amount.dimension != "mass" or taken.dose.material is None:
        return None
    best: tuple[float, str, float, float] | None = None
    for portion in portions(taken, bench.facts):
        substance = portion.substance
        if substance is None or portion.moles is None:
            return None
        if substance.family in _UNSURE or substance.name in _UNSURE:
            return None
        try:
            limit = solubility(substance.family, ROOM[0])
            mass = portion.moles * _anhydrous(substance.family)
        except (EquilibriumError, ValueError):
            return None
        # at most a litre of water in a litre of solution: the ratio is a lower limit
        ratio = mass / (litres * 10) / limit
        if best is None or ratio < best[0]:
            best = ratio, substance.name, mass / litres, limit * 10
    return best


def _anhydrous(family: str) -> float:
    from soplint.substances import FormulaError, molar_mass

    try:
        return molar_mass(family)
    except FormulaError as error:
        raise ValueError(str(error)) from error


def _too_much(taken: Taken, ratio: float, name: str, made: float, limit: float) -> Judgement:
    measure = taken.dose.amount
    most = measure.nominal / ratio
    grade = "major" if ratio > _FAR else "minor"
    working = (
        f"{made:.4g} g/L (without crystal water) against about {limit:.3g} g in a litre of water at"
        f" 20 °C: {ratio:.2g} times what dissolves, less in the cold"
    )
    return about_quantity(
        "amounts.solubility-not-exceeded", grade, taken.stated,
        f"{shown(measure)} of {name} does not dissolve in this volume",
        working, Interval(None, measure.unit, 0.0, most), f"at most {most:.3g} {measure.unit}",
    )  # fmt: skip
