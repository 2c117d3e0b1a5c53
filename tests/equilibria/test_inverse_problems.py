"""Recipes, adjustments and changes, each solved forwards again."""

from __future__ import annotations

import pytest

from soplint.equilibria import (
    BadAmountError,
    UnknownSubstanceError,
    UnreachableError,
    adjust,
    after_addition,
    after_dilution,
    at_temperature,
    buffer_recipe,
    pka,
    solve,
    system_pkas,
)
from soplint.equilibria.errors import EquilibriumError

PAIRS = [
    ("KH2PO4", "K2HPO4", 7.0, "phosphate"),
    ("Tris hydrochloride", "Tris", 8.0, "tris"),
    ("CH3COOH", "CH3COONa", 4.6, "acetate"),
    ("citric acid", "trisodium citrate", 5.5, "citrate"),
    ("NH4Cl", "NH3", 9.4, "ammonia"),
    ("H3BO3", "Na2B4O7", 8.8, "borate"),
    ("MES", "NaOH", 6.1, "mes"),
    ("HCl", "Tris", 7.6, "tris"),
]


@pytest.mark.parametrize(("acid", "base", "ph", "system"), PAIRS)
def test_a_recipe_gives_its_ph_and_concentration(acid, base, ph, system):
    recipe = buffer_recipe(acid, base, ph, 0.05)
    back = solve({acid: recipe.acid_amount, base: recipe.base_amount})
    assert back.pH == pytest.approx(ph, abs=1e-6)
    molar = back.totals[system] / solve({"NaCl": 1.0}).strong["Na+"]
    assert molar == pytest.approx(0.05, rel=1e-9)


def test_a_recipe_minds_what_else_is_in_it():
    plain = buffer_recipe("KH2PO4", "K2HPO4", 7.4, 0.01)
    salted = buffer_recipe("KH2PO4", "K2HPO4", 7.4, 0.01, others={"NaCl": 0.15})
    assert salted.base_amount > plain.base_amount


def test_a_pair_that_cannot_is_refused_with_its_range():
    with pytest.raises(UnreachableError, match="4.5.* to 9"):
        buffer_recipe("KH2PO4", "K2HPO4", 11.0, 0.05)
    with pytest.raises(UnknownSubstanceError):
        buffer_recipe("KH2PO4", "nothing", 7.0, 0.05)
    for bad in (0.0, -1.0, float("nan")):
        with pytest.raises(BadAmountError):
            buffer_recipe("KH2PO4", "K2HPO4", 7.0, bad)


@pytest.mark.parametrize("made_up", [True, False])
@pytest.mark.parametrize(
    ("composition", "ph", "adjuster"),
    [
        ({"Tris": 0.05}, 7.4, {"HCl": 1.0}),
        ({"KH2PO4": 0.1}, 7.0, {"NaOH": 5.0}),
        ({"HEPES": 0.02, "NaCl": 0.15}, 7.4, {"KOH": 1.0}),
        ({"glycine": 0.2}, 2.5, {"HCl": 6.0}),
        ({"NaCl": 0.1}, 4.0, {"HCl": 0.1}),
    ],
)
def test_an_adjustment_gives_its_ph(composition, ph, adjuster, made_up):
    found = adjust(composition, ph, adjuster, made_up=made_up)
    (name, strength) = next(iter(adjuster.items()))
    assert found.volume == pytest.approx(found.amount / strength)
    whole = 1.0 if made_up else 1.0 + found.volume
    mixed = {key: value / whole for key, value in composition.items()}
    mixed[name] = mixed.get(name, 0.0) + found.amount / whole
    assert solve(mixed).pH == pytest.approx(ph, abs=1e-6)


def test_the_wrong_adjuster_is_refused():
    with pytest.raises(UnreachableError) as caught:
        adjust({"Tris": 0.05}, 7.4, {"NaOH": 1.0})
    assert caught.value.culprit == "NaOH"
    assert adjust({"Tris": 0.05}, 7.4, {"HCl": 1.0}).amount > 0


def test_without_an_adjuster_the_right_one_is_taken():
    assert adjust({"Tris": 0.05}, 7.4).adjuster == "HCl"
    assert adjust({"KH2PO4": 0.05}, 7.4).adjuster == "NaOH"
    already = solve({"KH2PO4": 0.05}).pH
    assert adjust({"KH2PO4": 0.05}, already).amount == 0.0


@pytest.mark.parametrize("ph", [float("nan"), 20.0, -5.0, "7"])
def test_a_ph_that_is_none_is_refused(ph):
    with pytest.raises(BadAmountError) as caught:
        adjust({"Tris": 0.05}, ph, {"HCl": 1.0})
    assert caught.value.culprit == "pH"


def test_capacity_predicts_a_small_addition():
    buffer = {"KH2PO4": 0.05, "Na2HPO4": 0.05}
    before = solve(buffer)
    after = after_addition(buffer, 1000.0, {"HCl": 1.0}, 1.0)
    expected = -0.001 / before.buffer_capacity
    assert after.pH - before.pH == pytest.approx(expected, rel=0.05)


def test_capacity_of_a_buffer_is_van_slyke():
    """beta = ln 10 C K h / (K + h)² + ln 10 (h + oh), Van Slyke 1922, J. Biol. Chem. 52, 525."""
    solution = solve({"CH3COOH": 0.05, "CH3COONa": 0.05})
    fraction = 10 ** (solution.pH - pka("acetate", 1, 25.0, solution.ionic_strength))
    weak = 2.302585 * 0.1 * fraction / (1 + fraction) ** 2
    h = solution.species["H+"].concentration
    assert solution.buffer_capacity == pytest.approx(weak + 2.302585 * h, rel=1e-4)


def test_temperature_and_dilution():
    """Tris falls by about 0.028 per kelvin (Bates & Hetzer 1961, J. Phys. Chem. 65, 667)."""
    tris = {"Tris": 0.05, "Tris hydrochloride": 0.05}
    change = at_temperature(tris, 25.0, 35.0).pH - at_temperature(tris, 25.0, 25.0).pH
    assert change / 10 == pytest.approx(-0.027, abs=0.002)
    phosphate = {"KH2PO4": 0.025, "Na2HPO4": 0.025}
    half = after_dilution(phosphate, 2.0).pH - solve(phosphate).pH
    assert half == pytest.approx(0.080, abs=0.01)  # dilution value of the standard, Bates 1973
    with pytest.raises(BadAmountError):
        after_dilution(phosphate, 0.5)


def test_apparent_constants():
    assert pka("phosphate", 2, 25.0, 0.1) == pytest.approx(6.87, abs=0.01)
    assert pka("tris", 1, 25.0, 0.1) > pka("tris", 1, 25.0, 0.0)
    assert len(system_pkas("citrate")) == 3
    for bad in (0, 4, True):
        with pytest.raises(EquilibriumError):
            pka("phosphate", bad)
    with pytest.raises(EquilibriumError) as caught:
        pka("nothing")
    assert caught.value.culprit == "nothing"


def test_open_to_air():
    """Pure water over air of 420 ppm: pH 5.6 (sqrt(KH p Ka1), Stumm & Morgan, chapter 4)."""
    assert solve({"water": 1.0}, open_to_air=True).pH == pytest.approx(5.6, abs=0.03)
    closed = solve({"NaOH": 0.001})
    assert solve({"NaOH": 0.001}, open_to_air=True).pH < closed.pH - 2


def test_species_add_up_to_what_was_dissolved():
    solution = solve({"Na2B4O7": 0.02, "H3PO4": 0.01}, basis="mol/kg")
    species = solution.species
    boron = sum(
        s.molality * (2 if n[0] == "2" else 3 if n[0] == "3" else 1)
        for n, s in species.items()
        if "borate" in n
    )
    assert boron == pytest.approx(0.08, rel=1e-12)
    phosphorus = sum(s.molality for n, s in species.items() if "phosphate" in n)
    assert phosphorus == pytest.approx(0.01, rel=1e-12)
    charge = sum(s.charge * s.molality for s in species.values())
    assert abs(charge) < 1e-12
    assert species["H+"].activity == pytest.approx(10**-solution.pH)


def test_uncertainty_follows_the_constants():
    """Against a numerical derivative: TAPS at its pKa moves by the uncertainty of that pKa."""
    solution = solve({"TAPS": 0.05, "NaOH": 0.025})
    assert solution.pk_uncertainty == pytest.approx(0.06, abs=0.002)
    assert solution.uncertainty > solution.pk_uncertainty
    assert solve({"HCl": 0.1}).pk_uncertainty < 1e-3
