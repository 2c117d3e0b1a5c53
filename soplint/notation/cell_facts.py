"""Cells of stock, final and fact columns: strengths, pH, molar mass, density."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace

from soplint.notation.cells import Cell
from soplint.notation.headings import STRENGTHS, in_unit
from soplint.quantities import lookup_unit
from soplint.quantities.model import Measure


@dataclass(frozen=True, slots=True)
class Facts:
    """What a stock, final or fact cell says; offsets count in the row."""

    strengths: tuple[Measure, ...] = ()
    ph: Measure | None = None
    molar_mass: Measure | None = None
    density: Measure | None = None
    measures: tuple[Measure, ...] = ()


_SOLVENT = re.compile(r"\s(?:in|auf|в)\s", re.IGNORECASE)
DIMENSIONS = {"MOLARMASS": "molar-mass", "DENSITY": "density", "PH": "pH"}


def facts(cell: Cell, role: str, unit: Measure | None) -> Facts:
    """Strengths, pH, molar mass or density in a cell of a column with ``role``."""
    measures = list(cell.row_measures)
    if cell.shape == "long":
        return Facts(measures=cell.row_measures)
    bare = cell.shape == "number" or (
        measures
        and measures[0].dimension == "number"
        and not cell.text.chars[: cell.measures[0].start].strip(" ~≈")
    )
    if bare and measures:
        measures[0] = _with_unit(measures[0], role, unit)
    solvent = _SOLVENT.search(cell.text.chars)
    limit = cell.start + (solvent.start() if solvent else len(cell.text.chars))
    told = [m for m in measures if m.start < limit]
    return Facts(
        tuple(m for m in told if m.dimension in STRENGTHS),
        next((m for m in told if m.dimension == "pH"), None),
        next((m for m in told if m.dimension == "molar-mass"), None),
        next((m for m in told if m.dimension == "density"), None),
        tuple(measures),
    )


def _with_unit(number: Measure, role: str, unit: Measure | None) -> Measure:
    if unit is not None and (role not in DIMENSIONS or unit.dimension == DIMENSIONS[role]):
        return in_unit(number, unit)
    if role == "MOLARMASS":
        return replace(number, dimension="molar-mass", unit="g/mol", factor=1.0)
    if role == "DENSITY":
        density = lookup_unit("g/mL")
        factor = density.factor if density else 1.0
        return replace(number, dimension="density", unit="g/mL", factor=factor)
    if role == "PH":
        return replace(number, dimension="pH", unit="pH", factor=1.0)
    if role == "ASSAY":
        return replace(number, dimension="fraction", unit="%", factor=0.01)
    return number
