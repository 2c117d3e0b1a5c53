"""Titration curves: shape, equivalence points, end-point errors."""

from __future__ import annotations

import random

import numpy as np
import pytest

from soplint.equilibria import (
    BadAmountError,
    EquilibriumError,
    UnreachableError,
    indicator,
    solve,
    titration_curve,
)

ACIDS = [
    "HCl",
    "CH3COOH",
    "H3PO4",
    "C6H8O7",
    "H2SO4",
    "KHC8H4O4",
    "NH4Cl",
    "H3BO3",
    "C2H2O4",
    "EDTA",
]
BASES = ["NaOH", "NH3", "Tris", "Na2CO3", "Na2HPO4", "Na2B4O7", "C3H4N2", "KOH", "Ca(OH)2"]
VOLUMES = np.linspace(0.0, 60.0, 121)


def test_each_point_is_a_full_equilibrium_with_dilution():
    curve = titration_curve({"H3PO4": 0.1}, 25.0, {"NaOH": 0.1}, VOLUMES)
    for volume, ph in list(zip(VOLUMES, curve.pH, strict=True))[::10]:
        whole = 25.0 + volume
        mixed = {"H3PO4": 0.1 * 25.0 / whole, "NaOH": 0.1 * volume / whole}
        assert ph == pytest.approx(solve(mixed).pH, abs=1e-8)


def test_curves_of_random_pairs_are_monotone():
    rng = random.Random(20261201)
    for _ in range(60):
        acid = {name: 10 ** rng.uniform(-4, 0) for name in rng.sample(ACIDS, rng.randint(1, 3))}
        base = {rng.choice(BASES): 10 ** rng.uniform(-3, 0)}
        analyte, titrant, sign = (acid, base, 1) if rng.random() < 0.5 else (base, acid, -1)
        curve = titration_curve(analyte, 25.0, titrant, VOLUMES, rng.uniform(5, 45))
        steps = np.diff(curve.pH)
        # towards the pH of the titrant; past it dilution alone may turn a very dilute curve
        reached = (curve.pH[1:] - curve.pH[-1]) * sign < -1e-6
        assert (sign * steps[reached] > -1e-9).all(), (analyte, titrant)


def test_strong_acid_and_base_monotone_and_neutral_at_equivalence():
    curve = titration_curve({"HCl": 0.1}, 25.0, {"NaOH": 0.1}, VOLUMES)
    assert (np.diff(curve.pH) > 0).all()
    (point,) = curve.equivalences
    assert point.volume == pytest.approx(25.0)
    assert point.pH == pytest.approx(6.997, abs=0.01)
    assert point.observable


@pytest.mark.parametrize(
    ("analyte", "volume", "titrant", "volumes", "observable"),
    [
        ({"CH3COOH": 0.1}, 25.0, {"NaOH": 0.1}, [25.0], [True]),
        ({"NH3": 0.1}, 20.0, {"HCl": 0.1}, [20.0], [True]),
        ({"HCl": 0.1}, 20.0, {"Tris": 0.1}, [20.0], [True]),
        ({"CH3COOH": 0.1}, 20.0, {"NH3": 0.1}, [20.0], [True]),
        ({"H3PO4": 0.1}, 25.0, {"NaOH": 0.1}, [25.0, 50.0, 75.0], [True, True, False]),
        ({"Na2CO3": 0.05}, 25.0, {"HCl": 0.1}, [12.5, 25.0], [True, True]),
        ({"Na2B4O7": 0.05}, 20.0, {"HCl": 0.1}, [20.0], [True]),
        ({"H2SO4": 0.05}, 20.0, {"NaOH": 0.1}, [10.0, 20.0], [False, True]),
        ({"C6H8O7": 0.03}, 20.0, {"NaOH": 0.1}, [6.0, 12.0, 18.0], [False, False, True]),
        ({"HCl": 0.05, "CH3COOH": 0.05}, 25.0, {"NaOH": 0.1}, [12.5, 25.0], [True, True]),
        (
            {"NaOH": 0.1, "Na2CO3": 0.05},
            20.0,
            {"HCl": 0.1},
            [20.0, 30.0, 40.0],
            [False, True, True],
        ),
        ({"NaCl": 0.1}, 20.0, {"HCl": 0.1}, [], []),
    ],
)
def test_equivalence_volumes_follow_from_stoichiometry(
    analyte, volume, titrant, volumes, observable
):
    curve = titration_curve(analyte, volume, titrant, [0.0, 1.0])
    assert [point.volume for point in curve.equivalences] == pytest.approx(volumes)
    assert [point.observable for point in curve.equivalences] == observable


def test_the_slope_is_the_steepest_near_equivalence():
    curve = titration_curve({"CH3COOH": 0.1}, 25.0, {"NaOH": 0.1}, np.linspace(24.5, 25.5, 1001))
    measured = np.gradient(curve.pH, curve.volumes)
    assert measured.max() == pytest.approx(curve.equivalences[0].slope, rel=0.01)


def test_end_points():
    curve = titration_curve({"CH3COOH": 0.1}, 25.0, {"NaOH": 0.1}, VOLUMES)
    assert abs(curve.titration_error("phenolphthalein")) < 0.001
    assert curve.titration_error("methyl orange") < -0.5
    assert curve.titration_error(curve.equivalences[0].pH) == pytest.approx(0.0, abs=1e-9)
    assert curve.titration_error(7.0) < 0 < curve.titration_error(10.0)


def test_the_volume_of_a_ph_gives_that_ph():
    curve = titration_curve({"Na2CO3": 0.05}, 25.0, {"HCl": 0.1}, VOLUMES)
    volume = curve.volume_at(8.3)
    whole = 25.0 + volume
    back = solve({"Na2CO3": 0.05 * 25.0 / whole, "HCl": 0.1 * volume / whole})
    assert back.pH == pytest.approx(8.3, abs=1e-6)


def test_refusals_name_the_culprit():
    curve = titration_curve({"CH3COOH": 0.1}, 25.0, {"NaOH": 0.1}, VOLUMES)
    with pytest.raises(UnreachableError):
        curve.volume_at(14.0)
    with pytest.raises(EquilibriumError) as caught:
        curve.titration_error("litmus of the moon")
    assert caught.value.culprit == "litmus of the moon"
    for volumes in ([], [-1.0], [float("nan")]):
        with pytest.raises(BadAmountError):
            titration_curve({"HCl": 0.1}, 25.0, {"NaOH": 0.1}, volumes)
    with pytest.raises(BadAmountError):
        titration_curve({"HCl": 0.1}, 0.0, {"NaOH": 0.1}, VOLUMES)
    assert len(titration_curve({"HCl": 0.1}, 25.0, {"NaOH": 0.1}, VOLUMES).pH) == len(VOLUMES)


def test_indicators_have_a_range():
    assert indicator("Phenolphthalein").middle == pytest.approx(9.1)
