"""Arithmetic with intervals: what a computed value can be when its inputs are rounded."""

from __future__ import annotations

import math
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Range:
    """All values from ``low`` to ``high``, both included.

    Example:
        >>> Range(0.95, 1.05) * Range(9.9, 10.1)
        Range(low=9.405, high=10.605)
    """

    low: float
    high: float

    def __post_init__(self) -> None:
        if not self.low <= self.high:
            raise ValueError(f"not an interval: {self.low} to {self.high}")

    @property
    def middle(self) -> float:
        """The value half way between the bounds."""
        return self.low + (self.high - self.low) / 2

    def __add__(self, other: Range) -> Range:
        return Range(self.low + other.low, self.high + other.high)

    def __sub__(self, other: Range) -> Range:
        return Range(self.low - other.high, self.high - other.low)

    def __mul__(self, other: Range) -> Range:
        products = (
            _times(self.low, other.low),
            _times(self.low, other.high),
            _times(self.high, other.low),
            _times(self.high, other.high),
        )
        return Range(min(products), max(products))

    def __truediv__(self, other: Range) -> Range:
        """The quotient; without bounds where the divisor can be zero."""
        if other.low <= 0 <= other.high:
            return Range(-math.inf, math.inf)
        return self * Range(1 / other.high, 1 / other.low)

    def scaled(self, factor: float) -> Range:
        """All values times a number."""
        bounds = _times(self.low, factor), _times(self.high, factor)
        return Range(min(bounds), max(bounds))

    def widened(self, relative: float) -> Range:
        """The interval with each bound moved outward by a fraction of its own size.

        Example:
            >>> Range(90.0, 110.0).widened(0.1)
            Range(low=81.0, high=121.0)
        """
        return Range(self.low - abs(self.low) * relative, self.high + abs(self.high) * relative)

    def meets(self, other: Range) -> bool:
        """Whether the two have a value in common; bounds equal within rounding count.

        Example:
            >>> Range(1.0, 2.0).meets(Range(2.0, 3.0)), Range(1.0, 2.0).meets(Range(2.1, 3.0))
            (True, False)
        """
        slack = 1e-9 * max(_size(self.low), _size(self.high), _size(other.low), _size(other.high))
        return self.low <= other.high + slack and other.low <= self.high + slack

    def holds(self, value: float) -> bool:
        """Whether a value lies inside."""
        return self.low <= value <= self.high

    def joined(self, other: Range) -> Range:
        """The smallest interval that holds both."""
        return Range(min(self.low, other.low), max(self.high, other.high))


def exactly(value: float) -> Range:
    """The interval of a single value."""
    return Range(value, value)


def within(value: float, relative: float) -> Range:
    """The interval around a value by a fraction of its size.

    Example:
        >>> within(200.0, 0.05)
        Range(low=190.0, high=210.0)
    """
    return exactly(value).widened(relative)


def _times(one: float, other: float) -> float:
    """A product in which zero times an infinite bound is zero."""
    return 0.0 if one == 0 or other == 0 else one * other


def _size(bound: float) -> float:
    return abs(bound) if math.isfinite(bound) else 0.0
