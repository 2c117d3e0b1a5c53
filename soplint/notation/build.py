"""From the phrase tree of a sentence to its typed phrases.

Three passes: nodes become phrases; neighbours that belong together are joined (a name and the
amount after it, strengths after a comma, alternatives); commands give the phrases their meaning
(a volume after "make up to", a pH after "adjust").
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from lark import Token, Tree

from soplint.notation.nodes import Reader
from soplint.notation.phrases import Command, Dose, Loose, Material, Phrase, ToVolume, Ware
from soplint.notation.terminals import Terminal

# Terminals that may stand between a name and its amount or strength: "Bicine, 8.2 g".
_LINKS = frozenset({"COMMA", "DASH", "COLON", "EQUALS", "SEMICOLON"})


@dataclass(frozen=True, slots=True)
class Role:
    """A role word or separator that stands between phrases."""

    start: int
    end: int
    kind: str


@dataclass(frozen=True, slots=True)
class Condition:
    """"at 25 °C": a temperature that belongs to what stands before it."""

    start: int
    end: int
    loose: Loose


Part = Phrase | Role | Condition


def parts(chars: str, tree: Tree[Token], terminals: Sequence[Terminal]) -> list[Part]:
    """The phrases of a sentence in order, with the role words between them."""
    reader = Reader(chars, terminals)
    found: list[Part] = []
    for child in tree.children:
        if isinstance(child, Tree):
            _part(reader, child, found)
    return _join(found)


def _part(reader: Reader, tree: Tree[Token], found: list[Part]) -> None:
    start, end = reader.bounds(tree) if tree.children else (0, 0)
    if tree.data == "dose":
        found.append(reader.dose(tree))
        if any(isinstance(c, Token) and c.type == "OF" for c in tree.children[-1:]):
            found.append(Role(end, end, "OF"))
    elif tree.data == "material":
        found.append(reader.material(tree))
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
            found.append(Role(*reader.bounds(child), "LPAR"))
            for inner in child.children:
                if isinstance(inner, Tree):
                    _part(reader, inner, found)
            end = reader.bounds(child)[1]
            found.append(Role(end, end, "RPAR"))
        else:
            for terminal in reader.tokens(child):
                found.append(Role(terminal.start, terminal.end, terminal.kind))


# --- joining neighbours ----------------------------------------------------------------------


def _join(found: list[Part]) -> list[Part]:
    found = _shift_strengths(found)
    found = _late_strengths(found)
    return _name_first(found)


def _shift_strengths(found: list[Part]) -> list[Part]:
    """"20 mM Tris 150 mM NaCl": a strength before a name belongs to that name."""
    result = list(found)
    for index in range(len(result) - 1):
        first, second = result[index], result[index + 1]
        left = first.material if isinstance(first, Dose) else first
        if not (isinstance(left, Material) and isinstance(second, Material)):
            continue
        if second.strengths or not second.words or len(left.strengths) < 2 or left.bracket:
            continue
        moved = left.strengths[-1]
        shorter = replace(left, strengths=left.strengths[:-1], end=moved.start)
        result[index] = replace(first, material=shorter) if isinstance(first, Dose) else shorter
        result[index + 1] = replace(second, strengths=(moved,), start=moved.start)
    return result


def _late_strengths(found: list[Part]) -> list[Part]:
    """"hydrochloric acid, 37 % w/w, density 1.18 g/mL": facts after a comma join the name."""
    result: list[Part] = []
    for part in found:
        target = _behind_link(result)
        if target is not None:
            merged = _with_fact(result[target], part)
            if merged is not None:
                del result[target + 1 :]
                result[target] = merged
                continue
        result.append(part)
    return result


def _behind_link(result: list[Part]) -> int | None:
    """Index of the material or dose that a fact may still join, or None."""
    index = len(result) - 1
    equals = False
    while index >= 0 and isinstance(result[index], Role) and _kind(result[index]) in _LINKS:
        equals = equals or _kind(result[index]) == "EQUALS"
        index -= 1
    if equals and index >= 0 and isinstance(result[index], Dose):
        return None  # "100 µL A + 100 µL water = 0.5 mg/mL" claims a result
    if index >= 0 and isinstance(result[index], (Material, Dose)):
        return index
    return None


def _kind(part: Part) -> str:
    return part.kind if isinstance(part, (Role, Command)) else ""


def _with_fact(target: Part, part: Part) -> Part | None:
    """``target`` with the fact in ``part`` added, or None if it is no fact about it."""
    material = target.material if isinstance(target, Dose) else target
    if not isinstance(material, Material) or not material.words:
        return None
    if isinstance(target, Dose) and material.is_water:
        return None  # "10 mL bleach + 90 mL water, 0.5 %" speaks of the mixture
    if isinstance(part, Loose) and part.measure.dimension == "molar-mass":
        changed = replace(material, molar_mass=material.molar_mass or part.measure, end=part.end)
    elif isinstance(part, Loose) and part.measure.dimension == "density":
        changed = replace(material, density=material.density or part.measure, end=part.end)
    elif isinstance(part, Material) and not part.words and (part.density or part.molar_mass):
        changed = replace(
            material,
            strengths=material.strengths + part.strengths,
            bracket=material.bracket + part.bracket,
            density=material.density or part.density,
            molar_mass=material.molar_mass or part.molar_mass,
            end=part.end,
        )
    elif isinstance(part, Material) and not part.words and (part.strengths or part.ph):
        if isinstance(target, Dose) and part.strengths:
            changed = replace(material, finals=material.finals + part.strengths, end=part.end)
        else:
            changed = replace(
                material,
                strengths=material.strengths + part.strengths,
                ph=material.ph or part.ph,
                bracket=material.bracket + part.bracket,
                finals=material.finals + part.finals,
                molar_mass=material.molar_mass or part.molar_mass,
                end=part.end,
            )
    elif isinstance(part, Condition) and (material.ph is not None or material.density is not None):
        changed = replace(material, temperature=part.loose.measure, end=part.end)
    else:
        return None
    return replace(target, material=changed) if isinstance(target, Dose) else changed


def _name_first(found: list[Part]) -> list[Part]:
    """"KBr 12 g (100 mM)": a name, perhaps a separator, then its amount."""
    result: list[Part] = []
    for part in found:
        if isinstance(part, Dose) and (part.material is None or not part.material.words):
            target = _behind_link(result)
            if target is not None and _takes_amount(result, target):
                material = result[target]
                assert isinstance(material, Material)
                del result[target:]
                result.append(_named(part, material))
                continue
        result.append(part)
    return result


def _takes_amount(result: list[Part], index: int) -> bool:
    """Whether the material at ``index`` still waits for its amount."""
    part = result[index]
    if not isinstance(part, Material) or not part.words:
        return False
    before = result[index - 1] if index else None
    return not (isinstance(before, Role) and before.kind in ("IN", "WITH", "INTO", "TO", "FROM"))


def _named(dose: Dose, material: Material) -> Dose:
    """The dose with the name that stood before it; remarks behind the amount are kept."""
    behind = dose.material
    if behind is not None:
        material = replace(
            material,
            bracket=material.bracket + behind.bracket,
            finals=material.finals + behind.finals,
            molar_mass=material.molar_mass or behind.molar_mass,
        )
    return replace(dose, material=material, start=material.start)
