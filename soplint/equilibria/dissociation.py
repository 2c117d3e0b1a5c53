"""What a substance brings into water: acid systems and strong ions, by name or formula."""

from __future__ import annotations

import csv
import re
from collections.abc import Iterator
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path
from typing import TYPE_CHECKING

from soplint.equilibria.errors import EquilibriumError, UnknownSubstanceError
from soplint.equilibria.formulas import adducts, key, parse_formula

if TYPE_CHECKING:
    from soplint.substances import Substance

_DATA = Path(__file__).parent / "data"
_LONGEST = 200  # characters, above any name or formula of the tables
_SPACES = re.compile(r"[\s_]+")
_STRENGTH = re.compile(r"\s*,?\s*\(?(?:about )?\d[\d.,-]*\s*%.*$")
_WATER = re.compile(
    r",?\s*\(?(?:anhydrous|pure|(?:mono|di|tri|tetra|penta|hexa|hepta|octa|nona|deca|dodeca)?hydrate)\)?$"
)


@dataclass(frozen=True, slots=True)
class Dissociation:
    """One formula unit in water.

    `systems`: (acid system, molecules); `ions`: (strong ion, count);
    `kind`: dissociates, neutral or solvent (mixed solvents
    are outside the model); `cautions`: "edge: ..." or
    "outside: ..." notes on what the model leaves out.
    """

    name: str
    systems: tuple[tuple[str, float], ...]
    ions: tuple[tuple[str, float], ...]
    kind: str
    cautions: tuple[str, ...]


def table_rows(name: str) -> Iterator[dict[str, str]]:
    """Rows of one of the room's data files, comment lines left out.

    >>> next(table_rows("strong_ions.csv"))["ion"]
    'Na+'
    """
    with (_DATA / name).open(encoding="utf-8", newline="") as file:
        yield from csv.DictReader(line for line in file if not line.startswith("#"))


@lru_cache(maxsize=1)
def ion_charges() -> dict[str, int]:
    """Charges of the strong ions.

    >>> ion_charges()["Mg2+"]
    2
    """
    return {row["ion"]: int(row["charge"]) for row in table_rows("strong_ions.csv")}


@lru_cache(maxsize=1)
def ion_cautions() -> dict[str, str]:
    """Validity notes of the strong ions that carry one.

    >>> ion_cautions()["Fe3+"].partition(":")[0]
    'outside'
    """
    return {row["ion"]: row["caution"] for row in table_rows("strong_ions.csv") if row["caution"]}


def plain_name(text: str) -> str:
    """A name without the differences of spelling that carry no meaning.

    >>> plain_name(" Sodium  Hydrogensulphate ")
    'sodium hydrogensulfate'
    """
    name = _SPACES.sub(" ", text.strip().casefold()).replace("sulph", "sulf")
    return name.replace("’", "'").replace("–", "-").replace("‐", "-")


def _pairs(text: str) -> tuple[tuple[str, float], ...]:
    found = []
    for piece in text.split(";"):
        if piece:
            label, _, count = piece.strip().rpartition(" ")
            found.append((label, float(count)))
    return tuple(found)


@lru_cache(maxsize=1)
def _index() -> tuple[dict[str, Dissociation], dict[str, Dissociation]]:
    """The table by plain name and by formula key; an ambiguous formula is left out."""
    names: dict[str, Dissociation] = {}
    keys: dict[str, Dissociation] = {}
    for row in table_rows("dissociation.csv"):
        caution = row["caution"]
        entry = Dissociation(
            row["name"],
            _pairs(row["systems"]),
            _pairs(row["strong_ions"]),
            row["kind"],
            (caution,) if caution else (),
        )
        for name in (row["name"], *row["synonyms"].split(";")):
            if name:
                names.setdefault(plain_name(name), entry)
        if row["by_formula"] == "yes":
            keys.setdefault(row["key"], entry)
    return names, keys


def _by_name(text: str) -> Dissociation | None:
    names, _ = _index()
    name = plain_name(text)
    for shorter in (name, _STRENGTH.sub("", name), _WATER.sub("", name)):
        if shorter in names:
            return names[shorter]
    bare = _WATER.sub("", _STRENGTH.sub("", name))
    for ending in ("", ", anhydrous", " solution"):
        if bare + ending in names:
            return names[bare + ending]
    return None


def _by_formula(text: str, hint: str | None = None) -> Dissociation | None:
    from soplint.equilibria.composition import decompose

    try:
        parts, _ = adducts(text)
        atoms, _ = parse_formula(text)
    except EquilibriumError:
        return None
    found = _index()[1].get(key(atoms))
    if found is not None and (hint is None or hint in dict(found.systems)):
        return found
    if len(parts) > 1:
        pieces = [(times, _index()[1].get(key(part))) for times, part in parts]
        whole = _joined(text, pieces)
        if whole is not None:
            return whole
    return decompose(atoms, text, hint)


def _joined(name: str, pieces: list[tuple[int, Dissociation | None]]) -> Dissociation | None:
    """An adduct such as C4H11NO3·HCl from what its parts bring, when all are known."""
    systems: dict[str, float] = {}
    ions: dict[str, float] = {}
    for times, piece in pieces:
        if piece is None:
            return None
        for label, count in piece.systems:
            systems[label] = systems.get(label, 0.0) + times * count
        for label, count in piece.ions:
            ions[label] = ions.get(label, 0.0) + times * count
    return Dissociation(name, tuple(systems.items()), tuple(ions.items()), "dissociates", ())


def _by_catalogue(text: str) -> Dissociation | None:
    """Through the catalogue of reagents, which knows more names and formulas."""
    from soplint.substances import lookup

    match = lookup(text)
    if match is None or match.generic or not match.substances:
        return None
    return _of_substance(match.substances[0])


_SOLVENT = re.compile(r"solvent|^oil$")
_NEUTRAL = re.compile(r"^(?:sugar|polyol|neutral organic|adsorbent|gelling agent|wax|monomer)\b")
_COMPLEX = re.compile(r"^(?:protein|serum|medium|polymer|surfactant|nucleic acid|dye|indicator)")


def _of_substance(substance: Substance) -> Dissociation | None:
    """By what the catalogue says of a substance: its names, its kind, last its formula.

    A neutral organic formula alone does not tell which acid it is, so it is not trusted.
    """
    found = _by_name(substance.name)
    if found is not None:
        return found
    if _SOLVENT.search(substance.kind):
        return Dissociation(substance.name, (), (), "solvent", ())
    if substance.acid_system is None and _NEUTRAL.search(substance.kind):
        return Dissociation(substance.name, (), (), "neutral", ())
    split = _by_formula(substance.formula, substance.acid_system) if substance.formula else None
    if split is not None and (substance.acid_system or split.ions or not _has_carbon(substance)):
        return split
    level = "edge" if _COMPLEX.search(substance.kind) else "outside"
    note = f"{level}: acid-base behaviour of {substance.name} is not in the model"
    return Dissociation(substance.name, (), (), "neutral", (note,))


def _has_carbon(substance: Substance) -> bool:
    return "C" in parse_formula(substance.formula or "")[0]


@lru_cache(maxsize=4096)
def dissociation(substance: str) -> Dissociation:
    """What one formula unit of a substance brings into water.

    Parameters: substance, a formula (any hydrate, any order of elements) or a name.
    Returns: acid systems and strong ions; none of both for a neutral substance.
    Errors: UnknownSubstanceError names what no table resolves.

    >>> dissociation("Na2HPO4·7H2O").systems, dissociation("Na2HPO4").ions
    ((('phosphate', 1.0),), (('Na+', 2.0),))
    """
    if not isinstance(substance, str) or len(substance) > _LONGEST:
        shown = str(substance)[:60]
        raise UnknownSubstanceError(f"{shown!r} is no name of a substance", shown)
    found = _by_name(substance) or _by_formula(substance) or _by_catalogue(substance)
    if found is None:
        shown = substance if len(substance) <= 80 else substance[:77] + "..."
        raise UnknownSubstanceError(f"no dissociation known for {shown!r}", shown)
    return found
