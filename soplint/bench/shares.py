"""What one dose brings of a thing, in the unit of a strength, under each reasonable reading."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from soplint.bench.facts import Facts
from soplint.bench.numbers import ALIQUOT, relative, shown
from soplint.bench.portions import Portion, candidates, equivalents, portions
from soplint.bench.preparation import Taken
from soplint.notation.phrases import Material
from soplint.quantities.model import Measure
from soplint.substances.model import Substance


@dataclass(frozen=True, slots=True)
class Share:
    """What one dose brings of a thing, in the base unit of a strength times litres."""

    taken: Taken
    quantity: float
    relative: float
    working: str
    kind: str  # mass, stock, concentrate, neat, amount
    reading: str = ""
    named: bool = True
    substance: Substance | None = None
    label: Measure | None = None  # the printed strength of the stock


def diluted(taken: Taken, label: Measure, substance: Substance | None = None) -> Share:
    """c1·V1 with the printed strength of the stock."""
    amount = taken.dose.amount
    return Share(
        taken,
        amount.base * label.base,
        relative(amount, ALIQUOT) + relative(label, ALIQUOT),
        f"{shown(amount)} × {shown(label)}",
        "stock",
        substance=substance,
        label=label,
    )


def shares(taken: Taken, strength: Measure, facts: Facts) -> list[Share]:
    """What a dose brings in the unit of ``strength``, under each reasonable reading."""
    material = taken.dose.material
    counted = _counted(taken, strength)
    if material is None or counted:
        return counted
    found: list[Share] = []
    if taken.dose.amount.dimension == "volume":
        labels = [m for m in material.strengths if m.dimension == strength.dimension]
        if not labels:
            bracket = [m for m in material.bracket if m.dimension == strength.dimension]
            above = [m for m in bracket if m is not strength and m.base > strength.base]
            labels = above if material.finals or len(bracket) > 1 else bracket
        label = max(labels, key=lambda m: m.base) if labels else None
        if label is not None and label is not strength:
            found.extend(_by_density(taken, label, strength, facts))
            if not found or (label.basis is None and material.density is None):
                found.append(diluted(taken, label))
            as_bought = is_concentrate(material, label) and strength.basis in (None, "v/v")
            if strength.dimension == "fraction" and as_bought:
                # a percentage of the concentrate as it is bought, by volume
                amount = taken.dose.amount
                found.append(
                    Share(
                        taken,
                        amount.base,
                        relative(amount, ALIQUOT),
                        shown(amount),
                        "neat",
                        "v/v of the concentrate",
                        False,
                    )  # fmt: skip
                )
    if not found:
        for portion in portions(taken, facts):
            found.extend(as_shares(taken, portion, strength))
    if not found and strength.dimension in ("mass-concentration", "ppm", "fraction"):
        found.extend(by_mass(taken, strength))
    return found


def _by_density(taken: Taken, label: Measure, strength: Measure, facts: Facts) -> Iterator[Share]:
    """Per cent w/v from a concentrate in per cent w/w: its density counts."""
    material = taken.dose.material
    if strength.dimension != "fraction" or strength.basis != "w/v" or material is None:
        return
    if label.basis == "w/v" or not is_concentrate(material, label):
        return
    for portion in portions(taken, facts):
        if portion.grams is not None and portion.reading.endswith("w/w"):
            yield from as_shares(taken, portion, strength)


def is_concentrate(material: Material, label: Measure) -> bool:
    """Whether a liquid of this per cent is sold: its own volume is often what per cent count."""
    if label.dimension != "fraction" or label.basis not in (None, "w/w"):
        return False
    percent = label.base * 100
    return any(
        s.state in ("solution", "liquid") and s.strength and abs(s.strength - percent) < 3
        for s in candidates(material)
    )


def _counted(taken: Taken, strength: Measure) -> list[Share]:
    """An amount given in mol or in enzyme units: no molar mass is needed."""
    amount = taken.dose.amount
    pairs = {("amount", "molarity"), ("activity", "activity-concentration")}
    if (amount.dimension, strength.dimension) not in pairs:
        return []
    return [Share(taken, amount.base, relative(amount, ALIQUOT), shown(amount), "amount")]


def by_mass(taken: Taken, strength: Measure) -> Iterator[Share]:
    """A mass (or neat volume) of something without a formula."""
    amount = taken.dose.amount
    if amount.dimension == "mass" and strength.basis != "v/v":
        scale = 1000.0 if strength.dimension in ("fraction", "ppm") else 1.0
        yield Share(taken, amount.base / scale, relative(amount, 0.05), shown(amount), "mass")
    elif amount.dimension == "volume" and strength.dimension == "fraction":
        yield Share(taken, amount.base, relative(amount, ALIQUOT), shown(amount), "neat")


def as_shares(taken: Taken, portion: Portion, strength: Measure) -> Iterator[Share]:
    """A portion in the unit of the strength: mol, grams or litres, each where it is known."""
    kind = "mass" if taken.dose.amount.dimension == "mass" else "stock"
    if portion.concentrate:
        kind = "concentrate"
    grams = portion.grams

    def share(quantity: float, working: str, reading: str = portion.reading) -> Share:
        return Share(
            taken, quantity, portion.relative, working, kind, reading, portion.named,
            portion.substance,
        )  # fmt: skip

    if strength.dimension in ("molarity", "molality") and portion.moles is not None:
        yield share(portion.moles, portion.working)
    elif strength.dimension == "normality" and portion.moles is not None:
        z = equivalents(portion.substance) if portion.substance else 1
        yield share(portion.moles * z, f"{portion.working} × {z}" if z > 1 else portion.working)
    elif strength.dimension == "mass-concentration" and grams is not None:
        yield share(grams, f"{grams:.4g} g")
    elif strength.dimension == "ppm" and grams is not None:
        yield share(grams / 1000, f"{grams:.4g} g")
    elif strength.dimension == "fraction":
        volume = taken.dose.amount
        if volume.dimension == "volume" and strength.basis in (None, "v/v"):
            yield Share(
                taken, volume.base, relative(volume, ALIQUOT), shown(volume), "neat",
                "v/v", True, portion.substance,
            )  # fmt: skip
        liquid = portion.substance
        if grams is not None and strength.basis == "v/v" and volume.dimension == "mass":
            if liquid is not None and liquid.density and liquid.state == "liquid":
                litres = grams / 1000 / liquid.density
                yield share(litres, f"{portion.working} / {liquid.density:.3g} g/mL", "v/v")
        if grams is not None and strength.basis in (None, "w/v", "w/w"):
            yield share(grams / 1000, f"{grams:.4g} g", portion.reading or strength.basis or "w/v")
