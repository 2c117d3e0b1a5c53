"""Quantities: numbers with units as laboratories write them, and the interval each stands for."""

from soplint.quantities.model import Measure
from soplint.quantities.scan import find_measures
from soplint.quantities.style import DEFAULT, NumberStyle, number_style
from soplint.quantities.units import Unit, UnitError, convert, lookup_unit, unit_by_pint, unit_table

__all__ = [
    "DEFAULT",
    "Measure",
    "NumberStyle",
    "Unit",
    "UnitError",
    "convert",
    "find_measures",
    "lookup_unit",
    "number_style",
    "unit_by_pint",
    "unit_table",
]
