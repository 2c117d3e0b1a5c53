"""The litre of "30.3 g per litre", which is a volume though it is written as a word."""

from __future__ import annotations

from soplint.notation.phrases import ToVolume
from soplint.quantities.model import Measure


def per_litre(start: int, end: int) -> ToVolume:
    """The volume of one litre at the word between ``start`` and ``end``."""
    one = Measure(start, end, "volume", 1.0, 1.0, 1.0, "L", 1.0, 1, numeral=(start, start))
    return ToVolume(start, end, one, said_final=True)
