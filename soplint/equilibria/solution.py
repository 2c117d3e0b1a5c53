"""The result of a calculation: pH at once; species, capacity and uncertainty when asked for."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from math import log, sqrt
from typing import Any

from soplint.equilibria import species as kernel
from soplint.equilibria.acids import system
from soplint.equilibria.charges import slopes
from soplint.equilibria.validity import Validity, model_uncertainty
from soplint.equilibria.water import density

_LN10 = log(10.0)


@dataclass(frozen=True, slots=True)
class Species:
    """One dissolved species. `molality` in mol/kg water, `concentration` in the basis asked for."""

    name: str
    charge: int
    molality: float
    concentration: float
    activity: float


@dataclass(frozen=True, slots=True)
class Solution:
    """A solution at equilibrium.

    `pH` is on the activity scale; `ionic_strength` in mol/kg; `totals` and
    `strong` hold the composition in mol/kg by acid system and by strong ion.
    Species, capacity and uncertainty are computed on first access.
    """

    pH: float
    ionic_strength: float
    temperature: float
    basis: str
    totals: Mapping[str, float]
    strong: Mapping[str, float]
    charges: Mapping[str, int] = field(repr=False)
    notes: tuple[str, ...]
    problem: kernel.Problem = field(repr=False)
    names: tuple[str, ...] = field(repr=False)
    _kept: dict[str, Any] = field(default_factory=dict, repr=False, compare=False)

    @property
    def species(self) -> dict[str, Species]:
        """All species by name: "H+", "Na+", "phosphate 2-" and so on, in mol/kg and in the basis."""
        if "species" not in self._kept:
            self._kept["species"] = _species(self)
        found: dict[str, Species] = self._kept["species"]
        return found

    @property
    def residual(self) -> float:
        """Charge left over, relative to the larger of both charges."""
        sums = slopes(self.problem, self.pH, self.ionic_strength)
        return abs(sums.p - sums.n) / max(sums.p, sums.n)

    @property
    def buffer_capacity(self) -> float:
        """Van Slyke's beta = dC_base/dpH at constant ionic strength [mol/(L pH)]."""
        if "capacity" not in self._kept:
            sums = slopes(self.problem, self.pH, self.ionic_strength)
            scale = density(self.temperature)
            self._kept["capacity"] = -_LN10 * (sums.px - sums.nx) * scale
        return float(self._kept["capacity"])

    @property
    def validity(self) -> Validity:
        """Inside, at the edge of or outside what the model was tested for, with the reason."""
        if "validity" not in self._kept:
            from soplint.equilibria.validity import assess

            self._kept["validity"] = assess(self)
        found: Validity = self._kept["validity"]
        return found

    @property
    def pk_uncertainty(self) -> float:
        """Part of the uncertainty of pH that comes from the constants (standard, 1 s)."""
        if "constants" not in self._kept:
            self._kept["constants"] = _constants_part(self)
        return float(self._kept["constants"])

    @property
    def uncertainty(self) -> float:
        """Standard uncertainty of pH: constants and activity model, not the amounts weighed."""
        model = model_uncertainty(self.ionic_strength)
        return sqrt(model**2 + self.pk_uncertainty**2)


def _label(name: str, monomers: int, charge: int) -> str:
    if name == "calcium hydroxide ion pair":
        return "Ca2+" if charge == 2 else "CaOH+"
    sign = "" if charge == 0 else f" {abs(charge) if abs(charge) > 1 else ''}{'+-'[charge < 0]}"
    prefix = "" if monomers == 1 else f"{monomers} "
    return f"{prefix}{name}{sign}"


def _species(solution: Solution) -> dict[str, Species]:
    """Molality, concentration and activity of everything dissolved."""
    problem, ph = solution.problem, solution.pH
    d = kernel.damping(problem.slope, solution.ionic_strength)
    scale = density(solution.temperature) if solution.basis == "mol/L" else 1.0
    h = 10.0 ** (d - ph - problem.proton_term)
    oh = 10.0 ** (ph - problem.pkw + d - problem.hydroxide_term)
    found = {
        "H+": Species("H+", 1, h, h * scale, 10.0**-ph),
        "OH-": Species("OH-", -1, oh, oh * scale, 10.0 ** (ph - problem.pkw)),
    }
    for ion, molality in solution.strong.items():
        z = solution.charges[ion]
        activity = molality * 10.0 ** (-z * z * d)
        found[ion] = Species(ion, z, molality, molality * scale, activity)
    groups = [s.shape.forms for s in problem.systems] + [forms for _, forms in problem.fixed]
    amounts = kernel.molalities(problem, ph, solution.ionic_strength)
    for name, forms, values in zip(solution.names, groups, amounts, strict=True):
        for (q, _, z, _), molality in zip(forms, values, strict=True):
            label = _label(name, q, z)
            activity = molality * 10.0 ** (-z * z * d)
            found[label] = Species(label, z, molality, molality * scale, activity)
    return found


def _constants_part(solution: Solution) -> float:
    """Root sum of squares of (dpH/dpK) u(pK) over all steps, by moving each constant."""
    problem, strength = solution.problem, solution.ionic_strength
    sums = slopes(problem, solution.pH, strength)
    capacity = -_LN10 * (sums.px - sums.nx)
    d = kernel.damping(problem.slope, strength)
    oh = 10.0 ** (solution.pH - problem.pkw + d - problem.hydroxide_term)
    total = (_LN10 * oh / capacity * 0.005) ** 2
    amounts = kernel.molalities(problem, solution.pH, strength)
    for name, values in zip(solution.names, amounts, strict=True):
        steps = system(name).steps
        whole = sum(values[: len(steps) + 1])
        if whole <= 0.0:
            continue
        after = whole
        for number, step in enumerate(steps):
            after -= values[number]
            moved = _LN10 * after * (whole - after) / whole  # d(charge)/d(pK) of this step
            total += (moved / capacity * step.uncertainty_at(solution.temperature)) ** 2
    return sqrt(total)
