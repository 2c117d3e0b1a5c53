"""Buffers: computed pH, the ratio of the pair, the useful range."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from soplint.bench import Bench, Preparation, Relation
from soplint.bench.acidity import ph_relations, reach_of
from soplint.bench.numbers import shown
from soplint.causes import Cause
from soplint.checks.registry import Disagreement, Judgement, rule
from soplint.checks.wording import judgement
from soplint.findings.model import Finding, Interval

_MINOR_GAP = 0.3  # beyond the allowance by less than this: minor
_RANGE = 1.0  # useful range: pKa' ± 1
_FAR = 1.45  # beyond this nothing of the capacity is left (4 % of the maximum)


def _disagreeing(bench: Bench) -> Iterator[tuple[Relation, Relation | None]]:
    """pH relations that disagree, each with the same relation after exchanging the pair's amounts."""
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


def _exchanged(bench: Bench, relation: Relation) -> Relation | None:
    """The relation as it would be with the amounts of the two buffer salts exchanged."""
    preparation = relation.preparation
    assert preparation is not None
    pair = [
        index
        for index, taken in enumerate(preparation.taken)
        if taken.dose.material is not None
        and taken.dose.material.match is not None
        and any(s.acid_system for s in taken.dose.material.match.substances)
    ]
    if len(pair) != 2:
        return None
    first, second = (preparation.taken[i] for i in pair)
    if first.dose.amount.dimension != second.dose.amount.dimension:
        return None
    swapped = list(preparation.taken)
    swapped[pair[0]] = replace(first, dose=replace(first.dose, amount=second.dose.amount))
    swapped[pair[1]] = replace(second, dose=replace(second.dose, amount=first.dose.amount))
    other: Preparation = replace(preparation, taken=swapped)
    order = bench.preparations.index(preparation)
    for candidate in ph_relations(other, bench.facts, order):
        if candidate.tested.key == relation.tested.key and candidate.agrees:
            return candidate
    return None


def _grade(relation: Relation) -> str:
    return "minor" if abs(relation.deviation) < _MINOR_GAP else "major"


@rule("buffers.computed-ph-meets-stated")
def computed_ph_meets_stated(bench: Bench) -> Iterator[Judgement]:
    """The pH computed from everything in the vessel is the stated one."""
    for relation, exchanged in _disagreeing(bench):
        if exchanged is not None:
            continue
        value = relation.computed.value
        message = f"pH {relation.tested.measure.nominal:g} stated, pH {value:.2f} computed"
        made = judgement(
            bench, relation, "buffers.computed-ph-meets-stated", _grade(relation), message,
            amend=False,
        )  # fmt: skip
        yield replace(made, finding=replace(made.finding, computed=f"pH {value:.2f}"))


@rule("buffers.pair-ratio-meets-ph")
def pair_ratio_meets_ph(bench: Bench) -> Iterator[Judgement]:
    """Acid form and base form stand in the ratio that the pH needs."""
    for relation, exchanged in _disagreeing(bench):
        if exchanged is None:
            continue
        value = relation.computed.value
        message = (
            f"amounts of the pair give pH {value:.2f}, not {relation.tested.measure.nominal:g};"
            " exchanged they fit"
        )
        cause = Cause(
            "swapped-pair", "amounts of acid form and base form exchanged", True
        )
        made = judgement(
            bench, relation, "buffers.pair-ratio-meets-ph", _grade(relation), message, cause,
            amend=False,
        )  # fmt: skip
        yield replace(made, finding=replace(made.finding, computed=f"pH {value:.2f}"))


@rule("buffers.target-near-pka")
def target_near_pka(bench: Bench) -> Iterator[Judgement]:
    """A buffer is used within one unit of its pKa'."""
    for order, preparation in enumerate(bench.preparations):
        reach = reach_of(preparation, bench.facts, order)
        if reach is None or reach.distance <= _RANGE:
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

