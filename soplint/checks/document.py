"""The document itself: sentences that could not be read."""

from __future__ import annotations

from collections.abc import Iterator

from soplint.bench import Bench
from soplint.checks.registry import Judgement, rule
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
