"""Intervals of stated quantities as the ledger counts them (design: section 5, "Intervals")."""

from __future__ import annotations

from soplint.quantities.model import Measure

# Largest relative half-width that the digits of a quantity may claim, however few they are.
MASS = 0.05
ALIQUOT = 0.01
# Volumes made up to a mark, folds, parts of a ratio and counts are exact within this.
EXACT = 0.005
ABOUT = 0.10  # "about", "~"
NOMINAL_ONE_FIGURE = 0.05  # a strength in a title with one figure
NOMINAL = 0.01  # with more figures


def relative(measure: Measure, most: float) -> float:
    """Half-width of a quantity's interval as a share of its value.

    ``most`` caps what few digits may claim; an explicit tolerance, a range and "about" stand as
    they are.
    """
    nominal = abs(measure.nominal)
    if nominal == 0:
        return 0.0
    half = (measure.high - measure.low) / 2 / nominal
    if measure.manner in ("tolerance", "range"):
        return half
    if measure.manner == "about":
        return ABOUT
    return min(half, most)


def nominal_relative(measure: Measure) -> float:
    """Half-width of a strength in a heading, label or target, relative."""
    if measure.manner in ("tolerance", "range", "about"):
        return relative(measure, 1.0)
    if measure.digits <= 1:
        return NOMINAL_ONE_FIGURE
    nominal = abs(measure.nominal) or 1.0
    return min(NOMINAL, (measure.high - measure.low) / 2 / nominal)


def shown(measure: Measure) -> str:
    """A quantity as it goes into a working: value and unit, a range by its ends."""
    if measure.dimension == "pH" and measure.value is not None:
        return f"pH {measure.value:g}"
    unit = f" {measure.unit}" if measure.unit else ""
    if measure.value is None:
        return f"{measure.low:g} to {measure.high:g}{unit}"
    return f"{measure.value:g}{unit}"
