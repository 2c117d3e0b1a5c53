"""Findings made of relations: message, working, cause, amendment, related places."""

from __future__ import annotations

from dataclasses import replace

from soplint.bench import Bench, Relation, Stated
from soplint.bench.parts import fills_up
from soplint.causes import Cause
from soplint.checks.registry import Disagreement, Judgement
from soplint.findings.model import Amendment, Finding, Related
from soplint.quantities.writing import format_like, format_number_like, show


def judgement(
    bench: Bench,
    relation: Relation,
    rule: str,
    severity: str,
    message: str,
    cause: Cause | None = None,
    amend: bool = True,
    caution: str | None = None,
) -> Judgement:
    """The finding about a relation, with its working and what would put it right."""
    tested = relation.tested
    computed = computed_text(relation)
    working = relation.working
    if relation.reading:
        working += f" ({relation.reading})"
    if relation.note:
        working += f"; {relation.note}"
    finding = Finding(
        rule=rule,
        severity=severity,
        span=tested.span,
        text=_text(tested),
        message=message,
        stated=_text(tested),
        computed=computed,
        working=working,
        cause=cause.words if cause else None,
        cause_kind=cause.kind if cause else None,
        amendment=amendment(relation) if amend else None,
        related=related(relation),
        caution=caution,
        see=(),
    )
    return Judgement(finding, (Disagreement(tested, relation.computed, relation.working),))


def computed_text(relation: Relation) -> str:
    """The computed value in the digits and unit of the stated one."""
    value = relation.computed.value
    if value is None:
        return f"{relation.computed.low:g} to {relation.computed.high:g} {relation.computed.unit}"
    measure = relation.tested.measure
    if measure.value is None:
        return show(value, measure.unit)
    neighbour = _neighbour_unit(measure.unit, value / measure.value if measure.value else 0.0)
    if neighbour is not None:
        unit, factor = neighbour
        return format_like(value * factor, replace(measure, unit=unit))
    return format_like(value, measure)


# Units a thousand times larger, for a slip of the prefix.
_LARGER = {
    **{"mg": "g", "µg": "mg", "ng": "µg", "mL": "L", "µL": "mL", "nL": "µL", "g": "kg"},
    **{"mM": "M", "µM": "mM", "nM": "µM", "mmol/L": "mol/L", "µmol/L": "mmol/L"},
    **{"mg/L": "g/L", "µg/L": "mg/L", "µg/mL": "mg/mL", "ng/mL": "µg/mL", "ppb": "ppm"},
}
_SMALLER = {larger: smaller for smaller, larger in _LARGER.items()}


def _neighbour_unit(unit: str, ratio: float) -> tuple[str, float] | None:
    """The unit that the figure stands in rightly when computed / stated is a thousand or its inverse."""
    if abs(ratio / 1000 - 1) < 0.02 and unit in _LARGER:
        return _LARGER[unit], 1e-3
    if abs(ratio * 1000 - 1) < 0.02 and unit in _SMALLER:
        return _SMALLER[unit], 1e3
    return None


def amendment(relation: Relation) -> Amendment | None:
    """The correction of the tested number, where it is the only one that closes the relation."""
    measure = relation.tested.measure
    if measure.value is None or relation.computed.value is None or relation.computed.value <= 0:
        return None
    volume = relation.volume
    if volume is not None and volume.provenance in ("weak", "sum"):
        return None  # the volume is not certain, or moves with the amount
    if relation.kind == "ratio" and volume is None:
        return None
    if relation.preparation is not None and fills_up(relation.preparation):
        return None  # the water would have to change as well
    return Amendment(relation.tested.span, _in_its_own_writing(relation))


def _in_its_own_writing(relation: Relation) -> str:
    """The corrected number in the spelling of unit and spacing that the text has."""
    measure, value = relation.tested.measure, relation.computed.value
    assert value is not None
    written = relation.tested.text.chars[measure.start : measure.end]
    if relation.computed.unit != measure.unit or measure.numeral == (0, 0):
        return format_like(value, replace(measure, unit=relation.computed.unit))
    if _neighbour_unit(measure.unit, value / measure.value if measure.value else 0.0):
        return computed_text(relation)
    comma = "," in written
    first, last = (offset - measure.start for offset in measure.numeral)
    return written[:first] + format_number_like(value, measure, comma) + written[last:]


def related(relation: Relation) -> tuple[Related, ...]:
    """The other numbers of the relation."""
    seen = {relation.tested.key}
    found = []
    for stated in relation.inputs:
        if stated.key not in seen:
            seen.add(stated.key)
            found.append(Related(stated.span, _text(stated), "used in the working"))
    return tuple(found)


def _text(stated: Stated) -> str:
    return stated.text.chars[stated.measure.start : stated.measure.end]
