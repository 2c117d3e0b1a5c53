"""Formulas: composition, charge, hydrate water, molar mass, and what is wrong with a bad one."""

from __future__ import annotations

import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st
from molmass import ELEMENTS
from molmass import Formula as Independent

from soplint.substances import (
    FormulaError,
    catalogue,
    hill,
    molar_mass,
    molar_mass_uncertainty,
    parse_formula,
)
from soplint.substances.elements import atomic_weights

WITH_FORMULA = [s.formula for s in catalogue() if s.formula]
WEIGHT_SETS_DIFFER = 3e-4  # the independent library averages older isotope abundances


def test_all_elements_are_held() -> None:
    weights = atomic_weights()
    assert len(weights) == 118
    assert {element.symbol for element in ELEMENTS} <= set(weights)


@pytest.mark.parametrize("element", ELEMENTS, ids=lambda element: element.symbol)
def test_atomic_weights_against_an_independent_library(element: object) -> None:
    symbol, mass = element.symbol, element.mass  # type: ignore[attr-defined]
    held = atomic_weights()[symbol]
    if held.kind == "mass-number":
        assert held.value == pytest.approx(mass, abs=3.5)
    else:
        assert held.value == pytest.approx(mass, rel=WEIGHT_SETS_DIFFER)
        assert held.uncertainty > 0


def _doubled(formula: str) -> str:
    """``formula`` twice, so that the independent library meets no fractions of atoms."""
    parts = formula.split("·")
    written = []
    for part in parts:
        digits = part[: len(part) - len(part.lstrip("0123456789."))]
        written.append(f"({part[len(digits) :]}){2 * float(digits or 1):g}")
    return "".join(written)


@pytest.mark.parametrize("formula", sorted(set(WITH_FORMULA)))
def test_every_formula_of_the_catalogue_against_an_independent_library(formula: str) -> None:
    other = Independent(_doubled(formula))
    assert molar_mass(formula) == pytest.approx(other.mass / 2, rel=WEIGHT_SETS_DIFFER)
    ours = {symbol: 2 * count for symbol, count in parse_formula(formula).elements.items()}
    assert ours == {symbol: item.count for symbol, item in other.composition().items()}


@pytest.mark.parametrize(
    ("formula", "mass"),
    [
        # sums of the standard atomic weights 2021 (Prohaska et al. 2022), rounded as on labels
        ("NaCl", 58.44),
        ("KHC8H4O4", 204.22),
        ("C4H11NO3", 121.14),
        ("Na2HPO4·7H2O", 268.06),
        ("(NH4)2SO4", 132.13),
        ("CH3COONa·3H2O", 136.08),
        ("Na2B4O7·10H2O", 381.36),
        ("AgNO3", 169.87),
        ("K2Cr2O7", 294.18),
        ("C10H14N2Na2O8·2H2O", 372.24),
    ],
)
def test_molar_masses_as_printed_on_labels(formula: str, mass: float) -> None:
    assert molar_mass(formula) == pytest.approx(mass, abs=0.006)


@pytest.mark.parametrize(
    "formula",
    [
        "CuSO4·5H2O",
        "CuSO4.5H2O",
        "CuSO4*5H2O",
        "CuSO4 * 5H2O",
        "CuSO4•5H2O",
        "CuSO4×5H2O",
        "CuSO4x5H2O",
        "CuSO4 x 5 H2O",
        "CuSO4-5H2O",
        "CuSO4 - 5 H2O",
        "CuSO4, 5H2O",
        "CuSO4 5 H2O",
        "CuSO4+5H2O",
        "CuSO4.5H20",
        "CuSO4(H2O)5",
        "CuS04·5H2O",
        "CuSO₄·5H₂O",
        "CuSO4 · 5(H2O)",
        "[CuSO4]·5H2O",
    ],
)
def test_all_notations_of_a_hydrate_agree(formula: str) -> None:
    assert hill(parse_formula(formula).elements) == "CuH10O9S"


@pytest.mark.parametrize(
    ("formula", "water"),
    [("CaSO4·½H2O", 0.5), ("CaSO4·1/2H2O", 0.5), ("CaSO4.0.5H2O", 0.5), ("CdCl2·2.5H2O", 2.5)],
)
def test_fractions_of_water(formula: str, water: float) -> None:
    assert parse_formula(formula).water == water


@pytest.mark.parametrize(
    ("formula", "composition", "charge"),
    [
        ("SO4^2-", "O4S", -2),
        ("SO42-", "O4S", -2),
        ("SO₄²⁻", "O4S", -2),
        ("PO43-", "O4P", -3),
        ("NH4+", "H4N", 1),
        ("Ca2+", "Ca", 2),
        ("Ca++", "Ca", 2),
        ("Na+", "Na", 1),
        ("Hg22+", "Hg2", 2),
        ("Cr2O72-", "Cr2O7", -2),
        ("[Fe(CN)6]4-", "C6FeN6", -4),
        ("MnO4-", "MnO4", -1),
        ("NaCl", "ClNa", 0),
    ],
)
def test_charges(formula: str, composition: str, charge: int) -> None:
    parsed = parse_formula(formula)
    assert (hill(parsed.elements), parsed.charge) == (composition, charge)


@pytest.mark.parametrize("formula", ["H20", "KH2P04", "NaHC03", "K2Cr207", "H202", "Na2B407"])
def test_a_zero_for_the_letter_o_is_read_and_noted(formula: str) -> None:
    assert parse_formula(formula).slips == ("zero-for-O",)
    assert molar_mass(formula) == molar_mass(formula.replace("0", "O"))


@pytest.mark.parametrize(
    ("formula", "position", "culprit"),
    [
        ("HOCH2)", 5, ")"),
        ("(NaCl", 0, "("),
        ("Na(]", 3, "]"),
        ("Xy2", 0, "Xy"),
        ("NaXl", 2, "Xl"),
        ("NaCl·", 4, "·"),
        ("Na2CO3·xH2O", 7, "x"),
        ("Na()", 2, "()"),
        ("Na99999999", 2, "99999999"),
        ("Hello", 2, "l"),
        ("", 0, ""),
    ],
)
def test_errors_name_the_culprit_and_its_place(formula: str, position: int, culprit: str) -> None:
    with pytest.raises(FormulaError) as caught:
        parse_formula(formula)
    assert (caught.value.position, caught.value.culprit) == (position, culprit)
    assert repr(culprit) in str(caught.value) or not culprit


def test_the_uncertainty_covers_the_spread_of_atomic_weights() -> None:
    # KCl: 74.5483 by single values, 74.5513 with the older 35.453 for chlorine
    assert abs(molar_mass("KCl") - 74.5513) <= molar_mass_uncertainty("KCl")


@settings(max_examples=400, deadline=None)
@given(st.text(max_size=40) | st.text(alphabet="NaClHOS0123456789()[]·.x-+^ ½/", max_size=40))
@example("(" * 500)
@example("H" * 400)
@example("1/0H2O")
@example("½" * 50)
def test_only_the_declared_error_escapes(text: str) -> None:
    try:
        parsed = parse_formula(text)
    except FormulaError:
        return
    assert parsed.molar_mass > 0
    assert all(count > 0 for count in parsed.elements.values())
