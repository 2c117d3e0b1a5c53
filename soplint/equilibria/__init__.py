"""Acids, activity, charge balance, titration curves, buffer recipes, heats and solubility.

The kernel modules (`balance`, `batch`, `water`, `acids`) take floats and give floats.
`solve`, `titration_curve`, `buffer_recipe` and `adjust` are the door: they resolve names
and formulas to acid systems and strong ions. Amounts are mol/L or mol/kg of water,
temperatures °C, volumes mL where a name says so. pH is the activity scale of the standards.

Importing this package loads nothing; each public name loads its module on first use, and
the scalar path never loads numpy or scipy.

>>> from soplint.equilibria import solve
>>> round(solve({"CH3COOH": 0.1, "CH3COONa": 0.1}).pH, 2)
4.65
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from soplint.equilibria.constants import acid_systems_of, pka, system_pkas
    from soplint.equilibria.door import solve, solve_systems
    from soplint.equilibria.errors import (
        BadAmountError,
        EquilibriumError,
        NotConvergedError,
        UnknownSubstanceError,
        UnreachableError,
    )
    from soplint.equilibria.heats import (
        carbon_dioxide_volume,
        heat_of_neutralisation,
        heat_of_reaction,
        heat_of_solution,
        integral_heat,
        rise_on_diluting,
        rise_on_dissolving,
        rise_on_neutralising,
    )
    from soplint.equilibria.inverse import (
        Adjustment,
        BufferRecipe,
        adjust,
        after_addition,
        after_dilution,
        at_temperature,
        buffer_recipe,
    )
    from soplint.equilibria.precipitation import (
        Saturation,
        Solid,
        saturation,
        solids,
        solubility,
        solubility_ratio,
    )
    from soplint.equilibria.shortcuts import (
        ampholyte_ph,
        henderson_hasselbalch,
        pkb,
        ratio_for_ph,
        strong_acid_ph,
        strong_base_ph,
        weak_acid_ph,
        weak_base_ph,
    )
    from soplint.equilibria.solution import Solution, Species
    from soplint.equilibria.titration import (
        Equivalence,
        Indicator,
        TitrationCurve,
        indicator,
        titration_curve,
    )
    from soplint.equilibria.validity import Validity

_WHERE = {
    "solve": "door",
    "solve_systems": "door",
    "pka": "constants",
    "system_pkas": "constants",
    "acid_systems_of": "constants",
    "Adjustment": "inverse",
    "BufferRecipe": "inverse",
    "adjust": "inverse",
    "after_addition": "inverse",
    "after_dilution": "inverse",
    "at_temperature": "inverse",
    "buffer_recipe": "inverse",
    "Equivalence": "titration",
    "Indicator": "titration",
    "TitrationCurve": "titration",
    "indicator": "titration",
    "titration_curve": "titration",
    "carbon_dioxide_volume": "heats",
    "heat_of_neutralisation": "heats",
    "heat_of_reaction": "heats",
    "heat_of_solution": "heats",
    "integral_heat": "heats",
    "rise_on_diluting": "heats",
    "rise_on_dissolving": "heats",
    "rise_on_neutralising": "heats",
    "Saturation": "precipitation",
    "Solid": "precipitation",
    "saturation": "precipitation",
    "solids": "precipitation",
    "solubility": "precipitation",
    "solubility_ratio": "precipitation",
    "ampholyte_ph": "shortcuts",
    "henderson_hasselbalch": "shortcuts",
    "pkb": "shortcuts",
    "ratio_for_ph": "shortcuts",
    "strong_acid_ph": "shortcuts",
    "strong_base_ph": "shortcuts",
    "weak_acid_ph": "shortcuts",
    "weak_base_ph": "shortcuts",
    "Solution": "solution",
    "Species": "solution",
    "Validity": "validity",
    "EquilibriumError": "errors",
    "UnknownSubstanceError": "errors",
    "BadAmountError": "errors",
    "UnreachableError": "errors",
    "NotConvergedError": "errors",
}

__all__ = [
    "Adjustment",
    "BadAmountError",
    "BufferRecipe",
    "EquilibriumError",
    "Equivalence",
    "Indicator",
    "NotConvergedError",
    "Saturation",
    "Solid",
    "Solution",
    "Species",
    "TitrationCurve",
    "UnknownSubstanceError",
    "UnreachableError",
    "Validity",
    "acid_systems_of",
    "adjust",
    "after_addition",
    "after_dilution",
    "ampholyte_ph",
    "at_temperature",
    "buffer_recipe",
    "carbon_dioxide_volume",
    "heat_of_neutralisation",
    "heat_of_reaction",
    "heat_of_solution",
    "henderson_hasselbalch",
    "indicator",
    "integral_heat",
    "pka",
    "pkb",
    "ratio_for_ph",
    "rise_on_diluting",
    "rise_on_dissolving",
    "rise_on_neutralising",
    "saturation",
    "solids",
    "solubility",
    "solubility_ratio",
    "solve",
    "solve_systems",
    "strong_acid_ph",
    "strong_base_ph",
    "system_pkas",
    "titration_curve",
    "weak_acid_ph",
    "weak_base_ph",
]


def __getattr__(name: str) -> object:
    if name not in _WHERE:
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    return getattr(import_module(f"{__name__}.{_WHERE[name]}"), name)
