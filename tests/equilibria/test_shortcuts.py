"""Where the short cuts hold against the full solver, and where they do not."""

from __future__ import annotations

import pytest

from soplint.equilibria import (
    BadAmountError,
    ampholyte_ph,
    henderson_hasselbalch,
    pka,
    pkb,
    ratio_for_ph,
    solve,
    strong_acid_ph,
    strong_base_ph,
    system_pkas,
    weak_acid_ph,
    weak_base_ph,
)

BUFFERS = [
    ("acetate", 1, "CH3COOH", "CH3COONa"),
    ("phosphate", 2, "KH2PO4", "Na2HPO4"),
    ("tris", 1, "Tris hydrochloride", "Tris"),
    ("ammonia", 1, "NH4Cl", "NH3"),
    ("carbonate", 2, "NaHCO3", "Na2CO3"),
]


@pytest.mark.parametrize(("system", "step", "acid", "base"), BUFFERS)
@pytest.mark.parametrize("part", [0.1, 0.3, 0.5, 0.7, 0.9])
@pytest.mark.parametrize("total", [0.01, 0.05, 0.2])
def test_henderson_hasselbalch_holds_in_real_buffers(system, step, acid, base, part, total):
    x, y = total * (1 - part), total * part
    solution = solve({acid: x, base: y})
    apparent = pka(system, step, 25.0, solution.ionic_strength)
    error = abs(henderson_hasselbalch(apparent, y, x) - solution.pH)
    free = max(solution.species[name].concentration for name in ("H+", "OH-"))
    if min(x, y) >= 20 * free:
        assert error < 0.05
    else:
        assert error > 0.015  # outside its validity, and it shows


def test_henderson_hasselbalch_fails_at_strong_acids():
    """Phosphoric acid, pKa 2.1: the protons set free are no longer few."""
    solution = solve({"H3PO4": 0.01, "NaH2PO4": 0.01})
    apparent = pka("phosphate", 1, 25.0, solution.ionic_strength)
    assert abs(henderson_hasselbalch(apparent, 0.01, 0.01) - solution.pH) > 0.2


def test_the_pka_at_zero_strength_is_the_common_mistake():
    solution = solve({"KH2PO4": 0.1, "Na2HPO4": 0.1})
    assert henderson_hasselbalch(7.198, 1.0, 1.0) - solution.pH > 0.3


@pytest.mark.parametrize(
    ("system", "acid"), [("acetate", "CH3COOH"), ("ammonia", "NH4Cl"), ("borate", "H3BO3")]
)
@pytest.mark.parametrize("concentration", [0.01, 0.03])
def test_square_root_formula_of_weak_acids(system, acid, concentration):
    solution = solve({acid: concentration})
    apparent = pka(system, 1, 25.0, solution.ionic_strength)
    computed = weak_acid_ph(apparent, concentration)
    assert computed == pytest.approx(solution.pH, abs=0.06 if system != "ammonia" else 0.1)


def test_square_root_formula_fails_when_dilute_or_strong():
    assert abs(weak_acid_ph(2.87, 0.001) - solve({"chloroacetic acid": 0.001}).pH) > 0.1
    assert abs(weak_acid_ph(9.23, 1e-6) - solve({"H3BO3": 1e-6}).pH) > 0.5


@pytest.mark.parametrize(("system", "base"), [("ammonia", "NH3"), ("tris", "Tris")])
@pytest.mark.parametrize("concentration", [0.01, 0.1])
def test_square_root_formula_of_weak_bases(system, base, concentration):
    computed = weak_base_ph(pka(system), concentration)
    assert computed == pytest.approx(solve({base: concentration}).pH, abs=0.05)


@pytest.mark.parametrize(
    ("salt", "system", "step"),
    [("NaHCO3", "carbonate", 1), ("KH2PO4", "phosphate", 1), ("KHC8H4O4", "phthalate", 1)],
)
def test_mean_of_two_pkas_for_ampholytes(salt, system, step):
    solution = solve({salt: 0.05})
    constants = system_pkas(system, 25.0, solution.ionic_strength)
    computed = ampholyte_ph(constants[step - 1], constants[step])
    assert computed == pytest.approx(solution.pH, abs=0.12)


@pytest.mark.parametrize("concentration", [1e-5, 1e-4, 1e-3])
def test_strong_acid_and_base(concentration):
    assert strong_acid_ph(concentration) == pytest.approx(
        solve({"HCl": concentration}).pH, abs=0.02
    )
    assert strong_base_ph(concentration) == pytest.approx(
        solve({"NaOH": concentration}).pH, abs=0.02
    )


def test_strong_acid_without_activity_is_low_at_a_tenth_molar():
    assert solve({"HCl": 0.1}).pH - strong_acid_ph(0.1) == pytest.approx(0.1, abs=0.02)


def test_conversions():
    assert pkb(9.245) + 9.245 == pytest.approx(13.995)
    assert ratio_for_ph(7.0, 7.3) == pytest.approx(2.0, rel=0.01)
    with pytest.raises(BadAmountError) as caught:
        henderson_hasselbalch(7.0, 0.0, 1.0)
    assert caught.value.culprit == "base"
    assert henderson_hasselbalch(7.0, 1.0, 1.0) == 7.0
