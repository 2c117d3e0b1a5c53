"""Quantities as JSON values: the form shared by the record of a review and the worksheet."""

from __future__ import annotations

from math import isfinite
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from soplint.findings.model import Coverage, Entry, Interval
    from soplint.intake.model import Span

DIGITS = 12  # significant digits: below that, platforms differ in the last bits


def number(value: float | None) -> float | None:
    """``value`` for JSON: rounded to ``DIGITS`` digits; None where JSON has no such number.

    >>> number(0.1 + 0.2), number(float("inf"))
    (0.3, None)
    """
    if value is None or not isfinite(value):
        return None
    return float(f"{value:.{DIGITS}g}")


def place(span: Span) -> dict[str, int]:
    """The four numbers of a span: from 1, columns in code points, ends exclusive."""
    return {
        "line": span.line,
        "column": span.column,
        "end_line": span.end_line,
        "end_column": span.end_column,
    }


def interval(stated: Interval) -> dict[str, Any]:
    """A value with its unit and the interval that it stands for."""
    return {
        "value": number(stated.value),
        "unit": stated.unit,
        "low": number(stated.low),
        "high": number(stated.high),
    }


def quantity(entry: Entry) -> dict[str, Any]:
    """One entry of the ledger."""
    return {
        **place(entry.span),
        "text": entry.text,
        "of": entry.of,
        "role": entry.role,
        "verdict": entry.verdict,
        "reason": entry.reason,
        "stated": interval(entry.stated),
        "computed": None if entry.computed is None else interval(entry.computed),
        "working": entry.working,
        "rule": entry.rule,
    }


def coverage(read: Coverage, counts: dict[str, int]) -> dict[str, Any]:
    """What was read and what was not; ``counts`` holds the number of each verdict."""
    return {
        "quantities": sum(counts.values()),
        "agrees": counts["agrees"],
        "disagrees": counts["disagrees"],
        "not_verified": counts["not-verified"],
        "sentences_with_quantities": read.sentences_with_quantities,
        "sentences_read": read.sentences_read,
        "unread": [{"line": line, "text": text} for line, text in read.unread],
        "set_aside": dict(sorted(read.set_aside.items())),
        "pairs": {"assessed": read.pairs_assessed, "not_assessed": read.pairs_not_assessed},
    }


def printed(document: dict[str, Any]) -> str:
    """A record as JSON text: UTF-8 kept, keys in order, no NaN, nothing a terminal obeys."""
    import json

    from soplint.reports.inert import inert_json

    return inert_json(json.dumps(document, ensure_ascii=False, indent=1, allow_nan=False))
