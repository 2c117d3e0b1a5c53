"""A recipe table, read: one row a component, one amount column a variant of the preparation."""

from __future__ import annotations

from dataclasses import dataclass

from soplint.intake.model import Text
from soplint.notation.phrases import Dose, Material, Sentence, ToVolume
from soplint.quantities.model import Measure


@dataclass(frozen=True, slots=True)
class Variant:
    """An amount column: the same recipe for a volume, a fold or a named solution of its own.

    Offsets of ``volume``, ``fold`` and ``ph`` count in ``head``.
    """

    head: Text  # the heading cell, empty text when there is none
    volume: Measure | None = None  # "500 mL" as heading, "Amount / 25 mL"
    fold: Measure | None = None  # "10X" as heading
    ph: Measure | None = None
    name: str | None = None  # "Buffer A": columns that are different solutions


@dataclass(frozen=True, slots=True)
class Row:
    """One row.  ``text`` joins the cells with " | "; offsets of all phrases count in it."""

    text: Text
    kind: str  # component, total, complement (water to volume), note
    material: Material | None
    doses: tuple[Dose | None, ...]  # one per variant; strength of the stock and finals are in it
    to_volumes: tuple[ToVolume | None, ...]  # of total and complement rows, one per variant
    sentence: Sentence  # all quantities of the row, for the ledger


@dataclass(frozen=True, slots=True)
class RecipeTable:
    """A table that holds a recipe."""

    variants: tuple[Variant, ...]
    rows: tuple[Row, ...]
    head: tuple[Text, ...]
    caption: Text | None = None
    kind: str = (
        "recipe"  # recipe; list (reagents with facts, no amounts); other (nothing to recompute)
    )
