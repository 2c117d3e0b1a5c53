"""Hazards: what the order of additions brings together."""

from __future__ import annotations

from collections.abc import Iterator

from soplint.bench import Bench
from soplint.bench.pouring import Pouring, pourings
from soplint.checks.registry import Judgement, rule
from soplint.findings.model import Finding, Related
from soplint.notation.phrases import Sentence

CAUTION = "Follow the safety data sheet, local rules and licensed practice; this note replaces none of them."


_LITTLE = 0.05


@rule("hazards.acid-into-water")
def acid_into_water(bench: Bench) -> Iterator[Judgement]:
    """Concentrated acid is added to water, never water to the acid."""
    for sentences in _sections(bench):
        for pouring in pourings(sentences):
            if not pouring.diluted or pouring.acid.family == "H2SO4":
                yield _judgement(pouring)


def _sections(bench: Bench) -> Iterator[list[Sentence]]:
    """Sentences under one heading; a recipe list states no order and is left out."""
    current: list[Sentence] = []
    for index, read in enumerate(bench.blocks):
        if read.block.kind == "heading":
            yield current
            current = []
        elif read.table is None and index not in bench.scope.aside:
            if read.block.kind == "paragraph" and read.block.number is None:
                yield current  # a paragraph of its own begins with a vessel of its own
                current = []
            current.extend(read.sentences)
    yield current


def _judgement(pouring: Pouring) -> Judgement:
    sulfuric = pouring.acid.family == "H2SO4"
    if pouring.diluted:
        grade = "minor"
    elif not sulfuric and not pouring.poured and pouring.share <= _LITTLE:
        grade = "remark"  # a little acid in much water (common practice, no source)
    elif sulfuric:
        grade = "critical"
    else:
        grade = "major" if pouring.poured else "minor"
    name = pouring.acid.name.split(" %")[0].rstrip("0123456789.- ").rstrip()
    text = pouring.text.chars[pouring.start : pouring.end]
    places = (Related(pouring.acid_at.span, "", "the acid"),) if pouring.acid_at is not None else ()
    return Judgement(
        Finding(
            rule="hazards.acid-into-water",
            severity=grade,
            span=pouring.text.span(pouring.start, pouring.end),
            text=text,
            message=f"water reaches concentrated {name} ({pouring.percent:.3g} % w/w): it can boil and spatter",
            working="order of additions: the vessel holds the acid and no water when the water comes",
            cause="order of additions",
            cause_kind=None,
            related=places,
            caution=CAUTION,
        )
    )
