"""Relations within one name: molar mass against formula, strength against density and per cent."""

from __future__ import annotations

from soplint.bench.preparation import Stated
from soplint.bench.relation import Relation
from soplint.findings.model import Interval
from soplint.intake.model import Text
from soplint.notation.phrases import Material
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
