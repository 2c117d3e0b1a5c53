"""Closed statements: shares of a whole, values of symbols, written-out arithmetic.

Their quantities are listed and never dosed.
"""

from __future__ import annotations

from collections.abc import Iterator

from lark import Token, Tree

from soplint.notation.nodes import Reader
from soplint.notation.phrases import Assigned, Claim, Material


def closed(reader: Reader, tree: Tree[Token]) -> Iterator[Claim]:
    """The claims of a closed statement; none where its value is missing.

    ``tree`` is a node share, assigned or worked of the grammar.
    """
    if tree.data == "assigned":
        yield from _assigned(reader, tree)
        return
    start, end = reader.bounds(tree)
    kind = str(tree.data)
    for terminal in reader.tokens(tree):
        if terminal.measure is None:
            continue
        if kind == "worked":
            yield Claim(terminal.start, terminal.end, terminal.measure, kind=kind)
        else:
            yield Claim(start, end, terminal.measure, kind=kind)


def _assigned(reader: Reader, tree: Tree[Token]) -> Iterator[Assigned]:
    """ "c(NaOH) = 0.1 mol/L": the symbol, what stands in its brackets, the value."""
    last = tree.children[-1]
    if not (isinstance(last, Tree) and last.data == "value"):
        return
    value = next(reader.tokens(last)).measure
    assert value is not None
    symbol = tree.children[0]
    assert isinstance(symbol, Tree)
    start, end = reader.bounds(tree)
    terminal = next(reader.tokens(symbol))
    material: Material | None = None
    for part in symbol.find_data("material"):
        material = reader.material(part)
    yield Assigned(
        start,
        end,
        value,
        material if material is not None and material.words else None,
        "value",
        reader.chars[terminal.start : terminal.end],
    )
