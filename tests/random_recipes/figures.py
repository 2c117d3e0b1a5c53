"""Numbers of a recipe and how one document spells them."""

from __future__ import annotations

from dataclasses import dataclass
from math import floor, log10
from random import Random

SPELLINGS = {
    "g": ("g", "g", "g", "g", "gram", "grams"),
    "mg": ("mg",),
    "kg": ("kg",),
    "L": ("L", "L", "L", "l", "liter", "litre"),
    "mL": ("mL", "mL", "ml", "ml"),
    "uL": ("uL", "µL", "\u03bcL", "ul", "µl", "\u03bcl"),
    "M": ("M", "M", "mol/L", "mol/l"),
    "mM": ("mM", "mM", "mmol/L", "mmol/l"),
    "uM": ("uM", "µM", "\u03bcM", "µmol/L"),
    "N": ("N",),
    "g/L": ("g/L", "g/l"),
    "mg/L": ("mg/L", "mg/l"),
    "mg/mL": ("mg/mL", "mg/ml"),
    "ug/mL": ("ug/mL", "µg/mL", "\u03bcg/ml"),
    "% w/v": ("% w/v", "% (w/v)", "%"),
    "% v/v": ("% v/v", "% (v/v)", "%"),
    "%": ("%",),
    "% w/w": ("% w/w", "% (w/w)"),
    "X": ("X", "x", "×"),
    "ppm": ("ppm",),
    "g/mol": ("g/mol",),
    "g/mL": ("g/mL",),
}

TO_BASE = {
    "g": 1.0, "mg": 1e-3, "kg": 1e3, "L": 1.0, "mL": 1e-3, "uL": 1e-6,
    "M": 1.0, "mM": 1e-3, "uM": 1e-6, "N": 1.0, "g/L": 1.0, "mg/L": 1e-3, "mg/mL": 1.0,
    "ug/mL": 1e-3, "% w/v": 10.0, "% v/v": 1.0, "%": 1.0, "X": 1.0, "ppm": 1e-3,
}  # fmt: skip


@dataclass(slots=True)
class Figure:
    """One stated number; ``value`` is written, ``right`` is what it should be, both in ``unit``."""

    value: float
    unit: str
    digits: int | None  # significant figures; None: the shortest form
    right: float

    @property
    def base(self) -> float:
        return self.value * TO_BASE.get(self.unit, 1.0)


def exact(value: float, unit: str) -> Figure:
    """A number that was chosen, not computed."""
    return Figure(value, unit, None, value)


def rounded(value: float, unit: str, digits: int) -> Figure:
    """A number that was computed and is written with ``digits`` figures."""
    return Figure(value, unit, digits, value)


def plain(value: float, digits: int | None) -> str:
    """A number without exponent."""
    if digits is None:
        text = f"{value:.6f}".rstrip("0").rstrip(".") if abs(value) < 1e6 else f"{value:.0f}"
        return text
    if value == 0:
        return "0"
    places = digits - 1 - floor(log10(abs(value)) + 1e-12)
    if places <= 0:
        return f"{round(value, places):.0f}"
    return f"{value:.{places}f}"


@dataclass(frozen=True, slots=True)
class Style:
    """How one document writes numbers and units."""

    units: dict[str, str]
    glued: bool
    trailing: bool  # keep trailing zeros of computed numbers
    comma: bool  # decimal comma
    thousands: bool
    water: str

    @classmethod
    def choose(cls, rng: Random) -> Style:
        units = {unit: rng.choice(spellings) for unit, spellings in SPELLINGS.items()}
        comma = rng.random() < 0.02
        return cls(
            units,
            rng.random() < 0.25,
            rng.random() < 0.7,
            comma,
            not comma and rng.random() < 0.08,
            rng.choice(WATERS),
        )

    def number(self, figure: Figure) -> str:
        text = plain(figure.value, figure.digits)
        if "." in text and not self.trailing:
            text = text.rstrip("0").rstrip(".")
        whole, point, part = text.partition(".")
        if self.thousands and len(whole) > 3:
            whole = f"{int(whole):,}"
        return whole + ("," if self.comma and point else point) + part

    def write(self, figure: Figure) -> str:
        """Number and unit."""
        number = self.number(figure)
        if figure.unit == "pH":
            return f"pH {number}"
        if figure.unit == "":
            return number
        unit = self.units[figure.unit]
        glued = self.glued or figure.unit == "X" or (unit == "%" and self.trailing)
        glued = glued and len(unit) < 6 and "(" not in unit and "w/" not in unit
        return f"{number}{unit}" if glued else f"{number} {unit}"


WATERS = (
    "water", "water", "water", "deionised water", "distilled water", "dH2O", "ddH2O", "DI water",
    "H2O", "ultrapure water", "purified water",
)  # fmt: skip


def as_mass(grams: float, rng: Random) -> tuple[float, str]:
    """A mass in the unit a balance user would write."""
    if grams >= 2000:
        return grams / 1000, "kg"
    if grams < 0.3 or (grams < 1 and rng.random() < 0.3):
        return grams * 1000, "mg"
    return grams, "g"


def as_volume(litres: float, rng: Random) -> tuple[float, str]:
    """A volume in the unit a bench user would write."""
    if litres >= 1 and rng.random() < 0.7:
        return litres, "L"
    if litres < 0.9e-3 or (litres < 1.2e-3 and rng.random() < 0.5):
        return litres * 1e6, "uL"
    return litres * 1e3, "mL"


def as_molar(strength: float, rng: Random) -> tuple[float, str]:
    """A molar strength as M, mM or uM."""
    if strength < 0.9e-3:
        return strength * 1e6, "uM"
    if strength < 0.1 or (strength < 1 and rng.random() < 0.35):
        return strength * 1e3, "mM"
    return strength, "M"
