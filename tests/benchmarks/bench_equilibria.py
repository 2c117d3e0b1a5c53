"""Speed of the solver beside the PHREEQC engine, in one process with the same constants.

Run by hand: python tests/benchmarks/bench_equilibria.py
Single solve: a formula composition through `solve` against the fastest way the engine offers
(one prepared input block, pH read back). Curve: `titration_curve` with 200 points against one
REACTION block of 200 steps with the pH of each read from its selected output.
Aims: single at least 1.3x, curve at least 10x.
"""

from __future__ import annotations

import importlib.util
import sys
import time
from collections.abc import Callable
from pathlib import Path
from statistics import median
from types import ModuleType

ROOT = Path(__file__).resolve().parents[2]
sys.path.insert(0, str(ROOT))

from soplint.equilibria import solve, titration_curve  # noqa: E402
from soplint.equilibria.door import resolve  # noqa: E402

SINGLE = [
    {"KH2PO4": 0.025, "Na2HPO4": 0.025},
    {"CH3COOH": 0.1, "CH3COONa": 0.05},
    {"Tris": 0.05, "HCl": 0.03},
    {"C6H8O7": 0.05, "NaOH": 0.1},
    {"NaHCO3": 0.025, "Na2CO3": 0.025},
    {"Na2B4O7": 0.01},
    {"NH3": 0.1, "NH4Cl": 0.1, "H3PO4": 0.02},
    {"KHC8H4O4": 0.05},
]
CURVES = [
    ("acetic acid with sodium hydroxide", {"CH3COOH": 0.1}, "NaOH"),
    ("phosphoric acid with sodium hydroxide", {"H3PO4": 0.05}, "NaOH"),
    ("citric acid with sodium hydroxide", {"C6H8O7": 0.03}, "NaOH"),
    ("sodium carbonate with hydrochloric acid", {"Na2CO3": 0.05}, "HCl"),
]
POINTS = 200


def _engine() -> ModuleType:
    path = ROOT / "tests" / "equilibria" / "phreeqc_engine.py"
    spec = importlib.util.spec_from_file_location("phreeqc_engine", path)
    assert spec is not None and spec.loader is not None
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return module


def _paired(ours: Callable[[], object], theirs: Callable[[], object], rounds: int, inner: int):
    """Best of many short interleaved rounds, so that a busy machine disturbs neither; seconds a call."""
    best = [float("inf"), float("inf")]
    for _ in range(rounds):
        for index, call in enumerate((ours, theirs)):
            start = time.perf_counter()
            for _ in range(inner):
                call()
            best[index] = min(best[index], (time.perf_counter() - start) / inner)
    return best


def singles(module: ModuleType) -> list[float]:
    engine = module.Engine()
    ratios = []
    print(f"{'single solve':44}{'here us':>10}{'PHREEQC us':>12}{'ratio':>8}{'dpH':>9}")
    for composition in SINGLE:
        found = resolve(composition)
        text = module.solution_text(found.totals, found.strong)

        def theirs(text: str = text) -> float:
            engine.phreeqc.run_string(text)
            return float(engine.phreeqc.get_ph(1))

        def ours(composition: dict[str, float] = composition) -> float:
            return solve(composition, 25.0, "mol/kg").pH

        here, there = _paired(ours, theirs, 150, 10)
        ratios.append(there / here)
        label = ", ".join(f"{name} {amount}" for name, amount in composition.items())
        row = f"{label:44}{here * 1e6:10.1f}{there * 1e6:12.1f}{there / here:8.2f}"
        print(f"{row}{ours() - theirs():+9.4f}")
    return ratios


def _curve_text(module: ModuleType, analyte: dict[str, float], reagent: str) -> str:
    """200 equal steps of 0.1 mol/kg titrant, 2 kg in all, into 1 kg of analyte."""
    found = resolve(analyte)
    start = module.solution_text(found.totals, found.strong).replace("END\n", "")
    return (
        f"{start}REACTION 1\n  {reagent} 0.1\n  H2O {1000 / 18.015:.4f}\n  2 moles in {POINTS} steps\n"
        "SELECTED_OUTPUT 1\n  -reset false\n  -pH true\nEND\n"
    )


def curves(module: ModuleType) -> list[float]:
    import numpy as np

    engine = module.Engine()
    volumes = np.linspace(0.25, 50.0, POINTS)  # into 25 mL: the same course
    ratios = []
    print(
        f"\n{'curve of 200 points':44}{'here ms':>10}{'PHREEQC ms':>12}{'ratio':>8}{'worst dpH':>11}"
    )
    for label, analyte, reagent in CURVES:
        text = _curve_text(module, analyte, reagent)

        def theirs(text: str = text) -> list[float]:
            engine.phreeqc.run_string(text)
            rows = engine.phreeqc.get_selected_output_array()
            return [row[0] for row in rows[2:]]

        def ours(analyte: dict[str, float] = analyte, reagent: str = reagent) -> np.ndarray:
            return titration_curve(analyte, 25.0, {reagent: 0.1}, volumes).pH

        assert len(theirs()) == len(ours()) == POINTS
        here, there = _paired(ours, theirs, 60, 2)
        ratios.append(there / here)
        worst = max((a - b for a, b in zip(ours(), theirs(), strict=True)), key=abs)
        row = f"{label:44}{here * 1e3:10.3f}{there * 1e3:12.3f}{there / here:8.1f}"
        print(f"{row}{worst:+11.4f}")
    return ratios


def main() -> None:
    module = _engine()
    single = singles(module)
    print(f"single solve: median ratio {median(single):.2f}, lowest {min(single):.2f} (aim 1.3)")
    curve = curves(module)
    print(f"curve: median ratio {median(curve):.1f}, lowest {min(curve):.1f} (aim 10)")


if __name__ == "__main__":
    main()
