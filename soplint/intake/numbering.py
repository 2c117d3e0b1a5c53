"""Printed numbers and bullets before a line, told apart from quantities.

"5.1 Weigh" carries the number 5.1, "5.1 mL of ..." carries none.  The decision rests on what
follows the number: a unit-like word makes it a quantity.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

_UNIT_WORDS = """
    kg mg µg ug pg ng g gm gms gr gram grams milligram milligrams microgram micrograms kilogram
    l mL ml ML Ml mls µL µl uL ul nL nl dL dl cL cl pL m1 u1 cc cm3 dm3 liter liters litre litres
    milliliter milliliters millilitre millilitres microliter microliters microlitre microlitres
    mM µM uM nM pM mol mmol µmol umol nmol pmol mole moles molar millimolar micromolar normal
    molal mN meq mEq eq equiv equivalents ppm ppb % ‰ percent fold U IU unit units
    ° °C °F oC degrees degree deg rpm rcf psi bar mbar kPa MPa kV mV mA mW Hz kHz MHz
    nm mm cm µm um m km bp kb kDa Da min mins minute minutes s sec secs second
    seconds h hr hrs hour hours d day days week weeks month months year years
    time times drop drops volume volumes vol vols part parts tube tubes cell cells
    plate plates well wells tablet tablets pellet pellets aliquot aliquots portion portions
    piece pieces bottle bottles vial vials scoop scoops teaspoon teaspoons packet packets pack
    sheets replicates samples washes cycles rounds
    мл мкл л г мг мкг кг М мМ мкМ н ммоль моль мин ч сут дней раз
"""
# A single capital letter is a unit only when it does not start a word, a name or a list.
_UNIT = (
    r"(?:(?:"
    + "|".join(re.escape(word) for word in sorted(_UNIT_WORDS.split(), key=len, reverse=True))
    + r"|[MX]|x|×)(?![A-Za-zµА-я'’])|[LNC](?![\w'’]|[,-][A-Za-z]))"
)
NUMBER = r"(?:\d+(?:[.,]\d+)*|[.,]\d+|[½¼¾])"
_RANGE = rf"{NUMBER}(?:\s?(?:-|–|to|±|\+/-|/)\s?{NUMBER})?"
QUANTITY = rf"(?:[~≈<>≤≥]|ca\.?|about|approx\.?)?\s?{_RANGE}\s?-?\s?{_UNIT}"

_QUANTITY_START = re.compile(rf"(?:\(|\+\s?)?{QUANTITY}", re.IGNORECASE)
_QUANTITY_END = re.compile(rf"{QUANTITY}(?:\s?\([^()]{{0,60}}\))?[.,;]?\s*$", re.IGNORECASE)
_UNIT_NEXT = re.compile(rf"-?\s?{_UNIT}")
_RANGE_NEXT = re.compile(r"(?:to|or|and)\s[\d.~]")

_MAY_BE_NUMBER = re.compile(
    r"\(?(?:\d|[A-Za-z][.)\d]|[ivxIVX]{2,5}[.)])|#\.|(?:Step|STEP|Schritt|Étape|Шаг)\s"
)
_STEP = re.compile(
    r"(?:Step|STEP|Schritt|Étape|Шаг)\s+(\d{1,3}[a-z]?)(?:\s*[.:)]\s*|\s+[-–—]\s+|$)"
)
_BRACKET = re.compile(r"\(?(\d{1,3}|[A-Za-z]|[ivx]{2,5}|[IVX]{2,5})\)(?:\s+|(?=[A-Z]))")
_DOTTED = re.compile(
    r"((?:[A-Z]\.?)?\d{1,3}(?:\.\d{1,3}){1,5}|[A-Z]\.\d{1,3})(?:[.):]|\.\))?(?:\s+|$)"
)
_POINT = re.compile(r"(\d{1,3}|#|[A-Za-z]|[ivx]{2,5}|[IVX]{2,5})\.(?:\s+|$)")
_BARE = re.compile(r"(\d{1,2})(?:\s*[:–—]\s+|\s+-\s+|\s+)(?=\S)")
_BULLET = re.compile(r"([-+*•●▪◦‣·–—∙■□➢►✓])(?:\s+|$)|([•●▪◦‣■□➢►])")
_TASK = re.compile(r"\[[ xX]\]\s+")
_WORD = re.compile(r"[^\W\d_]{2,}")


@dataclass(frozen=True, slots=True)
class Mark:
    """A number or bullet printed before a line, and how many characters it takes."""

    number: str | None
    length: int
    firm: bool  # a number that cannot well be the middle of a wrapped sentence


def starts_with_quantity(chars: str) -> bool:
    """Whether a number and a unit open the line: "5.1 mL of", "~2 g", "10x", "0.2 M"."""
    return _QUANTITY_START.match(chars, 0, 60) is not None


def ends_with_quantity(chars: str) -> bool:
    """Whether a number and a unit close the line: "NaCl 5 g", "Tris - 12.1 g (0.1 M)"."""
    return _QUANTITY_END.search(chars[-80:]) is not None


def bullet(chars: str) -> Mark | None:
    """The bullet before ``chars``; a dash before a temperature is its sign.

    >>> bullet("• 5 g NaCl").length, bullet("– 20 °C"), bullet("-20 °C")
    (2, None, None)
    """
    match = _BULLET.match(chars)
    if match is None:
        return None
    rest = chars[match.end() :]
    if match.group(1) in ("-", "–") and re.match(r"\d+\s?(?:°|oC|ºC)", rest):
        return None
    return Mark(None, match.end() + task(rest), True)


def task(chars: str) -> int:
    """Length of a tick box at the start of an item's text."""
    match = _TASK.match(chars)
    return match.end() if match else 0


def printed_number(chars: str, heading: bool = False) -> Mark | None:
    """The number printed before a step or heading; None when it is a quantity or no number.

    A bare integer ("5 Buffer") counts only where ``heading`` says that the line is or may be a
    heading.

    >>> printed_number("5.1 Weigh 3 g").number, printed_number("5.1 mL of water")
    ('5.1', None)
    >>> printed_number("Step 3: Stir").number, printed_number("a) Stir").number
    ('3', 'a')
    """
    if _MAY_BE_NUMBER.match(chars) is None:
        return None
    match = _STEP.match(chars) or _BRACKET.match(chars)
    if match is not None:
        return _if_followed(match, chars, firm=True)
    match = _DOTTED.match(chars)
    if match is not None:
        return _dotted(match, chars)
    match = _POINT.match(chars)
    if match is not None:
        return _pointed(match, chars, heading)
    if heading and (match := _BARE.match(chars)) is not None:
        return _bare(match, chars)
    return None


def _if_followed(match: re.Match[str], chars: str, firm: bool) -> Mark | None:
    if match.end() >= len(chars) and not chars.startswith(("Step", "STEP")):
        return None
    return Mark(match.group(1), match.end(), firm)


def _dotted(match: re.Match[str], chars: str) -> Mark | None:
    number, rest = match.group(1), chars[match.end() :]
    parts = number.lstrip("ABCDEFGHIJKLMNOPQRSTUVWXYZ.").split(".")
    if any(len(part) > 1 and part[0] == "0" for part in parts):
        return None
    if not rest or _UNIT_NEXT.match(rest) or _RANGE_NEXT.match(rest):
        return None
    if rest[0].isupper() or rest[0] in "(\"'“‘[":
        return Mark(number, match.end(), True)
    if rest[0].isdigit() or rest[0] in "~≈<>≤≥":
        return Mark(number, match.end(), True) if starts_with_quantity(rest) else None
    if rest[0].islower():
        return Mark(number, match.end(), False)
    return None


def _pointed(match: re.Match[str], chars: str, heading: bool) -> Mark | None:
    number, rest = match.group(1), chars[match.end() :]
    if not rest:
        return None
    if number.isalpha() and number.isupper():
        follows = rest[0].isupper() or starts_with_quantity(rest)
        known = heading or number <= "H" or len(number) > 1
        return Mark(number, match.end(), False) if follows and known else None
    if rest[0].islower() and number.isdigit():
        return Mark(number, match.end(), False)
    return Mark(number, match.end(), number == "#")


def _bare(match: re.Match[str], chars: str) -> Mark | None:
    rest = chars[match.end() :]
    if _UNIT_NEXT.match(rest) or not rest[0].isupper() or not _WORD.match(rest):
        return None
    return Mark(match.group(1), match.end(), False)
