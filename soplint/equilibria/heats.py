"""Heat and gas of the steps a procedure asks for: estimates for review, never lower bounds.

All temperature rises are adiabatic: nothing is lost to the vessel or the air.
"""

from __future__ import annotations

from functools import lru_cache
from math import exp, isfinite, log

from soplint.equilibria.acids import system
from soplint.equilibria.dissociation import table_rows
from soplint.equilibria.errors import BadAmountError, EquilibriumError, UnknownSubstanceError
from soplint.equilibria.formulas import key, parse_formula
from soplint.equilibria.water import CELSIUS

_WATER_CAPACITY = 4.18  # J/(g K), liquid water near 25 °C (CRC Handbook)
_SOLUTE_CAPACITY = (
    1.4  # J/(g K), pure sulfuric acid (CRC Handbook, from memory), taken for all solutes
)
_WATER_MASS = 18.015  # g/mol
_GAS = 8.31446261815324  # J/(mol K), CODATA 2018
_NEUTRALISATION = "H+(aq) + OH-(aq) = H2O, per mol H+"


def _positive(name: str, value: float) -> float:
    if isinstance(value, bool) or not isfinite(value) or value < 0.0:
        raise BadAmountError(f"{name} is negative or not finite: {value!r}", name)
    return float(value)


def _bare(substance: str) -> str:
    """A key for the substance column: phase marks off, hydrates kept apart."""
    text = substance.split("(g)")[0].split("(l)")[0].split("(s)")[0]
    try:
        atoms, water = parse_formula(text)
    except EquilibriumError:
        return substance.casefold()
    return f"{key(atoms)}.{water}"


@lru_cache(maxsize=1)
def _solution_heats() -> dict[str, float]:
    rows = table_rows("heats.csv")
    return {
        _bare(row["substance"]): float(row["dH_kJ_mol"])
        for row in rows
        if row["kind"] == "heat of solution"
    }


@lru_cache(maxsize=1)
def _integral_heats() -> dict[str, list[tuple[float, float]]]:
    """Points (ln of mol water per mol solute, kJ/mol) by solute formula, in order."""
    curves: dict[str, list[tuple[float, float]]] = {}
    for row in table_rows("heats.csv"):
        if row["kind"] == "integral heat of solution":
            point = (log(float(row["mol_water_per_mol"])), float(row["dH_kJ_mol"]))
            curves.setdefault(_bare(row["substance"]), []).append(point)
    return {name: sorted(points) for name, points in curves.items()}


def heat_of_solution(substance: str) -> float:
    """Heat of solution at infinite dilution, 25 °C.

    Parameters: substance, formula (hydrates apart) or the name "urea".
    Returns: enthalpy change [kJ/mol], negative when heat is given off.
    Errors: UnknownSubstanceError when no value is held.
    Reference: Parker 1965, NSRDS-NBS 2; rows of data/heats.csv.

    >>> heat_of_solution("NaOH")
    -44.51
    """
    found = _solution_heats().get(_bare(substance))
    if found is None:
        raise UnknownSubstanceError(f"no heat of solution held for {substance!r}", substance)
    return found


def rise_on_dissolving(substance: str, amount: float, water: float) -> float:
    """Temperature rise when a substance dissolves, -n dH / (m c).

    Parameters: substance, as for `heat_of_solution`; amount [mol]; water [g].
    Returns: rise [K], negative when the solution cools.
    Validity: up to about 1 mol/kg; heat capacity is that of the water alone,
    so the size is overestimated by up to a tenth.
    Errors: UnknownSubstanceError, BadAmountError.

    >>> round(rise_on_dissolving("NaOH", 1.0, 1000.0), 1)
    10.6
    """
    mass = _positive("water", water)
    if mass == 0.0:
        raise BadAmountError("there is no water", "water")
    heat = heat_of_solution(substance) * 1000.0 * _positive(substance, amount)
    return -heat / (mass * _WATER_CAPACITY)


def integral_heat(solute: str, water_ratio: float) -> float:
    """Integral heat of solution in a limited amount of water, 25 °C.

    Straight lines in ln(r) between the points of the table, in r from none to the
    first point, level beyond the last. KOH has no table of its own: the curve of NaOH is scaled by the ratio of
    the heats at infinite dilution (an estimate, within about 4 kJ/mol).

    Parameters: solute, "H2SO4", "HCl", "NaOH" or "KOH"; water_ratio r [mol/mol].
    Returns: enthalpy change [kJ/mol].
    Validity: r from 0.5 (H2SO4), 1 (HCl), 3 (NaOH, KOH); rougher below.
    Errors: UnknownSubstanceError, BadAmountError.
    Reference: NBS Circular 500, as tabulated by Felder & Rousseau, Table B.11.

    >>> integral_heat("H2SO4", 10.0)
    -67.03
    """
    if _bare(solute) == _bare("KOH"):
        ratio = heat_of_solution("KOH") / heat_of_solution("NaOH")
        return ratio * integral_heat("NaOH", water_ratio)
    curve = _integral_heats().get(_bare(solute))
    if curve is None:
        raise UnknownSubstanceError(f"no integral heats held for {solute!r}", solute)
    if _positive("water_ratio", water_ratio) == 0.0:
        return 0.0
    x = log(water_ratio)
    if x <= curve[0][0]:
        return curve[0][1] * water_ratio / exp(curve[0][0])
    for (left, low), (right, high) in zip(curve, curve[1:], strict=False):
        if x <= right:
            return low + (high - low) * (x - left) / (right - left)
    return curve[-1][1]


def rise_on_diluting(
    solute: str, amount: float, solute_mass: float, water_before: float, water_added: float
) -> float:
    """Temperature rise when a concentrate is diluted, -n (dH(r2) - dH(r1)) / (m c).

    Parameters: solute, as for `integral_heat`; amount [mol] and solute_mass [g] of
    it; water_before, water already in the concentrate [g]; water_added [g].
    Returns: rise [K].
    Validity: adiabatic, both at one temperature at the start; the heat capacity is
    that of the water plus 1.4 J/(g K) for the solute. Above 100 °C it boils.
    Errors: UnknownSubstanceError, BadAmountError.

    >>> round(rise_on_diluting("H2SO4", 1.0, 98.1, 4.1, 1000.0), 0)
    15.0
    """
    moles = _positive(solute, amount)
    before, added = _positive("water_before", water_before), _positive("water_added", water_added)
    capacity = (before + added) * _WATER_CAPACITY + _positive(
        "solute_mass", solute_mass
    ) * _SOLUTE_CAPACITY
    if moles == 0.0 or capacity == 0.0:
        return 0.0
    first = integral_heat(solute, before / _WATER_MASS / moles)
    last = integral_heat(solute, (before + added) / _WATER_MASS / moles)
    return -1000.0 * moles * (last - first) / capacity


def heat_of_neutralisation(acid_system: str | None = None, step: int = 1) -> float:
    """Heat of neutralising one mole of protons with strong base, 25 °C: -55.8 + dH(step).

    Parameters: acid_system and step of the acid, none for a strong acid.
    Returns: enthalpy change [kJ/mol].
    Errors: EquilibriumError names an unknown system or step.
    Reference: Goldberg, Kishore & Lennen 2002, J. Phys. Chem. Ref. Data 31, 231.

    >>> round(heat_of_neutralisation("acetate"), 1)
    -56.2
    """
    strong = next(
        float(row["dH_kJ_mol"])
        for row in table_rows("heats.csv")
        if row["substance"] == _NEUTRALISATION
    )
    if acid_system is None:
        return strong
    steps = system(acid_system).steps
    if not 1 <= step <= len(steps):
        raise EquilibriumError(
            f"{acid_system} has no step {step!r}", f"{acid_system} step {step!r}"
        )
    return strong + steps[step - 1].enthalpy / 1000.0


def rise_on_neutralising(
    amount: float, solution_mass: float, acid_system: str | None = None, step: int = 1
) -> float:
    """Temperature rise when acid and base meet, -n dH / (m c).

    Parameters: amount of protons neutralised [mol]; solution_mass, both solutions
    together [g]; acid_system, step, as for `heat_of_neutralisation`.
    Returns: rise [K]. Validity: dilute solutions of one temperature.
    Errors: BadAmountError, EquilibriumError.

    >>> round(rise_on_neutralising(0.1, 200.0), 1)
    6.7
    """
    mass = _positive("solution_mass", solution_mass)
    if mass == 0.0:
        raise BadAmountError("there is no solution", "solution_mass")
    heat = heat_of_neutralisation(acid_system, step) * 1000.0
    return -heat * _positive("amount", amount) / (mass * _WATER_CAPACITY)


def heat_of_reaction(solid: str) -> float:
    """Heat of a solid base or carbonate with excess acid, for each mole of solid, 25 °C.

    Parameters: solid, formula. Returns: enthalpy change [kJ/mol].
    Errors: UnknownSubstanceError when no value is held.
    Reference: NBS Tables of Chemical Thermodynamic Properties 1982, differences.

    >>> heat_of_reaction("CaCO3")
    -15.2
    """
    for row in table_rows("heats.csv"):
        if row["kind"] == "heat of reaction" and row["substance"].startswith(f"{solid}(s)"):
            return float(row["dH_kJ_mol"])
    raise UnknownSubstanceError(f"no heat of reaction held for {solid!r}", solid)


def carbon_dioxide_volume(
    carbonate: float, temperature: float = 25.0, pressure: float = 101.325
) -> float:
    """Volume of carbon dioxide set free when carbonate meets excess acid, V = n R T / p.

    Parameters: carbonate, carbonate and hydrogen carbonate together [mol];
    temperature [°C]; pressure [kPa].
    Returns: volume [L], nothing staying dissolved (an upper bound).
    Errors: BadAmountError.

    >>> round(carbon_dioxide_volume(1.0), 2)
    24.47
    """
    if not _positive("pressure", pressure) > 0.0 or not temperature > -CELSIUS:
        raise BadAmountError("pressure or temperature is not positive", "pressure")
    return _positive("carbonate", carbonate) * _GAS * (temperature + CELSIUS) / pressure
