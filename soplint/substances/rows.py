"""The reagent files, row by row: every row becomes a Substance, rows are gathered into families.

A family holds all hydrates and commercial strengths of one substance.  Its key is the formula
without water; where two substances share a formula (dimethyl sulfoxide and 2-mercaptoethanol)
each family is named instead.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cache

from .formula import hill, molar_mass, parse_formula
from .model import Substance
from .stems import stem
from .tables import read_table

_GASES = ("HCl", "HBr", "HI", "NH3", "CH2O")  # at room temperature and undiluted
FILES = ("reagents.csv", "more_reagents.csv")


@dataclass(frozen=True, slots=True)
class Row:
    """One row of a reagent file: the substance and its other names."""

    substance: Substance
    synonyms: tuple[str, ...]


def without_water(formula: str) -> str:
    """A catalogue formula without its hydrate water: "Na2HPO4·7H2O" -> "Na2HPO4"."""
    parts = formula.split("·")
    kept = [part for part in parts[1:] if not part.endswith("H2O")]
    return "·".join([parts[0], *kept])


def _number(text: str) -> float | None:
    """A number, or None for an empty field and for words such as "miscible"."""
    try:
        return float(text)
    except ValueError:
        return None


def _list(text: str, separator: str) -> tuple[str, ...]:
    return tuple(part.strip() for part in text.split(separator) if part.strip())


def _substance(row: dict[str, str]) -> Substance:
    formula = row["formula"] or None
    strength = _number(row["strength_percent_w_w"])
    low, high = _number(row["assay_low_percent"]), _number(row["assay_high_percent"])
    pure = strength is None and formula is not None and row["form"] in ("solid", "liquid")
    return Substance(
        name=row["name"],
        formula=formula,
        molar_mass=molar_mass(formula) if formula else None,
        family="",
        hydrate=parse_formula(formula).water if formula else 0.0,
        state=row["form"],
        kind=row["reagent_class"],
        acid_system=row["acid_system"] or None,
        density=_number(row["density_g_mL_20C"]),
        strength=100.0 if pure else strength,
        strength_low=low,
        strength_high=high,
        solubility=_number(row["solubility_g_per_100_mL_water"]),
        cas=row["cas"] or None,
        hazards=_list(row["ghs_hazard_statements"], " "),
        other_forms=_list(row["other_forms"], ";"),
        status=row["status_density_strength"] or row["status_formula"] or "confirmed",
    )


def _families(rows: list[Row]) -> dict[str, str]:
    """Substance name to family key."""
    stems: dict[str, set[str]] = {}
    for row in rows:
        if row.substance.formula:
            anhydrous = without_water(row.substance.formula)
            stems.setdefault(hill(parse_formula(anhydrous).elements), set()).add(
                stem(row.substance.name)
            )
    keys: dict[str, str] = {}
    for row in rows:
        keys[row.substance.name] = stem(row.substance.name)
        if row.substance.formula:
            anhydrous = without_water(row.substance.formula)
            if len(stems[hill(parse_formula(anhydrous).elements)]) == 1:
                keys[row.substance.name] = anhydrous
    return keys


def _is_dilute(substance: Substance) -> bool:
    """A solution, or a solid of known assay well below 100 %."""
    if substance.state == "solution":
        return True
    return substance.strength is not None and substance.strength < 95


def _pure(rows: list[Row]) -> list[Row]:
    """The undiluted substance of each family of which no row is undiluted."""
    by_family: dict[str, list[Substance]] = {}
    for row in rows:
        by_family.setdefault(row.substance.family, []).append(row.substance)
    added = []
    for members in by_family.values():
        first = members[0]
        if not first.formula or not all(_is_dilute(member) for member in members):
            continue
        state = "solid" if first.state == "solid" else "liquid"
        pure = replace(
            first,
            name=stem(first.name) + ", pure",
            state="gas" if first.formula in _GASES else state,
            density=None,
            strength=100.0,
            strength_low=None,
            strength_high=None,
            status="confirmed",
        )
        added.append(Row(pure, ()))
    return added


@cache
def rows() -> tuple[Row, ...]:
    """All rows of the reagent files, in order, then the undiluted substances."""
    read: list[Row] = []
    for name in FILES:
        for record in read_table(name):
            read.append(Row(_substance(record), _list(record["synonyms"], ";")))
    families = _families(read)
    read = [
        replace(row, substance=replace(row.substance, family=families[row.substance.name]))
        for row in read
    ]
    return (*read, *_pure(read))
