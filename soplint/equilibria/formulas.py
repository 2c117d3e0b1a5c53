"""Chemical formulas: spellings of hydrates, atom counts, a key that ignores the order of writing."""

from __future__ import annotations

import re

from soplint.equilibria.errors import EquilibriumError

_SUBSCRIPTS = str.maketrans("₀₁₂₃₄₅₆₇₈₉", "0123456789")
_DOTS = re.compile(r"\s*[·•⋅∙*×]\s*|\s+x\s+")
_STOPS = re.compile(r"\s*\.\s*")
_TOKEN = re.compile(r"([A-Z][a-z]?)(\d*)|([(\[])|([)\]])(\d*)")
_PART = re.compile(r"(\d*(?:[.,]\d+)?|½)\s*(.+)")
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


def _pieces(text: str) -> list[tuple[float, str]]:
    """Parts of an adduct with their multipliers; a full stop separates only when no other dot does."""
    plain = text.strip().translate(_SUBSCRIPTS)
    dots = _DOTS if _DOTS.search(plain) else _STOPS
    pieces = []
    for piece in dots.split(plain):
        match = _PART.fullmatch(piece)
        if match is None or len(match[1]) > 5:
            raise EquilibriumError(f"{text!r} is not a formula", text)
        pieces.append((float((match[1] or "1").replace(",", ".").replace("½", "0.5")), match[2]))
    return pieces


def adducts(text: str) -> tuple[list[tuple[int, Atoms]], float]:
    """Atom counts of each part of a formula joined by dots, and the water of crystallisation.

    Parameters: text; parts may be joined by . · * and numbers written as subscripts.
    Returns: (multiplier, element -> count) of each part, molecules of water.
    Errors: EquilibriumError when the text is no formula.

    >>> adducts("C4H11NO3·HCl")[0][1]
    (1, {'H': 1, 'Cl': 1})
    """
    if len(text) > 120:
        raise EquilibriumError("formula too long", text[:40])
    parts: list[tuple[int, Atoms]] = []
    water = 0.0
    for index, (times, piece) in enumerate(_pieces(text)):
        if index and piece == "H2O":
            water += times
        elif times.is_integer():
            parts.append((int(times), _part(piece, text)))
        else:
            raise EquilibriumError(f"part of a molecule in {text!r}", text)
    return parts, water


def parse_formula(text: str) -> tuple[Atoms, float]:
    """Atom counts of a formula without its water of crystallisation, and that water.

    Parameters: text, as for `adducts`.
    Returns: (element -> count, molecules of water).
    Errors: EquilibriumError when the text is no formula.

    >>> parse_formula("Na2HPO4·7H2O")
    ({'Na': 2, 'H': 1, 'P': 1, 'O': 4}, 7.0)
    """
    parts, water = adducts(text)
    atoms: Atoms = {}
    for times, part in parts:
        _add(atoms, part, times)
    return atoms, water


def key(atoms: Atoms) -> str:
    """A text that is the same for every way of writing the same atoms.

    >>> key(parse_formula("CH3COONa")[0]) == key(parse_formula("C2H3NaO2")[0])
    True
    """
    return "".join(f"{element}{atoms[element]}" for element in sorted(atoms) if atoms[element])
