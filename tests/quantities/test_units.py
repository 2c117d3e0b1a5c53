"""The unit table against pint, row by row, and conversions."""

from __future__ import annotations

import math
import subprocess
import sys
from pathlib import Path

import pint
import pytest

import soplint.quantities.units as units
from soplint.quantities import UnitError, convert, lookup_unit, unit_by_pint, unit_table
from soplint.quantities.generate import read_definitions

_REGISTRY = pint.UnitRegistry()
_DEFINITIONS = Path(units.__file__).with_name("data") / "definitions.txt"
_BASES = {
    unit.symbol: unit.expression
    for unit in read_definitions(_DEFINITIONS.read_text(encoding="utf-8"))
}


@pytest.mark.parametrize("unit", sorted(set(unit_table().values()), key=lambda unit: unit.symbol))
def test_factor_is_that_of_pint(unit: units.Unit) -> None:
    base = _BASES.get(unit.base, "1")
    if unit.dimension == "temperature":
        for reading in (0.0, 20.0, 300.0):
            expected = _REGISTRY.Quantity(reading, unit.expression).to(base).magnitude
            assert math.isclose(reading * unit.factor + unit.offset, expected, abs_tol=1e-9)
        return
    one = _REGISTRY.Quantity(1.0, "") * _REGISTRY.parse_expression(unit.expression)
    expected = (one / _REGISTRY.parse_expression(base)).to("").magnitude
    assert math.isclose(unit.factor, expected, rel_tol=1e-12)


def test_table_is_what_the_definitions_give(tmp_path: Path) -> None:
    symbols = {unit.symbol for unit in unit_table().values()}
    assert symbols == set(_BASES)
    spelled = {
        word.removesuffix("!"): unit.symbol
        for unit in read_definitions(_DEFINITIONS.read_text(encoding="utf-8"))
        for word in (unit.symbol, *unit.spellings)
    }
    assert {word: unit.symbol for word, unit in unit_table().items()} == spelled


@pytest.mark.parametrize(
    ("value", "unit", "to", "expected"),
    [
        (250.0, "mL", "L", 0.25),
        (5.0, "g/100 mL", "g/L", 50.0),
        (1.0, "M", "mmol/L", 1000.0),
        (77.0, "°F", "°C", 25.0),
        (298.15, "K", "°C", 25.0),
        (25.0, "°C", "°F", 77.0),
        (1.0, "%", "ppm", 1e4),
        (2.0, "kDa", "g/mol", 2000.0),
        (90.0, "min", "h", 1.5),
    ],
)
def test_convert(value: float, unit: str, to: str, expected: float) -> None:
    assert math.isclose(convert(value, unit, to), expected, rel_tol=1e-12)
    assert math.isclose(convert(expected, to, unit), value, rel_tol=1e-12)


@pytest.mark.parametrize(("unit", "to"), [("mL", "g"), ("rpm", "×g"), ("g", "blorp")])
def test_convert_refuses(unit: str, to: str) -> None:
    with pytest.raises(UnitError):
        convert(1.0, unit, to)


def test_lookup() -> None:
    unit = lookup_unit("LITRES")
    assert unit is not None and unit.symbol == "L"
    assert lookup_unit("Mm") is None


def test_a_unit_outside_the_table_comes_from_pint() -> None:
    unit = unit_by_pint("teaspoon")  # 1/768 of the gallon of 231 cubic inches, 1 in = 25.4 mm
    assert unit is not None and unit.dimension == "volume"
    assert math.isclose(unit.factor, 231 * 0.254**3 / 768, rel_tol=1e-9)  # L
    assert unit_by_pint("blorp") is None


@pytest.mark.parametrize("text", ["g**999999999", "10**10**10**10", "1e400", "", "()", "g" * 5000])
def test_pint_is_not_asked_bombs(text: str) -> None:
    assert unit_by_pint(text) is None


def test_reading_quantities_loads_no_heavy_library() -> None:
    program = (
        "import sys; from soplint.quantities import find_measures, convert, show\n"
        "find_measures('5 mL of 0.1 M'); convert(1.0, 'mL', 'L'); show(1.0, 'g')\n"
        "print(*[name for name in ('pint', 'numpy', 'scipy') if name in sys.modules])"
    )
    root = Path(units.__file__).parents[2]
    run = subprocess.run(
        [sys.executable, "-c", program], capture_output=True, text=True, cwd=root, check=True
    )
    assert run.stdout.strip() == ""
