"""Recipes of several components: buffers, folds, pairs, mobile phases, columns, totals."""

from __future__ import annotations

from random import Random

from random_recipes.figures import Figure, as_mass, as_molar, as_volume, exact, rounded
from random_recipes.reagents import SOLUBLE, Named, name, reagents
from random_recipes.recipe import Part, Recipe, token
from random_recipes.single import VOLUMES, start_volume, volume

from soplint.equilibria import buffer_recipe

BUFFER_NAMES = (
    "Wash buffer", "Extraction buffer", "Binding buffer", "Assay buffer", "Storage buffer",
    "Elution buffer", "Dialysis buffer", "Reaction buffer", "Rinse solution", "Column buffer",
)  # fmt: skip

# words, unit of the final, usual finals, usual stocks (same unit), label of the stock
STOCKS = (
    ("Tris-HCl", "mM", (10, 20, 25, 50, 100), (1000,), ("pH 7.5", "pH 8.0", "pH 8.5")),
    ("HEPES", "mM", (10, 20, 25, 50), (1000, 500), ("pH 7.4", "pH 7.5")),
    ("MOPS", "mM", (10, 20, 40), (1000, 500), ("pH 7.0", "pH 7.2")),
    ("NaCl", "mM", (50, 100, 150, 200, 300, 500), (5000, 4000, 2000), ("",)),
    ("KCl", "mM", (5, 10, 25, 50, 100), (1000, 2000, 3000), ("",)),
    ("MgCl2", "mM", (1, 2, 5, 10), (1000, 500), ("",)),
    ("CaCl2", "mM", (1, 2, 2.5, 5), (1000, 500), ("",)),
    ("EDTA", "mM", (0.5, 1, 2, 5, 10), (500,), ("pH 8.0", "")),
    ("EGTA", "mM", (1, 2), (200, 500), ("",)),
    ("imidazole", "mM", (10, 20, 250), (1000, 2000), ("", "pH 8.0")),
    ("DTT", "mM", (1, 2, 5), (1000,), ("",)),
    ("sodium acetate", "mM", (20, 50, 100), (3000, 1000), ("pH 5.0", "pH 5.2")),
    ("NaF", "mM", (5, 10, 50), (500,), ("",)),
    ("SDS", "%", (0.1, 0.2, 0.5, 1), (10, 20), ("",)),
    ("Tween 20", "%", (0.05, 0.1, 0.2), (10, 20), ("",)),
    ("Triton X-100", "%", (0.1, 0.5, 1), (10, 20), ("",)),
    ("sodium azide", "%", (0.02, 0.05), (2, 10), ("",)),
    ("glycerol", "%", (5, 10, 20), (50, 80), ("",)),
    ("BSA", "mg/mL", (0.1, 0.5, 1), (10, 20), ("",)),
)
SOLIDS = ("nacl", "kcl", "tris", "hepes", "mgcl2", "cacl2", "edta", "glycine", "mgso4", "naac",
          "kh2po4", "nh42so4", "nah2po4", "citric", "imidazole", "k2hpo4", "na2hpo4")  # fmt: skip


def _strength(rng: Random, value: float, unit: str) -> Figure:
    if unit == "mM":
        return exact(*as_molar(value / 1000, rng))
    return exact(float(value), unit)


def _stock_part(rng: Random, row: tuple, number: int, litres: list[float]) -> tuple[Part, dict]:
    words, unit, finals, stocks, labels = row
    final, stock = rng.choice(finals), rng.choice(stocks)
    digits = rng.choice((3, 3, 4))
    figures = {
        f"f{number}": _strength(rng, final, unit),
        f"s{number}": _strength(rng, stock, unit),
    }
    keys = [f"a{number}.{column}" for column in range(len(litres))]
    for key, volume_ in zip(keys, litres, strict=True):
        figures[key] = rounded(*as_volume(final / stock * volume_, rng), digits)
    part = Part(words, "stock", keys, f"s{number}", f"f{number}", rng.choice(labels))
    return part, figures


def _solid_part(
    rng: Random, thing: Named, millimolar: float, number: int, litres: list[float], fold: float = 1
) -> tuple[Part, dict]:
    digits = rng.choice((3, 3, 4))
    figures = {f"f{number}": exact(*as_molar(millimolar / 1000, rng))}
    keys = [f"a{number}.{column}" for column in range(len(litres))]
    masses = [millimolar / 1000 * fold * thing.mass * v for v in litres]
    unit = as_mass(min(masses), rng)[1] if max(masses) / min(masses) < 8 else None
    for key, grams in zip(keys, masses, strict=True):
        value, own = as_mass(grams, rng)
        if unit == "mg" and grams < 5:
            value, own = grams * 1000, "mg"
        figures[key] = rounded(value, own, digits)
    part = Part(thing.words, "solid", keys, None, f"f{number}", named=thing)
    if rng.random() < 0.12:
        figures[f"M{number}"] = rounded(thing.mass, "g/mol", 5)
        part.molar_mass = f"M{number}"
    return part, figures


def _parts(rng: Random, litres: list[float], *, fold: float = 1.0) -> tuple[list[Part], dict, dict]:
    """Two to five components with their figures and relations."""
    count = rng.randint(2, 5)
    parts: list[Part] = []
    figures: dict[str, Figure] = {}
    near: dict[str, set[str]] = {}
    solids = rng.sample(SOLIDS, count)
    stocks = rng.sample(STOCKS, count)
    mixed = rng.choice(("solids", "stocks", "both"))
    for number in range(count):
        as_solid = mixed == "solids" or (mixed == "both" and number % 2 == 0) or fold > 1
        if as_solid:
            thing = name(rng, reagents()[solids[number]])
            most = SOLUBLE.get(thing.reagent.key, 2.5) * 1000 / fold
            usual = (2, 5, 10, 20, 25, 50, 100, 137, 150, 200)
            millimolar = rng.choice([c for c in usual if c <= most])
            part, made = _solid_part(rng, thing, millimolar, number, litres, fold)
        else:
            part, made = _stock_part(rng, stocks[number], number, litres)
        figures |= made
        parts.append(part)
        for key in made:
            near[key] = set(made)
    rng.shuffle(parts)
    return parts, figures, near


# Groups that precipitate with each other: no one would mix them.
_APART = (("ca", "phosphate sulf po4 so4 carbonate naf"), ("mg", "phosphate po4 naf carbonate"))

# Stocks under the key of the solid that is the same substance (or its base).
_SAME = {"sodium acetate": "naac", "tris-hcl": "tris"}


def _names_clash(parts: list[Part]) -> bool:
    """The same substance twice, or two that precipitate."""
    words = [p.words.lower() for p in parts]
    substances = {
        p.named.reagent.key if p.named else _SAME.get(w, w)
        for p, w in zip(parts, words, strict=True)
    }
    if len(substances) < len(parts):
        return True
    return any(
        one.startswith(metal)
        or f"{metal}cl2" in one
        or {"ca": "calcium", "mg": "magnesium"}[metal] in one
        for metal, partners in _APART
        for one in words
        if any(p in other for other in words if other != one for p in partners.split())
    )


def _finals(parts: list[Part]) -> str:
    said = [f"{token(p.final)} {p.words}" + (f" {p.label}" if p.label else "") for p in parts]
    return ", ".join(said)


def buffer(rng: Random) -> Recipe:
    """A buffer with a final strength for each component."""
    while True:
        litres = rng.choice(VOLUMES)
        parts, figures, near = _parts(rng, [litres])
        taken = sum(figures[p.amounts[0]].base for p in parts if p.how == "stock")
        if not _names_clash(parts) and taken < 0.7 * litres:
            break
    figures["V"] = volume(rng, litres)
    figures["S"] = start_volume(rng, litres)
    called = rng.choice(BUFFER_NAMES)
    in_title = rng.random() < 0.3
    whole = [f"{called} ({token('V')})", f"{called}, {token('V')}", called]
    if in_title:
        whole = [f"{called} ({_finals(parts)}), {token('V')}", f"{called}: {_finals(parts)}"]
    solids = any(p.how == "solid" for p in parts)
    return Recipe(
        "buffer", called, figures, parts, ["V"], whole,
        start="S" if solids and rng.random() < 0.5 else None,
        lead=called.lower(), near=near, finals_in_title=in_title,
    )  # fmt: skip


def fold(rng: Random) -> Recipe:
    """An X-fold stock of solids whose finals are those of the 1x solution."""
    times = rng.choice((5, 10, 10, 10, 20))
    while True:
        litres = rng.choice((0.5, 1.0, 1.0, 2.0))
        parts, figures, near = _parts(rng, [litres], fold=float(times))
        if not _names_clash(parts):
            break
    called = rng.choice(("saline buffer", "running buffer", "transfer buffer", "wash buffer"))
    figures["V"], figures["x"] = volume(rng, litres), exact(float(times), "X")
    figures["one"] = exact(1.0, "X")
    figures["S"] = start_volume(rng, litres)
    used = rng.choice((0.5, 1.0, 2.0, 5.0))
    figures["u"] = exact(*as_volume(used / times, rng))
    figures["U"] = exact(*as_volume(used, rng))
    near |= {key: {"u", "U", "x", "one"} for key in ("u", "U")}
    extra = [
        f"For the {token('one')} solution dilute {token('u')} to {token('U')} with water.",
        f"Dilute {token('u')} of the {token('x')} stock to {token('U')} with water to obtain {token('one')} buffer.",
    ]
    return Recipe(
        "fold", called, figures, parts, ["V"],
        [f"{token('x')} {called}, {token('V')}", f"{called.capitalize()} {token('x')} ({token('V')})"],
        start="S" if rng.random() < 0.5 else None, lead=f"{token('x')} {called}",
        finals_at=token("one"), extra=[rng.choice(extra)] if rng.random() < 0.7 else [], near=near,
    )  # fmt: skip


# acid form, base form, usual pH, acid-base name; formulas as the solver knows them
PAIRS = (
    ("nah2po4", "na2hpo4", "NaH2PO4", "Na2HPO4", (6.4, 7.4), "phosphate"),
    ("kh2po4", "k2hpo4", "KH2PO4", "K2HPO4", (6.2, 7.4), "potassium phosphate"),
    ("citric", "citrate", "citric acid", "trisodium citrate", (3.4, 6.0), "citrate"),
    ("tris", "trishcl", "Tris base", "Tris hydrochloride", (7.5, 8.7), "Tris"),
    ("nahco3", "na2co3", "NaHCO3", "Na2CO3", (9.4, 10.4), "carbonate"),
    ("boric", "borax", "H3BO3", "Na2B4O7", (8.5, 9.0), "borate"),
)


def pair(rng: Random) -> Recipe:
    """A buffer of acid form and base form at a stated pH."""
    first, second, acid, base, (low, high), called = rng.choice(PAIRS)
    molar = rng.choice((0.02, 0.05, 0.1, 0.1, 0.15))
    target = round(rng.uniform(low, high), 1)
    one, two = name(rng, reagents()[first]), name(rng, reagents()[second])
    if called == "Tris":
        made = buffer_recipe(two.plain, one.plain, target, molar)
        moles = (made.base_amount, made.acid_amount)
    else:
        made = buffer_recipe(acid, base, target, molar)
        moles = (made.acid_amount, made.base_amount)
    litres = rng.choice([v for v in VOLUMES if v >= 0.1])
    digits = rng.choice((3, 3, 4))
    figures = {
        "c": exact(*as_molar(molar, rng)), "V": volume(rng, litres),
        "pH": Figure(target, "pH", 2, target), "S": start_volume(rng, litres),
        "a0": rounded(*as_mass(moles[0] * litres * one.mass, rng), digits),
        "a1": rounded(*as_mass(moles[1] * litres * two.mass, rng), digits),
    }  # fmt: skip
    parts = [
        Part(one.words, "solid", ["a0"], named=one),
        Part(two.words, "solid", ["a1"], named=two),
    ]
    if rng.random() < 0.5:
        parts.reverse()
    cap = called[0].upper() + called[1:]
    heads = [
        f"{token('c')} {called} buffer, {token('pH')}, {token('V')}",
        f"{token('c')} {called} buffer {token('pH')} ({token('V')})",
        f"{cap} buffer, {token('c')}, {token('pH')}",
        f"{cap} buffer ({token('c')}, {token('pH')}), {token('V')}",
    ]
    extra = [f"The pH of the solution is {figures['pH'].value:g} (check)."]
    keys = {"c", "pH", "a0", "a1", "V"}
    return Recipe(
        "pair", f"{called} buffer", figures, parts, ["V"], heads,
        start="S" if rng.random() < 0.6 else None,
        lead=f"{token('c')} {called} buffer {token('pH')}",
        extra=extra if rng.random() < 0.05 else [], near={key: keys for key in keys},
    )  # fmt: skip


def mobile(rng: Random) -> Recipe:
    """A mobile phase by volumes."""
    organic = rng.choice(("acetonitrile", "methanol", "2-propanol", "ethanol"))
    litres = rng.choice((0.5, 1.0, 1.0, 2.0))
    share = rng.choice((10, 20, 25, 30, 35, 40, 50, 60, 65, 70, 80))
    shares = {organic: share, "water": 100 - share}
    if rng.random() < 0.3:
        shares = {
            organic: share,
            "water": 99 - share,
            rng.choice(("acetic acid", "formic acid")): 1,
        }
    if share > 50 or rng.random() < 0.3:
        order = list(shares)
    else:
        order = ["water", organic, *[n for n in shares if n not in ("water", organic)]]
    figures = {
        f"a{n}": exact(*as_volume(round(shares[word] / 100 * litres, 6), rng))
        for n, word in enumerate(order)
    }
    figures["V"] = volume(rng, litres)
    figures["R"] = Figure(0, "", None, 0)
    parts = [Part(word, "neat", [f"a{n}"]) for n, word in enumerate(order)]
    ratio = ":".join(str(shares[word]) for word in order)
    joined = rng.choice(("/", ":", " - ")).join(order)
    basis = rng.choice((" (v/v)", " v/v", " by volume"))
    head = f"Mobile phase: {joined} {ratio}{basis}"
    near = {key: set(figures) - {"R"} for key in figures}
    del figures["R"]
    return Recipe(
        "mobile", "Mobile phase", figures, parts, ["V"],
        [head, f"{head}, {token('V')}", f"{joined[0].upper()}{joined[1:]} {ratio}{basis}, {token('V')}"],
        finish="sum", total="V" if rng.random() < 0.3 else None,
        lead=f"{joined} {ratio}{basis}", near=near,
    )  # fmt: skip


def columns(rng: Random) -> Recipe:
    """The same buffer for several volumes."""
    while True:
        litres = sorted(rng.sample((0.05, 0.1, 0.2, 0.25, 0.5, 1.0, 2.0), rng.choice((2, 3, 3, 4))))
        parts, figures, near = _parts(rng, litres)
        taken = sum(figures[p.amounts[0]].base for p in parts if p.how == "stock")
        if not _names_clash(parts) and taken < 0.7 * litres[0]:
            break
    keys = [f"V{n}" for n in range(len(litres))]
    figures |= {key: volume(rng, v) for key, v in zip(keys, litres, strict=True)}
    called = rng.choice(BUFFER_NAMES)
    in_title = rng.random() < 0.4
    title = f"{called} ({_finals(parts)})" if in_title else called
    return Recipe(
        "columns", called, figures, parts, keys, [title],
        lead=called.lower(), near=near, finals_in_title=in_title,
    )  # fmt: skip


def totals(rng: Random) -> Recipe:
    """Stocks and a complement of water that add up to a total."""
    while True:
        litres = rng.choice((25e-6, 50e-6, 1e-4, 1e-3, 5e-3, 0.01, 0.05, 0.1, 0.5, 1.0))
        parts, figures, near = [], {}, {}
        for number, row in enumerate(rng.sample(STOCKS, rng.randint(2, 4))):
            part, made = _stock_part(rng, row, number, [litres])
            parts.append(part)
            figures |= made
            near |= {key: set(made) for key in made}
        written = [figures[p.amounts[0]] for p in parts]
        taken = sum(f.base for f in written)
        if taken < 0.7 * litres and min(f.base for f in written) >= 0.5e-6:
            break
    unit = figures[parts[0].amounts[0]].unit if litres < 1e-3 else None
    rest, own = ((litres - taken) * 1e6, "uL") if unit == "uL" else as_volume(litres - taken, rng)
    figures["W"] = rounded(rest, own, 4)
    figures["V"] = volume(rng, litres)
    everything = {"W", "V", *(p.amounts[0] for p in parts)}
    near |= {"W": everything, "V": everything}
    for part in parts:
        near[part.amounts[0]] = near[part.amounts[0]] | {"W", "V"}
    called = rng.choice(("Reaction mix", "Master mix", "Assay mix", "Working solution"))
    return Recipe(
        "totals", called, figures, parts, ["V"], [called, f"{called}, {token('V')}"],
        finish="water", water=["W"], total="V", lead=called.lower(), near=near,
    )  # fmt: skip


def serial(rng: Random) -> Recipe:
    """Standards made one from another in flasks."""
    analyte = rng.choice(("nitrate", "copper", "phosphate", "lead", "caffeine", "chloride"))
    strength = rng.choice((1000.0, 1000.0, 500.0, 100.0))
    figures = {"s": exact(strength, "mg/L")}
    steps, near = [], {}
    names = [f"Standard {n}" for n in range(1, 5)]
    for number in range(rng.randint(2, 4)):
        flask = rng.choice((25.0, 50.0, 100.0, 100.0))
        factor = rng.choice((2, 4, 5, 10, 10))
        strength = strength / factor
        keys = (f"a{number}", f"v{number}", f"c{number}")
        figures |= {
            keys[0]: exact(flask / factor, "mL"), keys[1]: exact(flask, "mL"),
            keys[2]: exact(round(strength, 6), "mg/L"),
        }  # fmt: skip
        before = f"c{number - 1}" if number else "s"
        for key in keys:
            near.setdefault(key, set()).update({*keys, before})
        if number:
            near[before].update(keys)
        else:
            near["s"] = {*keys}
        steps.append(keys)
    parts = [Part(names[n], "step", [keys[0]], final=keys[2]) for n, keys in enumerate(steps)]
    title = f"{analyte.capitalize()} standards from a {token('s')} stock"
    return Recipe(
        "serial", analyte, figures, parts, [], [title], finish="serial",
        lead=f"{analyte} standards", serial=steps, near=near,
    )  # fmt: skip
