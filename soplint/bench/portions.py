"""What a dose brings: mol, grams or litres of a substance, under each reasonable reading."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from soplint.bench.facts import Facts
from soplint.bench.numbers import ALIQUOT, MASS, relative, shown
from soplint.bench.preparation import Taken
from soplint.notation.phrases import Dose, Material
from soplint.quantities.model import Measure
from soplint.substances import Substance, concentrated
from soplint.substances import density as solution_density
from soplint.substances.model import Match

# A strength of a pure liquid or a concentrate is uncertain by its assay range, at least this much
# (design: "strength of a concentrate: the assay range of its row, at least 3 %").
CONCENTRATE = 0.03
# A printed molar mass names the form it agrees with this well.
PRINTED_MASS = 0.003


@dataclass(frozen=True, slots=True)
class Portion:
    """A dose as mol, grams and litres of one substance, under one reading."""

    substance: Substance | None
    moles: float | None
    grams: float | None
    litres: float | None  # of the neat liquid
    relative: float  # half-width of the interval, relative
    working: str  # "2.17 g / 137.99 g/mol"
    reading: str = ""  # "as the dihydrate", "37 % w/w"
    named: bool = True  # the reading is what the text says, not one of several guesses
    concentrate: bool = False  # taken from a concentrated liquid


def portions(taken: Taken, facts: Facts) -> list[Portion]:
    """Every reasonable reading of a dose, the one nearest to the text first."""
    return list(_of_dose(taken.dose, facts))


def _of_dose(dose: Dose, facts: Facts) -> Iterator[Portion]:
    material = dose.material
    if material is None:
        return
    meant = candidates(material)
    if dose.amount.dimension == "mass":
        # a weighed name means the solid unless only solutions are sold or a strength is printed
        solids = tuple(s for s in meant if s.state == "solid")
        meant = solids if solids and not material.strengths else meant
    for index, substance in enumerate(meant):
        named = index == 0 or bool(material.match and material.match.form_named)
        dimension = dose.amount.dimension
        if dimension == "mass":
            yield from _of_mass(dose, material, substance, named)
        elif dimension == "volume":
            yield from _of_volume(dose, material, substance, named, facts)
        elif dimension == "amount":
            mol = dose.amount.base
            grams = mol * substance.molar_mass if substance.molar_mass else None
            yield Portion(
                substance, mol, grams, None, relative(dose.amount, MASS), shown(dose.amount)
            )


def candidates(material: Material) -> tuple[Substance, ...]:
    """The substances that a name can mean."""
    if material.match is not None:
        return _as_weighed(material.match, material.molar_mass)
    if material.molar_mass is None or not material.words:
        return ()
    return (_as_printed(material.words, material.molar_mass.base),)


def _as_weighed(match: Match, printed: Measure | None) -> tuple[Substance, ...]:
    """The forms a name can mean; a printed molar mass settles which."""
    if printed is None or match.form_named:
        return match.substances
    fitting = tuple(
        s
        for s in match.substances
        if s.molar_mass and abs(printed.base / s.molar_mass - 1) < PRINTED_MASS
    )
    return fitting or match.substances


def _as_printed(words: str, molar_mass: float) -> Substance:
    """A substance that the catalogue does not know, with the molar mass that the text prints."""
    return Substance(
        name=words, formula=None, molar_mass=molar_mass, family=words.lower(), hydrate=0.0,
        state="solid", kind="", acid_system=None, density=None, strength=None, strength_low=None,
        strength_high=None, solubility=None, cas=None, hazards=(), other_forms=(),
        status="as printed in the text",
    )  # fmt: skip


def _of_mass(
    dose: Dose, material: Material, substance: Substance, named: bool
) -> Iterator[Portion]:
    grams = dose.amount.base
    spread = relative(dose.amount, MASS)
    mass = substance.molar_mass
    reading = "" if material.match and material.match.form_named else f"as {substance.name}"
    purity = _purity(material)
    text = shown(dose.amount)
    if purity is not None:
        grams *= purity
        text = f"{text} × {purity:.4g}"
    if mass is None:
        yield Portion(substance, None, grams, None, spread, text, reading, named)
        return
    yield Portion(
        substance, grams / mass, grams, None, spread, f"{text} / {mass:.2f} g/mol", reading, named
    )
    if purity is None and substance.strength and substance.strength < 99:
        share = substance.strength / 100
        yield Portion(
            substance,
            grams * share / mass,
            grams * share,
            None,
            max(spread, CONCENTRATE),
            f"{text} × {share:.3g} / {mass:.2f} g/mol",
            f"as {substance.strength:g} % w/w",
            False,
        )


def _purity(material: Material) -> float | None:
    """The assay printed with a solid: "85 % KOH"."""
    for measure in (*material.strengths, *material.bracket):
        if measure.dimension == "fraction" and measure.basis in (None, "w/w"):
            if 0.5 <= measure.base <= 1.0:
                return measure.base
    return None


def _of_volume(
    dose: Dose, material: Material, substance: Substance, named: bool, facts: Facts
) -> Iterator[Portion]:
    litres = dose.amount.base
    spread = relative(dose.amount, ALIQUOT)
    text = shown(dose.amount)
    strengths = list(stock_strengths(material))
    for strength in strengths:
        yield from _of_stock(litres, text, spread, strength, material, substance)
    if strengths:
        return
    known = facts.strength(material)
    if known is not None:
        yield from _of_stock(litres, text, spread, known, material, substance)
        return
    if material.match is not None and material.match.generic:
        return  # "the phosphate stock" is no bottle of phosphoric acid
    yield from _neat(litres, text, spread, substance, named, facts)


def stock_strengths(material: Material) -> Iterator[Measure]:
    """The strengths of the thing taken, as far as they are no finals.

    Beside two molar strengths ("25 mM 2 M MES": final, stock) the larger is the stock's.
    """
    beside = [m for m in material.strengths if m.dimension != "fold"]
    if not beside:
        beside = [m for m in material.bracket if m.dimension in _STOCK and not material.finals]
    if len(beside) > 1 and len({m.dimension for m in beside}) == 1:
        beside = [max(beside, key=lambda m: m.base)]
    yield from beside


_STOCK = ("molarity", "normality", "mass-concentration", "fraction", "molality")


def _of_stock(
    litres: float,
    text: str,
    spread: float,
    strength: Measure,
    material: Material,
    substance: Substance,
) -> Iterator[Portion]:
    """A volume of a solution whose strength is printed."""
    mass = substance.molar_mass
    spread += relative(strength, ALIQUOT)
    written = shown(strength)
    if strength.dimension in ("molarity", "molality"):
        mol = litres * strength.base
        grams = mol * mass if mass else None
        yield Portion(substance, mol, grams, None, spread, f"{text} × {written}", written)
    elif strength.dimension == "normality":
        z = equivalents(substance)
        mol = litres * strength.base / z
        grams = mol * mass if mass else None
        yield Portion(substance, mol, grams, None, spread, f"{text} × {written} / {z}", written)
    elif strength.dimension == "mass-concentration":
        grams = litres * strength.base
        moles = grams / mass if mass else None
        yield Portion(substance, moles, grams, None, spread, f"{text} × {written}", written)
    elif strength.dimension == "fraction":
        yield from _of_percent(litres, text, spread, strength, material, substance)


def _of_percent(
    litres: float,
    text: str,
    spread: float,
    strength: Measure,
    material: Material,
    substance: Substance,
) -> Iterator[Portion]:
    """A volume of an x % solution: by w/w with its density, by w/v, by v/v."""
    share, mass = strength.base, substance.molar_mass
    written = shown(strength)
    liquid = substance.state in ("liquid", "solution", "gas")

    def portion(grams: float, how: str, basis: str, neat: float | None = None) -> Portion:
        said = strength.basis == basis
        moles = grams / mass if mass else None
        return Portion(
            substance, moles, grams, neat, spread, how, f"{written} read as {basis}", said, liquid
        )

    if strength.basis in (None, "w/w") and mass:
        thick = _density(material, substance, share * 100)
        if thick is not None and (strength.basis == "w/w" or liquid):
            how = f"{text} × {thick:.3g} g/mL × {share:.3g} / {mass:.2f} g/mol"
            yield portion(litres * 1000 * thick * share, how, "w/w")
    if strength.basis in (None, "w/v"):
        yield portion(litres * 1000 * share, f"{text} × {share * 1000:.4g} g/L", "w/v")
    mixed = strength.basis == "v/v" or (strength.basis is None and not _as_sold(material, share))
    if mixed and substance.density and liquid:
        neat = litres * share
        pure = (substance.strength or 100) / 100
        grams = neat * 1000 * substance.density * pure
        yield portion(grams, f"{text} × {share:.3g} × {substance.density:.3g} g/mL", "v/v", neat)


def _as_sold(material: Material, share: float) -> bool:
    """Whether a solution of this per cent is sold: 37 % of hydrochloric acid is no 37 % v/v."""
    return any(
        s.state == "solution" and s.strength and abs(s.strength - share * 100) < 3
        for s in candidates(material)
    )


def _density(material: Material, substance: Substance, percent: float) -> float | None:
    """Density in g/mL of a solution of ``percent`` w/w: as printed, from the table, from its row."""
    if material.density is not None:
        return material.density.base
    tabulated = solution_density(substance.family, percent)
    if tabulated is not None:
        return tabulated
    if substance.density and substance.strength and abs(substance.strength - percent) < 3:
        return substance.density
    return None


def _neat(
    litres: float, text: str, spread: float, substance: Substance, named: bool, facts: Facts
) -> Iterator[Portion]:
    """A volume of a liquid whose strength is not printed: the common strengths."""
    mass = substance.molar_mass
    if substance.state not in ("liquid", "solution") or not substance.density:
        return
    strengths = concentrated(substance)
    for number, strength in enumerate(strengths):
        mol = litres * strength.mol_per_litre
        yield Portion(
            substance,
            mol,
            mol * mass if mass else None,
            litres,
            max(spread, CONCENTRATE),
            f"{text} × {strength.mol_per_litre:.4g} mol/L",
            f"taken as {strength.percent_w_w:g} % w/w",
            named and number == 0,
            True,
        )
    if not strengths:
        pure = (substance.strength or 100) / 100
        grams = litres * 1000 * substance.density * pure
        yield Portion(
            substance,
            grams / mass if mass else None,
            grams,
            litres,
            max(spread, CONCENTRATE),
            f"{text} × {substance.density:.3g} g/mL" + (f" / {mass:.2f} g/mol" if mass else ""),
            "",
            named,
            True,
        )


# Protons or hydroxide ions that one formula unit gives or takes in complete neutralisation; every
# other substance counts one.  By definition of the normal solution (USP Volumetric Solutions).
_EQUIVALENTS = {
    **{"H2SO4": 2, "C2H2O4": 2, "Na2CO3": 2, "K2CO3": 2, "Ca(OH)2": 2, "Ba(OH)2": 2},
    **{"KMnO4": 5, "K2Cr2O7": 6, "I2": 2, "KBrO3": 6, "KIO3": 6, "Na2B4O7": 2, "H3PO4": 3},
}


def equivalents(substance: Substance) -> int:
    """Equivalents per mol for the usual reaction of a substance."""
    return _EQUIVALENTS.get(substance.family, 1)
