"""Acid systems: which protons they lose, and pK(T) of each loss at zero ionic strength."""

from __future__ import annotations

import csv
from dataclasses import dataclass
from functools import cache, lru_cache
from math import log, sqrt
from pathlib import Path

from soplint.equilibria.errors import EquilibriumError
from soplint.equilibria.water import CELSIUS, debye_huckel_slope

_DATA = Path(__file__).parent / "data"
_R_LN10 = 8.31446261815324 * log(10.0)  # J/(mol K), CODATA 2018
_T0 = 298.15
ION_SIZE = 1.5  # kg^½ mol^-½, the product B·a of the Bates-Guggenheim convention


@dataclass(frozen=True, slots=True)
class AcidStep:
    """Loss of one proton: constants at 25 °C and how they move with temperature."""

    pk: float
    enthalpy: float  # J/mol
    heat_capacity: float  # J/(mol K)
    equation: tuple[float, float, float] | None  # pK = A1/T - A2 + A3 T
    log_equation: tuple[float, float, float] | None  # pK = B1/T + B2 + B3 ln T
    uncertainty: float
    shift: float  # added to pK: polynuclear refit, or reference ionic strength
    enthalpy_known: bool
    status: str
    source: str

    def at(self, kelvin: float) -> float:
        """pK at a temperature [K], zero ionic strength."""
        if self.equation is not None:
            a1, a2, a3 = self.equation
            return a1 / kelvin - a2 + a3 * kelvin + self.shift
        if self.log_equation is not None:
            b1, b2, b3 = self.log_equation
            return b1 / kelvin + b2 + b3 * log(kelvin) + self.shift
        heat = self.enthalpy * (1.0 / _T0 - 1.0 / kelvin)
        capacity = self.heat_capacity * (_T0 / kelvin - 1.0 + log(kelvin / _T0))
        return self.pk - (heat + capacity) / _R_LN10 + self.shift

    def uncertainty_at(self, temperature: float) -> float:
        """Uncertainty of pK at a temperature [°C]; 0.01 for each kelvin where no enthalpy is held."""
        drift = 0.0 if self.enthalpy_known else 0.01 * abs(temperature - 25.0)
        return sqrt(self.uncertainty**2 + drift**2)


@dataclass(frozen=True, slots=True)
class Cluster:
    """A species built of several acid molecules, q HA -> cluster + j H+ (water not counted)."""

    monomers: int
    protons_lost: int
    charge: int
    step: AcidStep


@dataclass(frozen=True, slots=True)
class AcidSystem:
    """One acid with all its forms; `charge` is that of the form that holds every proton."""

    name: str
    charge: int
    steps: tuple[AcidStep, ...]
    clusters: tuple[Cluster, ...]

    @property
    def charges(self) -> tuple[int, ...]:
        """Charges of the forms, most protonated first."""
        return tuple(self.charge - lost for lost in range(len(self.steps) + 1))


@dataclass(frozen=True, slots=True)
class AcidAt:
    """An acid system at one temperature, ready for the kernel.

    `cumulative` holds the sums of pK over the protons lost; `clusters` holds
    (monomers, protons lost, charge, pK) of each polynuclear species.
    """

    name: str
    charge: int
    cumulative: tuple[float, ...]
    clusters: tuple[tuple[int, int, int, float], ...]


def _number(text: str) -> float:
    return float(text) if text else 0.0


def _triple(row: dict[str, str], names: tuple[str, str, str]) -> tuple[float, float, float] | None:
    if not row[names[0]]:
        return None
    return float(row[names[0]]), float(row[names[1]]), float(row[names[2]])


def _reference_shift(row: dict[str, str]) -> float:
    """Brings a constant measured at I > 0 (concentrations) to I = 0 with the activity model."""
    strength = _number(row["ionic_strength_mol_kg"])
    if strength == 0.0:
        return _number(row["shift"])
    root = sqrt(strength)
    decades = debye_huckel_slope(25.0) * root / (1.0 + ION_SIZE * root)
    charge = int(row["charge_of_acid"])
    return decades * (1 + (charge - 1) ** 2 - charge**2)


def _step(row: dict[str, str]) -> AcidStep:
    return AcidStep(
        pk=float(row["pKa_25C"]),
        enthalpy=_number(row["dH_kJ_mol"]) * 1000.0,
        heat_capacity=_number(row["dCp_J_mol_K"]),
        equation=_triple(row, ("A1", "A2", "A3")),
        log_equation=_triple(row, ("B1", "B2", "B3")),
        uncertainty=float(row["uncertainty_pKa"]),
        shift=_reference_shift(row),
        enthalpy_known=bool(row["dH_kJ_mol"] or row["A1"] or row["B1"]),
        status=row["status"],
        source=row["source"],
    )


def _rows(name: str) -> list[dict[str, str]]:
    with (_DATA / name).open(encoding="utf-8", newline="") as file:
        lines = (line for line in file if not line.startswith("#"))
        return list(csv.DictReader(lines))


@lru_cache(maxsize=1)
def _grouped() -> tuple[dict[str, list[dict[str, str]]], dict[str, list[dict[str, str]]]]:
    """Rows of the acid and cluster tables by system, read once."""
    steps: dict[str, list[dict[str, str]]] = {}
    for row in _rows("acids.csv"):
        steps.setdefault(row["system"], []).append(row)
    clusters: dict[str, list[dict[str, str]]] = {}
    for row in _rows("clusters.csv"):
        clusters.setdefault(row["system"], []).append(row)
    return steps, clusters


def systems() -> tuple[str, ...]:
    """Names of all acid systems of the table.

    >>> "phosphate" in systems()
    True
    """
    return tuple(_grouped()[0])


@cache
def system(name: str) -> AcidSystem:
    """The acid system of that name.

    Parameters: name, a key of `data/acids.csv`.
    Returns: the system with its steps in order of loss.
    Errors: EquilibriumError names an unknown system.

    >>> system("phosphate").charges
    (0, -1, -2, -3)
    """
    steps, clusters = _grouped()
    if name not in steps:
        raise EquilibriumError(f"no acid system named {name!r}", name)
    rows = sorted(steps[name], key=lambda row: int(row["step"]))
    charge = int(rows[0]["charge_of_acid"])
    built = tuple(
        Cluster(
            int(row["monomers"]),
            int(row["protons_lost"]),
            int(row["monomers"]) * charge - int(row["protons_lost"]),
            _step(row),
        )
        for row in clusters.get(name, ())
    )
    return AcidSystem(name, charge, tuple(_step(row) for row in rows), built)


@lru_cache(maxsize=4096)
def acid_at(name: str, temperature: float) -> AcidAt:
    """An acid system with its constants at a temperature [°C], remembered.

    >>> [round(value, 2) for value in acid_at("acetate", 25.0).cumulative]
    [0.0, 4.76]
    """
    acid = system(name)
    kelvin = temperature + CELSIUS
    total = 0.0
    cumulative = [0.0]
    for step in acid.steps:
        total += step.at(kelvin)
        cumulative.append(total)
    clusters = tuple(
        (item.monomers, item.protons_lost, item.charge, item.step.at(kelvin))
        for item in acid.clusters
    )
    return AcidAt(name, acid.charge, tuple(cumulative), clusters)
