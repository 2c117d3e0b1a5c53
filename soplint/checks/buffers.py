"""Buffers: computed pH, the ratio of the pair, the useful range."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from soplint.bench import Bench, Relation
from soplint.bench.acidity import exchanged_ph, mixtures, reach_of
from soplint.bench.numbers import shown
from soplint.bench.preparation import Preparation, Stated
from soplint.bench.remedies import amounts_for, pairs_in_range, systems_of
from soplint.causes import Cause
from soplint.checks.registry import Disagreement, Judgement, rule
from soplint.checks.wording import judgement
from soplint.findings.model import Finding, Interval, Related

_MINOR_GAP = 0.3  # beyond the allowance by less than this: minor
_RANGE = 1.0  # useful range: pKa' ± 1
_FAR = 1.45  # beyond this nothing of the capacity is left (4 % of the maximum)


def _disagreeing(bench: Bench) -> Iterator[tuple[Relation, bool]]:
    """pH relations that disagree, each with whether exchanging the pair's amounts mends it."""
    for relation in bench.relations:
        if relation.kind != "ph" or relation.agrees or relation.preparation is None:
            continue
        if any(
            r.preparation is relation.preparation
            and not r.agrees
            and r.kind in ("mass", "stock", "concentrate")
            for r in bench.relations
        ):
            continue  # a wrong amount of the same preparation is reported by itself
        yield relation, _exchanged(bench, relation)


_CLEAR = 0.4  # near the pKa' an exchange hardly shows: below this it is no exchange


def _exchanged(bench: Bench, relation: Relation) -> bool:
    """Whether the stated pH comes out when acid form and base form exchange their amounts."""
    preparation, value = relation.preparation, relation.computed.value
    assert preparation is not None and value is not None
    stated = relation.tested.measure
    if abs(stated.nominal - value) < _CLEAR:
        return False
    order = bench.preparations.index(preparation)
    allowance = (relation.computed.high - relation.computed.low) / 2
    # nearer by far than as written: any exchange moves the pH a little towards the pKa'
    near = min(allowance, abs(stated.nominal - value) / 3)
    return any(
        abs(other - stated.nominal) <= near
        for other in exchanged_ph(preparation, bench.facts, order)
    )


def _grade(relation: Relation) -> str:
    return "minor" if abs(relation.deviation) < _MINOR_GAP else "major"


@rule("buffers.computed-ph-meets-stated")
def computed_ph_meets_stated(bench: Bench) -> Iterator[Judgement]:
    """The pH computed from everything in the vessel is the stated one."""
    for relations in _by_preparation(bench, exchanged=False):
        worst = max(relations, key=lambda r: abs(r.deviation))
        value = worst.computed.value
        message = f"pH {worst.tested.measure.nominal:g} stated, pH {value:.2f} computed"
        yield _judgement(bench, worst, relations, "buffers.computed-ph-meets-stated", message, None)


@rule("buffers.pair-ratio-meets-ph")
def pair_ratio_meets_ph(bench: Bench) -> Iterator[Judgement]:
    """Acid form and base form stand in the ratio that the pH needs."""
    cause = Cause("swapped-pair", "amounts of acid form and base form exchanged", True)
    for relations in _by_preparation(bench, exchanged=True):
        worst = max(relations, key=lambda r: abs(r.deviation))
        value = worst.computed.value
        message = (
            f"amounts of the pair give pH {value:.2f}, not {worst.tested.measure.nominal:g};"
            " exchanged they fit"
        )
        yield _judgement(bench, worst, relations, "buffers.pair-ratio-meets-ph", message, cause)


def _by_preparation(bench: Bench, exchanged: bool) -> Iterator[list[Relation]]:
    """Disagreeing pH statements, together for each preparation: one cause, one finding."""
    groups: dict[int, list[Relation]] = {}
    for relation, swapped in _disagreeing(bench):
        if swapped is exchanged:
            groups.setdefault(id(relation.preparation), []).append(relation)
    yield from groups.values()


def _judgement(
    bench: Bench,
    worst: Relation,
    relations: list[Relation],
    name: str,
    message: str,
    cause: Cause | None,
) -> Judgement:
    made = judgement(bench, worst, name, _grade(worst), message, cause, amend=False)
    others = [r for r in relations if r is not worst]
    also = tuple(
        Related(r.tested.span, shown(r.tested.measure), "the same pH is stated here")
        for r in others
    )
    finding = replace(
        made.finding,
        computed=f"pH {worst.computed.value:.2f}",
        working=f"{made.finding.working}{_amounts(bench, worst)}",
        related=also + made.finding.related,
    )
    more = tuple(Disagreement(r.tested, r.computed, r.working) for r in others)
    return Judgement(finding, made.disproved + more)


def _reached(bench: Bench, stated: Stated) -> bool:
    """Whether the contents give the pH that is stated: a reference buffer need not hold much."""
    return any(r.kind == "ph" and r.agrees and r.tested.key == stated.key for r in bench.relations)


def _amounts(bench: Bench, relation: Relation) -> str:
    """The amounts of the pair that give the stated pH at the strength that is there."""
    preparation = relation.preparation
    if preparation is None or preparation.volume is None:
        return ""
    order = bench.preparations.index(preparation)
    for mixture in mixtures(preparation, bench.facts, order):
        systems = systems_of(mixture.contents)
        if len(systems) != 1:
            return ""
        system, strength = next(iter(systems.items()))
        ph, litres = relation.tested.measure.nominal, preparation.volume.litres
        amounts = amounts_for(system, ph, strength, litres, 25.0)
        return f"; for pH {ph:g} at this strength: {amounts}" if amounts else ""
    return ""


def _instead(preparation: Preparation, ph: float, degrees: float) -> str:
    """Pairs in range of a pH, with the amounts for the stated strength."""
    title, volume = preparation.title, preparation.volume
    molar = [
        t.stated.measure.base
        for t in (title.targets if title is not None else ())
        if t.stated.measure.dimension == "molarity"
    ]
    if not molar or volume is None:
        return ""
    pairs = pairs_in_range(ph, molar[0], volume.litres, degrees)
    return f"; in range of pH {ph:g}: {pairs}" if pairs else ""


@rule("buffers.target-near-pka")
def target_near_pka(bench: Bench) -> Iterator[Judgement]:
    """A buffer is used within one unit of its pKa'."""
    for order, preparation in enumerate(bench.preparations):
        reach = reach_of(preparation, bench.facts, order)
        if reach is None or reach.distance <= _RANGE or _reached(bench, reach.stated):
            continue
        measure = reach.stated.measure
        grade = "major" if reach.distance > _FAR else "minor"
        if reach.system == "tris" and 6.6 <= measure.nominal <= 7.1:
            grade = "remark"  # stacking-gel and neutralising buffers (common practice, no source)
        share = 10 ** (measure.nominal - reach.pka)
        working = (
            f"pKa' of {reach.system} = {reach.pka:.2f} at {reach.temperature:g} °C and ionic strength"
            f" {reach.strength:.2g} mol/kg; |{measure.nominal:g} − {reach.pka:.2f}|"
            f" = {reach.distance:.2f}; base : acid = {share:.3g} : 1"
            f"{_instead(preparation, measure.nominal, reach.temperature)}"
        )
        low, high = reach.pka - _RANGE, reach.pka + _RANGE
        finding = Finding(
            rule="buffers.target-near-pka",
            severity=grade,
            span=reach.stated.span,
            text=shown(measure),
            message=(
                f"{reach.system} hardly buffers at pH {measure.nominal:g}:"
                f" its pKa' is {reach.pka:.2f}"
            ),
            stated=shown(measure),
            computed=f"pH {low:.1f} to {high:.1f}",
            working=working,
        )
        interval = Interval(None, "pH", round(low, 3), round(high, 3))
        yield Judgement(finding, (Disagreement(reach.stated, interval, working),))
