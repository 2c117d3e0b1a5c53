"""Chemical formulas: composition, charge, hydrate water and molar mass.

Read are brackets of three kinds, hydrates and adducts joined by any of ``· • ∙ ⋅ . * × x , ; + -``
or a space ("5 H2O"), fractional water ("0.5H2O", "½H2O"), charges ("SO4^2-", "NH4+"), Unicode
subscripts, and the slip of a zero for the letter O ("H20", "KH2P04", "Cr207").  Isotopes are not.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import lru_cache

from .elements import atomic_weights

LONGEST = 400  # characters; far above any real formula, so that no input costs noticeable time
LARGEST_COUNT = 99_999

_PLAIN = str.maketrans(
    dict(zip("₀₁₂₃₄₅₆₇₈₉⁰¹²³⁴⁵⁶⁷⁸⁹", "01234567890123456789", strict=True))
    | dict.fromkeys("⁺₊", "+")
    | dict.fromkeys("⁻₋−–—‐‑", "-")
    | dict.fromkeys("•∙⋅⋆‧×✕＊∗・", "·")
    | dict.fromkeys("\u00a0\u202f\u2009", " ")
)
_CHARGE = re.compile(r"(?P<mark>\^\{?|[(\[]|(?<=\]))?(?P<digits>\d*)(?P<sign>[+-]{1,4})[)\]}]?$")
_COEFFICIENT = re.compile(r"(\d+) ?/ ?(\d+)|([½¼¾])|(\d+[.,]\d+(?=[^\d.,])|\d+)")
_FRACTIONS = {"½": 0.5, "¼": 0.25, "¾": 0.75}
_SEPARATOR = re.compile(r" *(?:[·*,;.+-]|(?<![A-Za-z])[xX](?= *[\d½¼¾(\[A-Z])) *| +")
_WATER_SLIP = re.compile(r"H20(?!\d)(?=$|[ ·*,;.+)\]-])")
_OPEN = {"(": ")", "[": "]", "{": "}"}
_DIGITS = re.compile(r"\d+")


class FormulaError(ValueError):
    """A text that is no formula: names the culprit and where it stands (from 0)."""

    def __init__(self, formula: str, position: int, culprit: str, reason: str) -> None:
        shown = formula if len(formula) <= 60 else formula[:57] + "..."
        super().__init__(f"{shown!r}, character {position + 1}: {reason} ({culprit!r})")
        self.formula = formula
        self.position = position
        self.culprit = culprit
        self.reason = reason


@dataclass(frozen=True, slots=True)
class Formula:
    """A parsed formula."""

    text: str  # as given
    elements: dict[str, float]  # atoms of each element, hydrate water included
    charge: int
    water: float  # mol hydrate water per mol
    slips: tuple[str, ...] = ()  # "zero-for-O"

    @property
    def molar_mass(self) -> float:
        """Molar mass in g/mol."""
        weights = atomic_weights()
        return sum(weights[symbol].value * count for symbol, count in self.elements.items())

    @property
    def uncertainty(self) -> float:
        """Uncertainty of the molar mass in g/mol: linear sum over the elements, an upper bound."""
        weights = atomic_weights()
        return sum(weights[symbol].uncertainty * count for symbol, count in self.elements.items())


class _Scanner:
    """One pass over a formula; a stack of composition tables, one for each open bracket."""

    def __init__(self, formula: str, text: str) -> None:
        self.formula = formula
        self.text = text
        self.at = 0
        self.stack: list[dict[str, float]] = [{}]
        self.brackets: list[int] = []
        self.slips: set[str] = set()

    def fail(self, reason: str, position: int, length: int = 1) -> FormulaError:
        return FormulaError(self.formula, position, self.text[position : position + length], reason)

    def add(self, symbol: str, count: float) -> None:
        table = self.stack[-1]
        table[symbol] = table.get(symbol, 0) + count

    def count(self) -> int:
        """The number at the present place, 1 when there is none."""
        found = _DIGITS.match(self.text, self.at)
        if found is None:
            return 1
        if len(found[0]) > len(str(LARGEST_COUNT)):
            raise self.fail("number too large", self.at, len(found[0]))
        self.at = found.end()
        if int(found[0]) == 0:
            raise self.fail("a count of zero", found.start(), len(found[0]))
        return int(found[0])

    def element(self) -> None:
        """An element symbol and its count; "P04" and "Cr207" hold a zero for the letter O."""
        weights = atomic_weights()
        text, start = self.text, self.at
        symbol = text[start : start + 2]
        if symbol not in weights:
            symbol = text[start]
        two_letters = text[start + 1 : start + 2].islower()
        if symbol not in weights or (two_letters and len(symbol) == 1):
            raise self.fail("no such element", start, 2 if two_letters else 1)
        self.at += len(symbol)
        digits = _DIGITS.match(text, self.at)
        if digits is None:
            self.add(symbol, 1)
        elif digits[0].startswith("0"):
            self.slips.add("zero-for-O")
            self.add(symbol, 1)
            self.oxygen(self.at)
        elif symbol != "C" and len(digits[0]) == 3 and digits[0][1] == "0" != digits[0][2]:
            self.slips.add("zero-for-O")
            self.add(symbol, int(digits[0][0]))
            self.oxygen(self.at + 1)
        else:
            self.add(symbol, self.count())

    def oxygen(self, zero: int) -> None:
        """The zero at ``zero`` is the letter O; its count follows."""
        self.at = zero + 1
        self.add("O", self.count())

    def close(self) -> None:
        """A closing bracket: the inner table, multiplied, joins the outer one."""
        if not self.brackets:
            raise self.fail("closing bracket without its opening", self.at)
        opening = self.brackets.pop()
        if _OPEN[self.text[opening]] != self.text[self.at]:
            raise self.fail("closing bracket of another kind than its opening", self.at)
        inner = self.stack.pop()
        if not inner:
            raise self.fail("empty brackets", opening, 2)
        self.at += 1
        factor = self.count()
        for symbol, count in inner.items():
            self.add(symbol, count * factor)

    def ends_part(self, start: int) -> bool:
        """Whether a separator stands here, outside brackets and after something."""
        if self.brackets or self.at == start:
            return False
        return _SEPARATOR.match(self.text, self.at) is not None

    def part(self) -> dict[str, float]:
        """Everything up to the next separator outside brackets."""
        start = self.at
        self.stack = [{}]
        while self.at < len(self.text):
            if slip := _WATER_SLIP.match(self.text, self.at):
                self.slips.add("zero-for-O")
                self.add("H", 2)
                self.add("O", 1)
                self.at = slip.end()
                continue
            char = self.text[self.at]
            if self.ends_part(start):
                break
            if "A" <= char <= "Z":
                self.element()
            elif char in _OPEN:
                if len(self.brackets) > 20:
                    raise self.fail("brackets nested too deeply", self.at)
                self.brackets.append(self.at)
                self.stack.append({})
                self.at += 1
            elif char in ")]}":
                self.close()
            else:
                raise self.fail("not part of a formula", self.at)
        if self.brackets:
            raise self.fail("opening bracket without its closing", self.brackets[-1])
        if self.at == start:
            raise self.fail("no element", min(start, len(self.text) - 1))
        return self.stack[0]

    def coefficient(self) -> float:
        """The multiple of a part: "5", "0.5", "1/2" or a fraction sign; 1 when none stands."""
        found = _COEFFICIENT.match(self.text, self.at)
        if found is None:
            return 1
        self.at = found.end()
        while self.text.startswith(" ", self.at):
            self.at += 1
        above, below, sign, number = found.groups()
        if above is not None:
            value = int(above) / int(below) if int(below) else 0.0
        else:
            value = _FRACTIONS[sign] if sign else float(number.replace(",", "."))
        if not 0 < value <= LARGEST_COUNT:
            raise self.fail("impossible multiple", found.start(), len(found[0]))
        return value


def _split_charge(text: str) -> tuple[str, int]:
    """``text`` without its trailing charge, and the charge."""
    found = _CHARGE.search(text)
    if found is None:
        return text, 0
    digits, signs, kept = found["digits"], found["sign"], ""
    if found["mark"] is None and digits:
        single_element = re.fullmatch(r"[A-Z][a-z]?", text[: found.start()]) is not None
        if not single_element or len(digits) > 1:
            kept, digits = (digits[:-1], digits[-1]) if len(digits) > 1 else (digits, "")
    size = int(digits[:2]) if digits else len(signs)
    return text[: found.start()] + kept, size if signs[0] == "+" else -size


@lru_cache(maxsize=4096)
def parse_formula(formula: str) -> Formula:
    """Composition, charge and hydrate water of a chemical formula.

    Raises FormulaError naming the culprit and its place for anything that is no formula.

    >>> parsed = parse_formula("CH3COONa·3H2O")
    >>> parsed.elements["O"], parsed.water
    (5.0, 3.0)
    >>> parse_formula("SO4^2-").charge
    -2
    >>> parse_formula("NaH2PO4.H20").slips
    ('zero-for-O',)
    """
    text = formula.translate(_PLAIN).strip()
    if not text:
        raise FormulaError(formula, 0, "", "empty formula")
    if len(text) > LONGEST:
        raise FormulaError(formula, LONGEST, text[LONGEST : LONGEST + 10], "formula too long")
    text, charge = _split_charge(text)
    scanner = _Scanner(formula, text)
    if not text:
        raise FormulaError(formula, 0, formula[:1], "a charge without a formula")
    total: dict[str, float] = {}
    water = 0.0
    parts = 0
    while True:
        multiple = scanner.coefficient()
        if scanner.at >= len(text):
            raise scanner.fail("nothing after this", len(text) - 1)
        composition = scanner.part()
        if parts and composition == {"H": 2, "O": 1}:
            water += multiple
        for symbol, count in composition.items():
            total[symbol] = total.get(symbol, 0) + count * multiple
        parts += 1
        separator = _SEPARATOR.match(text, scanner.at)
        if separator is None:
            break
        scanner.at = separator.end()
    return Formula(formula, total, charge, water, tuple(sorted(scanner.slips)))


def molar_mass(formula: str) -> float:
    """Molar mass in g/mol, hydrate water included: the sum of atoms times atomic weight.

    Weights: standard atomic weights 2021, single values for the interval elements (Prohaska et
    al. 2022, Pure Appl. Chem. 94, 573).  The electron mass of charges is neglected.
    Raises FormulaError.

    >>> round(molar_mass("Na2HPO4·7H2O"), 3)
    268.062
    >>> round(molar_mass("(NH4)2SO4"), 2)
    132.13
    """
    return parse_formula(formula).molar_mass


def molar_mass_uncertainty(formula: str) -> float:
    """Upper bound of the uncertainty of ``molar_mass`` in g/mol, from the atomic weights.

    >>> molar_mass_uncertainty("NaCl") < 0.011
    True
    """
    return parse_formula(formula).uncertainty


def hill(elements: dict[str, float]) -> str:
    """Composition in Hill order (C, H, then by alphabet): equal for all spellings of a formula.

    >>> hill(parse_formula("CH3COOH").elements)
    'C2H4O2'
    """
    first = [symbol for symbol in ("C", "H") if "C" in elements and symbol in elements]
    rest = sorted(symbol for symbol in elements if symbol not in first)
    return "".join(
        symbol if elements[symbol] == 1 else f"{symbol}{elements[symbol]:g}"
        for symbol in (*first, *rest)
    )
