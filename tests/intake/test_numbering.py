"""Printed numbers are told apart from quantities."""

from __future__ import annotations

import pytest

from soplint.intake.numbering import (
    bullet,
    ends_with_quantity,
    printed_number,
    starts_with_quantity,
)

QUANTITIES = """
5.1 mL of water | 5.0 g NaCl | 2.5 M NaOH | 10 mM Tris | 1.5 L of water | 0.2 M bicine | 12 % SDS
1.0 N HCl | 2.5 x SDS buffer | 10X TBE | 3 times | 2 drops of dye | 4.5 h at 20 °C | 1.25 µg/mL
5.0 mol/L HCl | 2.5 °C | 1.5 volumes of ethanol | 1.5 мл воды | 3.2 kg | 2.05 Tris base
1.5 – 2.0 g | 1.5 to 2 g | 5.1 = x | 1,5 g | 100 mL
"""
NUMBERED = {
    "5.1 Weigh 3 g": ("5.1", "Weigh 3 g"),
    "1.5 Add water": ("1.5", "Add water"),
    "5.1. Weigh": ("5.1", "Weigh"),
    "5.1.2 Mix": ("5.1.2", "Mix"),
    "2.5 Mix": ("2.5", "Mix"),
    "2.5 Label the bottle": ("2.5", "Label the bottle"),
    "2.5 Note the mass": ("2.5", "Note the mass"),
    "5.1 10 mL of water is added": ("5.1", "10 mL of water is added"),
    "5.1 weigh 3 g": ("5.1", "weigh 3 g"),
    "1. Weigh": ("1", "Weigh"),
    "1. 5 g NaCl": ("1", "5 g NaCl"),
    "12) 5 g NaCl": ("12", "5 g NaCl"),
    "(3) Mix": ("3", "Mix"),
    "a) stir": ("a", "stir"),
    "b. stir": ("b", "stir"),
    "ii) stir": ("ii", "stir"),
    "A. Stocks": ("A", "Stocks"),
    "A.1 Stocks": ("A.1", "Stocks"),
    "Step 3: stir": ("3", "stir"),
    "Step 12 - stir": ("12", "stir"),
    "4.2 L-Arginine stock": ("4.2", "L-Arginine stock"),
}
HEADINGS = {
    "5 Buffer, 0.05 mol/L": "5",
    "5.2 Buffer": "5.2",
    "5 - Buffer": "5",
    "2 M BICINE, pH = 8.3": None,
    "4x Borate Mix (2 L)": None,
    "10 mM Tris": None,
    "50 mL tube": None,
    "1 liter of TAE": None,
    "2 Molar KBr": "2",
    "20 °C": None,
    "100 Buffers": None,
}


@pytest.mark.parametrize(
    "chars", [part.strip() for part in QUANTITIES.replace("\n", "|").split("|") if part.strip()]
)
def test_a_quantity_is_no_number(chars: str) -> None:
    assert printed_number(chars) is None


@pytest.mark.parametrize("chars", NUMBERED)
def test_a_printed_number_is_cut_off(chars: str) -> None:
    mark = printed_number(chars)
    assert mark is not None
    assert (mark.number, chars[mark.length :]) == NUMBERED[chars]


@pytest.mark.parametrize("chars", HEADINGS)
def test_bare_integers_number_headings_only(chars: str) -> None:
    mark = printed_number(chars, heading=True)
    assert (mark.number if mark else None) == HEADINGS[chars]


def test_names_and_dates_are_no_numbers() -> None:
    for chars in (
        "E. coli",
        "H. pylori medium",
        "2026-03-02 issued",
        "J. Smith",
        "pH 7",
        "1:10",
        "5",
    ):
        assert printed_number(chars) is None, chars


def test_bullets() -> None:
    for chars in ("• 5 g", "•5 g", "– stir", "- stir", "* CuSO4", "+ water"):
        assert bullet(chars) is not None, chars
    for chars in ("-20 °C", "- 20 °C", "*E. coli*", "5 g", "–5"):
        assert bullet(chars) is None, chars


def test_quantities_at_the_ends_of_a_line() -> None:
    assert starts_with_quantity("~5 mL of dye") and starts_with_quantity(".05 g KBr")
    assert starts_with_quantity("20-30 mL water") and starts_with_quantity("½ L of milk")
    assert not starts_with_quantity("5 tests") and not starts_with_quantity("NaCl 5 g")
    assert ends_with_quantity("Malt 18 g") and ends_with_quantity("KBr 2.4 g (20 mM)")
    assert not ends_with_quantity("5 g of malt")
