"""Any mixture converges: charge balance to 1e-10, ionic strength consistent, typed errors."""

from __future__ import annotations

import math
import random

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from soplint.equilibria import BadAmountError, EquilibriumError, solve
from soplint.equilibria import balance as kernel
from soplint.equilibria.acids import systems
from soplint.equilibria.dissociation import ion_charges
from soplint.equilibria.problem import build


def _amount(rng):
    """1e-9 to 3 mol/kg, evenly in the logarithm."""
    return 10 ** rng.uniform(-9.0, math.log10(3.0))


def _mixture(rng, most_systems=5):
    names, charges = systems(), ion_charges()
    totals = {rng.choice(names): _amount(rng) for _ in range(rng.randint(0, most_systems))}
    strong = {rng.choice(list(charges)): _amount(rng) for _ in range(rng.randint(0, 4))}
    return build(totals, strong, charges, rng.uniform(0.0, 60.0))


def _judge(problem, start=None):
    root = kernel.balance(problem, start)
    sums = kernel.slopes(problem, root.ph, root.ionic_strength)
    assert abs(sums.p - sums.n) <= 1e-10 * max(sums.p, sums.n)
    assert 0.5 * sums.s == pytest.approx(root.ionic_strength, rel=1e-8)
    return root


def _run(seed, count):
    rng = random.Random(seed)
    for _ in range(count):
        _judge(_mixture(rng))


def test_two_thousand_random_mixtures():
    _run(20261201, 2000)


@pytest.mark.slow
def test_twenty_thousand_random_mixtures():
    _run(7, 20000)


def test_the_start_does_not_matter():
    rng = random.Random(3)
    for _ in range(200):
        problem = _mixture(rng)
        roots = [kernel.balance(problem, start).ph for start in (-1.0, 7.0, 15.0)]
        assert max(roots) - min(roots) < 1e-9


def test_the_slow_way_gives_the_same():
    """The path taken when Newton does not settle, which no random mixture needed."""
    rng = random.Random(5)
    for _ in range(50):
        problem = _mixture(rng)
        slow = kernel._alternating(problem, 7.0, 1e-3)
        assert slow.ph == pytest.approx(kernel.balance(problem).ph, abs=1e-9)


def test_derivatives_are_those_of_the_sums():
    rng = random.Random(11)
    for _ in range(40):
        problem, x, d, step = _mixture(rng), rng.uniform(2, 12), rng.uniform(0, 0.3), 1e-5
        here = kernel.charge_sums(problem, x, d)
        by_x = kernel.charge_sums(problem, x + step, d), kernel.charge_sums(problem, x - step, d)
        by_d = kernel.charge_sums(problem, x, d + step), kernel.charge_sums(problem, x, d - step)
        for name, slope, (up, down) in (
            ("p", here.px, by_x),
            ("n", here.nx, by_x),
            ("s", here.sx, by_x),
            ("p", here.pd, by_d),
            ("n", here.nd, by_d),
            ("s", here.sd, by_d),
        ):
            measured = (getattr(up, name) - getattr(down, name)) / (2 * step * math.log(10))
            scale = abs(getattr(here, name)) + 1e-12
            assert slope == pytest.approx(measured, abs=1e-6 * scale)


@settings(max_examples=150, deadline=None)
@given(
    st.dictionaries(
        st.sampled_from(
            ["KH2PO4", "Na2HPO4", "HCl", "NaOH", "Tris", "C6H8O7", "H3BO3", "NH3", "NaCl"]
        ),
        st.floats(allow_nan=True, allow_infinity=True),
        max_size=4,
    ),
    st.floats(allow_nan=True, allow_infinity=True),
)
def test_only_declared_errors_escape(composition, temperature):
    try:
        solution = solve(composition, temperature)
    except EquilibriumError as error:
        assert error.culprit
    else:
        assert math.isfinite(solution.pH)
        assert math.isfinite(solution.buffer_capacity)
        assert math.isfinite(solution.uncertainty)


@pytest.mark.parametrize("amount", [-0.1, math.nan, math.inf, "0.1", None, True, 1e9])
def test_a_bad_amount_is_named(amount):
    with pytest.raises(BadAmountError) as caught:
        solve({"NaCl": 0.1, "KH2PO4": amount})
    assert caught.value.culprit == "KH2PO4"
    assert solve({"NaCl": 0.1, "KH2PO4": 0.1}).pH < 7


@pytest.mark.parametrize("temperature", [-1.0, 101.0, math.nan, "25"])
def test_a_bad_temperature_is_named(temperature):
    with pytest.raises(BadAmountError) as caught:
        solve({"NaCl": 0.1}, temperature)
    assert caught.value.culprit == "temperature"


def test_an_empty_composition_and_a_bad_basis_are_named():
    for nothing in ({}, None, ["NaCl"]):
        with pytest.raises(BadAmountError) as caught:
            solve(nothing)
        assert caught.value.culprit == "composition"
    with pytest.raises(BadAmountError) as caught:
        solve({"NaCl": 0.1}, basis="g/L")
    assert caught.value.culprit == "basis"
