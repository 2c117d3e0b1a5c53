"""Whether a comma inside a number is a decimal comma or groups thousands, by file-wide evidence."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from soplint.quantities.late import LatePattern


@dataclass(frozen=True, slots=True)
class NumberStyle:
    """How often a file writes numbers that can be read in one way only.

    ``decimal_commas`` counts "0,05" and "41,6 mg", ``thousands`` counts "1,250,000" and
    "1,250.5", ``points`` counts "12.5 mg".  Spin speeds ("15,000 rcf") are left out: they say
    nothing about the masses beside them.
    """

    decimal_commas: int = 0
    thousands: int = 0
    points: int = 0

    @property
    def comma_is_decimal(self) -> bool:
        """The reading to prefer where "1,250" could be 1250 or 1.25."""
        return self.decimal_commas > self.thousands

    @property
    def settled(self) -> bool:
        """True where all evidence points one way, so that no other reading need be tried."""
        if self.decimal_commas:
            return not self.thousands and not self.points
        return self.thousands > 0


DEFAULT = NumberStyle()

_DECIMAL_COMMA = LatePattern(
    r"(?<![\w.,])(?:0,\d+|\d+,(?:\d{1,2}|\d{4,}))"
    r"(?=\s?(?:[%‰°]|(?:[mkunpµμ]?(?:g|l|L|M|mol|Mol)|gram|[мкн]{0,2}[гМл]|мкл|mm|cm)(?!\w)))"
)
_ZERO_COMMA = LatePattern(r"(?<![\w.,])0,\d*[1-9](?!\d*[,\w])")
_PH_COMMA = LatePattern(r"\bp[Hh]\s?[=:~]?\s?1?\d,\d{1,2}(?![\d,]|\s?[munµμ]?[MLlg]\b)")
_THOUSANDS = LatePattern(r"(?<![\w.,])[1-9]\d{0,2}(?:(?:,\d{3}){2,}|,\d{3}\.\d)(?![\d,])")
_POINT = LatePattern(r"(?<![\w.,])\d+\.\d+(?=\s?(?:[%‰°]|[mkunpµμ]?(?:g|l|L|M|mol)(?!\w)))")


def number_style(texts: Iterable[str]) -> NumberStyle:
    """Count the evidence in the lines of a file.

    Example:
        >>> number_style(["41,6 mg of dye", "0,05 mM"]).comma_is_decimal
        True
        >>> number_style(["spin at 15,000 rcf", "2.5 g"]).comma_is_decimal
        False
    """
    decimal = thousands = points = 0
    for text in texts:
        if "," in text:
            decimal += _DECIMAL_COMMA.count(text) or _ZERO_COMMA.count(text)
            decimal += _PH_COMMA.count(text)
            thousands += _THOUSANDS.count(text)
        if "." in text:
            points += _POINT.count(text)
    return NumberStyle(decimal, thousands, points)
