"""The worksheet: every stated quantity of one document with its verdict, for people or programs."""

from __future__ import annotations

from math import isfinite
from typing import TYPE_CHECKING, Any

from soplint.reports.inert import inert
from soplint.reports.layout import Page, padded, width, wrapped
from soplint.reports.outcome import verdicts
from soplint.reports.quantities import coverage, number, printed, quantity

if TYPE_CHECKING:
    from collections.abc import Iterator

    from soplint.findings.model import Entry, Interval, Review

INDENT = "      "
WIDEST = 28  # columns of a cell before it pushes the ones behind it
COLUMNS = (
    "line",
    "column",
    "stated",
    "of",
    "role",
    "verdict",
    "reason",
    "computed",
    "unit",
    "working",
    "rule",
)


def as_text(review: Review, page: Page) -> Iterator[str]:
    """The quantities grouped under the source line that states them."""
    yield inert(f"{review.path}: {review.title}" if review.title else review.path)
    columns = _columns(review)
    line = 0
    for entry in review.entries:
        if entry.span.line != line:
            line = entry.span.line
            yield ""
            yield from _source_line(review, line, page)
        yield from _row(entry, columns, page)
    yield ""
    yield from _coverage(review, page)


def as_json(review: Review, page: Page) -> Iterator[str]:
    """The worksheet as JSON; a quantity has the form that it has in the record of a review."""
    document: dict[str, Any] = {
        "record": "soplint-worksheet",
        "record_version": 1,
        "path": review.path,
        "sha256": review.sha256,
        "title": review.title,
        "notes": list(review.notes),
        "quantities": [quantity(entry) for entry in review.entries],
        "coverage": coverage(review.coverage, verdicts([review])),
    }
    yield printed(document)


def as_csv(review: Review, page: Page) -> Iterator[str]:
    """One row per quantity under a heading row, comma-separated."""
    import csv
    import io

    cells = io.StringIO()
    writer = csv.writer(cells, lineterminator="\n")
    writer.writerow(COLUMNS)
    for entry in review.entries:
        value = None if entry.computed is None else number(entry.computed.value)
        writer.writerow(
            [
                entry.span.line,
                entry.span.column,
                _cell(entry.text),
                _cell(entry.of),
                entry.role,
                entry.verdict,
                entry.reason or "",
                "" if value is None else f"{value:.6g}",
                "" if entry.computed is None else _cell(entry.computed.unit),
                _cell(entry.working),
                entry.rule or "",
            ]
        )
    yield cells.getvalue().removesuffix("\n")


def computed_text(interval: Interval | None) -> str:
    """A computed interval for people: four digits, the range where there is no single value.

    >>> from soplint.findings.model import Interval
    >>> computed_text(Interval(9.1897, "g", 9.1, 9.2))
    '9.19 g'
    """
    if interval is None:
        return ""
    if interval.unit == "pH":
        return f"pH {_range(interval, '.2f')}"
    return f"{_range(interval, '.4g')} {interval.unit}".rstrip()


def _range(interval: Interval, digits: str) -> str:
    if interval.value is not None:
        return format(interval.value, digits)
    if not isfinite(interval.low):
        return f"at most {interval.high:{digits}}"
    if not isfinite(interval.high):
        return f"at least {interval.low:{digits}}"
    return f"{interval.low:{digits}} to {interval.high:{digits}}"


def _cell(text: str | None) -> str:
    """Text for a spreadsheet; what a spreadsheet would take for a formula is made text."""
    plain = inert(text or "")
    formula = plain.startswith(("=", "+", "@")) or (plain[:1] == "-" and not plain[1:2].isdigit())
    return "'" + plain if formula else plain


def _columns(review: Review) -> tuple[int, int, int]:
    """Columns for what is stated, what it is of, and the verdict."""
    rows = [_cells(entry) for entry in review.entries]
    first, second, third = (
        min(max((width(r[i]) for r in rows), default=0), WIDEST) for i in (0, 1, 2)
    )
    return first, second, third


def _cells(entry: Entry) -> tuple[str, str, str, str]:
    verdict = entry.verdict.replace("-", " ")
    return (
        inert(entry.text),
        inert(entry.of or ""),
        f"{verdict}: {inert(entry.reason)}" if entry.reason else verdict,
        inert(computed_text(entry.computed)),
    )


def _source_line(review: Review, line: int, page: Page) -> Iterator[str]:
    text = review.lines[line - 1] if line <= len(review.lines) else ""
    first, *more = wrapped(inert(text.replace("\t", " ").strip()), page.width, len(INDENT))
    yield f"{line:>4}  {first}"
    yield from (INDENT + part for part in more)


def _row(entry: Entry, columns: tuple[int, int, int], page: Page) -> Iterator[str]:
    stated, of, verdict, computed = _cells(entry)
    if entry.verdict == "disagrees":
        verdict = page.strong(verdict) + " " * (columns[2] - width(verdict))
    else:
        verdict = padded(verdict, columns[2])
    row = f"{INDENT}{padded(stated, columns[0])}  {padded(of, columns[1])}  {verdict}  {computed}"
    yield row.rstrip()
    for part in (entry.working or "").splitlines():
        for line in wrapped(inert(part), page.width, len(INDENT) + 2):
            yield f"{INDENT}  {line}"


def _coverage(review: Review, page: Page) -> Iterator[str]:
    counts = verdicts([review])
    yield (
        f"{sum(counts.values())} quantities: {counts['agrees']} agree, "
        f"{counts['disagrees']} disagree, {counts['not-verified']} not verified."
    )
    if review.coverage.set_aside:
        kinds = ", ".join(
            f"{n} {inert(kind)}" for kind, n in sorted(review.coverage.set_aside.items())
        )
        yield from wrapped(f"Set aside: {kinds}.", page.width)
    for line, text in review.coverage.unread:
        yield from wrapped(f"Not read, line {line}: {inert(text)}", page.width)
    for note in review.notes:
        yield from wrapped(f"Note: {inert(note)}", page.width)
