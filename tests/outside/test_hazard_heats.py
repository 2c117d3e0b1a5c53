"""Temperature rises against tabulated enthalpies that the program does not hold itself."""

import pytest

from soplint.bench import carry_out
from soplint.bench.vessels import vessels
from soplint.checks.hazard_heat import dilution_rise, neutralisation_rise
from soplint.equilibria.heats import rise_on_diluting, rise_on_neutralising
from soplint.intake import read_bytes
from soplint.notation.document import read_document


def vessel(text):
    bench = carry_out(read_document(read_bytes(text.encode(), "a.sop")))
    return next(v for v in vessels(bench) if v.contents)


def test_sulfuric_acid_by_enthalpies_of_formation():
    """Standard enthalpies of formation of H2SO4(l) -813.99 and of H2SO4 in 50 H2O -886.77 kJ/mol.

    NBS Tables of Chemical Thermodynamic Properties (1982), from memory.  1 mol of pure acid into
    50 mol of water: ΔT = 72.8 kJ / (900.75 g × 4.18 J/(g K) + 98.1 g × 1.4 J/(g K)).
    """
    heat = 886.77 - 813.99
    expected = heat * 1000 / (50 * 18.015 * 4.18 + 98.08 * 1.4)
    assert rise_on_diluting("H2SO4", 1.0, 98.08, 0.0, 50 * 18.015) == pytest.approx(
        expected, rel=0.02
    )


def test_hundred_millilitres_of_acid_in_nine_hundred_of_water():
    """1.80 mol, 60 to 75 kJ/mol from 96 % acid to 28 H2O (NBS Tables 1982, from memory): 27 to 34 °C."""
    made = vessel("3 Acid\n3.1 Add 100 mL of sulfuric acid 96 % w/w to 900 mL of water.\n")
    rise = dilution_rise(made, made.contents[0])
    low, high = (1.80 * e * 1000 / (900 * 4.18 + 176 * 1.4) for e in (60, 75))
    assert low < rise < high


def test_hydrochloric_acid_by_enthalpy_of_formation_of_water():
    """ΔfH of H2O(l) -285.83 and of OH-(aq) -229.99 kJ/mol (CODATA Key Values, 1989): 55.84 kJ/mol."""
    moles, litres = 1.0, 0.4
    expected = (285.83 - 229.99) * 1000 * moles / (litres * 1000 * 4.18)
    assert rise_on_neutralising(moles, litres * 1000) == pytest.approx(expected, rel=0.01)


def test_equal_volumes_of_five_molar_acid_and_alkali():
    """2.5 mol/L × 55.84 kJ/mol / (1000 g × 4.18 J/(g K)) = 33.4 °C (CODATA Key Values)."""
    made = vessel(
        "4 Mixture\n4.1 Mix 200 mL of hydrochloric acid 5 mol/L with 200 mL of sodium hydroxide 5 mol/L.\n"
    )
    rise, _, _ = neutralisation_rise(made)
    assert rise == pytest.approx(33.4, abs=0.5)


def test_four_hundred_grams_of_sodium_hydroxide_in_a_litre():
    """Rule of thumb: 42.4 kJ/mol over 1 L of water and the solid, about 88 °C; 12 % for the concentration."""
    made = vessel("2 Caustic\n2.1 Add 400 g of sodium hydroxide to 1000 mL of water.\n")
    rise = dilution_rise(made, made.contents[0])
    expected = 10 * 42.4e3 / (1000 * 4.18 + 400 * 1.4)
    assert rise == pytest.approx(expected, rel=0.12)
