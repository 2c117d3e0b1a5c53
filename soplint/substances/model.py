"""A substance of the catalogue: what a name stands for."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Substance:
    """One substance in one form (hydrate, salt, concentration)."""

    name: str  # preferred English name, unique
    formula: str | None  # "Na2HPO4·7H2O"; None where there is none (agarose)
    molar_mass: float | None  # g/mol, computed from the formula
    family: str  # key shared by all hydrates of one substance: the anhydrous formula or the name
    hydrate: float  # mol water per mol, 0 for anhydrous
    state: str  # solid, liquid, solution, gas
    kind: str  # reagent class, links to the incompatibility table
    acid_system: str | None
    density: float | None  # g/mL at 20 °C
    strength: float | None  # % w/w of a commercial solution, 100 for a pure liquid or solid
    strength_low: float | None  # assay range of the row
    strength_high: float | None
    solubility: float | None  # g per 100 mL water, about 20 °C
    cas: str | None
    hazards: tuple[str, ...]  # H statements
    other_forms: tuple[str, ...]  # names of other salts, hydrates, strengths of the same substance
    status: str  # of the numbers a finding would rest on


@dataclass(frozen=True, slots=True)
class Match:
    """A name found in text: which substances it can mean, best first."""

    start: int
    end: int
    substances: tuple[Substance, ...]  # more than one: the form is not settled by the name
    form_named: bool  # a hydrate or "anhydrous" was named (or only one form exists)
    generic: bool  # "phosphate", "citrate": names a whole acid system, not a reagent
    written: str  # as in the text
    flags: tuple[str, ...] = ()  # notation slips: "zero-for-O", "case" ...
