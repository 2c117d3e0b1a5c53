"""What a superscript is read as, from what stands before and after it."""

from __future__ import annotations

import re

from soplint.intake.characters import RAISED_DIGITS

_DEGREE = frozenset("o O ° 0 º ∘".split())
_CHARGE = re.compile(r"\d*[+-]")


def raised(content: str, before: str, after: str) -> str:
    """Characters for the superscript ``content`` printed after ``before`` and ahead of ``after``.

    A power stays a power (``10^5``, ``L^-1``), a charge stays a charge (``Ca2+``, ``SO4^2-``),
    a raised o is a degree sign, a numerator is a numerator, and any other raised digit stays
    raised (``m²``), so that it is never taken for part of a formula.

    >>> raised("5", "x 10", " "), raised("2+", "Ca", " "), raised("2-", "SO4", ""), raised("2", " m", "")
    ('^5', '2+', '^2-', '²')
    """
    last = before[-1:]
    if content in _DEGREE and after in ("C", "F") and (content != "0" or not last.isalpha()):
        return "°"
    if content.isdigit() and after in tuple("/⁄"):
        return " " + content if last.isdigit() else content
    if last.isdigit() and content.lstrip("+-").isdigit():
        return "^" + content
    if _CHARGE.fullmatch(content):
        return "^" + content if last.isdigit() and len(content) > 1 else content
    if content[:1] == "-" and content[1:].isdigit():
        return "^" + content
    if content.isdigit() and last.strip():
        return "".join(RAISED_DIGITS[digit] for digit in content if digit in RAISED_DIGITS)
    return content
