"""Recipes of one solute: a solid, a concentrated liquid, or a stock brought to a strength."""

from __future__ import annotations

from random import Random

from random_recipes.figures import (
    Figure,
    as_mass,
    as_molar,
    as_volume,
    exact,
    rounded,
)
from random_recipes.reagents import SOLUBLE, Named, name, reagents
from random_recipes.recipe import Part, Recipe, token

from soplint.substances import molar_mass

VOLUMES = (0.025, 0.05, 0.1, 0.2, 0.25, 0.5, 0.5, 1.0, 1.0, 2.0, 5.0)
MOLAR = (0.01, 0.02, 0.025, 0.05, 0.1, 0.1, 0.15, 0.2, 0.25, 0.3, 0.4, 0.5, 0.75, 1.0, 1.5, 2.0)

# Usual concentrates: words, formula, % w/w, g/mL, short names.  From memory; the reader knows them.
CONCENTRATES = (
    ("hydrochloric acid", "HCl", 37.0, 1.18),
    ("hydrochloric acid", "HCl", 32.0, 1.16),
    ("sulfuric acid", "H2SO4", 96.0, 1.84),
    ("nitric acid", "HNO3", 65.0, 1.39),
    ("nitric acid", "HNO3", 70.0, 1.41),
    ("phosphoric acid", "H3PO4", 85.0, 1.69),
    ("acetic acid", "C2H4O2", 99.8, 1.05),
    ("formic acid", "CH2O2", 98.0, 1.22),
    ("ammonia solution", "NH3", 25.0, 0.91),
    ("perchloric acid", "HClO4", 70.0, 1.67),
)


def volume(rng: Random, litres: float) -> Figure:
    return exact(*as_volume(litres, rng))


def start_volume(rng: Random, litres: float) -> Figure:
    share = rng.choice((0.6, 0.7, 0.8, 0.8, 0.8, 0.9))
    return exact(*as_volume(round(litres * share, 4), rng))


def solid(rng: Random) -> Recipe:
    """A solid to a strength."""
    pool = list(reagents().values())
    unit = rng.choice(("M", "M", "M", "M", "g/L", "mg/mL", "% w/v", "N"))
    if unit == "N":
        pool = [r for r in pool if r.equivalents]
    while True:
        thing = name(rng, rng.choice(pool))
        litres = rng.choice(VOLUMES)
        strength, grams = _strength(rng, unit, thing, litres)
        if grams / thing.mass / litres <= SOLUBLE.get(thing.reagent.key, 2.5):
            break
    figures = {
        "c": strength,
        "V": volume(rng, litres),
        "S": start_volume(rng, litres),
        "m": rounded(*as_mass(grams, rng), rng.choice((3, 3, 4))),
    }
    part = Part(thing.words, "solid", ["m"], named=thing)
    if rng.random() < 0.2 and unit in ("M", "N"):
        figures["M"] = rounded(thing.mass, "g/mol", rng.choice((4, 5, 5)))
        part.molar_mass = "M"
    short = thing.plain if rng.random() < 0.6 else thing.words
    return Recipe(
        "solid",
        f"{short} solution",
        figures,
        [part],
        ["V"],
        titles(rng, short),
        start="S" if rng.random() < 0.7 else None,
        lead=f"{token('c')} {short}",
        near={key: {"c", "m", "V", "M"} for key in ("c", "m", "M")},
    )


def _strength(rng: Random, unit: str, thing: Named, litres: float) -> tuple[Figure, float]:
    """The strength and the mass in g that gives it."""
    if unit == "M":
        molar = rng.choice(MOLAR)
        return exact(*as_molar(molar, rng)), molar * litres * thing.mass
    if unit == "N":
        normal = rng.choice((0.02, 0.05, 0.1, 0.1, 0.25, 0.5, 1.0))
        return exact(normal, "N"), normal / (thing.reagent.equivalents or 1) * litres * thing.mass
    # a strength by mass counts the substance as it is weighed
    strength = rng.choice((0.5, 1.0, 2.0, 2.5, 5.0, 10.0, 15.0, 20.0))
    factor = 10.0 if unit == "% w/v" else 1.0
    return exact(strength, unit), strength * factor * litres


def titles(rng: Random, short: str) -> list[str]:
    """Titles that carry the strength, with or without the volume."""
    cap = short[0].upper() + short[1:]
    return [
        f"{cap}, {token('c')}, {token('V')}",
        f"{cap} solution, {token('c')} ({token('V')})",
        f"{token('c')} {short}, {token('V')}",
        f"{token('c')} {short} ({token('V')})",
        f"{token('V')} of {token('c')} {short}",
        f"{cap} {token('c')}",
        f"{token('c')} {short} solution",
        f"{cap} solution ({token('c')})",
    ]


def concentrate(rng: Random) -> Recipe:
    """A concentrated liquid to a strength."""
    words, formula, per_cent, density = rng.choice(CONCENTRATES)
    molar_stock = 10 * density * per_cent / molar_mass(formula)
    litres = rng.choice([v for v in VOLUMES if v >= 0.1])
    molar = rng.choice([c for c in MOLAR if c <= molar_stock / 5])
    taken = molar * litres / molar_stock
    figures = {
        "c": exact(*as_molar(molar, rng)),
        "V": volume(rng, litres),
        "S": start_volume(rng, litres),
        "a": rounded(*as_volume(taken, rng), 3),
    }
    assay: tuple[str, ...] = ()
    shape = rng.choice(("assay", "assay", "molar", "both", "none"))
    if shape in ("assay", "both"):
        figures["p"], figures["d"] = exact(per_cent, "% w/w"), exact(density, "g/mL")
        assay = ("p", "d")
    if shape in ("molar", "both"):
        figures["s"] = rounded(molar_stock, "M", 3)
        assay += ("s",)
    concentrated = "glacial " if words == "acetic acid" else "concentrated "
    said = words if assay else concentrated + words
    said = said.replace("concentrated ammonia", "ammonia") if assay else said
    part = Part(said, "acid", ["a"], assay=assay)
    near = {key: {"c", "a", "V", "s", "p", "d"} for key in ("c", "a", "s", "p", "d")}
    short = "ammonia" if formula == "NH3" else words
    return Recipe(
        "concentrate", f"{short} solution", figures, [part], ["V"], titles(rng, short),
        start="S", lead=f"{token('c')} {short}", near=near,
    )  # fmt: skip


SOLUTES = (
    "NaCl", "sodium chloride", "KCl", "potassium chloride", "sodium acetate", "NaOH", "MgCl2",
    "imidazole", "ammonium acetate", "sodium citrate", "HCl", "glycine", "CaCl2", "KI",
)  # fmt: skip
WORKING = (
    "running buffer",
    "wash buffer",
    "borate running buffer",
    "assay buffer",
    "salt solution",
)


def dilution(rng: Random) -> Recipe:
    """A stock diluted to a strength: molar, per cent, fold, mg/mL or ppm."""
    unit = rng.choice(("M", "M", "M", "%", "X", "mg/mL", "ppm"))
    ratio = rng.choice((2, 2.5, 4, 5, 10, 10, 20, 25, 50, 100))
    litres = rng.choice(VOLUMES)
    if unit == "M":
        stock, short = rng.choice((0.1, 0.5, 1.0, 1.0, 2.0, 3.0, 5.0)), rng.choice(SOLUTES)
        high, low = exact(*as_molar(stock, rng)), exact(*as_molar(round(stock / ratio, 7), rng))
    elif unit == "%":
        short, unit = rng.choice(
            (("SDS", "% w/v"), ("sucrose", "% w/v"), ("sodium azide", "% w/v"),
             ("Tween 20", "% v/v"), ("glycerol", "% v/v"), ("ethanol", "% v/v"))
        )  # fmt: skip
        stock = {"ethanol": 96.0, "sodium azide": 10.0, "Tween 20": 10.0}.get(short, 20.0)
        low_value = rng.choice((70.0, 50.0, 20.0)) if short == "ethanol" else stock / ratio
        ratio = stock / low_value
        high, low = exact(stock, unit), exact(round(low_value, 7), unit)
    elif unit == "X":
        ratio, short = rng.choice((5, 10, 10, 20, 50, 100)), rng.choice(WORKING)
        high, low = exact(float(ratio), "X"), exact(1.0, "X")
    elif unit == "mg/mL":
        stock = rng.choice((10.0, 20.0, 50.0, 100.0))
        short = rng.choice(("ampicillin", "BSA", "lysozyme", "kanamycin", "glucose"))
        high, low = exact(stock, "mg/mL"), exact(round(stock / ratio, 6), "mg/mL")
    else:
        stock = rng.choice((100.0, 1000.0))
        short = rng.choice(("nitrate", "copper", "lead", "chloride", "iron"))
        unit = rng.choice(("ppm", "mg/L"))
        high, low = exact(stock, unit), exact(round(stock / ratio, 6), unit)
    taken = litres / ratio
    figures = {
        "c": low, "s": high, "V": volume(rng, litres),
        "a": rounded(*as_volume(taken, rng), rng.choice((3, 3, 4))),
    }  # fmt: skip
    finish = rng.choice(("mark", "mark", "mark", "water"))
    if finish == "water":
        figures["w"] = rounded(*as_volume(litres - taken, rng), 4)
    part = Part(short, "stock", ["a"], stock="s")
    near = {key: {"c", "a", "V", "s", "w"} for key in ("c", "a", "s", "w")}
    return Recipe(
        "dilution", short, figures, [part], ["V"], titles(rng, short), finish=finish,
        water=["w"] if finish == "water" else [], lead=f"{token('c')} {short}", near=near,
    )  # fmt: skip
