"""Markup out of lines: the cases of ``inline_cases.txt``, and where the characters come from."""

from __future__ import annotations

from pathlib import Path

import pytest

from soplint.intake.inline import clean, clean_line
from soplint.intake.scan import Line

CASES = [
    tuple(line.split(" => "))
    for line in Path(__file__).with_name("inline_cases.txt").read_text("utf-8").splitlines()
    if line.strip() and not line.startswith("# ")
]


def test_there_are_cases() -> None:
    assert len(CASES) > 40
    assert all(len(case) == 2 for case in CASES)


@pytest.mark.parametrize(("source", "read"), CASES)
def test_line_reads_as(source: str, read: str) -> None:
    assert clean_line(1, 1, source).chars.replace("\n", "⏎") == read.strip()


def test_invisible_characters_are_dropped_or_spaces() -> None:
    source = "5\u00a0g\u200b \u202eKBr\u202c\u2009\u00adin\u3000water\ufeff"
    assert clean_line(1, 1, source).chars == "5 g KBr in water"


def test_a_line_without_markup_keeps_no_places() -> None:
    text = clean_line(4, 7, "Weigh 5.0 g of NaCl (M = 58.44 g/mol) at 20 °C ± 1 °C – cool.")
    assert text.places is None
    assert text.place(6) == (4, 13)


def test_places_point_at_the_source_behind_markup() -> None:
    source = "Add **5 &micro;L** of K~2~CO~3~"
    text = clean_line(2, 3, source)
    assert text.chars == "Add 5 µL of K2CO3"
    start = text.chars.index("5")
    assert text.place(start) == (2, 3 + source.index("5"))
    assert text.place(text.chars.index("µ")) == (2, 3 + source.index("&"))
    assert text.place(text.chars.index("O3") + 1) == (2, 3 + source.index("3"))


def test_emphasis_and_comments_run_over_lines() -> None:
    lines = [Line(1, 1, "a **bold"), Line(2, 1, "part** b <!-- x"), Line(3, 1, "y --> c")]
    texts = clean(lines)
    assert [text.chars for text in texts] == ["a bold", "part b", "c"]
    assert [text.line for text in texts] == [1, 2, 3]
    assert texts[2].place(0) == (3, 7)
