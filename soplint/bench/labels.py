"""Relations within one name: molar mass against formula, strength against density and per cent."""

from __future__ import annotations

from soplint.bench.numbers import shown
from soplint.bench.preparation import Stated
from soplint.bench.relation import Relation
from soplint.bench.species import fragment_of
from soplint.bench.stoichiometry import units_of_analyte, units_of_titrant
from soplint.findings.model import Interval
from soplint.intake.model import Text
from soplint.notation.phrases import Equivalent, Material
from soplint.substances import molar_mass
from soplint.substances.model import Substance

# Weight sets that average older isotope data differ by up to 0.02 % (IUPAC abridged weights 2021).
ATOMIC_WEIGHTS = 0.0002
# Printed molar masses are rounded, and older tables differ more: no finding below this.
MOLAR_MASS = 0.002
CONCENTRATE = 0.03  # commercial assay range


def molar_mass_relation(text: Text, material: Material) -> Relation | None:
    """The printed molar mass against the forms that the name can mean."""
    printed = material.molar_mass
    if printed is None or material.match is None or material.match.generic:
        return None
    forms = [s for s in material.match.substances if s.molar_mass]
    if not forms or printed.nominal <= 0:
        return None
    best = min(forms, key=lambda s: abs((s.molar_mass or 0) / printed.base - 1))
    chosen = best if not material.match.form_named else forms[0]
    mass = chosen.molar_mass or 0.0
    if chosen.density and printed.base < 23 and abs(printed.base / chosen.density - 1) < 0.02:
        return None  # a density in the wrong unit
    deviation = printed.base / mass - 1
    allowed = (printed.high - printed.low) / 2 * printed.factor + mass * ATOMIC_WEIGHTS
    return Relation(
        "molar-mass",
        Stated(text, printed),
        chosen.name,
        Interval(mass / printed.factor, printed.unit, (mass - allowed), (mass + allowed)),
        abs(printed.base - mass) <= allowed or abs(deviation) <= MOLAR_MASS,
        deviation,
        f"M({chosen.formula}) = {mass:.3f} g/mol",
        substance=chosen,
        exact=True,
    )


def label_relation(text: Text, material: Material) -> Relation | None:
    """The printed strength of a concentrate: c = 10·ρ·w / M."""
    molar = [m for m in (*material.strengths, *material.bracket) if m.dimension == "molarity"]
    percent = [
        m
        for m in (*material.strengths, *material.bracket)
        if m.dimension == "fraction" and m.basis in (None, "w/w")
    ]
    substance = _liquid(material)
    if len(molar) != 1 or substance is None or not substance.molar_mass:
        return None
    density = material.density
    if density is None or (not percent and not substance.strength):
        return None
    if percent and len(percent) != 1:
        return None
    share = percent[0].base if percent else (substance.strength or 0.0) / 100
    value = 1000 * density.base * share / substance.molar_mass / molar[0].factor
    deviation = molar[0].nominal / value - 1 if value else 0.0
    half = abs(value) * 0.005 + (molar[0].high - molar[0].low) / 2
    return Relation(
        "label-strength",
        Stated(text, molar[0]),
        substance.name,
        Interval(value, molar[0].unit, value - half, value + half),
        abs(molar[0].nominal - value) <= half or abs(deviation) <= CONCENTRATE,
        deviation,
        f"1000 × {density.nominal:g} g/mL × {share:.4g} / {substance.molar_mass:.2f} g/mol"
        f" = {value:.4g} {molar[0].unit}",
        tuple(Stated(text, m) for m in (density, *percent)),
        substance=substance,
    )


def _liquid(material: Material) -> Substance | None:
    if material.match is None or material.match.generic:
        return None
    return material.match.substances[0] if material.match.substances else None


def equivalent_relation(text: Text, phrase: Equivalent) -> Relation | None:
    """mg of analyte per mL of titrant: c·n(titrant)·M / n(analyte), by the table of reactions."""
    titrant, analyte = phrase.titrant, phrase.mass.material
    strength = [m for m in titrant.strengths if m.dimension in ("molarity", "normality")]
    measure = phrase.mass.amount
    if len(strength) != 1 or analyte is None or measure.dimension != "mass" or not measure.base:
        return None
    litres = phrase.volume.base if phrase.volume is not None else 0.001
    kind, units = units_of_titrant(_liquid(titrant))
    if strength[0].dimension == "normality":
        units = 1.0
    ways = [
        (name, mass, number, strength[0].base * litres * units * mass / number)
        for name, family, mass in _analytes(analyte)
        for number in units_of_analyte(family, kind)
    ]
    if not ways:
        return None
    name, mass, number, grams = min(ways, key=lambda way: abs(way[3] / measure.base - 1))
    value = grams / measure.factor
    half = (measure.high - measure.low) / 2 + value * ATOMIC_WEIGHTS
    by = f" / {number:g}" if number != 1 else ""
    times = f" × {units:g}" if units != 1 else ""
    return Relation(
        "equivalent",
        Stated(text, measure),
        name,
        Interval(value, measure.unit, value - half, value + half),
        abs(measure.nominal - value) <= half + value * MOLAR_MASS / 4,
        measure.nominal / value - 1,
        f"{shown(strength[0])} × {litres * 1000:g} mL{times} × {mass:.3f} g/mol{by}"
        f" = {value:.5g} {measure.unit}",
        (Stated(text, strength[0]),),
        exact=True,
    )


def _analytes(analyte: Material) -> list[tuple[str, str, float]]:
    """Name, family and molar mass of what a factor counts: a substance or an element."""
    if analyte.match is not None and not analyte.match.generic:
        return [(s.name, s.family, s.molar_mass) for s in analyte.match.substances if s.molar_mass]
    fragment = fragment_of(analyte.words)
    return [(fragment, fragment, molar_mass(fragment))] if fragment else []
