"""Strengths written with their symbol behind a name: "silver nitrate, c(AgNO3) = 0.1 mol/L".

ISO 80000-9 names c for the amount concentration, ρ, β and γ for the mass concentration, w for the
mass fraction, φ and σ for the volume fraction.  Behind the name of a solution they say no more
than the bare strength, so that symbol and sign are left out.
"""

from __future__ import annotations

from collections.abc import Sequence

from soplint.notation.terminals import Terminal

_SYMBOLS = {"c", "C", "w", "ρ", "β", "γ", "φ", "σ", "b"}
_VALUES = {"STRENGTH", "PERCENT"}
_BEHIND = {"NAME", "WATER", "SOLUTION", "OTHER", "COMMA", "SEMICOLON", "COLON", "RPAR", "LPAR"}
_NAMES = {"NAME", "SOLUTION"}


def strengths_unassigned(chars: str, found: Sequence[Terminal]) -> list[Terminal]:
    """The terminals without such symbols, where every symbol of the sentence is one of them."""
    symbols = [t for t in found if t.kind == "SYMBOL"]
    if not symbols or any(chars[t.start : t.end] not in _SYMBOLS for t in symbols):
        return list(found)
    result: list[Terminal] = []
    index = 0
    while index < len(found):
        terminal = found[index]
        if terminal.kind == "SYMBOL" and _follows_name(result):
            inner, after = _species(found, index + 1)
            if after and found[after].kind in _VALUES:
                if inner is not None and not _said(inner, result):
                    result.append(inner)
                index = after
                continue
        result.append(terminal)
        index += 1
    return result


def _follows_name(before: Sequence[Terminal]) -> bool:
    """Whether a named solution stands before, with no command or amount in between."""
    if not before or before[-1].kind not in _BEHIND and before[-1].measure is None:
        return False
    return any(t.kind in _NAMES for t in before)


def _species(found: Sequence[Terminal], index: int) -> tuple[Terminal | None, int]:
    """What stands in the brackets of the symbol, and the index behind the equals sign."""
    kinds = [t.kind for t in found[index : index + 4]]
    if kinds[:1] == ["EQUALS"] and len(found) > index + 1:
        return None, index + 1
    if len(kinds) == 4 and kinds[0] == "LPAR" and kinds[2:] == ["RPAR", "EQUALS"]:
        if kinds[1] in ("NAME", "OTHER") and len(found) > index + 4:
            return found[index + 1], index + 4
    return None, 0


def _said(inner: Terminal, before: Sequence[Terminal]) -> bool:
    """Whether the formula in the brackets is that of the name before it."""
    if inner.match is None:
        return False
    family = inner.match.substances[0].family
    return any(t.match is not None and t.match.substances[0].family == family for t in before)
