"""One strength printed in two units: "0.1 ppm (10 µg/L)", "0.02 mol/L (0.12 N)", "0.9 % (154 mM)"."""

from __future__ import annotations

from collections.abc import Iterator

from soplint.bench.numbers import nominal_relative, shown
from soplint.bench.portions import candidates, equivalents
from soplint.bench.preparation import Stated
from soplint.bench.relation import Relation
from soplint.findings.model import Interval
from soplint.intake.model import Text
from soplint.notation.phrases import Material
from soplint.quantities.model import Measure

# Both strengths are taken as they are printed; dilute solutions, so that 1 L weighs 1 kg.
_DILUTE = 0.05  # g/mL; above this per cent and g/L differ by the density
_LEAST = 0.03


def twofold_relation(text: Text, material: Material) -> Relation | None:
    """The strength in brackets against the one before it, where one follows from the other."""
    printed = [m for m in (*material.strengths, *material.bracket) if m.dimension != "fold"]
    if len(printed) != 2 or not material.strengths:
        return None
    first, second = printed
    if first.dimension == second.dimension:
        return None
    values = [value for value, _ in _as_second(first, second, material)]
    if not values or not second.base:
        return None
    value, how = min(
        _as_second(first, second, material), key=lambda way: abs(way[0] / second.base - 1)
    )
    spread = max(_LEAST, nominal_relative(first) + nominal_relative(second))
    computed = value / second.factor
    return Relation(
        "twofold",
        Stated(text, second),
        material.words or None,
        Interval(computed, second.unit, computed * (1 - spread), computed * (1 + spread)),
        abs(second.base / value - 1) <= spread,
        second.base / value - 1,
        f"{shown(first)}{how} = {computed:.4g} {second.unit}",
        (Stated(text, first),),
        one_figure=first.digits <= 1,
    )


def _as_second(first: Measure, second: Measure, material: Material) -> Iterator[tuple[float, str]]:
    """The first strength in the base unit of the second, under each reading."""
    grams = _grams(first)
    if second.dimension == "mass-concentration" and grams is not None:
        yield grams, ""
    elif second.dimension in ("ppm", "fraction") and grams is not None and grams < 1000 * _DILUTE:
        yield grams / 1000, ""
    for substance in candidates(material):
        if second.dimension == "molarity" and grams is not None and substance.molar_mass:
            if substance.state == "solid":
                yield grams / substance.molar_mass, f" / {substance.molar_mass:.2f} g/mol"
        if first.dimension == "molarity" and second.dimension == "mass-concentration":
            if substance.molar_mass:
                yield first.base * substance.molar_mass, f" × {substance.molar_mass:.2f} g/mol"
        z = equivalents(substance)
        if first.dimension == "molarity" and second.dimension == "normality" and z > 1:
            yield first.base * z, f" × {z}"
        if first.dimension == "normality" and second.dimension == "molarity" and z > 1:
            yield first.base / z, f" / {z}"


def _grams(measure: Measure) -> float | None:
    """A strength by mass in g/L; None for the others and for per cent by volume."""
    if measure.dimension == "mass-concentration":
        return measure.base
    if measure.dimension == "ppm" or (
        measure.dimension == "fraction" and measure.basis in (None, "w/v")
    ):
        return measure.base * 1000 if measure.base < _DILUTE or measure.basis else None
    return None
