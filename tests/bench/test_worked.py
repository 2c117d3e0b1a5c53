"""Arithmetic that is written out, line by line from a table of right and wrong ones."""

from __future__ import annotations

from pathlib import Path

import pytest

RULE = "document.arithmetic-recomputes"
TABLE = Path(__file__).parent / "data" / "written_arithmetic.csv"


def _rows():
    lines = TABLE.read_text(encoding="utf-8").splitlines()
    rows = [line.split("|") for line in lines if line and not line.startswith("#")][1:]
    return [tuple(row) for row in rows]


ROWS = _rows()


def _reviewed(review, text):
    return review(f"## Calculation\n\n{text}\n")


def test_table_has_right_and_wrong_lines():
    kinds = [expects for _, expects, _ in ROWS]
    assert set(kinds) == {"agrees", "silent", "disagrees"}
    assert kinds.count("disagrees") >= 40 and len(kinds) - kinds.count("disagrees") >= 60


@pytest.mark.parametrize("text", [t for t, expects, _ in ROWS if expects != "disagrees"])
def test_right_line_has_no_finding(review, grave, text):
    assert grave(_reviewed(review, text)) == []


@pytest.mark.parametrize("text", [t for t, expects, _ in ROWS if expects == "agrees"])
def test_right_line_is_entered_as_agreeing(review, text):
    entries = _reviewed(review, text).entries
    assert "agrees" in [e.verdict for e in entries], [(e.text, e.reason) for e in entries]


@pytest.mark.parametrize(
    ("text", "computed"), [(t, c) for t, expects, c in ROWS if expects == "disagrees"]
)
def test_wrong_line_is_found_with_the_right_value(review, text, computed):
    findings = [f for f in _reviewed(review, text).findings if f.rule == RULE]
    assert [f.computed for f in findings] == [computed]


@pytest.mark.parametrize(
    "text",
    [
        "((((((((((((((((((1 + 2)))))))))))))))))) = 4",
        "5 / 0 = 4 g",
        "5 × 10^99 × 10^99 / 3 = 4 g",
        "log(0) × 2 = 4 g",
        "99^30^30 × 2 = 4 g",
        "3 - 3 + 0 = 4 g",
    ],
)
def test_odd_arithmetic_is_survived(review, text):
    assert all(e.verdict != "agrees" for e in _reviewed(review, text).entries)


@pytest.mark.parametrize(("printed", "found"), [("0.1000", False), ("0.1100", True)])
def test_formula_and_example_in_one_line(review, printed, found):
    # 0.4103 × 1000 / (204.22 × 20.10) = 0.09996
    line = "c = m × 1000 / (204.22 × V), m in g, V in mL. Example: m = 0.4103 g, V = 20.10 mL gives"
    rules = [f.rule for f in _reviewed(review, f"{line} c = {printed} mol/L.").findings]
    assert ("document.worked-example-reproduces" in rules) is found
