"""Titrations: equivalents."""

from __future__ import annotations

from collections.abc import Iterator

from soplint.bench import Bench
from soplint.causes import likely_cause
from soplint.checks.registry import Judgement, rule
from soplint.checks.wording import computed_text, judgement


@rule("titrations.equivalent-recomputes")
def equivalent_recomputes(bench: Bench) -> Iterator[Judgement]:
    """Each mL of a titrant corresponds to c·M/z of the substance titrated."""
    for relation in bench.relations:
        if relation.kind != "equivalent" or relation.agrees:
            continue
        message = (
            f"equivalent of {relation.of}: {relation.tested.measure.nominal:g}"
            f" {relation.tested.measure.unit} stated, {computed_text(relation)} computed"
        )
        grade = "minor" if abs(relation.deviation) < 0.002 else "critical"
        yield judgement(
            bench,
            relation,
            "titrations.equivalent-recomputes",
            grade,
            message,
            likely_cause(relation, bench),
        )
