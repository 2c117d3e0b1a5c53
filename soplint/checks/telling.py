"""Findings of the buffer family that are told about a quantity or a passage."""

from __future__ import annotations

from dataclasses import replace

from soplint.bench import Bench, Relation, Stated
from soplint.bench.numbers import shown
from soplint.checks.registry import Disagreement, Judgement
from soplint.checks.wording import judgement
from soplint.findings.model import Finding, Interval, Related
from soplint.intake.model import Text


def about_ph(
    bench: Bench, relation: Relation, rule: str, severity: str, message: str, remedy: str = ""
) -> Judgement:
    """The finding about a stated pH, its remedy behind the working."""
    made = judgement(bench, relation, rule, severity, message, amend=False)
    value = relation.computed.value
    working = relation.working + (f"; {remedy}" if remedy else "")
    computed = f"pH {value:.2f}" if value is not None else None
    finding = replace(made.finding, computed=computed, working=working)
    return Judgement(finding, made.disproved)


def about_quantity(
    rule: str,
    severity: str,
    stated: Stated,
    message: str,
    working: str,
    computed: Interval | None = None,
    computed_words: str | None = None,
    related: tuple[Related, ...] = (),
) -> Judgement:
    """The finding about a quantity that a calculation disproves."""
    finding = Finding(
        rule=rule,
        severity=severity,
        span=stated.span,
        text=shown(stated.measure),
        message=message,
        stated=shown(stated.measure),
        computed=computed_words,
        working=working,
        related=related,
    )
    return Judgement(finding, (Disagreement(stated, computed, working),))


def about_passage(
    rule: str,
    severity: str,
    text: Text,
    start: int,
    end: int,
    message: str,
    working: str | None = None,
    related: tuple[Related, ...] = (),
) -> Judgement:
    """The finding about words that no number stands for: an order of steps, a use."""
    return Judgement(
        Finding(
            rule=rule,
            severity=severity,
            span=text.span(start, end),
            text=text.chars[start:end],
            message=message,
            working=working,
            related=related,
        )
    )
