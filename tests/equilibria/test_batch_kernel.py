"""The batched path gives the numbers of the scalar path."""

from __future__ import annotations

import math
import random

import numpy as np
import pytest

from soplint.equilibria.acids import acid_at, systems
from soplint.equilibria.balance import balance
from soplint.equilibria.batch import Batch, balance_batch
from soplint.equilibria.problem import forms_of, interactions
from soplint.equilibria.water import properties


def _random_batch(rng, points=40):
    names = rng.sample(list(systems()), rng.randint(0, 5))
    temperature = rng.uniform(0.0, 60.0)
    _, slope, pkw = properties(temperature)

    def amounts():
        return np.array([10 ** rng.uniform(-9.0, math.log10(3.0)) for _ in range(points)])

    charge = amounts() * np.array([rng.choice((-1, 1)) for _ in range(points)])
    return Batch(
        tuple(forms_of(acid_at(name, temperature), {}) for name in names),
        np.array([amounts() for _ in names]).reshape(len(names), points),
        charge,
        np.abs(charge) + amounts(),
        slope,
        pkw,
        amounts() * 0.1,
        amounts() * 0.05,
    )


def _worst(seed, count):
    rng = random.Random(seed)
    worst = 0.0
    for _ in range(count):
        batch = _random_batch(rng)
        ph, strength = balance_batch(batch)
        for index in range(len(ph)):
            root = balance(batch.point(index))
            worst = max(worst, abs(ph[index] - root.ph))
            assert strength[index] == pytest.approx(root.ionic_strength, rel=1e-8)
    return worst


def test_batch_agrees_with_scalar():
    assert _worst(20261201, 40) < 1e-8


@pytest.mark.slow
def test_batch_agrees_with_scalar_at_length():
    assert _worst(17, 500) < 1e-8


def test_most_points_need_no_scalar_help(monkeypatch):
    from soplint.equilibria import batch as module

    helped = []
    monkeypatch.setattr(module, "balance", lambda problem: helped.append(1) or balance(problem))
    rng = random.Random(1)
    for _ in range(40):
        balance_batch(_random_batch(rng))
    assert len(helped) < 0.05 * 40 * 40


def test_a_total_of_zero_is_no_system():
    forms = (forms_of(acid_at("borate", 25.0), {}), forms_of(acid_at("acetate", 25.0), {}))
    zero = np.zeros(3)
    totals = np.array([[0.0, 0.05, 0.0], [0.0, 0.0, 0.1]])
    batch = Batch(forms, totals, zero, zero, 0.51, 14.0, zero, zero)
    ph, _ = balance_batch(batch)
    assert ph[0] == pytest.approx(7.0, abs=1e-9)
    assert ph[1] == pytest.approx(balance(batch.point(1)).ph, abs=1e-9)
    assert ph[2] == pytest.approx(balance(batch.point(2)).ph, abs=1e-9)


def test_specific_interactions_reach_both_paths():
    """Only H+ and OH- have coefficients: curves keep the forms of a system fixed."""
    assert set(interactions()) == {"H+", "OH-"}
