"""Hypotheses: each says by which factor a slip of its kind would have changed the right number.

A hypothesis yields (kind, stated / right, words).  The search keeps those whose factor meets the
one found.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator
from dataclasses import dataclass

from soplint.bench import Bench, Relation
from soplint.bench.numbers import shown
from soplint.bench.portions import equivalents
from soplint.bench.preparation import Taken
from soplint.substances import catalogue, concentrated
from soplint.substances.model import Substance

Hypothesis = tuple[str, float, str]


@dataclass(frozen=True, slots=True)
class Case:
    """A disagreement with the bench it stands on."""

    relation: Relation
    bench: Bench


def hydrates_and_salts(case: Case) -> Iterator[Hypothesis]:
    """The mass of another hydrate or salt form."""
    substance = case.relation.substance
    if substance is None or not substance.molar_mass:
        return
    if case.relation.kind not in {"mass", "molar-mass"}:
        return  # of a sum each member is asked by itself
    for other in related_forms(substance):
        if other.molar_mass and other.state == "solid":
            kind = "other-hydrate" if other.family == substance.family else "other-salt-form"
            if kind == "other-salt-form" and _cations(other) not in (
                *(_cations(substance), frozenset()),
            ):
                kind = "another-salt"
            yield (
                kind,
                other.molar_mass / substance.molar_mass,
                f"the amount fits {other.name} ({other.molar_mass:.2f} g/mol)",
            )


def related_forms(substance: Substance) -> list[Substance]:
    """Other hydrates and salts of one substance."""
    names = set(substance.other_forms)
    return [
        other
        for other in catalogue()
        if other.name != substance.name
        and (
            other.family == substance.family
            or other.name in names
            or (other.acid_system is not None and other.acid_system == substance.acid_system)
        )
    ]


_CATIONS = (
    "Na",
    "K",
    "Li",
    "Mg",
    "Ca",
    "Sr",
    "Ba",
    "Mn",
    "Zn",
    "Cu",
    "Fe",
    "Co",
    "Ni",
    "Ag",
    "NH4",
)


def _cations(substance: Substance) -> frozenset[str]:
    """Metals (and ammonium) of a formula; a free acid or base has none."""
    formula = substance.formula or ""
    return frozenset(c for c in _CATIONS if re.search(rf"{c}(?![a-z])", formula))


def powers_of_ten(case: Case) -> Iterator[Hypothesis]:
    """A decimal point or a unit prefix."""
    for power, kind in ((1, "factor-ten"), (2, "factor-hundred"), (3, "factor-thousand")):
        for sign in (1, -1):
            words = (
                "a unit prefix (thousand-fold)"
                if power == 3
                else f"the decimal point ({10**power}-fold)"
            )
            yield kind, 10.0 ** (power * sign), words


def other_volumes(case: Case) -> Iterator[Hypothesis]:
    """The amount for another volume of the document."""
    volume = case.relation.volume
    if volume is None or volume.litres <= 0:
        return
    seen: set[float] = {round(volume.litres, 9)}
    for preparation in case.bench.preparations:
        for stated in (
            preparation.volume.stated if preparation.volume else None,
            preparation.title.volume if preparation.title else None,
            *(t.stated for t in preparation.taken if t.solvent or _is_water(t)),
        ):
            if stated is None or round(stated.measure.base, 9) in seen or stated.measure.base <= 0:
                continue
            seen.add(round(stated.measure.base, 9))
            yield (
                "copied-volume",
                stated.measure.base / volume.litres,
                f"the amount fits {shown(stated.measure)} (line {stated.span.line})",
            )


def _is_water(taken: Taken) -> bool:
    material = taken.dose.material
    return material is not None and material.is_water and taken.dose.amount.dimension == "volume"


def normal_for_molar(case: Case) -> Iterator[Hypothesis]:
    """Normality taken for molarity, or the reverse."""
    substance = case.relation.substance
    z = equivalents(substance) if substance else 1
    if z > 1 and case.relation.kind in ("mass", "concentrate", "stock", "neat"):
        yield "normality", float(z), f"normality and molarity interchanged (z = {z})"
        yield "normality", 1.0 / z, f"normality and molarity interchanged (z = {z})"


def assay_ignored(case: Case) -> Iterator[Hypothesis]:
    """The strength of the concentrate was not applied."""
    substance = case.relation.substance
    if substance is None or case.relation.kind != "concentrate":
        return
    taken = case.relation.taken
    material = taken.dose.material if taken is not None else None
    printed = [m.base * 100 for m in (material.strengths if material else ()) if m.unit == "%"]
    for percent, density in (
        *((p, substance.density or 1.0) for p in printed),
        *((sold.percent_w_w, sold.density) for sold in concentrated(substance)),
    ):
        share = percent / 100
        if share < 0.99:
            yield "assay-ignored", share, "the strength of the concentrate was not applied"
            both = "neither strength nor density of the concentrate was applied"
            yield "assay-ignored", share * density, both
    if substance.density:
        yield "weight-for-volume", substance.density, "grams were written as millilitres"


def halves_and_doubles(case: Case) -> Iterator[Hypothesis]:
    """Twice or half the amount."""
    yield "factor-two", 2.0, "twice the amount"
    yield "factor-two", 0.5, "half the amount"


def exchanged_digits(case: Case) -> Iterator[Hypothesis]:
    """Two neighbouring figures exchanged."""
    relation = case.relation
    right, stated = relation.computed.value, relation.tested.measure.nominal
    if right is None or right <= 0:
        return
    digits = max(2, min(relation.tested.measure.digits, 6))
    text = f"{right:.{digits}g}"
    for index in range(len(text) - 1):
        first, second = text[index], text[index + 1]
        if first.isdigit() and second.isdigit() and first != second:
            swapped = text[:index] + second + first + text[index + 2 :]
            try:
                value = float(swapped)
            except ValueError:
                continue
            if value and abs(value / stated - 1) < 0.002:
                yield "digits-exchanged", stated / right, "two figures exchanged"


def copied_neighbours(case: Case) -> Iterator[Hypothesis]:
    """The same number stands beside another thing of the same preparation."""
    relation = case.relation
    preparation, right = relation.preparation, relation.computed.value
    if preparation is None or not right or relation.taken is None:
        return
    measure = relation.tested.measure
    for other in preparation.taken:
        if other.dose.material is None or other.dose.material.is_water:
            continue
        if other.stated.key == relation.tested.key:
            continue
        same = other.dose.amount
        if same.unit == measure.unit and same.value == measure.value and same.digits > 1:
            yield (
                "copied-neighbour",
                measure.nominal / right,
                f"the figure of {other.dose.material.words} (line {other.stated.span.line})",
            )


def one_part(case: Case) -> Iterator[Hypothesis]:
    """1 + n parts taken for 1 in n."""
    relation = case.relation
    if relation.kind not in ("stock", "fold") or relation.volume is None or relation.taken is None:
        return
    right = relation.computed.value
    if not right:
        return
    parts = relation.volume.litres / (right * relation.tested.measure.factor)
    for change in (1, -1):
        if parts + change > 1:
            yield "one-part", parts / (parts + change), "1 + n parts taken for 1 in n"


ALL: tuple[Callable[[Case], Iterator[Hypothesis]], ...] = (
    hydrates_and_salts,
    powers_of_ten,
    other_volumes,
    normal_for_molar,
    assay_ignored,
    halves_and_doubles,
    exchanged_digits,
    copied_neighbours,
    one_part,
)
