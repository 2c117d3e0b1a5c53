"""Reviews whole procedures and looks up what the record says about one quantity."""

from __future__ import annotations

import pytest

ABOVE_REMARK = ("critical", "major", "minor")


@pytest.fixture(scope="session")
def found_at():
    """``found_at(review, line, *rules)``: whether a finding above remark names that line."""

    def of(reviewed, line, *rules):
        return any(
            f.severity in ABOVE_REMARK
            and (not rules or f.rule in rules)
            and line in (f.span.line, *(r.span.line for r in f.related))
            for f in reviewed.findings
        )

    return of
