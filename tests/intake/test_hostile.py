"""Any bytes give a document or ``Unreadable``; the time grows with the size and no faster."""

from __future__ import annotations

import time

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from soplint.intake import Document, Unreadable, read_bytes, sentences

ENDINGS = (".md", ".sop", ".txt", ".rst")


@settings(max_examples=150, deadline=None)
@given(st.binary(max_size=300), st.sampled_from(ENDINGS))
def test_any_bytes(data: bytes, ending: str) -> None:
    try:
        document = read_bytes(data, "a" + ending)
    except Unreadable as refused:
        assert str(refused)
    else:
        assert isinstance(document, Document)


@settings(max_examples=150, deadline=None)
@given(
    st.text(alphabet="*_`~^$&<>[]()!|#-+=:.\\\n\r\t 15gaAµ²", max_size=120),
    st.sampled_from(ENDINGS),
)
def test_any_marks(source: str, ending: str) -> None:
    document = read_bytes(source.encode(), "a" + ending)
    assert all(sentences(block.text) is not None for block in document.blocks)


# Each shape repeated n times; each once was, or might be, slower than linear.
SHAPES = {
    "one line": "lorem ipsum ",
    "wrapped prose": "lorem ipsum dolor sit amet consetetur sadipscing elitr sed diam\n",
    "stars": "*a* ",
    "open stars": "**a b ",
    "back-ticks": "``a`",
    "comments": "x <!--",
    "struck": "<del>a ",
    "tags": '<b a="1" ',
    "brackets": "[a](",
    "formulas": "$a ",
    "exclamation marks": "!?",
    "spaces": "a" + " " * 200,
    "rules": "= - ",
    "quotes": ">" * 50 + " a\n",
    "items": "- a\n",
    "headings": "# a\n\n",
    "numbers": "1 A\n\n",
    "pipes": "| a ",
    "rows": "| NaCl | 5 g | 10 mM |\n",
    "columns": "NaCl    5 g    10 mM\n",
    "simple tables": "=== ===\na   b\n\n",
    "fences": "~~~~\n```\n",
    "HTML tables": "<table>\n\n",
    "HTML comments": "<!-- a\n",
    "list tables": ".. list-table::\n",
    "cells": "<td>\n",
}


def _seconds(source: str, ending: str) -> float:
    best = 9.0
    for _ in range(2):
        start = time.perf_counter()
        read_bytes(source.encode(), "a" + ending)
        best = min(best, time.perf_counter() - start)
    return best


@pytest.mark.parametrize("shape", SHAPES)
@pytest.mark.parametrize("ending", [".md", ".rst"])
def test_time_grows_with_the_size(shape: str, ending: str) -> None:
    unit = SHAPES[shape]
    small = unit * (6_000 // len(unit))
    few, many = _seconds(small, ending), _seconds(small * 8, ending)
    # Eight times the size: linear is 8, quadratic 64.
    assert many < 30 * few + 0.15


@pytest.mark.parametrize("opening", ["> ", "- ", "1. ", ">- ", "  - "])
def test_deep_nesting(opening: str) -> None:
    nested = "".join(opening * depth + f"{depth} g of NaCl\n" for depth in range(1, 300, 7))
    one_line = opening * 3000 + "5 g of KBr\n"
    stairs = "".join("  " * depth + f"- {depth} g of NaCl\n" for depth in range(200))
    for source in (nested, one_line, stairs):
        document = read_bytes(source.encode(), "a.md")
        words = " ".join(block.text.chars for block in document.blocks)
        for line in source.splitlines():
            amount = line.lstrip("->1. ").split(" of ")[0] if opening != "1. " else "of"
            assert amount in words


def test_nothing_is_lost_in_a_deep_list() -> None:
    source = "".join("  " * depth + f"- {depth + 1} g of NaCl\n" for depth in range(100))
    document = read_bytes(source.encode(), "a.md")
    assert [block.text.chars for block in document.blocks] == [
        f"{k} g of NaCl" for k in range(1, 101)
    ]
    assert document.blocks[4].level == 5
