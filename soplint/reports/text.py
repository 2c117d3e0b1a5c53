"""The report ``text``: every finding with its worksheet block, then what was not read or reviewed."""

from __future__ import annotations

from typing import TYPE_CHECKING

from soplint.cautions import CAUTIONS
from soplint.reports.inert import inert
from soplint.reports.layout import Page, wrapped
from soplint.reports.lines import first_line
from soplint.reports.outcome import Summary, summarise
from soplint.reports.source import stretch

if TYPE_CHECKING:
    from collections.abc import Iterator

    from soplint.findings.model import Amendment, Finding, Related, Review
    from soplint.reports.outcome import Outcome

INDENT = "    "
LABEL = 10  # columns of "computed" and two spaces
UNREAD_SHOWN = 120  # characters of an unread sentence


def report(outcome: Outcome, page: Page) -> Iterator[str]:
    """The lines of the report; the last one says whether the run is held."""
    for review in outcome.reviews:
        for finding in review.findings:
            yield first_line(review.path, finding, page)
            yield from _block(review, finding, page)
            yield ""
    yield from _section("Withheld", _withheld(outcome), page)
    yield from _section("Not read", _unread(outcome), page)
    yield from _section("Not verified", _unverified(outcome), page)
    yield from _section("Not reviewed", _not_reviewed(outcome), page)
    yield from _section("Notes", _notes(outcome), page)
    yield f"Reviewed on {outcome.on.isoformat()}."
    for caution in CAUTIONS:
        yield from wrapped(caution, page.width)
    yield from wrapped(closing(summarise(outcome), len(outcome.not_reviewed)), page.width)


def closing(summary: Summary, not_reviewed: int) -> str:
    """The last sentence: held or not held, the classes, the counts.

    ``not_reviewed`` is the number of paths that were asked for and could not be reviewed.
    """
    tail = f"; {_count(not_reviewed, 'path')} not reviewed" if not_reviewed else ""
    if not summary.documents:
        return f"Nothing reviewed{tail}."
    withheld = f"; {_count(summary.withheld, 'finding')} withheld" if summary.withheld else ""
    return (
        f"{'Held' if summary.held else 'Not held'}: {_classes(summary)}. "
        f"{_count(summary.documents, 'procedure')}, "
        f"{_count(summary.quantities, 'quantity', 'quantities')}: "
        f"{summary.agrees} agree, {summary.disagrees} disagree, "
        f"{summary.not_verified} not verified; "
        f"{_count(summary.sentences_not_read, 'sentence')} not read{withheld}{tail}."
    )


def _classes(summary: Summary) -> str:
    counts = [
        f"{number} {word}"
        for number, word in (
            (summary.critical, "critical"),
            (summary.major, "major"),
            (summary.minor, "minor"),
            (summary.remark, "remark" if summary.remark == 1 else "remarks"),
            (summary.under_permit, "under deviation permit"),
        )
        if number
    ]
    return ", ".join(counts) or "no findings"


def _count(number: int, one: str, many: str | None = None) -> str:
    return f"{number} {one if number == 1 else many or one + 's'}"


def _block(review: Review, finding: Finding, page: Page) -> Iterator[str]:
    for label, value in _rows(review, finding):
        for part in value.splitlines():
            lines = wrapped(inert(part), page.width, len(INDENT) + LABEL)
            for line in lines:
                yield f"{INDENT}{label:{LABEL}}{line}"
                label = ""


def _rows(review: Review, finding: Finding) -> Iterator[tuple[str, str]]:
    plain = (
        ("stated", finding.stated),
        ("computed", finding.computed),
        ("working", finding.working),
        ("cause", finding.cause),
    )
    for label, value in plain:
        if value:
            yield label, value
    if finding.amendment is not None:
        yield "amend", _amendment(review, finding, finding.amendment)
    for related in finding.related:
        yield "related", _related(related)
    if finding.caution:
        yield "caution", finding.caution
    if finding.permit is not None:
        permit = finding.permit
        yield (
            "permit",
            f'"{permit.reason}", approved {permit.approved_by} {permit.on}, until {permit.until}',
        )
    for source in finding.see:
        yield "see", source


def _amendment(review: Review, finding: Finding, amendment: Amendment) -> str:
    elsewhere = amendment.span.line != finding.span.line
    place = f"line {amendment.span.line}: " if elsewhere else ""
    return (
        f"{place}{inert(stretch(review.lines, amendment.span))} -> {inert(amendment.replacement)}"
    )


def _related(related: Related) -> str:
    return f'line {related.span.line}, "{inert(related.text)}": {related.message}'


def _section(title: str, lines: list[str], page: Page) -> Iterator[str]:
    if lines:
        yield f"{title}:"
        for line in lines:
            first, *more = wrapped(line, page.width, len(INDENT))
            yield f"  {first}"
            yield from (f"{INDENT}{part}" for part in more)
        yield ""


def _withheld(outcome: Outcome) -> list[str]:
    return [first_line(review.path, f) for review in outcome.reviews for f in review.withheld]


def _unread(outcome: Outcome) -> list[str]:
    return [
        f"{inert(review.path)}:{line}: {inert(_clipped(text))}"
        for review in outcome.reviews
        for line, text in review.coverage.unread
    ]


def _clipped(text: str) -> str:
    return text if len(text) <= UNREAD_SHOWN else text[: UNREAD_SHOWN - 1] + "…"


def _unverified(outcome: Outcome) -> list[str]:
    reasons: dict[str, int] = {}
    for review in outcome.reviews:
        for entry in review.entries:
            if entry.verdict == "not-verified":
                reason = entry.reason or "no reason recorded"
                reasons[reason] = reasons.get(reason, 0) + 1
    if not reasons:
        return []
    counts = ", ".join(f"{number} {reason}" for reason, number in sorted(reasons.items()))
    return [f"{counts} (soplint worksheet FILE shows each)"]


def _not_reviewed(outcome: Outcome) -> list[str]:
    return [f"{inert(missed.path)}: {inert(missed.reason)}" for missed in outcome.not_reviewed]


def _notes(outcome: Outcome) -> list[str]:
    notes = [
        f"{inert(review.path)}: {inert(note)}"
        for review in outcome.reviews
        for note in review.notes
    ]
    assessed = sum(review.coverage.pairs_assessed for review in outcome.reviews)
    open_pairs = sum(review.coverage.pairs_not_assessed for review in outcome.reviews)
    if assessed or open_pairs:
        notes.append(f"pairs of substances: {assessed} assessed, {open_pairs} not assessed")
    return notes
