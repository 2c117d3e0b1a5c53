"""The door: names and amounts in, a solution out."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from math import isfinite

from soplint.equilibria.balance import balance
from soplint.equilibria.dissociation import dissociation, ion_cautions, ion_charges
from soplint.equilibria.errors import BadAmountError, EquilibriumError
from soplint.equilibria.problem import build
from soplint.equilibria.solution import Solution
from soplint.equilibria.water import CELSIUS, density

BASES = ("mol/L", "mol/kg")
AIR_CO2 = (
    4.2e-4  # atm, partial pressure in dry outdoor air (NOAA global mean 2022-2023, from memory)
)
_CALCIUM = "calcium hydroxide ion pair"


@dataclass(frozen=True, slots=True)
class Resolved:
    """A composition resolved: totals by acid system, strong ions, notes on validity."""

    totals: dict[str, float]
    strong: dict[str, float]
    notes: tuple[str, ...]


def check_temperature(temperature: float) -> float:
    """The temperature [°C] when the solvent data cover it (0 to 100), else BadAmountError.

    >>> check_temperature(25)
    25.0
    """
    if not isinstance(temperature, (int, float)) or not 0.0 <= temperature <= 100.0:
        raise BadAmountError(
            f"temperature {temperature!r} °C is not within 0 to 100", "temperature"
        )
    return float(temperature)


def check_amount(name: str, amount: float) -> float:
    """A non-negative finite amount, else BadAmountError naming the substance.

    >>> check_amount("NaCl", 0.1)
    0.1
    """
    if isinstance(amount, bool) or not isinstance(amount, (int, float)):
        raise BadAmountError(f"amount of {name!r} is not a number: {amount!r}", name)
    if not isfinite(amount) or amount < 0.0:
        raise BadAmountError(f"amount of {name!r} is negative or not finite: {amount!r}", name)
    if amount > 100.0:
        raise BadAmountError(f"amount of {name!r} is beyond any solution: {amount!r}", name)
    return float(amount)


def resolve(composition: Mapping[str, float]) -> Resolved:
    """Totals and strong ions of a composition, in the unit of its amounts.

    Parameters: composition, formula or name -> amount (mol/L, mol/kg or mol).
    Returns: the totals by acid system and strong ion; calcium counts as a system of its own.
    Errors: BadAmountError, UnknownSubstanceError; both name the culprit.

    >>> resolve({"NH4Cl": 0.1}).totals
    {'ammonia': 0.1}
    """
    if not composition or not isinstance(composition, Mapping):
        raise BadAmountError("the composition is empty or no mapping", "composition")
    totals: dict[str, float] = {}
    strong: dict[str, float] = {}
    notes: list[str] = []
    solvent = 0.0
    for name, given in composition.items():
        amount = check_amount(name, given)
        found = dissociation(name)
        if amount == 0.0:
            continue
        notes.extend(found.cautions)
        if found.kind == "solvent":
            solvent += amount
        for label, count in found.systems:
            totals[label] = totals.get(label, 0.0) + count * amount
        for label, count in found.ions:
            strong[label] = strong.get(label, 0.0) + count * amount
    if solvent > 0.5:
        level = "outside" if solvent > 2.0 else "edge"
        notes.append(f"{level}: mixed solvent, {solvent:.2g} mol/L of an organic liquid")
    cautions = ion_cautions()
    notes.extend(cautions[ion] for ion in strong if ion in cautions)
    if "Ca2+" in strong:
        totals[_CALCIUM] = totals.get(_CALCIUM, 0.0) + strong.pop("Ca2+")
    return Resolved(totals, strong, tuple(notes))


def henry_co2(temperature: float) -> float:
    """Solubility of carbon dioxide, lg K = 108.3865 + 0.01985076 T - 6919.53/T - 40.45154 lg T + 669365/T².

    Parameters: temperature [°C].
    Returns: molality of dissolved carbon dioxide over one atmosphere of it [mol/(kg atm)].
    Validity: 0 to 90 °C.
    Reference: Plummer & Busenberg 1982, Geochim. Cosmochim. Acta 46, 1011 (coefficients from memory).

    >>> round(henry_co2(25.0), 4)
    0.034
    """
    from math import log10

    kelvin = temperature + CELSIUS
    exponent = 108.3865 + 0.01985076 * kelvin - 6919.53 / kelvin - 40.45154 * log10(kelvin)
    return float(10.0 ** (exponent + 669365.0 / kelvin**2))


# mol/L; twelve orders below the ions of water, so no pH shows it, and logarithms stay finite.
_NOTHING = 1e-20


def solve_systems(
    totals: Mapping[str, float],
    strong: Mapping[str, float],
    temperature: float = 25.0,
    basis: str = "mol/L",
    *,
    co2_pressure: float | None = None,
    notes: tuple[str, ...] = (),
    start: float | None = None,
) -> Solution:
    """Equilibrium of a composition already resolved to acid systems and strong ions.

    Parameters: totals, acid system -> amount; strong, ion -> amount, both in
    the basis ("mol/L" or "mol/kg"); temperature [°C]; co2_pressure [atm] when
    the solution is open to a gas; notes, "edge: ..." or "outside: ..." to carry
    into the validity; start, a first guess of pH.
    Returns: the solution.
    Errors: EquilibriumError names an unknown system or ion.

    >>> solve_systems({"acetate": 0.1}, {"Na+": 0.05}).pH < 4.76
    True
    """
    if basis not in BASES:
        raise BadAmountError(f"basis {basis!r} is neither mol/L nor mol/kg", "basis")
    charges = ion_charges()
    for ion in strong:
        if ion not in charges:
            raise EquilibriumError(f"no strong ion named {ion!r}", ion)
    scale = 1.0 / density(temperature) if basis == "mol/L" else 1.0
    totals = {name: scale * value for name, value in totals.items() if value > _NOTHING}
    strong = {ion: scale * value for ion, value in strong.items() if value > _NOTHING}
    held = None
    if co2_pressure is not None:
        held = {"carbonate": henry_co2(temperature) * check_amount("CO2", co2_pressure)}
        totals.pop("carbonate", None)
    problem = build(totals, strong, charges, temperature, held)
    root = balance(problem, start)
    return Solution(
        root.ph,
        root.ionic_strength,
        temperature,
        basis,
        totals,
        strong,
        charges,
        notes,
        problem,
        (*totals, *(held or ())),
    )


def solve(
    composition: Mapping[str, float],
    temperature: float = 25.0,
    basis: str = "mol/L",
    *,
    open_to_air: bool = False,
    co2_pressure: float = AIR_CO2,
) -> Solution:
    """pH and species of an aqueous solution of known composition.

    Charge balance over all acid-base systems and the ions of water at a
    self-consistent ionic strength; activity by the Bates-Guggenheim convention,
    lg(gamma) = -A z² sqrt(I)/(1 + 1.5 sqrt(I)), with specific terms of H+ and OH-.

    Parameters: composition, formula or name -> amount, e.g. {"KH2PO4": 0.025,
    "Na2HPO4": 0.025}; temperature [°C]; basis, "mol/L" or "mol/kg" (water);
    open_to_air, lets carbon dioxide at co2_pressure [atm] set the carbonate.
    Returns: the solution (pH, ionic_strength, species, buffer_capacity, validity,
    uncertainty).
    Validity: 0 to 60 °C, I up to 0.2 mol/kg, with larger uncertainty up to 0.7;
    molarity is turned into molality by the density of water. Primary pH standards
    0 to 50 °C within 0.02.
    Errors: BadAmountError, UnknownSubstanceError; both name the culprit.
    Reference: Buck et al. 2002, Pure Appl. Chem. 74, 2169; constants in data/acids.csv.

    >>> round(solve({"KH2PO4": 0.025, "Na2HPO4": 0.025}, basis="mol/kg").pH, 2)
    6.87
    """
    temperature = check_temperature(temperature)
    found = resolve(composition)
    return solve_systems(
        found.totals,
        found.strong,
        temperature,
        basis,
        co2_pressure=co2_pressure if open_to_air else None,
        notes=found.notes,
    )
