"""Reagents of the writer: names, forms, molar masses; read from ``reagents.txt``."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache
from pathlib import Path
from random import Random

from soplint.substances import molar_mass

HYDRATES = {
    0: "anhydrous", 1: "monohydrate", 2: "dihydrate", 3: "trihydrate", 4: "tetrahydrate",
    5: "pentahydrate", 6: "hexahydrate", 7: "heptahydrate", 10: "decahydrate", 12: "dodecahydrate",
}  # fmt: skip

# Salt forms whose masses are exchanged by mistake: the mass of the second under the first's name.
SALT_FORMS = (
    ("trishcl", "tris"), ("tris", "trishcl"), ("kh2po4", "nah2po4"), ("k2hpo4", "na2hpo4"),
    ("na2hpo4", "nah2po4"), ("kac", "naac"), ("citrate", "citric"),
)  # fmt: skip


# mol/L that dissolve without trouble, where it is little (from memory, well below saturation)
SOLUBLE = {
    "kbro3": 0.3, "kio3": 0.2, "k2so4": 0.4, "boric": 0.5, "borax": 0.05, "naf": 0.5, "na2hpo4": 0.3,
    "oxalic": 0.5, "khp": 0.3, "edta": 0.2, "nahco3": 0.8, "na2so4": 0.5, "na2co3": 1.0, "cuso4": 0.8,
    "kh2po4": 1.0, "feso4": 0.8, "bacl2": 1.0, "tris": 2.0, "bicine": 1.0, "hepes": 1.5, "mops": 1.5,
    "k2hpo4": 1.5, "nah2po4": 1.5, "sucrose": 1.5, "glucose": 2.0, "citrate": 1.0, "glycine": 2.0,
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class Reagent:
    """A family of solids: one substance with the hydrates that are sold."""

    key: str
    names: tuple[str, ...]
    written: str | None  # formula without water
    formula: str
    hydrates: tuple[int, ...]
    equivalents: int | None

    def mass(self, hydrate: int) -> float:
        """Molar mass of one form, g/mol."""
        return molar_mass(self.formula) + hydrate * molar_mass("H2O")

    def others(self, hydrate: int) -> list[float]:
        """Molar masses of the other forms."""
        return [self.mass(n) for n in self.hydrates if n != hydrate]


@dataclass(frozen=True, slots=True)
class Named:
    """A solid as a recipe names it: the words, the form weighed, whether the words say it."""

    reagent: Reagent
    hydrate: int
    words: str
    plain: str  # the words without the form
    named: bool

    @property
    def mass(self) -> float:
        return self.reagent.mass(self.hydrate)


@cache
def reagents() -> dict[str, Reagent]:
    """All families by key."""
    found = {}
    text = (Path(__file__).resolve().parent / "reagents.txt").read_text(encoding="utf-8")
    for line in text.splitlines():
        if line.startswith("#") or not line.strip():
            continue
        key, names, written, formula, hydrates, z = (cell.strip() for cell in line.split("|"))
        found[key] = Reagent(
            key,
            tuple(n.strip() for n in names.split(";")),
            None if written == "-" else written,
            formula,
            tuple(int(n) for n in hydrates.split()),
            None if z == "-" else int(z),
        )
    return found


def name(rng: Random, reagent: Reagent, *, must_name: bool = False) -> Named:
    """Choose form and spelling: English or formula, form said or left open."""
    hydrate = rng.choice(reagent.hydrates[:2])
    plain = rng.choice(reagent.names)
    formula = reagent.written if reagent.written and rng.random() < 0.5 else None
    plain = formula or plain
    several = len(reagent.hydrates) > 1 or reagent.hydrates != (0,)
    said = several and (must_name or rng.random() < 0.6)
    if not said:
        return Named(reagent, hydrate, plain, plain, not several)
    return Named(reagent, hydrate, _with_form(rng, plain, formula, hydrate), plain, True)


def _with_form(rng: Random, plain: str, formula: str | None, hydrate: int) -> str:
    word = HYDRATES[hydrate]
    if hydrate == 0:
        shapes = [f"{plain} ({word})", f"{plain}, {word}", f"{word} {plain}"]
        return rng.choice(shapes)
    if formula is None:
        return rng.choice([f"{plain} {word}", f"{plain} {word}", f"{plain} ({word})"])
    n = "" if hydrate == 1 else str(hydrate)
    joins = [f"·{n}H2O", f"*{n}H2O", f" * {n}H2O", f"•{n}H2O", f".{n}H2O", f" x {n}H2O"]
    if hydrate > 1:
        joins += [f"-{n}H2O", f", {n}H2O", f" {word}", f"·{n} H2O"]
    return formula + rng.choice(joins)
