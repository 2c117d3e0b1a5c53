"""Against an independent engine: PHREEQC with the same constants, random systems, 25 °C."""

from __future__ import annotations

import importlib.util
import random
from dataclasses import replace
from pathlib import Path

import pytest

from soplint.equilibria.balance import balance
from soplint.equilibria.dissociation import ion_charges
from soplint.equilibria.problem import build

pytest.importorskip("phreeqpython", reason="the PHREEQC engine (phreeqpython) is not installed")


@pytest.fixture(scope="module")
def engine_module():
    path = Path(__file__).parent / "phreeqc_engine.py"
    spec = importlib.util.spec_from_file_location("phreeqc_engine", path)
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return module


def _ours(totals, strong):
    """Specific interactions off: the other engine has none in this set-up."""
    problem = build(totals, strong, ion_charges(), 25.0)
    return balance(replace(problem, proton_term=0.0, hydroxide_term=0.0))


def _random_system(module, rng):
    totals = {
        rng.choice(module.SYSTEMS): 10 ** rng.uniform(-5, -0.7) for _ in range(rng.randint(1, 4))
    }
    strong = {
        rng.choice(list(module.IONS)): 10 ** rng.uniform(-5, -0.5) for _ in range(rng.randint(0, 3))
    }
    return totals, strong


def _compare(module, seed, count):
    """Differences of `count` systems; those the other engine cannot solve are drawn again."""
    engine, rng = module.Engine(), random.Random(seed)
    differences, refused = [], 0
    while len(differences) < count:
        totals, strong = _random_system(module, rng)
        try:
            ph, strength = engine.ph(totals, strong)
        except Exception as error:
            assert "converge" in str(error)
            refused += 1
            continue
        root = _ours(totals, strong)
        # the slope A differs by 0.3 %, and ln of the activity of water by 0.017 for each mol/kg
        solutes = sum(totals.values()) + 2 * sum(strong.values())
        assert root.ph == pytest.approx(ph, abs=0.001 + 0.01 * solutes), (totals, strong)
        assert root.ionic_strength == pytest.approx(strength, rel=0.005, abs=1e-7)
        differences.append(abs(root.ph - ph))
    assert refused < 0.05 * count
    return differences


def test_250_random_systems(engine_module):
    differences = sorted(_compare(engine_module, 20261201, 250))
    assert len(differences) == 250
    assert differences[125] < 0.0005
    print(f"\nPHREEQC, 250 systems: median {differences[125]:.5f}, worst {differences[-1]:.5f} pH")


@pytest.mark.slow
def test_3000_random_systems(engine_module):
    assert len(_compare(engine_module, 3, 3000)) == 3000


def test_a_wrong_constant_would_be_seen(engine_module):
    engine = engine_module.Engine()
    ph, _ = engine.ph({"acetate": 0.1}, {"Na+": 0.05})
    assert abs(_ours({"acetate": 0.1}, {"Na+": 0.053}).ph - ph) > 0.02
