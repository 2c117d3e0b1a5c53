"""The table of spellings is sound: every terminal known, every spelling once and reachable."""

from __future__ import annotations

import re
from collections import defaultdict
from pathlib import Path

import pytest

from soplint.notation.lexicon import spellings, terminals
from soplint.quantities import find_measures
from soplint.substances import NameIndex

GRAMMAR = Path(__file__).parents[2] / "grammar"
LINES = [
    line
    for line in (GRAMMAR / "lexicon.txt").read_text(encoding="utf-8").splitlines()
    if line and not line.startswith("#")
]
DECLARED = {
    word
    for line in (GRAMMAR / "procedure.lark").read_text(encoding="utf-8").splitlines()
    if line.startswith("%declare")
    for word in line.split()[1:]
}


def table() -> dict[str, list[str]]:
    """Terminals by spelling."""
    found: dict[str, list[str]] = defaultdict(list)
    for line in LINES:
        kind, _, listed = line.partition(":")
        for spelling in listed.split("|"):
            found[" ".join(spelling.split()).lower()].append(kind)
    return found


def kinds(text: str) -> list[str]:
    """Terminals of a text."""
    return [t.kind for t in terminals(text, find_measures(text), NameIndex().find(text))]


def test_every_line_is_a_terminal_of_the_grammar_or_dropped():
    named = [line.partition(":")[0] for line in LINES]
    assert set(named) - DECLARED == {"SKIP"}
    assert len(named) == len(set(named)), "a terminal has two lines"


def test_no_spelling_has_two_meanings_or_stands_twice():
    assert {s: k for s, k in table().items() if len(k) > 1} == {}
    assert "" not in table()
    assert len(table()) > 600


def test_spellings_are_lower_case_and_without_brackets():
    odd = [s for line in LINES for s in line.partition(":")[2].split("|")]
    assert [s for s in odd if s != s.lower() or re.search(r"[()\[\]{}]", s)] == []


def test_table_is_read_whole():
    read = sum(len(choices) for choices in spellings().values())
    assert read == sum(len(k) for k in table().values())


@pytest.mark.parametrize("kind", sorted({line.partition(":")[0] for line in LINES} - {"SKIP"}))
def test_spellings_reach_their_terminal(kind):
    """A spelling between two unknown words is one terminal, whatever shorter ones are in it."""
    listed = next(line for line in LINES if line.startswith(f"{kind}:")).partition(":")[2]
    wrong = {}
    for spelling in (" ".join(s.split()) for s in listed.split("|")):
        found = kinds(f"zzq {spelling} zzq")
        if found != ["OTHER", kind, "OTHER"]:
            wrong[spelling] = found
    assert wrong == {}


def test_dropped_words_leave_nothing():
    listed = next(line for line in LINES if line.startswith("SKIP:")).partition(":")[2]
    wrong = {}
    for spelling in (" ".join(s.split()) for s in listed.split("|")):
        found = kinds(f"zzq {spelling} zzq")
        if found != ["OTHER"]:
            wrong[spelling] = found
    assert wrong == {}


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("Make up to 500 mL", ["MAKE_UP", "TO", "VOLUME"]),
        ("MAKE UP TO 500 ML", ["MAKE_UP", "TO", "VOLUME"]),
        ("make-up to 500 mL", ["MAKE_UP", "TO", "VOLUME"]),
        ("zzq (yyp zzq", ["OTHER", "OTHER"]),  # a bracket without its partner
        ("zzq) yyp ((zzq)", ["OTHER", "OTHER", "LPAR", "OTHER", "RPAR"]),
        ("Tween 20 5 mL", ["NAME", "VOLUME"]),  # a name that holds a number
        ("buffer A 5 mL", ["SOLUTION", "OTHER", "VOLUME"]),
        ("a buffer 5 mL", ["SOLUTION", "VOLUME"]),
        ("V = 5 mL", ["SYMBOL", "EQUALS", "VOLUME"]),
        ("solution V = 5 mL", ["SOLUTION", "OTHER", "EQUALS", "VOLUME"]),
    ],
)
def test_terminals_of(text, expected):
    assert kinds(text) == expected
