"""Arithmetic that is written out is a closed statement, not a recipe.

"(119.0 g/mol) x (45 mmol/L) x 80 mL = 0.43 g" doses nothing: its quantities become FIGURE, its
signs, brackets and unit conversions ("1 L / 1,000 mL") are left out.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from math import isclose

from soplint.notation.terminals import Terminal

_SIGNS = {"TIMES", "SLASH", "PLUS", "DASH", "EQUALS"}
_BRACKETS = {"LPAR", "RPAR"}


def arithmetic(chars: str, found: list[Terminal]) -> list[Terminal]:
    """The terminals with the figures of every written-out arithmetic marked.

    A sign of multiplication outside one is a word ("x") or debris ("*").
    """
    result: list[Terminal] = []
    at = 0
    while at < len(found):
        end = _run(found, at)
        run = found[at:end]
        if _computes(chars, run):
            result.extend(_figures(run))
        else:
            end = max(end, at + 1)
            result.extend(_plain(chars, found[at:end]))
        at = end
    return result


def _run(found: Sequence[Terminal], at: int) -> int:
    """End of the stretch of quantities, signs and brackets that begins at ``at``."""
    while at < len(found):
        terminal = found[at]
        if terminal.measure is None and terminal.kind not in _SIGNS | _BRACKETS:
            break
        at += 1
    return at


def _computes(chars: str, run: Sequence[Terminal]) -> bool:
    """Whether quantities are multiplied or divided, and to what end."""
    kinds = [terminal.kind for terminal in run]
    figures = sum(terminal.measure is not None for terminal in run)
    if figures < 2:
        return False
    times = sum(_stands_between(run, index) for index, kind in enumerate(kinds) if kind == "TIMES")
    if times and ("EQUALS" in kinds or times > 1 or "MOLARMASS" in kinds):
        return True
    return any(
        kind == "SLASH" and "EQUALS" in kinds[index:] and _bare_divisor(chars, run, index)
        for index, kind in enumerate(kinds)
    )


def _stands_between(run: Sequence[Terminal], index: int) -> bool:
    """Whether the sign at ``index`` has a quantity or a bracket on both sides."""
    if not 0 < index < len(run) - 1:
        return False
    before, after = run[index - 1], run[index + 1]
    return (before.measure is not None or before.kind == "RPAR") and (
        after.measure is not None or after.kind == "LPAR"
    )


def _bare_divisor(chars: str, run: Sequence[Terminal], index: int) -> bool:
    """ "7.5 g / 25 = 0.3 g": a number without a unit stands behind the sign."""
    following = run[index + 1]
    if following.kind == "NUMBER":
        return True
    between = chars[run[index].end : following.start].strip()
    return following.kind == "EQUALS" and between.replace(".", "").isdigit()


def _figures(run: Sequence[Terminal]) -> list[Terminal]:
    """The quantities of an arithmetic; brackets that reach beyond it stay."""
    inner = _inner_brackets(run)
    converted = _conversions(run)
    return [
        replace(terminal, kind="FIGURE") if terminal.measure is not None else terminal
        for index, terminal in enumerate(run)
        if index not in inner and index not in converted and terminal.kind not in _SIGNS
    ]


def _inner_brackets(run: Sequence[Terminal]) -> set[int]:
    """Indices of brackets that open and close within the run."""
    opened: list[int] = []
    inner: set[int] = set()
    for index, terminal in enumerate(run):
        if terminal.kind == "LPAR":
            opened.append(index)
        elif terminal.kind == "RPAR" and opened:
            inner.update((opened.pop(), index))
    return inner


def _conversions(run: Sequence[Terminal]) -> set[int]:
    """Indices of quantities that only change units: "1 mol / 1,000 mmol", "per 1 L"."""
    found: set[int] = set()
    for index in range(1, len(run) - 1):
        if run[index].kind != "SLASH":
            continue
        above, below = run[index - 1].measure, run[index + 1].measure
        if below is None:
            continue
        if below.value == 1:
            found.add(index + 1)
        if above is not None and above.dimension == below.dimension:
            if isclose(above.base, below.base, rel_tol=1e-9):
                found.update((index - 1, index + 1))
    return found


def _plain(chars: str, run: Sequence[Terminal]) -> list[Terminal]:
    """A stretch that computes nothing: "x" is a word, other signs of multiplication mean nothing."""
    return [
        replace(terminal, kind="OTHER") if terminal.kind == "TIMES" else terminal
        for terminal in run
        if terminal.kind != "TIMES" or chars[terminal.start].isalpha()
    ]
