"""Quantities: numbers with units as laboratories write them, and the interval each stands for.

``find_measures`` reads a line, ``number_style`` settles the comma from a whole file, ``convert``
changes units, ``format_like`` and ``show`` write values down, ``Range`` computes with intervals.
The spellings and the units stand in ``data/definitions.txt``; their factors come from pint.
"""

from soplint.quantities.intervals import Range, exactly, within
from soplint.quantities.model import Measure
from soplint.quantities.scan import find_measures
from soplint.quantities.style import DEFAULT, NumberStyle, number_style
from soplint.quantities.units import (
    Unit,
    UnitError,
    convert,
    known_unit,
    lookup_unit,
    unit_by_pint,
    unit_table,
)
from soplint.quantities.writing import (
    format_like,
    format_number_like,
    plain_number,
    show,
    with_unit,
)

__all__ = [
    "DEFAULT",
    "Measure",
    "NumberStyle",
    "Range",
    "Unit",
    "UnitError",
    "convert",
    "exactly",
    "find_measures",
    "format_like",
    "format_number_like",
    "known_unit",
    "lookup_unit",
    "number_style",
    "plain_number",
    "show",
    "unit_by_pint",
    "unit_table",
    "with_unit",
    "within",
]
