"""Findings made of relations: message, working, cause, amendment, related places."""

from __future__ import annotations

from soplint.bench import Bench, Relation, Stated
from soplint.causes import Cause
from soplint.checks.registry import Disagreement, Judgement
from soplint.findings.model import Amendment, Finding, Related
from soplint.quantities.writing import format_like, show


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
    if relation.tested.measure.value is None:
        return show(value, relation.tested.measure.unit)
    return format_like(value, relation.tested.measure)


def amendment(relation: Relation) -> Amendment | None:
    """The correction of the tested number, where it is the only one that closes the relation."""
    measure = relation.tested.measure
    if measure.value is None or relation.computed.value is None or relation.computed.value <= 0:
        return None
    volume = relation.volume
    if volume is not None and volume.provenance == "weak":
        return None
    replacement = format_like(relation.computed.value, measure)
    return Amendment(relation.tested.span, replacement)


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
