"""From the phrase tree of a sentence to its typed phrases.

Three passes: nodes become phrases (here); neighbours that belong together are joined (``joins``:
a name and the amount after it, strengths after a comma); commands give the phrases their meaning
(``meaning``: a volume after "make up to", a pH after "adjust").
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from lark import Token, Tree

from soplint.notation.closed import closed
from soplint.notation.joins import join
from soplint.notation.nodes import Reader, opens
from soplint.notation.parts import Condition, Part, Role
from soplint.notation.phrases import Command, Loose, ToVolume, Ware
from soplint.notation.terminals import Terminal


def parts(chars: str, tree: Tree[Token], terminals: Sequence[Terminal]) -> list[Part]:
    """The phrases of a sentence in order, with the role words between them."""
    reader = Reader(chars, terminals)
    found: list[Part] = []
    for child in tree.children:
        if isinstance(child, Tree):
            _part(reader, child, found)
    return join(found)


def _part(reader: Reader, tree: Tree[Token], found: list[Part]) -> None:
    start, end = reader.bounds(tree) if tree.children else (0, 0)
    if tree.data == "dose":
        dose = reader.dose(tree)
        back = reader.points_back(dose)
        found.append(replace(dose, material=None) if back else dose)
        if back:
            found.append(Role(end, end, "OF"))
        if _ends_in(tree, "OF"):
            found.append(Role(end, end, "OF"))
        _opened(reader, tree, found)
    elif tree.data == "material":
        found.append(reader.material(tree))
        if _ends_in(tree, "OF"):
            found.append(Role(end, end, "OF"))
        _opened(reader, tree, found)
    elif tree.data in ("share", "assigned", "worked"):
        found.extend(closed(reader, tree))
    elif tree.data == "to_volume":
        tokens = list(reader.tokens(tree))
        volume = tokens[-1].measure
        said = any(t.kind == "FINAL" for t in tokens)
        found.append(ToVolume(start, end, volume, said_final=said))
    elif tree.data == "at_temperature":
        measure = list(reader.tokens(tree))[-1].measure
        assert measure is not None
        found.append(Condition(start, end, Loose(start, end, measure)))
    elif tree.data == "loose":
        _loose(reader, next(reader.tokens(tree)), found)
    elif tree.data == "command":
        found.append(Command(start, end, next(reader.tokens(tree)).kind))
    elif tree.data == "role":
        _role(reader, tree, found)


def _ends_in(tree: Tree[Token], kind: str) -> bool:
    last = tree.children[-1] if tree.children else None
    return isinstance(last, Token) and last.type == kind


def _opened(reader: Reader, tree: Tree[Token], found: list[Part]) -> None:
    """Go on into the brackets of a thing that say more than remarks."""
    nodes = list(reversed(tree.children))
    while nodes:
        child = nodes.pop()
        if not isinstance(child, Tree):
            continue
        if child.data != "bracket":
            nodes.extend(reversed(child.children))
        elif opens(child):
            _open(reader, child, found)


def _open(reader: Reader, bracket: Tree[Token], found: list[Part]) -> None:
    """The phrases in a bracket, between the roles of its signs."""
    start, end = reader.bounds(bracket)
    found.append(Role(start, start + 1, "LPAR"))
    for inner in bracket.children:
        if isinstance(inner, Tree):
            _part(reader, inner, found)
    found.append(Role(end, end, "RPAR"))


def _loose(reader: Reader, terminal: Terminal, found: list[Part]) -> None:
    words = reader.chars[terminal.start : terminal.end]
    if terminal.kind == "WARE":
        if terminal.measure is not None:
            found.append(Ware(terminal.start, terminal.end, terminal.measure, words))
        else:
            found.append(Role(terminal.start, terminal.end, "WARE"))
    elif terminal.measure is not None:
        found.append(Loose(terminal.start, terminal.end, terminal.measure))


def _role(reader: Reader, tree: Tree[Token], found: list[Part]) -> None:
    """Role words one by one; a bracket without a thing before it opens into its phrases."""
    for child in tree.children:
        if isinstance(child, Tree) and child.data == "bracket":
            _open(reader, child, found)
        else:
            for terminal in reader.tokens(child):
                words = reader.chars[terminal.start : terminal.end].lower()
                found.append(Role(terminal.start, terminal.end, terminal.kind, words))
