"""Quantities found in lines: the shapes that the rest of the program leans on."""

from __future__ import annotations

from soplint.quantities import find_measures


def test_glued_units_and_strengths() -> None:
    found = [(m.value, m.unit, m.dimension) for m in find_measures("Add 34mls of 0.5 M HCl")]
    assert found == [(34.0, "mL", "volume"), (0.5, "M", "molarity")]


def test_span_is_the_quantity_without_about() -> None:
    line = "take about 5.0 mL"
    (measure,) = find_measures(line)
    assert line[measure.start : measure.end] == "5.0 mL"
    assert (measure.manner, measure.digits) == ("about", 2)
    assert (measure.low, measure.high) == (4.5, 5.5)
