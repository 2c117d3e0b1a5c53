"""Reviews procedures and looks up what became of one quantity."""

from __future__ import annotations

import pytest

from soplint.review import review_bytes

ABOVE_REMARK = ("critical", "major", "minor")


@pytest.fixture(scope="session")
def review():
    """``review(text)``: the review of a procedure."""

    def of(text, name="procedure.md"):
        return review_bytes(text.encode("utf-8"), name)

    return of


@pytest.fixture(scope="session")
def grave():
    """``grave(review)``: the findings above remark, as words to be shown when a test fails."""

    def of(reviewed):
        return [
            f"line {f.span.line}: {f.severity} {f.rule}: {f.message}"
            for f in reviewed.findings
            if f.severity in ABOVE_REMARK
        ]

    return of


@pytest.fixture(scope="session")
def entry():
    """``entry(review, text)``: the one quantity of the ledger written so."""

    def of(reviewed, text, line=None):
        found = [e for e in reviewed.entries if e.text == text and line in (None, e.span.line)]
        assert len(found) == 1, (text, [(e.text, e.span.line) for e in reviewed.entries])
        return found[0]

    return of
