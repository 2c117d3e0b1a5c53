"""File-wide evidence on the comma, values written down, interval arithmetic."""

from __future__ import annotations

import math

import pytest

from soplint.quantities import (
    NumberStyle,
    Range,
    exactly,
    find_measures,
    format_like,
    format_number_like,
    number_style,
    show,
    within,
)


@pytest.mark.parametrize(
    ("texts", "value", "others"),
    [
        (["15,000 rcf for 5 min"], 1250.0, (1.25,)),  # a spin speed says nothing about masses
        (["41,6 mg of dye", "0,05 mM"], 1.25, ()),
        (["pH 6,2 at 25 °C"], 1.25, ()),
        (["1,250,000 cells"], 1250.0, ()),
        (["2.5 g and 3.75 mL"], 1250.0, (1.25,)),
        (["41,6 mg of dye", "2.5 mL of it"], 1.25, (1250.0,)),  # both occur: neither is settled
        (["0.2 mM ZnCl2,50 mM NaBr"], 1250.0, (1.25,)),  # a list comma is no evidence
        ([], 1250.0, (1.25,)),
    ],
)
def test_one_thousand_or_one(texts: list[str], value: float, others: tuple[float, ...]) -> None:
    (measure,) = find_measures("1,250 g", number_style(texts))
    assert (measure.value, measure.alternatives) == (value, others)


def test_speeds_are_thousands_even_among_decimal_commas() -> None:
    style = number_style(["15,000 rcf", "3,18 mg", "0,5 g"])
    assert style.comma_is_decimal
    assert [m.value for m in find_measures("3,184 mg", style)] == [3.184]
    assert [m.value for m in find_measures("spin at 15,000 rcf", style)] == [15000.0]


def test_bare_decimal_commas_follow_the_file() -> None:
    comma = NumberStyle(decimal_commas=3)
    assert [m.value for m in find_measures("a factor of 1,25 here", comma)] == [1.25]
    assert [m.value for m in find_measures("in wells 1,2 there")] == [1.0, 2.0]


@pytest.mark.parametrize(
    ("text", "low", "high", "digits"),
    [
        ("100 mL", 99.5, 100.5, 3),
        ("4.87 g", 4.865, 4.875, 3),
        ("0.050 M", 0.0495, 0.0505, 2),
        ("about 100 mL", 90.0, 110.0, 3),
        ("about 1 mL", 0.5, 1.5, 1),  # "about" never makes a number sharper than its digits
        ("10X buffer", 9.95, 10.05, 2),
        ("5-10 mL", 5.0, 10.0, 2),
        ("2e7 cells/mL", 1.5e7, 2.5e7, 1),
        ("N/50", 0.0199, 0.0201, 2),
        ("pH ~4.6", 4.4, 4.8, 2),
    ],
)
def test_intervals_and_digits(text: str, low: float, high: float, digits: int) -> None:
    (measure,) = find_measures(text)
    assert math.isclose(measure.low, low, rel_tol=1e-12)
    assert math.isclose(measure.high, high, rel_tol=1e-12)
    assert measure.digits == digits


def test_base_values() -> None:
    celsius, millilitres = find_measures("heat to 77 °F, add 250 mL")
    assert math.isclose(celsius.base, 25.0)
    assert millilitres.base == 0.25


@pytest.mark.parametrize(
    ("value", "like", "expected"),
    [
        (9.1949, "4.87 g", "9.19 g"),
        (121.1, "100 mL", "121 mL"),
        (0.0304, "4 mL", "0.0304 mL"),  # so small a value needs more decimals than its model
        (8.06, "pH 7.4", "pH 8.1"),
        (7.0, "pH 7.42", "pH 7.00"),
        (20.0, "10X", "20X"),
        (0.25, "5 %", "0.25 %"),
        (2500.0, "1,250 g", "2500 g"),
    ],
)
def test_format_like(value: float, like: str, expected: str) -> None:
    assert format_like(value, find_measures(like)[0]) == expected


def test_format_number_keeps_the_comma_of_the_text() -> None:
    line = "add 4,87 g of it"
    (measure,) = find_measures(line)
    start, end = measure.numeral
    new = line[:start] + format_number_like(9.19, measure, comma=True) + line[end:]
    assert new == "add 9,19 g of it"


@pytest.mark.parametrize(
    ("value", "unit", "expected"),
    [
        (0.05, "mol/L", "0.05 mol/L"),
        (121.135993, "g/mol", "121.1 g/mol"),
        (999999.0, "mL", "1e6 mL"),
        (123456.0, "mL", "123500 mL"),
        (0.00012346, "g", "0.0001235 g"),
        (0.000012346, "g", "1.235e-5 g"),
        (0.0, "g", "0 g"),
        (-2.5, "°C", "-2.5 °C"),
        (7.0, "pH", "pH 7"),
        (3.0, "", "3"),
    ],
)
def test_show(value: float, unit: str, expected: str) -> None:
    assert show(value, unit) == expected


def test_ranges() -> None:
    assert Range(1.0, 2.0) + Range(3.0, 5.0) == Range(4.0, 7.0)
    assert Range(3.0, 5.0) - Range(1.0, 2.0) == Range(1.0, 4.0)
    assert Range(-1.0, 2.0) * Range(3.0, 5.0) == Range(-5.0, 10.0)
    assert Range(4.0, 8.0) / Range(2.0, 4.0) == Range(1.0, 4.0)
    assert Range(1.0, 2.0) / Range(-1.0, 1.0) == Range(-math.inf, math.inf)
    assert Range(-10.0, -5.0).widened(0.1) == Range(-11.0, -4.5)
    assert Range(1.0, 2.0).scaled(-2.0) == Range(-4.0, -2.0)
    assert Range(1.0, 2.0).joined(exactly(5.0)) == Range(1.0, 5.0)
    assert within(100.0, 0.05).holds(104.9) and not within(100.0, 0.05).holds(105.1)
    assert Range(0.1 + 0.2, 1.0).meets(Range(0.0, 0.3))
    assert not Range(0.31, 1.0).meets(Range(0.0, 0.3))
    with pytest.raises(ValueError, match="not an interval"):
        Range(2.0, 1.0)
