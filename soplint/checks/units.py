"""Units: dimensions, thousand-fold slips, printed molar masses."""

from __future__ import annotations

from collections.abc import Iterator

from soplint.bench import Bench, Relation
from soplint.causes import likely_cause
from soplint.checks.grouping import common_factor
from soplint.checks.registry import Judgement, rule
from soplint.checks.wording import computed_text, judgement


@rule("units.no-thousandfold-slip")
def no_thousandfold_slip(bench: Bench) -> Iterator[Judgement]:
    """A stated amount is not a thousand times what the other numbers need."""
    grouped = common_factor(bench)
    seen = set()
    for relation in bench.relations:
        if relation.agrees or relation.exact or relation.tested.key in seen:
            continue
        if id(relation) in grouped or relation.kind in ("ph", "parts", "total", "columns"):
            continue
        cause = likely_cause(relation, bench)
        if cause is None or cause.kind != "factor-thousand":
            continue
        if bench.ledger.verdict(relation.tested) == "agrees":
            continue
        seen.add(relation.tested.key)
        message = (
            f"thousand-fold slip: {_stated(relation)} of {relation.of or 'it'} stated,"
            f" {computed_text(relation)} computed"
        )
        yield judgement(bench, relation, "units.no-thousandfold-slip", "major", message, cause)


def _stated(relation: Relation) -> str:
    measure = relation.tested.measure
    return relation.tested.text.chars[measure.start : measure.end]


@rule("units.molar-mass-agrees")
def molar_mass_agrees(bench: Bench) -> Iterator[Judgement]:
    """A printed molar mass is that of the substance named."""
    for relation in bench.relations:
        if relation.kind == "molar-mass" and not relation.agrees:
            cause = likely_cause(relation, bench)
            grade = "minor" if abs(relation.deviation) < 0.01 else "major"
            message = (
                f"molar mass of {relation.of}: {_stated(relation)} stated,"
                f" {computed_text(relation)} computed"
            )
            yield judgement(bench, relation, "units.molar-mass-agrees", grade, message, cause)


@rule("units.dimensions-match")
def dimensions_match(bench: Bench) -> Iterator[Judgement]:
    """The unit of an amount can be a unit of that amount."""
    for relation in bench.relations:
        if relation.kind == "dimension" and not relation.agrees:
            message = (
                f"{_stated(relation)} of {relation.of}: the unit does not fit, the figure does"
            )
            yield judgement(bench, relation, "units.dimensions-match", "major", message)
