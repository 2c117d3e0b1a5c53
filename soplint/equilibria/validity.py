"""Where the model holds: ionic strength, temperature, and what it leaves out."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from soplint.equilibria.solution import Solution

EDGE_STRENGTH = 0.2  # mol/kg
OUTSIDE_STRENGTH = 0.7
_METALS = ("Ca2+", "Mg2+", "Sr2+", "Ba2+", "Zn2+", "Cu2+", "Fe2+", "Fe3+", "Mn2+", "Co2+", "Ni2+")
_CHELATORS = ("edta", "egta", "dtpa", "nitrilotriacetate")
_BINDERS = ("citrate", "phosphate", "pyrophosphate", "oxalate", "tartrate", "malate", "carbonate")
_LOWEST_PH = {"hepes": 5.0, "epps": 5.0, "pipes": 4.5, "heppso": 5.0}
_LEVELS = ("inside", "edge", "outside")


@dataclass(frozen=True, slots=True)
class Validity:
    """`level` is "inside", "edge" or "outside"; `reasons` says why it is not inside."""

    level: str
    reasons: tuple[str, ...]

    def __str__(self) -> str:
        return self.level if not self.reasons else f"{self.level}: {'; '.join(self.reasons)}"


def model_uncertainty(strength: float) -> float:
    """Standard uncertainty of pH that the activity model brings.

    Set from what was measured: about 0.01 over the primary and secondary standards
    (I up to 0.1 mol/kg), 0.04 over handbook tables up to I = 0.6 mol/kg; beyond
    0.7 mol/kg it grows by 0.2 for each mol/kg, an estimate.

    Parameters: strength [mol/kg]. Returns: u(pH) [1].

    >>> round(model_uncertainty(0.1), 3)
    0.02
    """
    inside = min(strength, OUTSIDE_STRENGTH)
    return 0.015 + 0.05 * inside + 0.2 * max(0.0, strength - OUTSIDE_STRENGTH)


def _strength(solution: Solution) -> tuple[str, str] | None:
    value = solution.ionic_strength
    if value > OUTSIDE_STRENGTH:
        return "outside", f"ionic strength {value:.2f} mol/kg is above {OUTSIDE_STRENGTH}"
    if value > EDGE_STRENGTH:
        return "edge", f"ionic strength {value:.2f} mol/kg is above {EDGE_STRENGTH}"
    return None


def _temperature(solution: Solution) -> tuple[str, str] | None:
    value = solution.temperature
    if value > 60.0:
        return "outside", f"{value:g} °C is above 60 °C"
    if value > 50.0:
        return "edge", f"{value:g} °C is above 50 °C, where most pK equations end"
    return None


def _metals(solution: Solution) -> tuple[str, str] | None:
    metals = [ion for ion in _METALS if solution.strong.get(ion, 0.0) > 0.0]
    if solution.totals.get("calcium hydroxide ion pair", 0.0) > 0.0:
        metals.append("Ca2+")
    if not metals:
        return None
    for names, level in ((_CHELATORS, "outside"), (_BINDERS, "edge")):
        for name in names:
            if solution.totals.get(name, 0.0) > 0.0:
                return level, f"complexes of {metals[0]} with {name} are not in the model"
    return None


def _left_out(solution: Solution) -> tuple[str, str] | None:
    for name, lowest in _LOWEST_PH.items():
        if solution.totals.get(name, 0.0) > 0.0 and solution.pH < lowest:
            return "outside", f"the lower step of {name} is not in the model below pH {lowest:g}"
    if solution.totals.get("sulfide", 0.0) > 0.0 and solution.pH > 12.5:
        return "edge", "the second step of sulfide is not in the model"
    return None


def _weak(solution: Solution) -> tuple[str, str] | None:
    if not solution.problem.fixed and solution.buffer_capacity < 1e-5:
        return "edge", "hardly buffered: carbon dioxide of the air moves this pH"
    return None


def assess(solution: Solution) -> Validity:
    """Collects every reason and the worst level.

    >>> Validity("edge", ("ionic strength",)).level
    'edge'
    """
    found = [check(solution) for check in (_strength, _temperature, _metals, _left_out, _weak)]
    noted = [(text.partition(": ")[0], text.partition(": ")[2]) for text in solution.notes]
    reasons = [item for item in (*found, *noted) if item is not None]
    if not reasons:
        return Validity("inside", ())
    level = max((level for level, _ in reasons), key=_LEVELS.index)
    return Validity(level, tuple(dict.fromkeys(text for _, text in reasons)))
