"""Substances: formulas and molar masses, the catalogue of reagents, and names in running text.

>>> round(molar_mass("Na2HPO4·7H2O"), 2)
268.06
>>> [s.name for s in lookup("di-sodium hydrogen phosphate heptahydrate").substances]
['disodium hydrogen phosphate heptahydrate']
"""

from __future__ import annotations

from .catalogue import catalogue, forms, hydrates
from .formula import (
    Formula,
    FormulaError,
    hill,
    molar_mass,
    molar_mass_uncertainty,
    parse_formula,
)
from .index import NameIndex
from .lookup import lookup
from .model import Match, Substance
from .strengths import (
    Strength,
    check_cas,
    concentrated,
    density,
    grams_per_litre,
    mol_per_litre,
    percent_w_w,
)

__all__ = [
    "Formula",
    "FormulaError",
    "Match",
    "NameIndex",
    "Strength",
    "Substance",
    "catalogue",
    "check_cas",
    "concentrated",
    "density",
    "forms",
    "grams_per_litre",
    "hill",
    "hydrates",
    "lookup",
    "mol_per_litre",
    "molar_mass",
    "molar_mass_uncertainty",
    "parse_formula",
    "percent_w_w",
]
