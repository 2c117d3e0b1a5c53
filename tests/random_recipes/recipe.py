"""An abstract recipe: figures by key, parts, and how the whole is finished; no wording yet."""

from __future__ import annotations

from dataclasses import dataclass, field

from random_recipes.figures import Figure
from random_recipes.reagents import Named


@dataclass(slots=True)
class Part:
    """One thing taken. Keys name figures of the recipe."""

    words: str
    how: str  # solid, stock, neat, acid
    amounts: list[str]  # one key per volume column
    stock: str | None = None  # strength of the stock
    final: str | None = None
    label: str = ""  # said behind the name of a stock, "pH 8.0"
    molar_mass: str | None = None
    assay: tuple[str, ...] = ()  # per cent, density, mol/L printed beside a concentrate
    named: Named | None = None


@dataclass(slots=True)
class Recipe:
    """A recipe before it is worded."""

    kind: str
    name: str
    figures: dict[str, Figure]
    parts: list[Part]
    volumes: list[str]  # keys of the final volumes, one per column
    titles: list[str]  # possible titles, with figure tokens
    finish: str = "mark"  # mark, water, sum
    water: list[str] = field(default_factory=list)  # keys of the water complement, per column
    start: str | None = None
    total: str | None = None  # key of a printed total
    lead: str = ""  # what a lead-in makes: "[c] sodium chloride"
    finals_at: str = ""  # "1x" when the finals hold after dilution
    extra: list[str] = field(default_factory=list)  # sentences with tokens
    finals_in_title: bool = False
    serial: list[tuple[str, str, str]] = field(default_factory=list)  # aliquot, flask, strength
    near: dict[str, set[str]] = field(default_factory=dict)  # key: keys of the same relation

    def amount_of(self, part: Part) -> Figure:
        return self.figures[part.amounts[0]]


def token(key: str | None) -> str:
    """The mark of a figure in a text, number with unit."""
    return f"⟦{key}⟧"


def bare(key: str) -> str:
    """The mark of a figure in a text, number only."""
    return f"⟦{key}|n⟧"
