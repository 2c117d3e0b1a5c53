"""The report ``lines``: one line per finding in the GNU form ``path:line:column: message``."""

from __future__ import annotations

from typing import TYPE_CHECKING

from soplint.reports.inert import inert
from soplint.reports.layout import Page
from soplint.reports.outcome import is_open

if TYPE_CHECKING:
    from collections.abc import Iterator

    from soplint.findings.model import Finding
    from soplint.reports.outcome import Outcome


def report(outcome: Outcome, page: Page) -> Iterator[str]:
    """The first line of every finding, in order of document and place."""
    for review in outcome.reviews:
        for finding in review.findings:
            yield first_line(review.path, finding, page)


def first_line(path: str, finding: Finding, page: Page = Page()) -> str:  # noqa: B008 (frozen)
    """Place, class, rule and message; a permit in force is named, since it changes the class."""
    place = f"{inert(path)}:{finding.span.line}:{finding.span.column}"
    permit = finding.permit
    covered = ""
    if permit is not None and not is_open(finding):
        covered = f" (under deviation permit until {inert(permit.until)})"
    severity = page.strong(finding.severity)
    return f"{place}: {severity}, {inert(finding.rule)}: {inert(finding.message)}{covered}"
