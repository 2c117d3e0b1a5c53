"""Review one document: bytes in, everything that a report needs out."""

from __future__ import annotations

from dataclasses import replace

from soplint.bench import Bench, carry_out
from soplint.bench.contact import pairs
from soplint.checks import RULES, Judgement
from soplint.findings.model import SEVERITIES, Coverage, Finding, Related, Review
from soplint.intake import Document, read_bytes
from soplint.notation.document import read_document
from soplint.settings import Settings

DEFAULT = Settings()


def review_bytes(data: bytes, path: str, settings: Settings = DEFAULT) -> Review:
    """Review a procedure.

    Parameters: data, the file as it is; path, as given, its ending decides how it is read;
    settings, which rules apply.
    Returns: ledger, findings and coverage.
    Errors: ``soplint.intake.Unreadable`` when the bytes are no text.

    >>> review = review_bytes(b"Sodium chloride, 1 mol/L, 1000 mL\\n\\n- 58.44 g NaCl\\n", "a.md")
    >>> [entry.verdict for entry in review.entries]
    ['agrees', 'agrees', 'agrees']
    """
    document = read_bytes(data, path)
    bench = carry_out(read_document(document))
    shown, withheld = _judge(bench, settings)
    return Review(
        path=document.path,
        sha256=document.sha256,
        title=document.title,
        lines=document.lines,
        notes=document.notes,
        entries=bench.ledger.entries(document),
        findings=_ordered(shown, document),
        withheld=_ordered(withheld, document),
        coverage=_coverage(bench),
    )


def _judge(bench: Bench, settings: Settings) -> tuple[list[Finding], list[Finding]]:
    """All findings; each disproved quantity belongs to the most severe one about it."""
    judgements = [j for rule in RULES.values() for j in rule.function(bench)]
    judgements.sort(key=lambda j: SEVERITIES.index(j.finding.severity))
    owner: dict[tuple[int, int, int, int], int] = {}
    shown: list[Finding] = []
    withheld: list[Finding] = []
    for number, judgement in enumerate(judgements):
        disproved = [
            d for d in judgement.disproved if owner.setdefault(d.stated.key, number) == number
        ]
        if judgement.disproved and not disproved:
            continue  # the same quantity is already disproved by another finding
        finding = _own(judgement, owner, number)
        for item in disproved:
            bench.ledger.disagree(item.stated, item.computed, item.working, finding.rule)
        (shown if settings.applies(finding.rule) else withheld).append(finding)
    _open_inputs(bench)
    return shown, withheld


def _own(judgement: Judgement, owner: dict[tuple[int, int, int, int], int], number: int) -> Finding:
    """The finding without related places that are disproved by another finding."""

    def free(related: Related) -> bool:
        span = related.span
        key = (span.line, span.column, span.end_line, span.end_column)
        return owner.get(key, number) == number

    kept = tuple(r for r in judgement.finding.related if free(r))
    return replace(judgement.finding, related=kept)


def _open_inputs(bench: Bench) -> None:
    """Numbers of a relation that does not close are neither proved nor disproved."""
    for relation in bench.relations:
        if relation.agrees or bench.ledger.verdict(relation.tested) != "disagrees":
            continue
        for stated in relation.inputs:
            bench.ledger.leave_open(stated, "relation-open")


def _ordered(findings: list[Finding], document: Document) -> tuple[Finding, ...]:
    """By position, with the exact source text of each place."""

    def placed(finding: Finding) -> Finding:
        return replace(
            finding,
            text=document.source(finding.span),
            related=tuple(replace(r, text=document.source(r.span)) for r in finding.related),
        )

    return tuple(
        sorted(
            (placed(finding) for finding in findings),
            key=lambda f: (f.span, SEVERITIES.index(f.severity), f.rule, f.message),
        )
    )


def _coverage(bench: Bench) -> Coverage:
    reading = bench.reading
    assessed, left = pairs(bench)
    return Coverage(
        sentences_with_quantities=reading.with_quantities,
        sentences_read=reading.with_quantities - len(reading.unread),
        unread=tuple((line, text) for line, text, _ in reading.unread),
        set_aside=dict(sorted(reading.set_aside.items())),
        pairs_assessed=assessed,
        pairs_not_assessed=left,
    )


__all__ = ["review_bytes"]
