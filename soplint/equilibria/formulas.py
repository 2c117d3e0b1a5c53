"""Chemical formulas: spellings of hydrates, atom counts, a key that ignores the order of writing."""

from __future__ import annotations

import re

from soplint.equilibria.errors import EquilibriumError

_SUBSCRIPTS = str.maketrans("₀₁₂₃₄₅₆₇₈₉", "0123456789")
_DOTS = re.compile(r"\s*[.·•⋅∙*×]\s*|\s+x\s+")
_TOKEN = re.compile(r"([A-Z][a-z]?)(\d*)|([(\[])|([)\]])(\d*)")
_PART = re.compile(r"(\d*)(.+)")
_ELEMENTS = frozenset(
    "H Li Be B C N O F Na Mg Al Si P S Cl K Ca Ti V Cr Mn Fe Co Ni Cu Zn As Se Br Rb Sr Mo Ag Cd "
    "Sn Sb Te I Cs Ba La Ce W Pt Au Hg Pb Bi".split()
)

Atoms = dict[str, int]


def _add(into: Atoms, atoms: Atoms, times: int) -> None:
    for element, count in atoms.items():
        into[element] = into.get(element, 0) + count * times


def _part(text: str, whole: str) -> Atoms:
    """Atom counts of a formula without dots."""
    stack: list[Atoms] = [{}]
    position = 0
    while position < len(text):
        match = _TOKEN.match(text, position)
        if match is None:
            raise EquilibriumError(f"{whole!r} is not a formula", whole)
        element, count, opening, closing, times = match.groups()
        if element:
            if element not in _ELEMENTS:
                raise EquilibriumError(f"{element!r} in {whole!r} is no element known here", whole)
            _add(stack[-1], {element: int(count or 1)}, 1)
        elif opening:
            stack.append({})
        elif closing and len(stack) > 1:
            inner = stack.pop()
            _add(stack[-1], inner, int(times or 1))
        else:
            raise EquilibriumError(f"unbalanced bracket in {whole!r}", whole)
        position = match.end()
    if len(stack) > 1:
        raise EquilibriumError(f"unbalanced bracket in {whole!r}", whole)
    return stack[0]


def parse_formula(text: str) -> tuple[Atoms, int]:
    """Atom counts of a formula without its water of crystallisation, and that water.

    Parameters: text; hydrate dots may be written . · * and numbers as subscripts.
    Returns: (element -> count, molecules of water).
    Errors: EquilibriumError when the text is no formula.

    >>> parse_formula("Na2HPO4·7H2O")
    ({'Na': 2, 'H': 1, 'P': 1, 'O': 4}, 7)
    """
    if len(text) > 120:
        raise EquilibriumError("formula too long", text[:40])
    atoms: Atoms = {}
    water = 0
    for index, piece in enumerate(_DOTS.split(text.strip().translate(_SUBSCRIPTS))):
        match = _PART.fullmatch(piece)
        if match is None or len(match[1]) > 3:
            raise EquilibriumError(f"{text!r} is not a formula", text)
        times = int(match[1] or 1)
        if index and match[2] == "H2O":
            water += times
        else:
            _add(atoms, _part(match[2], text), times)
    return atoms, water


def key(atoms: Atoms) -> str:
    """A text that is the same for every way of writing the same atoms.

    >>> key(parse_formula("CH3COONa")[0]) == key(parse_formula("C2H3NaO2")[0])
    True
    """
    return "".join(f"{element}{atoms[element]}" for element in sorted(atoms) if atoms[element])
