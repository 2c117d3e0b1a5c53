"""Look-ups of constants: apparent pKa' at a temperature and ionic strength, systems of a substance."""

from __future__ import annotations

from math import isfinite

from soplint.equilibria.acids import acid_at, system
from soplint.equilibria.dissociation import dissociation
from soplint.equilibria.door import check_temperature
from soplint.equilibria.errors import BadAmountError, EquilibriumError
from soplint.equilibria.species import damping
from soplint.equilibria.water import debye_huckel_slope


def pka(name: str, step: int = 1, temperature: float = 25.0, ionic_strength: float = 0.0) -> float:
    """Apparent pKa' = pH - lg([base]/[acid]), with pH on the activity scale.

    pKa' = pKa(T) + (2 z - 1) D, z the charge of the acid form,
    D = A sqrt(I)/(1 + 1.5 sqrt(I)).

    Parameters: name, acid system; step, 1 for the first proton lost;
    temperature [°C]; ionic_strength [mol/kg].
    Returns: pKa' [1], for use with concentrations in the Henderson-Hasselbalch equation.
    Validity: 0 to 60 °C, I up to 0.7 mol/kg.
    Errors: EquilibriumError names an unknown system or step.
    Reference: Bates & Guggenheim 1960, Pure Appl. Chem. 1, 163; constants in data/acids.csv.

    >>> round(pka("phosphate", 2, 25.0, 0.1), 2)
    6.87
    """
    acid = system(name)
    if isinstance(step, bool) or not isinstance(step, int) or not 1 <= step <= len(acid.steps):
        raise EquilibriumError(f"{name} has no step {step!r}", f"{name} step {step!r}")
    temperature = check_temperature(temperature)
    if not isfinite(ionic_strength) or ionic_strength < 0.0:
        raise BadAmountError(f"ionic strength {ionic_strength!r} is no strength", "ionic strength")
    cumulative = acid_at(name, temperature).cumulative
    charge = acid.charge - step + 1
    damped = damping(debye_huckel_slope(temperature), ionic_strength)
    return cumulative[step] - cumulative[step - 1] + (2 * charge - 1) * damped


def system_pkas(name: str, temperature: float = 25.0, ionic_strength: float = 0.0) -> list[float]:
    """All pKa' of an acid system, in order of loss; parameters as for `pka`.

    >>> [round(value, 2) for value in system_pkas("acetate")]
    [4.76]
    """
    steps = range(1, len(system(name).steps) + 1)
    return [pka(name, step, temperature, ionic_strength) for step in steps]


def acid_systems_of(name_or_formula: str) -> dict[str, float]:
    """Acid systems one formula unit of a substance brings, with their number.

    Parameters: name_or_formula. Returns: acid system -> count; empty for neutral
    substances, strong acids and bases, and salts of both.
    Errors: UnknownSubstanceError.

    >>> acid_systems_of("ammonium dihydrogen phosphate")
    {'phosphate': 1.0, 'ammonia': 1.0}
    """
    return dict(dissociation(name_or_formula).systems)
