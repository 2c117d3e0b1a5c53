"""The grammar is total, and every alternative of it is needed by an example of the reference."""

from __future__ import annotations

import importlib.util
import itertools
import random
import re
import sys
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import pytest
from lark import Lark

from soplint.notation import parser
from soplint.notation.terminals import Terminal

HERE = Path(__file__).parent
GRAMMAR = HERE.parents[1] / "grammar"
SOURCE = (GRAMMAR / "procedure.lark").read_text(encoding="utf-8")

_spec = importlib.util.spec_from_file_location("reading_form", HERE / "reading_form.py")
assert _spec is not None and _spec.loader is not None
form = importlib.util.module_from_spec(_spec)
sys.modules[_spec.name] = form
_spec.loader.exec_module(form)

EXAMPLES = list(form.examples(GRAMMAR / "README.md"))
TERMINALS = [
    word for line in SOURCE.splitlines() if line.startswith("%declare") for word in line.split()[1:]
]
_RULE = re.compile(r"^[!?]?(?P<name>[a-z_]+): (?P<body>.*(?:\n +\|.*)*)", re.MULTILINE)
_COMMENT = re.compile(r"//.*")


@dataclass(frozen=True)
class Alternative:
    """One alternative of a rule and where it stands in the grammar file."""

    rule: str
    text: str
    start: int
    end: int


def alternatives() -> Iterator[Alternative]:
    """Every alternative of every rule of the grammar."""
    for rule in _RULE.finditer(SOURCE):
        at = rule.start("body")
        for line in rule["body"].split("\n"):
            code = _COMMENT.sub("", line)
            for part in re.finditer(r"[^|]+", code):
                text = part[0].strip()
                if text:
                    start = at + part.start() + part[0].index(text)
                    yield Alternative(rule["name"], text, start, start + len(text))
            at += len(line) + 1


ALTERNATIVES = list(alternatives())


# --- total -------------------------------------------------------------------------------------


def balanced(kinds: tuple[str, ...]) -> bool:
    depth = 0
    for kind in kinds:
        depth += (kind == "LPAR") - (kind == "RPAR")
        if depth < 0:
            return False
    return depth == 0


def parses(kinds: tuple[str, ...]) -> bool:
    """Whether the grammar takes the sequence whole; the lexer hands over balanced brackets only."""
    tree, kept = parser.parse([Terminal(kind, at, at + 1) for at, kind in enumerate(kinds)])
    counted = [token.start_pos for token in tree.scan_values(lambda _: True)]
    return len(kept) == len(kinds) and counted == sorted(counted)


@pytest.mark.parametrize("length", [0, 1, 2])
def test_grammar_takes_every_short_sequence(length):
    sequences = [s for s in itertools.product(TERMINALS, repeat=length) if balanced(s)]
    assert len(sequences) >= (len(TERMINALS) - 2) ** length
    assert all(map(parses, sequences))


@pytest.mark.slow
def test_grammar_takes_every_sequence_of_three():
    sequences = [s for s in itertools.product(TERMINALS, repeat=3) if balanced(s)]
    assert len(sequences) > 400_000
    assert all(map(parses, sequences))


def test_grammar_takes_long_random_sequences():
    chance = random.Random(20261201)
    for _ in range(3000):
        kinds = [chance.choice(TERMINALS) for _ in range(chance.randint(4, 14))]
        opened = 0
        for index, kind in enumerate(kinds):
            if kind == "RPAR" and not opened:
                kinds[index] = "COMMA"
            opened += (kinds[index] == "LPAR") - (kinds[index] == "RPAR")
        assert parses(tuple(kinds) + ("RPAR",) * opened)


# --- nothing superfluous -------------------------------------------------------------------------


def test_grammar_has_its_alternatives_and_sections():
    rules = {alternative.rule for alternative in ALTERNATIVES}
    assert {"dose", "material", "to_volume", "role", "assigned"} <= rules
    assert len(ALTERNATIVES) > 100


@pytest.mark.slow
@pytest.mark.parametrize("gone", ALTERNATIVES, ids=lambda a: f"{a.rule}: {a.text}")
def test_every_alternative_is_needed(gone, monkeypatch):
    """Without the alternative some example of the reference reads otherwise, or not at all."""
    source = SOURCE[: gone.start] + "NEVER" + SOURCE[gone.end :] + "\n%declare NEVER\n"
    changed = Lark(source, parser="lalr", lexer=parser._Ready, start="sentence")
    monkeypatch.setattr(parser, "_parser", lambda: changed)
    for example in EXAMPLES:
        try:
            if form.reading(example.text) != example.expected:
                return
        except Exception:  # any failure shows that the alternative is needed
            return
    pytest.fail("no example of grammar/README.md needs this alternative")
