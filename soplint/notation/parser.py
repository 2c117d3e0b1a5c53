"""Parse terminals with the grammar of ``grammar/procedure.lark`` (LALR)."""

from __future__ import annotations

import os
from collections.abc import Iterator, Sequence
from functools import lru_cache
from typing import Any

from lark import Lark, Token, Tree
from lark.lexer import Lexer

from soplint.notation.terminals import Terminal
from soplint.places import folder

# A bracket nested deeper than this is no prose; it is read as if it were not there.
DEEPEST_BRACKET = 20


class _Ready(Lexer):
    """Hands the parser the terminals that the lexicon has made; each token knows its index."""

    def __init__(self, lexer_conf: object) -> None:
        pass

    def lex(self, data: Any, parser_state: Any = None) -> Iterator[Token]:
        for index, terminal in enumerate(data):
            yield Token(terminal.kind, "", start_pos=index)


@lru_cache(maxsize=1)
def _parser() -> Lark:
    with open(os.path.join(folder("grammar"), "procedure.lark"), encoding="utf-8") as file:
        source = file.read()
    return Lark(source, parser="lalr", lexer=_Ready, start="sentence")


def parse(found: Sequence[Terminal]) -> tuple[Tree[Token], list[Terminal]]:
    """The phrase tree of a sentence and the terminals that its tokens count (``start_pos``).

    Never fails for terminals that the lexicon makes: the grammar is total, which a test asserts
    for all short sequences.
    """
    kept = _flat(found)
    return _parser().parse(kept), kept


def _flat(found: Sequence[Terminal]) -> list[Terminal]:
    """The terminals without brackets that are nested too deep."""
    depth = 0
    kept: list[Terminal] = []
    for terminal in found:
        if terminal.kind == "LPAR":
            depth += 1
        if depth <= DEEPEST_BRACKET or terminal.kind not in ("LPAR", "RPAR"):
            kept.append(terminal)
        if terminal.kind == "RPAR":
            depth -= 1
    return kept
