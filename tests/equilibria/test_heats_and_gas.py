"""Heats and gas volumes against figures worked by hand from the tabulated enthalpies."""

from __future__ import annotations

import pytest

from soplint.equilibria import (
    BadAmountError,
    EquilibriumError,
    UnknownSubstanceError,
    carbon_dioxide_volume,
    heat_of_neutralisation,
    heat_of_reaction,
    heat_of_solution,
    integral_heat,
    rise_on_diluting,
    rise_on_dissolving,
    rise_on_neutralising,
)


def test_dissolving_warms_or_cools():
    assert rise_on_dissolving("NaOH", 1.0, 1000.0) == pytest.approx(44.51 / 4.18, rel=1e-9)
    assert rise_on_dissolving("NH4NO3", 1.0, 1000.0) < -6
    assert (
        heat_of_solution("CaCl2")
        < heat_of_solution("CaCl2.2H2O")
        < 0
        < heat_of_solution("CaCl2.6H2O")
    )
    assert heat_of_solution("CaCl2·2H2O") == heat_of_solution("CaCl2.2H2O")
    assert heat_of_solution("KOH") < heat_of_solution("NaOH")


def test_integral_heats_pass_through_the_table_and_are_monotone_for_acids():
    assert integral_heat("H2SO4", 10.0) == -67.03
    assert integral_heat("HCl", 5.0) == -64.05
    for solute in ("H2SO4", "HCl"):
        values = [integral_heat(solute, 0.1 * 1.3**n) for n in range(60)]
        assert values == sorted(values, reverse=True)
        assert values[0] < 0
    assert integral_heat("H2SO4", 0.0) == 0.0
    assert integral_heat("KOH", 50.0) == pytest.approx(-55.0, abs=1.0)


def test_diluting_sulfuric_acid():
    """1 mol of 96 % acid (4.1 g water) into 1 L: the heat is that from r = 0.23 to r = 55.7.

    The same with the formula of Thomsen, dH = -74.7 r/(r + 1.798) kJ/mol, gives 15.2 K.
    """
    thomsen = 74.7 * (55.7 / 57.5 - 0.228 / 2.026) * 1000 / (1004.1 * 4.18 + 98.1 * 1.4)
    rise = rise_on_diluting("H2SO4", 1.0, 98.1, 4.1, 1000.0)
    assert rise == pytest.approx(thomsen, rel=0.06)
    assert rise_on_diluting("H2SO4", 9.0, 883.0, 37.0, 500.0) > 80  # it would boil on top of 20 °C


def test_diluting_dilute_acid_hardly_warms():
    assert abs(rise_on_diluting("HCl", 0.1, 3.6, 1000.0, 1000.0)) < 0.1
    assert rise_on_diluting("NaOH", 10.0, 400.0, 400.0, 600.0) > 20


def test_neutralising():
    assert heat_of_neutralisation() == -55.8
    assert heat_of_neutralisation("ammonia") == pytest.approx(-55.8 + 51.95)
    assert rise_on_neutralising(0.1, 200.0) == pytest.approx(5580 / 836, rel=1e-9)
    with pytest.raises(EquilibriumError) as caught:
        heat_of_neutralisation("acetate", 2)
    assert "acetate" in caught.value.culprit


def test_gas_from_carbonate():
    """Molar volume of an ideal gas at 0 °C and 101.325 kPa is 22.414 L."""
    assert carbon_dioxide_volume(1.0, 0.0) == pytest.approx(22.414, abs=0.001)
    assert heat_of_reaction("NaHCO3") > 0 > heat_of_reaction("CaCO3")


@pytest.mark.parametrize(
    "call", [heat_of_solution, heat_of_reaction, lambda s: integral_heat(s, 1.0)]
)
def test_what_is_not_held_is_named(call):
    with pytest.raises(UnknownSubstanceError) as caught:
        call("unobtainium")
    assert caught.value.culprit == "unobtainium"


@pytest.mark.parametrize("amount", [-1.0, float("nan"), float("inf")])
def test_bad_amounts_are_refused(amount):
    for call in (
        lambda: rise_on_dissolving("NaOH", amount, 100.0),
        lambda: rise_on_diluting("HCl", amount, 1.0, 1.0, 1.0),
        lambda: rise_on_neutralising(amount, 100.0),
        lambda: carbon_dioxide_volume(amount),
        lambda: integral_heat("HCl", amount),
    ):
        with pytest.raises(BadAmountError):
            call()
    assert carbon_dioxide_volume(0.0) == 0.0
