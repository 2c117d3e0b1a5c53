"""Saturation and solubility limits."""

from __future__ import annotations

from math import log10

import pytest

from soplint.equilibria import (
    BadAmountError,
    UnknownSubstanceError,
    saturation,
    solids,
    solubility,
    solubility_ratio,
    solve,
)
from soplint.equilibria.acids import system
from soplint.equilibria.dissociation import ion_charges


def _indices(composition):
    return {item.solid.name: item for item in saturation(solve(composition))}


def test_every_solid_is_neutral_and_made_of_species_that_exist():
    charges = ion_charges() | {"OH-": -1, "Ca2+": 2}
    for solid in solids():
        total = 0
        for name, count in solid.ions:
            if name in charges:
                total += count * charges[name]
                continue
            acid, _, sign = name.rpartition(" ")
            charge = int(sign[:-1] or 1) * (1 if sign[-1] == "+" else -1)
            assert charge in system(acid).charges, name
            total += count * charge
        assert total == 0, solid.name


def test_index_is_the_activity_product_over_the_constant():
    item = _indices({"BaCl2": 1e-4, "Na2SO4": 1e-4})["BaSO4"]
    species = solve({"BaCl2": 1e-4, "Na2SO4": 1e-4}).species
    product = log10(species["Ba2+"].activity * species["sulfate 2-"].activity)
    assert item.index == pytest.approx(product + 9.98)
    assert item.can_precipitate


def test_a_saturated_solution_has_an_index_near_zero():
    """Silver chloride, 1.3e-5 mol/L (from its product); lime standard 0.0203 mol/kg at 25 °C."""
    assert abs(_indices({"AgNO3": 1.33e-5, "NaCl": 1.33e-5})["AgCl"].index) < 0.02
    lime = {i.solid.name: i for i in saturation(solve({"Ca(OH)2": 0.0203}, basis="mol/kg"))}
    assert abs(lime["Ca(OH)2 portlandite"].index) < 0.2


@pytest.mark.parametrize(
    ("composition", "solid"),
    [
        ({"CaCl2": 0.01, "Na2CO3": 0.01}, "CaCO3 calcite"),
        ({"MgCl2": 0.01, "NH4Cl": 0.01, "Na2HPO4": 0.01, "NH3": 0.1}, "MgNH4PO4.6H2O (struvite)"),
        ({"AgNO3": 0.1, "K2CrO4": 0.01}, "Ag2CrO4"),
        ({"KCl": 0.1, "sodium dodecyl sulfate": 0.03}, "potassium dodecyl sulfate (KDS)"),
        ({"CaCl2": 0.01, "NaF": 0.01}, "CaF2"),
        ({"MgCl2": 0.1, "NaOH": 0.1}, "Mg(OH)2 brucite"),
    ],
)
def test_what_falls_out_is_found(composition, solid):
    assert _indices(composition)[solid].can_precipitate


def test_what_stays_dissolved_is_not_alleged():
    found = _indices({"MgCl2": 0.001, "KCl": 0.1, "Tris": 0.01, "HCl": 0.005})
    assert not any(item.can_precipitate for item in found.values())
    assert saturation(solve({"NaCl": 0.1})) == ()


def test_solubility_limits():
    assert solubility("NaCl") == 35.9
    assert solubility("Na2CO3") == 21.5
    assert (
        solubility_ratio("KMnO4", 10.0, 100.0) > 1.3 > 1.0 > solubility_ratio("NaCl", 10.0, 100.0)
    )
    with pytest.raises(UnknownSubstanceError) as caught:
        solubility("unobtainium")
    assert caught.value.culprit == "unobtainium"
    with pytest.raises(BadAmountError):
        solubility_ratio("NaCl", float("nan"), 100.0)
