"""What becomes of a pH: in the cold, after dilution, under a load of acid or base."""

from __future__ import annotations

import re
from collections.abc import Iterator

from soplint.bench import Bench, Relation
from soplint.bench.passages import bottles_of
from soplint.bench.remedies import strength_for_load
from soplint.checks.registry import Judgement, rule
from soplint.checks.telling import about_ph

_MINOR_GAP = 0.3  # beyond the allowance by less than this: minor


def _disagreeing(bench: Bench, *kinds: str) -> Iterator[Relation]:
    for relation in bench.relations:
        if relation.kind in kinds and not relation.agrees:
            yield relation


@rule("buffers.ph-holds-at-temperature")
def ph_holds_at_temperature(bench: Bench) -> Iterator[Judgement]:
    """A pH stated for another temperature is the one that the buffer has there."""
    for relation in _disagreeing(bench, "ph-at"):
        value = relation.computed.value
        assert value is not None
        stated = relation.tested.measure.nominal
        grade = "minor" if abs(relation.deviation) < _MINOR_GAP else "major"
        message = f"pH {stated:g} stated at another temperature, pH {value:.2f} computed"
        remedy = f"for pH {stated:g} there, set the pH {abs(value - stated):.2f}"
        remedy += " lower" if value > stated else " higher"
        yield about_ph(bench, relation, "buffers.ph-holds-at-temperature", grade, message, remedy)


_CHECKED = re.compile(
    r"\b(?:check|verif\w*|confirm\w*|adjust\w*|correct\w*|measure the ph|set the ph)", re.IGNORECASE
)


@rule("buffers.dilution-ph-meets-stated")
def dilution_ph_meets_stated(bench: Bench) -> Iterator[Judgement]:
    """The pH stated for a dilution is the one that the diluted buffer has."""
    for relation in _disagreeing(bench, "ph-diluted", "ph-diluted-title"):
        if _CHECKED.search(relation.tested.text.chars):
            continue
        value = relation.computed.value
        assert value is not None
        stated = relation.tested.measure.nominal
        grade = "minor" if relation.kind == "ph-diluted" else "remark"
        message = f"pH {stated:g} stated for the dilution, pH {value:.2f} computed"
        direction = "lower" if value > stated else "higher"
        remedy = (
            f"for pH {stated:g} after dilution set the concentrate about"
            f" {abs(value - stated):.2f} {direction}, or adjust after dilution"
        )
        yield about_ph(bench, relation, "buffers.dilution-ph-meets-stated", grade, message, remedy)


@rule("buffers.capacity-bears-load")
def capacity_bears_load(bench: Bench) -> Iterator[Judgement]:
    """The pH stated after acid or base is added is the one that the buffer can hold."""
    for relation in _disagreeing(bench, "ph-loaded"):
        value = relation.computed.value
        assert value is not None
        stated = relation.tested.measure.nominal
        grade = "minor" if abs(relation.deviation) < _MINOR_GAP / 2 else "major"
        message = f"pH {stated:g} stated after the addition, pH {value:.2f} computed"
        yield about_ph(
            bench,
            relation,
            "buffers.capacity-bears-load",
            grade,
            message,
            _stronger(bench, relation),
        )


_FORMULA = re.compile(r"mmol of (\w+):")
_AMOUNTS = re.compile(r"([\d.]+) mL with ([\d.e+-]+) mmol")


def _stronger(bench: Bench, relation: Relation) -> str:
    """How strong the buffer would have to be to hold the stated pH."""
    if relation.preparation is None or relation.preparation not in bench.preparations:
        return ""
    bottles = bottles_of(bench)
    finished = bottles.finished(bench.preparations.index(relation.preparation))
    contents = next(finished.contents(), None) if finished is not None else None
    acid, amounts = _FORMULA.search(relation.working), _AMOUNTS.search(relation.working)
    if contents is None or acid is None or amounts is None:
        return ""
    litres, mol = float(amounts.group(1)) / 1000, float(amounts.group(2)) / 1000
    factor = strength_for_load(
        contents, litres, acid.group(1), mol, 0.001, relation.tested.measure.nominal
    )
    if factor is None:
        return ""
    return f"the buffer would have to be {factor:.2g} times as strong to hold the stated pH"
