"""Substances: formulas and molar masses, the catalogue of reagents, and names in running text.

``molar_mass`` and ``parse_formula`` read a formula.  ``lookup`` tells what one name means;
``NameIndex.find`` finds all names in a line.  A name that leaves the form open (no hydrate named,
"EDTA", "Tris-HCl", an acid without its strength) means several substances, best first, so that
the caller can try them all.  ``forms`` and ``hydrates`` give the relatives of a substance,
``concentrated`` and ``density`` the commercial strengths and densities of liquids.

The facts stand in ``data/``: atomic weights, two reagent files with one row per form, synonyms,
strengths, densities, ions.  ``index.json`` is prepared from them by
``python -m soplint.substances.prepare`` and is all that a review loads.  Modules, from the ground
up: elements, formula (a formula by itself); naming, stems, tables, rows, prepare (the files);
catalogue (substances at run time); hydration, inorganic, reading, words, water, index, lookup
(names in text); strengths.

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
