"""The PHREEQC engine of the package registry, given the constants of this project.

PHREEQC: Parkhurst & Appelo 2013, USGS Techniques and Methods 6-A43. Its own activity
model is set to the one used here: lg(gamma) = -A z² sqrt(I)/(1 + B a sqrt(I)) with B a = 1.5.
Its Debye-Hückel A comes from its own formulas and differs by less than 0.3 %; it lowers the
activity of water with the sum of solutes, which this project does not.
"""

from __future__ import annotations

from collections.abc import Mapping

from soplint.equilibria.acids import ION_SIZE, acid_at
from soplint.equilibria.water import ionisation

SYSTEMS = (
    "acetate ammonia phosphate citrate tris carbonate borate sulfate glycine oxalate "
    "tartrate phthalate imidazole succinate hepes pyrophosphate arsenate fluoride"
).split()
IONS = {"Na+": ("Na", 1), "K+": ("K", 1), "Cl-": ("Cl", -1), "NO3-": ("Nz", -1)}
_B_AT_25 = 0.3286  # kg^½ mol^-½ Å^-1, Debye-Hückel B (Robinson & Stokes, Appendix 7.1)
GAMMA = f"-gamma {ION_SIZE / _B_AT_25:.4f} 0"


def element(system: str) -> str:
    """A made-up element name for an acid system."""
    return "X" + chr(ord("a") + SYSTEMS.index(system))


def _charge(z: int) -> str:
    return "" if z == 0 else f"{'+' if z > 0 else '-'}{abs(z) if abs(z) > 1 else ''}"


def _species(system: str) -> tuple[str, list[str]]:
    """Master species (all protons gone) and the reactions that add protons to it."""
    acid = acid_at(system, 25.0)
    name, cumulative = element(system), acid.cumulative
    steps = len(cumulative) - 1
    base = name + _charge(acid.charge - steps)
    lines = [f"{base} = {base}", "  log_k 0", f"  {GAMMA}"]
    for added in range(1, steps + 1):
        made = f"{name}H{added if added > 1 else ''}{_charge(acid.charge - steps + added)}"
        lines += [
            f"{base} + {added} H+ = {made}",
            f"  log_k {cumulative[steps] - cumulative[steps - added]:.6f}",
            f"  {GAMMA}",
        ]
    for monomers, lost, charge, pk in acid.clusters:
        added = monomers * steps - lost
        made = f"{name}{monomers}H{added if added > 1 else ''}{_charge(charge)}"
        lines += [
            f"{monomers} {base} + {added} H+ = {made}",
            f"  log_k {monomers * cumulative[steps] - pk:.6f}",
            f"  {GAMMA}",
        ]
    return base, lines


def database() -> str:
    """A database with water, four strong ions and the acid systems above."""
    masters = [
        "H H+ -1 H 1.008",
        "H(0) H2 0 H",
        "H(1) H+ -1 0",
        "E e- 0 0 0",
        "O H2O 0 O 16.0",
        "O(0) O2 0 O",
        "O(-2) H2O 0 0",
    ]
    species = ["H+ = H+", f"  {GAMMA}", "e- = e-", "H2O = H2O"]
    species += ["H2O = OH- + H+", f"  log_k {-ionisation(25.0):.6f}", f"  {GAMMA}"]
    species += ["2 H2O = O2 + 4 H+ + 4 e-", "  log_k -86.08", "2 H+ + 2 e- = H2", "  log_k -3.15"]
    for name, z in IONS.values():
        masters.append(f"{name} {name}{_charge(z)} 0 {name} 20.0")
        species += [f"{name}{_charge(z)} = {name}{_charge(z)}", f"  {GAMMA}"]
    for system in SYSTEMS:
        base, lines = _species(system)
        masters.append(f"{element(system)} {base} 0 {element(system)} 50.0")
        species += lines
    return "\n".join(["SOLUTION_MASTER_SPECIES", *masters, "SOLUTION_SPECIES", *species, "END", ""])


def solution_text(totals: Mapping[str, float], strong: Mapping[str, float]) -> str:
    """Input block for one solution in mol/kg water, pH by charge balance."""
    lines = ["SOLUTION 1", "  temp 25", "  units mol/kgw", "  pH 7 charge"]
    lines += [f"  {element(name)} {value:.12g}" for name, value in totals.items()]
    lines += [f"  {IONS[ion][0]} {value:.12g}" for ion, value in strong.items()]
    return "\n".join([*lines, "END", ""])


class Engine:
    """PHREEQC with the database above."""

    def __init__(self) -> None:
        from phreeqpython.viphreeqc import VIPhreeqc

        self.phreeqc = VIPhreeqc()
        self.phreeqc.load_database_string(database())

    def ph(self, totals: Mapping[str, float], strong: Mapping[str, float]) -> tuple[float, float]:
        """pH and ionic strength [mol/kg]."""
        self.phreeqc.run_string(solution_text(totals, strong))
        return float(self.phreeqc.get_ph(1)), float(self.phreeqc.get_mu(1))
