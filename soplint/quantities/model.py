"""A quantity as written: its value, its unit and the interval that its writing stands for."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Measure:
    """One quantity read in a line of text.

    ``dimension`` is one of: mass, volume, amount, molarity, molality, normality,
    mass-concentration, fraction, ppm, fold, pH, temperature, temperature-difference, time,
    molar-mass, density, ratio, activity (enzyme units), activity-concentration, osmolality, molar-ratio,
    length, area, speed, pressure, energy, power, voltage, count (drops, tablets), volumes
    (parts by volume: "3 volumes"), number (bare), money, other.
    """

    start: int  # offsets into the characters of the line; "about" is not part of the quantity
    end: int
    dimension: str
    value: float | None  # nominal, in ``unit``; None for a range or a ratio
    low: float  # the interval that the writing stands for, in ``unit``
    high: float
    unit: str  # canonical symbol ("mL", "µL", "mol/L", "%", "X", "pH", "°C"); "" for a bare number
    factor: float  # value * factor is in the base unit of the dimension (g, L, mol, mol/L, g/L ...)
    digits: int  # significant figures as written
    manner: str = "plain"  # plain, about, tolerance, range, at-most, at-least
    basis: str | None = None  # "w/v", "v/v", "w/w", "mol" ...
    parts: tuple[float, ...] = ()  # of a ratio, in order
    alternatives: tuple[
        float, ...
    ] = ()  # other values that the digits could mean ("1,250" read as 1250)
    flags: tuple[str, ...] = ()  # notation slips: "m1", "leading-dot", "uM-length" ...
    offset: float = 0.0  # added after the factor: only °F and K have one
    numeral: tuple[int, int] = (0, 0)  # where the digits stand, so that they alone can be replaced
    places: int = 0  # decimals as written; below 0 where the digits say less ("2e7")

    @property
    def nominal(self) -> float:
        """The stated value in ``unit``; the middle of a range."""
        return self.value if self.value is not None else (self.low + self.high) / 2

    @property
    def base(self) -> float:
        """The stated value in the base unit of the dimension."""
        return self.nominal * self.factor + self.offset
