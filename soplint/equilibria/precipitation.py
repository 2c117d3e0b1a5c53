"""Saturation of a solution with solids, and limits of solubility."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from math import isfinite, log10

from soplint.equilibria.dissociation import table_rows
from soplint.equilibria.errors import BadAmountError, EquilibriumError, UnknownSubstanceError
from soplint.equilibria.formulas import key, parse_formula
from soplint.equilibria.solution import Solution


@dataclass(frozen=True, slots=True)
class Solid:
    """A solid with its solubility product; `ions` are (species, count)."""

    name: str
    ions: tuple[tuple[str, int], ...]
    log_product: float
    uncertainty: float
    status: str
    source: str


@dataclass(frozen=True, slots=True)
class Saturation:
    """lg(ion activity product / Ksp) of one solid: above zero it can precipitate."""

    solid: Solid
    index: float

    @property
    def can_precipitate(self) -> bool:
        """Whether the index exceeds the uncertainty of the constant."""
        return self.index > self.solid.uncertainty


@lru_cache(maxsize=1)
def solids() -> tuple[Solid, ...]:
    """All solids of data/ksp.csv.

    >>> any(solid.name == "AgCl" for solid in solids())
    True
    """
    found = []
    for row in table_rows("ksp.csv"):
        pairs = [piece.rpartition(" ") for piece in row["ions"].split(";")]
        found.append(
            Solid(
                row["solid"],
                tuple((label, int(count)) for label, _, count in pairs),
                float(row["log10_Ksp"]),
                float(row["uncertainty"]),
                row["status"],
                row["source"],
            )
        )
    return tuple(found)


def saturation(solution: Solution) -> tuple[Saturation, ...]:
    """Saturation index of every solid all of whose ions are present, highest first.

    SI = sum of nu lg a - lg Ksp, water at unit activity.

    Parameters: solution, from `solve`.
    Returns: the indices; an empty tuple when no listed solid can form.
    Validity: as for `solve`; constants hold at 25 °C and are used at every
    temperature. Ion pairs and complexes are not in the model, so indices of strongly
    complexed metals are too high.
    Reference: sources in data/ksp.csv.

    >>> from soplint.equilibria import solve
    >>> saturation(solve({"CaCl2": 0.01, "Na2CO3": 0.01}))[0].can_precipitate
    True
    """
    species = solution.species
    found = []
    for solid in solids():
        activities = [(species[name].activity, n) for name, n in solid.ions if name in species]
        if len(activities) == len(solid.ions) and all(a > 0.0 for a, _ in activities):
            product = sum(n * log10(a) for a, n in activities)
            found.append(Saturation(solid, product - solid.log_product))
    return tuple(sorted(found, key=lambda item: -item.index))


@lru_cache(maxsize=1)
def _solubilities() -> dict[str, list[tuple[float, float]]]:
    table: dict[str, list[tuple[float, float]]] = {}
    for row in table_rows("solubilities.csv"):
        point = (float(row["temperature_C"]), float(row["solubility_g_per_100g_water"]))
        table.setdefault(_key(row["substance"]), []).append(point)
    return table


def _key(substance: str) -> str:
    try:
        atoms, water = parse_formula(substance)
    except EquilibriumError:
        return substance.strip().casefold()
    return f"{key(atoms)}.{water}"


def solubility(substance: str, temperature: float = 20.0) -> float:
    """Solubility in water at the tabulated temperature nearest to the one asked for.

    Parameters: substance, formula or name as in data/solubilities.csv; temperature [°C].
    Returns: grams of the substance in 100 g of water.
    Validity: within about 5 %; most rows hold at 20 °C only.
    Errors: UnknownSubstanceError when no value is held.

    >>> solubility("NaCl")
    35.9
    """
    points = _solubilities().get(_key(substance))
    if points is None:
        raise UnknownSubstanceError(f"no solubility held for {substance!r}", substance)
    return min(points, key=lambda point: abs(point[0] - temperature))[1]


def solubility_ratio(
    substance: str, grams: float, water: float, temperature: float = 20.0
) -> float:
    """Amount asked for over amount that dissolves: above 1 it cannot dissolve.

    Parameters: substance, as for `solubility`; grams of it; water [g]; temperature [°C].
    Returns: ratio [1]; the data bear a factor of 1.3.
    Errors: UnknownSubstanceError, BadAmountError.

    >>> round(solubility_ratio("NaCl", 35.9, 100.0), 3)
    1.0
    """
    if not (isfinite(grams) and isfinite(water)) or grams < 0.0 or water <= 0.0:
        raise BadAmountError(f"grams {grams!r} or water {water!r} is no amount", substance)
    return grams / water * 100.0 / solubility(substance, temperature)
