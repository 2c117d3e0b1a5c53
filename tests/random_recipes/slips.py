"""One seeded slip in a right recipe, of a kind as frequent as in published recipes."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from random import Random

from random_recipes.figures import TO_BASE, Figure, plain
from random_recipes.reagents import SALT_FORMS, reagents
from random_recipes.recipe import Part, Recipe
from random_recipes.writer import Number, Sheet, sheet

TWOFOLD = ("factor-two", "copied-volume")  # another volume of the text may be twice this one
LEAST = 0.12  # genuine slips are at least 10 % off; below that the bands are a matter of taste


@dataclass(frozen=True, slots=True)
class Slip:
    """What was made wrong: the figure, the kind, the causes that name it rightly."""

    kind: str
    key: str
    causes: frozenset[str] = frozenset()  # empty: no hypothesis covers it


@dataclass(frozen=True, slots=True)
class Wrong:
    """A text with one slip."""

    sheet: Sheet
    slip: Slip
    text: str
    numbers: list[Number]
    near: tuple[Number, ...]  # the slip and the numbers of its relations

    @property
    def number(self) -> Number:
        """The slipped number, where it stands first."""
        return next(n for n in self.numbers if n.key == self.slip.key)


Maker = Callable[[Random, Recipe], Slip | None]


def _times(figure: Figure, factor: float) -> bool:
    """Make a figure wrong by a factor; False when it would hardly show."""
    if abs(factor - 1) < LEAST:
        return False
    figure.value = figure.right * factor
    figure.digits = figure.digits or 3
    return True


def _reads_right(recipe: Recipe, part: Part, factor: float) -> bool:
    """Whether a mass times the factor is right for another form that the words leave open."""
    thing = part.named
    if thing is None or thing.named:
        return False
    masses = thing.reagent.others(thing.hydrate)
    return any(abs(factor * thing.mass / mass - 1) < 0.08 for mass in masses)


def _some(rng: Random, recipe: Recipe, *hows: str) -> Part | None:
    """A part of one of the ways of taking."""
    if recipe.kind == "pair":
        return None
    pool = [p for p in recipe.parts if p.how in hows]
    return rng.choice(pool) if pool else None


def _key(rng: Random, part: Part) -> str:
    return rng.choice(part.amounts)


def _factor(
    kind: str, rng: Random, recipe: Recipe, part: Part | None, factor: float, *causes: str
) -> Slip | None:
    """A part's amount times a factor."""
    if part is None or _reads_right(recipe, part, factor):
        return None
    key = _key(rng, part)
    if len(part.amounts) == 2 and part.final is None:
        return None
    return Slip(kind, key, frozenset(causes)) if _times(recipe.figures[key], factor) else None


def dilution(rng: Random, recipe: Recipe) -> Slip | None:
    """The volume of a stock does not give the strength."""
    part = _some(rng, recipe, "stock", "step")
    if part is None:
        return None
    figure = recipe.figures[part.amounts[0]]
    volume = recipe.figures[recipe.volumes[0] if recipe.volumes else "v" + part.amounts[0][1:]]
    way = rng.choice(("part", "double", "double", "other-stock", "other-stock", "sum"))
    if way == "part":
        parts = volume.base / figure.base
        factor = parts / (parts + 1) if rng.random() < 0.7 else parts / max(parts - 1, 1)
        return _factor("dilution one part", rng, recipe, part, factor, "one-part")
    if way == "double":
        return _factor("dilution twofold", rng, recipe, part, rng.choice((2.0, 0.5)), *TWOFOLD)
    if way == "other-stock":
        return _factor(
            "dilution other stock", rng, recipe, part, rng.choice((0.4, 2.5, 5.0, 0.2, 3.0))
        )
    return _factor("dilution arithmetic", rng, recipe, part, rng.choice((0.62, 0.77, 1.31, 1.68)))


def prefix(rng: Random, recipe: Recipe) -> Slip | None:
    """A unit prefix: the digits right, the unit a thousand off."""
    part = _some(rng, recipe, "solid", "stock", "acid")
    if part is None:
        return None
    key = part.final if part.final and rng.random() < 0.3 else _key(rng, part)
    figure = recipe.figures[key]
    other = {"g": "mg", "mg": "g", "mL": "uL", "uL": "mL", "mM": "M", "M": "mM", "uM": "mM",
             "kg": "g", "L": "mL"}.get(figure.unit)  # fmt: skip
    if other is None:
        return None
    scale = 1000.0 if other in ("mg", "uL", "mM") and figure.unit != "uM" else 0.001
    if (figure.unit, other) in (("kg", "g"), ("L", "mL")):
        scale = 1000.0
    figure.unit, figure.right = other, figure.right * scale
    return Slip("prefix", key, frozenset({"factor-thousand"}))


def molar_mass(rng: Random, recipe: Recipe) -> Slip | None:
    """The molar mass printed beside a name."""
    pool = [p for p in recipe.parts if p.molar_mass and p.named]
    if not pool:
        return None
    part = rng.choice(pool)
    thing, key = part.named, part.molar_mass
    assert thing is not None and key is not None
    figure = recipe.figures[key]
    way = rng.choice(("form", "digits", "other"))
    if way == "form" and thing.named and thing.reagent.others(thing.hydrate):
        other = rng.choice(thing.reagent.others(thing.hydrate))
        made = _times(figure, other / thing.mass)
        return (
            Slip("molar mass of another form", key, frozenset({"other-hydrate"})) if made else None
        )
    factor = rng.choice((0.83, 1.17, 1.24)) if way == "other" else _exchanged(rng, figure)
    if factor is None or _reads_right(recipe, part, factor) or not _times(figure, factor):
        return None
    if way == "other":
        return Slip("molar mass", key)
    return Slip("molar mass digits", key, frozenset({"digits-exchanged"}))


def _exchanged(rng: Random, figure: Figure) -> float | None:
    """The factor of two neighbouring digits exchanged, if it shows."""
    text = plain(figure.right, figure.digits or 3)
    places = [n for n in range(len(text) - 1) if text[n].isdigit() and text[n + 1].isdigit()]
    for n in rng.sample(places, len(places)):
        other = float(text[:n] + text[n + 1] + text[n] + text[n + 2 :])
        if other and abs(other / figure.right - 1) >= LEAST and text[n + 1] != "0":
            return other / float(text)
    return None


def mass(rng: Random, recipe: Recipe) -> Slip | None:
    """A mass that was reckoned or typed wrong."""
    part = _some(rng, recipe, "solid")
    if part is None:
        return None
    way = rng.choice(("digits", "digits", "double", "dropped", "share"))
    if way == "double":
        return _factor("mass twofold", rng, recipe, part, rng.choice((2.0, 0.5)), *TWOFOLD)
    if way == "share":
        return _factor("mass arithmetic", rng, recipe, part, rng.choice((0.77, 0.83, 1.17, 1.36)))
    key = _key(rng, part)
    figure = recipe.figures[key]
    if way == "digits":
        factor = _exchanged(rng, figure)
        if factor is None or _reads_right(recipe, part, factor) or not _times(figure, factor):
            return None
        return Slip("mass digits", key, frozenset({"digits-exchanged"}))
    text = plain(figure.right, figure.digits)
    if "." in text[:2] or len(text) < 4:
        return None
    value = float(text[0] + text[2:])  # the second digit is left out
    if _reads_right(recipe, part, value / figure.right) or not _times(figure, value / figure.right):
        return None
    return Slip("mass digit dropped", key)


def hydrate(rng: Random, recipe: Recipe) -> Slip | None:
    """The mass of another hydrate than the one named."""
    pool = [
        p
        for p in recipe.parts
        if p.named and p.named.named and p.named.reagent.others(p.named.hydrate)
    ]
    if (
        not pool
        or recipe.kind == "pair"
        or recipe.figures.get("c", Figure(1, "M", 1, 1)).unit[0] in "g%"
    ):
        return None
    part = rng.choice(pool)
    assert part.named is not None
    other = rng.choice(part.named.reagent.others(part.named.hydrate))
    key = _key(rng, part)
    if part.final is None and recipe.figures["c"].unit not in ("M", "mM", "uM", "N"):
        return None
    made = _times(recipe.figures[key], other / part.named.mass)
    return Slip("hydrate", key, frozenset({"other-hydrate"})) if made else None


def salt_form(rng: Random, recipe: Recipe) -> Slip | None:
    """The mass of another salt of the same acid or base."""
    for key, other in rng.sample(SALT_FORMS, len(SALT_FORMS)):
        for part in recipe.parts:
            thing = part.named
            if thing is None or thing.reagent.key != key or recipe.kind == "pair":
                continue
            if part.final is None and recipe.figures["c"].unit not in ("M", "mM", "uM"):
                continue
            form = reagents()[other]
            factor = form.mass(form.hydrates[0]) / thing.mass
            return _factor("salt form", rng, recipe, part, factor, "other-salt-form")
    return None


def column(rng: Random, recipe: Recipe) -> Slip | None:
    """One cell of a scaled column."""
    if recipe.kind != "columns":
        return None
    part = rng.choice(recipe.parts)
    key = _key(rng, part)
    figure = recipe.figures[key]
    way = rng.choice(("ten", "digits", "share", "next"))
    if way == "ten":
        return _factor("column ten", rng, recipe, part, rng.choice((10.0, 0.1)), "factor-ten")
    if way == "digits":
        factor = _exchanged(rng, figure)
        if factor is None or _reads_right(recipe, part, factor) or not _times(figure, factor):
            return None
        return Slip("column digits", key, frozenset({"digits-exchanged"}))
    if way == "next":
        other = recipe.figures[rng.choice([k for k in part.amounts if k != key])]
        factor = other.base / figure.base
        if _reads_right(recipe, part, factor):
            return None
        return Slip("column copied", key) if _times(figure, factor) else None
    return _factor("column arithmetic", rng, recipe, part, rng.choice((0.75, 1.2, 1.4)))


def ten(rng: Random, recipe: Recipe) -> Slip | None:
    """The decimal point."""
    part = _some(rng, recipe, "solid", "stock", "acid", "step")
    return _factor("ten", rng, recipe, part, rng.choice((10.0, 0.1)), "factor-ten")


def neighbour(rng: Random, recipe: Recipe) -> Slip | None:
    """The figure of the row above."""
    pairs = [
        (a, b)
        for a in recipe.parts
        for b in recipe.parts
        if a is not b and a.how == b.how and recipe.kind in ("buffer", "columns", "totals", "fold")
        and recipe.figures[a.amounts[0]].unit == recipe.figures[b.amounts[0]].unit
    ]  # fmt: skip
    if not pairs:
        return None
    part, other = rng.choice(pairs)
    source, figure = recipe.figures[other.amounts[0]], recipe.figures[part.amounts[0]]
    factor = float(plain(source.right, source.digits)) / figure.right
    if _reads_right(recipe, part, factor) or not _times(figure, factor):
        return None
    figure.digits = source.digits
    return Slip("copied neighbour", part.amounts[0], frozenset({"copied-neighbour"}))


def unit(rng: Random, recipe: Recipe) -> Slip | None:
    """A unit of another kind: the digits are right."""
    part = _some(rng, recipe, "solid")
    if part is None:
        return None
    key = part.final if part.final and rng.random() < 0.3 else _key(rng, part)
    figure = recipe.figures[key]
    other = {"g": "mL", "mg": "uL", "M": "%", "mM": "mg/mL"}.get(figure.unit)
    if other is None:
        return None
    figure.unit = other
    return Slip("unit", key)


def total(rng: Random, recipe: Recipe) -> Slip | None:
    """The water or the total does not add up."""
    if recipe.kind not in ("totals", "mobile", "dilution"):
        return None
    key = recipe.water[0] if recipe.water else None
    if recipe.total and rng.random() < 0.5 and recipe.kind == "mobile":
        key = recipe.total
    if key is None:
        return None
    made = _times(recipe.figures[key], rng.choice((0.8, 0.87, 1.15, 1.25)))
    return Slip("sum", key) if made else None


def start(rng: Random, recipe: Recipe) -> Slip | None:
    """The mass for the starting volume."""
    if recipe.start is None or recipe.kind == "pair":
        return None
    part = _some(rng, recipe, "solid", "acid")
    factor = recipe.figures[recipe.start].base / recipe.figures[recipe.volumes[0]].base
    return _factor("start volume", rng, recipe, part, factor, "copied-volume")


def folds(rng: Random, recipe: Recipe) -> Slip | None:
    """The volume of an X-fold stock, or one component at another fold."""
    if recipe.kind == "dilution" and recipe.figures["s"].unit == "X":
        return _factor("fold", rng, recipe, recipe.parts[0], rng.choice((0.5, 2.0)), "factor-two")
    if recipe.kind != "fold":
        return None
    if recipe.extra and rng.random() < 0.5:
        made = _times(recipe.figures["u"], rng.choice((0.5, 2.0)))
        return Slip("fold", "u", frozenset({"factor-two"})) if made else None
    if len(recipe.parts) < 3:
        return None  # of two rows at different folds either may be the wrong one
    times = recipe.figures["x"].value
    part = rng.choice(recipe.parts)
    return _factor("fold of one row", rng, recipe, part, 1 / times)


def swapped(rng: Random, recipe: Recipe) -> Slip | None:
    """Acid form and base form exchanged."""
    if recipe.kind != "pair":
        return None
    one, two = recipe.parts
    first, second = recipe.figures[one.amounts[0]], recipe.figures[two.amounts[0]]
    assert one.named and two.named
    ratio = (first.base / one.named.mass) / (second.base / two.named.mass)
    crossed = (second.base / one.named.mass) / (first.base / two.named.mass)
    least = 2.5 if one.named.named and two.named.named else 8.0  # an open form explains much
    if max(ratio / crossed, crossed / ratio) < least:
        return None
    grams = first.base, second.base
    first.value, second.value = second.right, first.right
    first.unit, second.unit = second.unit, first.unit
    for figure, right in zip((first, second), grams, strict=True):
        figure.right = right / TO_BASE[figure.unit]
    return Slip("swapped pair", one.amounts[0], frozenset({"swapped-pair"}))


def label(rng: Random, recipe: Recipe) -> Slip | None:
    """The strength printed for a concentrate."""
    if recipe.kind != "concentrate" or not {"s", "p"} <= set(recipe.figures):
        return None
    made = _times(recipe.figures["s"], rng.choice((0.65, 0.82, 1.2, 1.5)))
    return Slip("label of a concentrate", "s") if made else None


def assay(rng: Random, recipe: Recipe) -> Slip | None:
    """The content of a concentrate left out of the volume."""
    if recipe.kind != "concentrate" or "p" not in recipe.figures:
        return None
    share = recipe.figures["p"].value / 100
    return _factor("assay ignored", rng, recipe, recipe.parts[0], share, "assay-ignored")


def normal(rng: Random, recipe: Recipe) -> Slip | None:
    """Normality taken for molarity."""
    part = recipe.parts[0]
    z = part.named.reagent.equivalents if part.named else None
    if recipe.kind != "solid" or not z or z < 2 or recipe.figures["c"].unit not in ("N", "M", "mM"):
        return None
    factor = float(z) if recipe.figures["c"].unit == "N" else 1 / z
    return _factor("normality", rng, recipe, part, factor, "normality", "factor-two")


def percent(rng: Random, recipe: Recipe) -> Slip | None:
    """A percentage reckoned wrong."""
    if not recipe.figures.get("c") or recipe.figures["c"].unit not in ("% w/v", "% v/v"):
        return None
    part = recipe.parts[0]
    if rng.random() < 0.6:
        return _factor("percent ten", rng, recipe, part, rng.choice((10.0, 0.1)), "factor-ten")
    return _factor("percent", rng, recipe, part, rng.choice((0.8, 1.25, 1.6)))


def other(rng: Random, recipe: Recipe) -> Slip | None:
    """Any other number: a share too much or too little, or a number from nowhere."""
    part = _some(rng, recipe, "solid", "stock", "acid", "step", "neat")
    factors = (1.17, 0.77, 1.42, 0.66, 1.27, 3.4, 0.29, rng.uniform(0.3, 0.8), rng.uniform(1.3, 4))
    return _factor("another number", rng, recipe, part, rng.choice(factors))


def strength(rng: Random, recipe: Recipe) -> Slip | None:
    """A final strength or the strength of a stock that the amounts do not give."""
    pool = [(p, k) for p in recipe.parts for k in (p.final, p.stock) if k]
    if not pool or recipe.kind == "serial":
        return None
    part, key = rng.choice(pool)
    factor = rng.choice((0.5, 0.6, 1.5, 2.0, 3.0))
    if _reads_right(recipe, part, 1 / factor):
        return None
    made = _times(recipe.figures[key], factor)
    return Slip("strength of a row", key) if made else None


# weights: counts of genuine mistakes in published recipes, small ones raised to 2 so that they occur
KINDS: dict[str, tuple[Maker, float]] = {
    "dilution": (dilution, 12), "prefix": (prefix, 9), "molar mass": (molar_mass, 6), "mass": (mass, 4),
    "hydrate": (hydrate, 4), "column": (column, 4), "ten": (ten, 3), "neighbour": (neighbour, 2),
    "unit": (unit, 2), "total": (total, 2), "salt form": (salt_form, 2), "start": (start, 2),
    "folds": (folds, 2), "swapped": (swapped, 2), "label": (label, 2), "assay": (assay, 1),
    "normal": (normal, 1), "percent": (percent, 2), "other": (other, 6), "strength": (strength, 3),
}  # fmt: skip


def slipped(seed: int) -> Wrong:
    """A recipe with one slip, by seed."""
    rng = Random(f"slip {seed}")
    names = list(KINDS)
    maker = KINDS[rng.choices(names, [KINDS[n][1] for n in names])[0]][0]
    for attempt in range(2000):
        made = sheet(seed * 2000 + attempt + 10_000_000)
        right, _ = made.write()
        wrong = maker(rng, made.recipe)
        if wrong is None:
            continue
        text, numbers = made.write()
        needed = {wrong.key} | ({made.recipe.start} if wrong.kind == "start volume" else set())
        if needed <= {n.key for n in numbers} and text != right:
            near = made.recipe.near.get(wrong.key, set()) | {wrong.key}
            keys = near | set(made.recipe.volumes)
            return Wrong(made, wrong, text, numbers, tuple(n for n in numbers if n.key in keys))
    raise AssertionError(f"no recipe for slip {seed}")
