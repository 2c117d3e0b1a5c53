"""The document itself: sentences that could not be read."""

from __future__ import annotations

from collections.abc import Iterator

from soplint.bench import Bench
from soplint.causes import likely_cause
from soplint.checks.registry import Judgement, rule
from soplint.checks.wording import computed_text, judgement
from soplint.findings.model import Finding


@rule("document.sentence-readable")
def sentence_readable(bench: Bench) -> Iterator[Judgement]:
    """Strict text: every sentence that holds a quantity can be read."""
    for _, _, sentence in bench.reading.unread:
        if not sentence.strict:
            continue
        chars = sentence.text.chars
        start = len(chars) - len(chars.lstrip())
        yield Judgement(
            Finding(
                rule="document.sentence-readable",
                severity="minor",
                span=sentence.text.span(start, len(chars.rstrip())),
                text=chars.strip(),
                message="sentence holds a quantity that could not be bound to a substance",
            )
        )


_ROUNDING = 0.02  # intermediate results are rounded before they are printed


@rule("document.arithmetic-recomputes")
def arithmetic_recomputes(bench: Bench) -> Iterator[Judgement]:
    """Arithmetic that is written out gives the printed result."""
    for relation in bench.relations:
        if relation.kind != "worked" or relation.agrees:
            continue
        grade = "minor" if abs(relation.deviation) < _ROUNDING else "major"
        measure = relation.tested.measure
        stated = relation.tested.text.chars[measure.start : measure.end]
        message = f"arithmetic: {stated} printed, {computed_text(relation)} computed"
        cause = likely_cause(relation, bench)
        yield judgement(bench, relation, "document.arithmetic-recomputes", grade, message, cause)


@rule("document.worked-example-reproduces")
def worked_example_reproduces(bench: Bench) -> Iterator[Judgement]:
    """The numbers of a worked example, put into the formula, give the printed result."""
    for relation in bench.relations:
        if relation.kind != "example" or relation.agrees:
            continue
        measure = relation.tested.measure
        stated = relation.tested.text.chars[measure.start : measure.end]
        grade = "minor" if abs(relation.deviation) < _EXAMPLE else "major"
        message = f"worked example: {stated} printed, {computed_text(relation)} computed"
        cause = likely_cause(relation, bench)
        name = "document.worked-example-reproduces"
        yield judgement(bench, relation, name, grade, message, cause, amend=False)


_EXAMPLE = 0.005
