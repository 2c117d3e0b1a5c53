"""From totals and strong ions to a problem the kernel can close."""

from __future__ import annotations

import csv
from collections.abc import Mapping
from functools import lru_cache
from pathlib import Path

from soplint.equilibria.acids import AcidAt, acid_at
from soplint.equilibria.species import Dissolved, Form, Problem, Shape, shape_of
from soplint.equilibria.water import properties

_DATA = Path(__file__).parent / "data"


@lru_cache(maxsize=1)
def interactions() -> dict[str, dict[str, float]]:
    """Specific interaction coefficients [kg/mol]: ion -> counter ion -> epsilon.

    >>> interactions()["H+"]["Cl-"]
    0.12
    """
    table: dict[str, dict[str, float]] = {}
    with (_DATA / "interactions.csv").open(encoding="utf-8", newline="") as file:
        for row in csv.DictReader(line for line in file if not line.startswith("#")):
            table.setdefault(row["ion"], {})[row["counter_ion"]] = float(row["epsilon"])
    return table


def interaction_term(ion: str, strong: Mapping[str, float]) -> float:
    """Sum of epsilon m over the strong ions present: the specific part of lg(gamma).

    Parameters: ion, a key of the table; strong, ion -> molality [mol/kg].
    Returns: b [1].

    >>> interaction_term("H+", {"Cl-": 0.1})
    0.012
    """
    row = interactions().get(ion)
    if not row:
        return 0.0
    term = 0.0
    for counter, epsilon in row.items():
        if counter in strong:
            term += epsilon * strong[counter]
    return term


def forms_of(acid: AcidAt, strong: Mapping[str, float]) -> tuple[Form, ...]:
    """The species of an acid with the specific interactions folded into their pK.

    >>> forms_of(acid_at("acetate", 25.0), {})[1][:3]
    (1, 1, -1)
    """
    name = acid.name
    terms = [
        interaction_term(f"{name}:{acid.charge - lost}", strong)
        for lost in range(len(acid.cumulative))
    ]
    forms = [
        (1, lost, acid.charge - lost, pk + terms[lost] - terms[0])
        for lost, pk in enumerate(acid.cumulative)
    ]
    forms.extend(
        (q, j, z, pk + interaction_term(f"{name}:{q}:{z}", strong) - q * terms[0])
        for q, j, z, pk in acid.clusters
    )
    return tuple(forms)


@lru_cache(maxsize=1)
def _interacting() -> frozenset[str]:
    """Acid systems with coefficients of their own in the table."""
    return frozenset(ion.partition(":")[0] for ion in interactions() if ":" in ion)


@lru_cache(maxsize=4096)
def _plain_shape(name: str, temperature: float) -> Shape:
    return shape_of(forms_of(acid_at(name, temperature), {}))


def _shape(name: str, temperature: float, strong: Mapping[str, float]) -> Shape:
    if name in _interacting():
        return shape_of(forms_of(acid_at(name, temperature), strong))
    return _plain_shape(name, temperature)


def build(
    totals: Mapping[str, float],
    strong: Mapping[str, float],
    charges: Mapping[str, int],
    temperature: float,
    held: Mapping[str, float] | None = None,
) -> Problem:
    """A problem from molalities.

    Parameters: totals, acid system -> mol/kg; strong, ion -> mol/kg; charges,
    ion -> charge; temperature [°C]; held, acid system -> molality of its first
    form fixed by a gas [mol/kg].
    Returns: the problem.

    >>> build({"acetate": 0.1}, {}, {}, 25.0).systems[0].total
    0.1
    """
    _, slope, pkw = properties(temperature)
    dissolved = []
    for name, total in totals.items():
        if total > 0.0 and not (held and name in held):
            dissolved.append(Dissolved(total, _shape(name, temperature, strong)))
    fixed = tuple(
        (anchor, forms_of(acid_at(name, temperature), strong))
        for name, anchor in (held or {}).items()
    )
    charge = squares = 0.0
    for ion, molality in strong.items():
        z = charges[ion]
        charge += z * molality
        squares += z * z * molality
    return Problem(
        tuple(dissolved),
        charge,
        squares,
        slope,
        pkw,
        interaction_term("H+", strong),
        interaction_term("OH-", strong),
        fixed,
    )
