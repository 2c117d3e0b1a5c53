"""From the parse tree to materials and doses: the phrases that need no neighbour."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field

from lark import Token, Tree

from soplint.notation.phrases import Dose, Material
from soplint.notation.terminals import Terminal
from soplint.quantities.model import Measure
from soplint.substances.model import Match

Node = Tree[Token] | Token

_POINTING = re.compile(
    r"\s*(?:of\s+)?(?:this|that|the above|the latter)\s+"
    r"(?:(?:stock|standard|working|diluted|intermediate)\s+)?"
    r"(?:solution|stock|dilution|mixture|standard|mix)\b",
    re.IGNORECASE,
)
# Endings of words that make a following name part of a longer one (radicals of organic names).
_RADICALS = ("yl", "oxy", "amino", "phenyl", "bromo", "chloro", "iodo", "fluoro", "nitro", "-")


@dataclass(slots=True)
class Remarks:
    """What a bracket says about the thing before it."""

    strengths: list[Measure] = field(default_factory=list)
    finals: list[Measure] = field(default_factory=list)
    amounts: list[Measure] = field(default_factory=list)
    ph: Measure | None = None
    temperature: Measure | None = None
    molar_mass: Measure | None = None
    density: Measure | None = None
    contents: list[Material] = field(default_factory=list)
    each: bool = False


def opens(bracket: Tree[Token]) -> bool:
    """Whether a bracket is no remark about the thing before it, but goes on with the sentence.

    It lists doses by name ("(10 g tryptone, 5 g yeast extract per litre)") or says with what
    something was done ("pH 7.4 (with 2 M KOH)").
    """
    doses = 0
    first: Node = bracket.children[1]
    while isinstance(first, Tree):
        first = first.children[0]
    if first.type == "WITH":
        return True
    for child in bracket.children:
        if isinstance(child, Tree) and child.data == "dose":
            last = child.children[-1]
            doses += isinstance(last, Tree) and last.data == "material"
    return doses > 1


class Reader:
    """Reads nodes of one sentence; holds its characters and terminals."""

    def __init__(self, chars: str, terminals: Sequence[Terminal]) -> None:
        self.chars = chars
        self.terminals = terminals

    def terminal(self, token: Token) -> Terminal:
        """The terminal that a token counts."""
        return self.terminals[token.start_pos or 0]

    def tokens(self, node: Node) -> Iterator[Terminal]:
        """All terminals below a node, left to right."""
        stack: list[Node] = [node]
        while stack:
            top = stack.pop()
            if isinstance(top, Token):
                yield self.terminal(top)
            else:
                stack.extend(reversed(top.children))

    def bounds(self, node: Node) -> tuple[int, int]:
        """First and last offset of a node."""
        first = last = node
        while isinstance(first, Tree):
            first = first.children[0]
        while isinstance(last, Tree):
            last = last.children[-1]
        return self.terminal(first).start, self.terminal(last).end

    # --- materials -----------------------------------------------------------------------------

    def material(self, tree: Tree[Token]) -> Material:
        """A material with its strengths and the remarks in its brackets."""
        words, match, solution, each = "", None, False, False
        before: list[Measure] = []
        remarks = Remarks()
        for child in tree.children:
            if isinstance(child, Token):
                continue  # "of" between a strength and its name
            if child.data == "head":
                words, match, solution = self._head(child)
            elif child.data == "strengths":
                each = self._strengths(child, before, remarks) or each
            else:
                self._tail(child, before, remarks, unknown=match is None)
        start, end = self.bounds(tree)
        ph = next((m for m in before if m.dimension == "pH"), None) or remarks.ph
        return Material(
            start,
            end,
            words,
            match,
            solution,
            strengths=tuple(m for m in before if m.dimension != "pH"),
            ph=ph,
            temperature=remarks.temperature,
            bracket=tuple(remarks.strengths + remarks.amounts),
            finals=tuple(remarks.finals),
            molar_mass=remarks.molar_mass,
            density=remarks.density,
            contents=tuple(remarks.contents),
            each=each or remarks.each,
        )

    def _strengths(self, tree: Tree[Token], before: list[Measure], remarks: Remarks) -> bool:
        """Add strengths before a name to ``before``; whether "each" was said."""
        each = False
        nodes: list[Node] = [tree]  # the grammar nests one level for each strength
        while nodes:
            child = nodes.pop()
            if isinstance(child, Token):
                each = True
            elif child.data == "strengths":
                nodes.extend(reversed(child.children))
            elif child.data == "bracket":
                self.remarks(child, remarks)
            else:
                before.extend(m for m in (t.measure for t in self.tokens(child)) if m is not None)
        return each

    def _head(self, tree: Tree[Token]) -> tuple[str, Match | None, bool]:
        found = list(self.tokens(tree))
        matches = [t.match for t in found if t.match is not None]
        solution = any(t.kind == "SOLUTION" for t in found)
        words = self.chars[found[0].start : found[-1].end].strip(" .,;:")
        distinct = {m.substances[0].family for m in matches if m.substances}
        match = matches[0] if len(distinct) == 1 else None
        if match is not None and self._belongs_to_longer_name(found):
            match = None
        return words, match, solution

    def _belongs_to_longer_name(self, found: list[Terminal]) -> bool:
        """Whether an unknown chemical word stands before a name: "4-nitrophenyl phosphate"."""
        for before, after in zip(found, found[1:], strict=False):
            if after.match is None or before.kind != "OTHER":
                continue
            last = self.chars[before.start : before.end].split()[-1].lower().rstrip(",")
            if last.endswith(_RADICALS) or any(c.isdigit() for c in last):
                return True
        return False

    def _tail(
        self, tree: Tree[Token], before: list[Measure], remarks: Remarks, unknown: bool
    ) -> None:
        for child in tree.children:
            if isinstance(child, Tree) and child.data == "bracket":
                self.remarks(child, remarks, unknown)
            else:
                for terminal in self.tokens(child):
                    if terminal.kind == "MOLARMASS":
                        remarks.molar_mass = terminal.measure
                    elif terminal.kind == "DENSITY":
                        remarks.density = terminal.measure
                    elif terminal.measure is not None:
                        before.append(terminal.measure)

    def _contents(self, bracket: Tree[Token]) -> list[Material]:
        """Named strengths in a bracket, where it lists at least two: "(0.15 M NaCl, 10 mM Tris)"."""
        named = [
            self.material(child)
            for child in bracket.children
            if isinstance(child, Tree) and child.data == "material"
        ]
        named = [m for m in named if m.words and m.strengths]
        return named

    def remarks(self, bracket: Tree[Token], into: Remarks, unknown: bool = False) -> Remarks:
        """What the bracket says, added to ``into``."""
        if opens(bracket):
            return into
        found = list(self.tokens(bracket))
        final = any(t.kind in ("FINAL", "FINALCONC") for t in found)
        named = self._contents(bracket)
        listed = len(named) > 1 or bool(named and unknown and not final)
        if listed:
            into.contents.extend(named)
        solvent = False
        for index, terminal in enumerate(found):
            measure = terminal.measure
            if terminal.kind == "IN":
                # "(10 g/L in ethanol 96 % v/v)": what follows is the solvent's; "(20X in 500 mL)"
                # says for which volume
                after = [t.kind for t in found[index + 1 : index + 3]]
                solvent = after[:1] != ["VOLUME"] or after[1:] not in (["COMMA"], ["RPAR"])
            if terminal.kind == "EACH":
                into.each = True
            if measure is None or solvent:
                continue
            if listed and terminal.kind in ("STRENGTH", "PERCENT", "FOLD"):
                continue
            if terminal.kind == "PH" and any(
                m.start <= terminal.start < m.end and m.ph is not None for m in into.contents
            ):
                continue  # the label pH of one of several stocks
            if terminal.kind in ("STRENGTH", "PERCENT", "FOLD"):
                (into.finals if final else into.strengths).append(measure)
            elif terminal.kind == "PH":
                into.ph = into.ph or measure
            elif terminal.kind == "MOLARMASS":
                into.molar_mass = into.molar_mass or measure
            elif terminal.kind == "DENSITY":
                into.density = into.density or measure
            elif terminal.kind == "TEMPERATURE":
                into.temperature = into.temperature or measure
            elif terminal.kind in ("MASS", "VOLUME", "AMOUNT", "RATIO"):
                into.amounts.append(measure)
        return into

    def _amount(self, tree: Tree[Token], remarks: Remarks) -> tuple[Measure | None, bool]:
        """The quantity of a dose; brackets behind it go to ``remarks``."""
        amount: Measure | None = None
        each = False
        nodes: list[Node] = [tree]  # the grammar nests one level for each bracket
        while nodes:
            part = nodes.pop()
            if isinstance(part, Token):
                each = True
            elif part.data == "quantity":
                amount = next(self.tokens(part)).measure
            elif part.data == "amount":
                nodes.extend(reversed(part.children))
            else:
                self.remarks(part, remarks)
        return amount, each

    def points_back(self, dose: Dose) -> bool:
        """Whether a dose is of the solution made just before: "10 mL of this solution"."""
        material = dose.material
        if material is None or material.match or material.strengths or material.ph:
            return False
        bare = self.chars[material.start : dose.end].strip(" .,;:") == material.words
        return bare and _POINTING.match(self.chars, dose.amount.end) is not None

    # --- doses -----------------------------------------------------------------------------------

    def dose(self, tree: Tree[Token]) -> Dose:
        """An amount with its material, if one follows."""
        amount: Measure | None = None
        each = False
        material: Material | None = None
        remarks = Remarks()
        for child in tree.children:
            if not isinstance(child, Tree):
                continue
            if child.data == "material":
                material = self.material(child)
            elif child.data == "amount":
                amount, each = self._amount(child, remarks)
        assert amount is not None
        start, end = self.bounds(tree)
        if material is None and (remarks.strengths or remarks.finals or remarks.molar_mass):
            # "KBr 12 g (100 mM)": kept on a nameless material until the name is found
            material = Material(
                start,
                end,
                "",
                bracket=tuple(remarks.strengths),
                finals=tuple(remarks.finals),
                molar_mass=remarks.molar_mass,
            )
        return Dose(start, end, amount, material, same=tuple(remarks.amounts), each=each)
