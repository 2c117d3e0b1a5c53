"""Five layouts: steps, bullets, table, prose, one line (or a heading with body)."""

from __future__ import annotations

from collections.abc import Callable
from random import Random

from random_recipes.figures import Style
from random_recipes.recipe import Part, Recipe, bare, token
from random_recipes.wording import (
    CLOSING,
    POUR,
    WEIGH,
    capital,
    dose,
    filled,
    made_up,
    stocked,
    thing,
)

LAYOUTS = ("steps", "bullets", "table", "prose", "oneliner")


def heading(rng: Random, text: str, suffix: str) -> str:
    """A heading, a bold line, or in plain text a line by itself."""
    if suffix != ".md":
        return (
            rng.choice((text, text, f"{rng.randint(2, 9)} {text}")) if "⟦" not in text[:1] else text
        )
    return rng.choice((f"## {text}", f"## {text}", f"### {text}", f"**{text}**"))


def title(rng: Random, recipe: Recipe) -> str:
    return rng.choice(recipe.titles)


def sections(recipe: Recipe) -> list[int]:
    return list(range(max(1, len(recipe.volumes))))


def steps(rng: Random, recipe: Recipe, style: Style, suffix: str) -> list[str]:
    """Numbered imperative sentences."""
    if recipe.serial:
        return [heading(rng, title(rng, recipe), suffix), "", *_serial_steps(rng, recipe, style)]
    lines = [heading(rng, title(rng, recipe), suffix), ""]
    for column in sections(recipe):
        if len(recipe.volumes) > 1:
            lines += [_subheading(rng, recipe, column, suffix), ""]
        said = _sentences(rng, recipe, style, column)
        lines += [f"{n}. {text}" for n, text in enumerate(said, 1)] + [""]
    return lines


def _subheading(rng: Random, recipe: Recipe, column: int, suffix: str) -> str:
    words = rng.choice(("For {}", "For {}:", "{} batch")).format(token(recipe.volumes[column]))
    return f"### {words.rstrip(':')}" if suffix == ".md" else words


def _sentences(rng: Random, recipe: Recipe, style: Style, column: int) -> list[str]:
    """The steps of one preparation, water first where an acid goes in."""
    said: list[str] = []
    water, start = style.water, token(recipe.start)
    acid = any(p.how == "acid" for p in recipe.parts)
    opened = recipe.start is None or column > 0
    if acid and not opened:
        said.append(
            rng.choice(
                (f"Place about {start} of {water} in a beaker.", f"Measure {start} of {water}.")
            )
        )
        opened = True
    for part in recipe.parts:
        verb = rng.choice(WEIGH if part.how == "solid" else POUR)
        said.append(f"{verb} {dose(rng, part, recipe, column)}.")
    if not opened:
        words = (f"Dissolve in {start} of {water}.", f"Dissolve in about {start} {water}.",
                 f"Add {start} of {water} and stir until dissolved.")  # fmt: skip
        said.append(rng.choice(words))
    if recipe.finish != "sum":
        said.append(made_up(rng, recipe, water, column) + rng.choice(("", " and mix")) + ".")
    if recipe.total:
        said.append(
            rng.choice(("Total volume {}.", "The total volume is {}.")).format(token(recipe.total))
        )
    said += recipe.extra
    if rng.random() < 0.4:
        said.append(rng.choice(CLOSING))
    return said


def _serial_steps(rng: Random, recipe: Recipe, style: Style) -> list[str]:
    said = []
    before = f"the {token('s')} stock"
    for n, keys in enumerate(recipe.serial, 1):
        aliquot, flask, strength = (token(key) for key in keys)
        shapes = (
            f"Pipette {aliquot} of {before} into a {flask} volumetric flask"
            f" and make up to the mark with {style.water} ({strength}).",
            f"Dilute {aliquot} of {before} to {flask} with {style.water} ({strength}).",
            f"Transfer {aliquot} of {before} to a {flask} flask and make up to {flask}: {strength}.",
        )
        said.append(f"{n}. {rng.choice(shapes)}")
        before = rng.choice((f"the {strength} standard", f"the {strength} solution"))
    return said


def bullets(rng: Random, recipe: Recipe, style: Style, suffix: str) -> list[str]:
    """Amounts in a list."""
    if recipe.serial:
        return [heading(rng, title(rng, recipe), suffix), "", *_serial_bullets(rng, recipe, style)]
    lines = [heading(rng, title(rng, recipe), suffix), ""]
    mark = rng.choice(("- ", "- ", "* "))
    shape = rng.choice(("first", "first", "last", "colon"))
    for column in sections(recipe):
        if len(recipe.volumes) > 1:
            lines += [_subheading(rng, recipe, column, suffix), ""]
        for part in recipe.parts:
            lines.append(mark + _bullet(rng, part, recipe, column, shape))
        if recipe.finish != "sum":
            lines.append(mark + filled(rng, recipe, style.water, column))
        if recipe.total:
            lines.append(
                f"{mark}Total{rng.choice((':', ' volume:', ' volume'))} {token(recipe.total)}"
            )
        lines.append("")
    lines += [" ".join([*recipe.extra, *([rng.choice(CLOSING)] if rng.random() < 0.3 else [])]), ""]
    return lines


def _bullet(rng: Random, part: Part, recipe: Recipe, column: int, shape: str) -> str:
    if shape == "first":
        return dose(rng, part, recipe, column)
    named = stocked(rng, part) if part.how == "stock" else thing(part, recipe)
    final = f" ({token(part.final)})" if part.final and not recipe.finals_in_title else ""
    if recipe.finals_at and final:
        final = f" ({token(part.final)} at {recipe.finals_at})"
    joined = {"last": " ", "colon": ": "}[shape]
    return f"{named}{joined}{token(part.amounts[column])}{final}"


def _serial_bullets(rng: Random, recipe: Recipe, style: Style) -> list[str]:
    before, said = f"{token('s')} stock", []
    for n, (aliquot, flask, strength) in enumerate(recipe.serial, 1):
        said.append(
            f"- Standard {n}, {token(strength)}: {token(aliquot)} of {before}, {style.water} to {token(flask)}"
        )
        before = f"standard {n}"
    return said


def table(rng: Random, recipe: Recipe, style: Style, suffix: str) -> list[str]:
    """A table with the amounts, one row a component."""
    lines = [heading(rng, title(rng, recipe), suffix), ""]
    if recipe.serial:
        return lines + _serial_table(recipe)
    head, rows = _grid(rng, recipe, style)
    lines += _markdown([head, *rows]) + [""]
    if recipe.extra:
        lines += [" ".join(recipe.extra), ""]
    return lines


def _markdown(rows: list[list[str]]) -> list[str]:
    bars = ["| " + " | ".join(cells) + " |" for cells in rows]
    return [bars[0], "|" + " --- |" * len(rows[0]), *bars[1:]]


def _grid(rng: Random, recipe: Recipe, style: Style) -> tuple[list[str], list[list[str]]]:
    """Header and rows; columns as the recipe has them."""
    stocks = any(p.how == "stock" for p in recipe.parts)
    finals = any(p.final for p in recipe.parts) and not recipe.finals_in_title
    masses = any(p.molar_mass for p in recipe.parts)
    several = len(recipe.volumes) > 1
    own_stock = stocks and rng.random() < 0.6
    amounts = (
        [token(v) for v in recipe.volumes]
        if several or (rng.random() < 0.2 and recipe.finish == "mark")
        else []
    )
    head = [rng.choice(("Component", "Reagent", "Chemical", "Ingredient"))]
    head += [rng.choice(("MW (g/mol)", "M.W. (g/mol)", "Molar mass (g/mol)"))] if masses else []
    head += [rng.choice(("Stock", "Stock concentration", "[Stock]"))] if own_stock else []
    at = f" ({recipe.finals_at})" if recipe.finals_at else ""
    head += [rng.choice(("Final", "Final concentration", "Concentration")) + at] if finals else []
    head += amounts or [
        rng.choice(("Amount", "Amount", "Quantity", "To add", "Volume" if stocks else "Amount"))
    ]
    columns = max(1, len(recipe.volumes))
    rows = []
    for part in recipe.parts:
        words = part.words if own_stock or part.how != "stock" else stocked(rng, part)
        if part.assay:
            words = thing(part, recipe)
        row = [words]
        row += [bare(part.molar_mass) if part.molar_mass else ""] if masses else []
        if own_stock:
            label = f", {part.label}" if part.label else ""
            row.append(token(part.stock) + label if part.stock else rng.choice(("", "-", "solid")))
        row += [token(part.final) if part.final else ""] if finals else []
        row += [token(part.amounts[n]) for n in range(columns)]
        rows.append(row)
    blank = [""] * (len(head) - 1 - columns)
    if recipe.finish == "mark":
        to = rng.choice(("to {}", "to {}", "up to {}", "fill up to {}"))
        rows.append([capital(style.water), *blank, *(to.format(token(v)) for v in recipe.volumes)])
    elif recipe.finish == "water":
        rows.append([capital(style.water), *blank, *(token(w) for w in recipe.water)])
    if recipe.total:
        rows.append([rng.choice(("Total", "Total volume")), *blank, token(recipe.total)])
    if not several and rng.random() < 0.1:  # amount first
        head, rows = [head[-1], *head[:-1]], [[r[-1], *r[:-1]] for r in rows]
    return head, rows


def _serial_table(recipe: Recipe) -> list[str]:
    rows = [["Standard", "Taken", "Final volume", "Concentration"]]
    before = f"{token('s')} stock"
    for n, (aliquot, flask, strength) in enumerate(recipe.serial, 1):
        rows.append([str(n), f"{token(aliquot)} of {before}", token(flask), token(strength)])
        before = f"standard {n}"
    return _markdown(rows)


def prose(rng: Random, recipe: Recipe, style: Style, suffix: str) -> list[str]:
    """Running sentences."""
    if recipe.serial:
        said = [t.split(". ", 1)[1] for t in _serial_steps(rng, recipe, style)]
        return [heading(rng, title(rng, recipe), suffix), "", " ".join(said)]
    lines = []
    headed = (
        recipe.kind not in ("solid", "concentrate", "dilution", "pair", "mobile")
        or rng.random() < 0.5
    )
    if headed:
        lines += [heading(rng, title(rng, recipe), suffix), ""]
    for column in sections(recipe):
        lines += [_paragraph(rng, recipe, style, column, headed), ""]
    return lines


def _paragraph(rng: Random, recipe: Recipe, style: Style, column: int, headed: bool) -> str:
    volume = token(recipe.volumes[column])
    doses = [dose(rng, p, recipe, column, of=True) for p in recipe.parts]
    listed = doses[0] if len(doses) == 1 else ", ".join(doses[:-1]) + " and " + doses[-1]
    acid = any(p.how == "acid" for p in recipe.parts)
    solids = all(p.how == "solid" for p in recipe.parts)
    lead = "" if headed and len(recipe.volumes) == 1 else f"To prepare {volume} of {recipe.lead}, "
    if headed and len(recipe.volumes) > 1:
        lead = f"For {volume}, "
    start = (
        f" in about {token(recipe.start)} of {style.water}"
        if recipe.start and column == 0
        else f" in {style.water}"
    )
    if acid:
        body = f"add {listed} slowly to {token(recipe.start)} of {style.water}"
    elif solids:
        body = f"{rng.choice(('dissolve', 'dissolve', 'weigh'))} {listed}"
        body = body + start if body.startswith("dissolve") else f"{body}, dissolve{start}"
    else:
        body = f"{rng.choice(('mix', 'combine', 'take'))} {listed}"
    finish = ""
    if recipe.finish != "sum":
        words = made_up(rng, recipe, style.water, column)
        finish = rng.choice((" and ", ", then ")) + words[0].lower() + words[1:]
    said = capital(lead + body + finish) + "."
    if recipe.total:
        said += f" The total volume is {token(recipe.total)}."
    return " ".join([said, *recipe.extra, *([rng.choice(CLOSING)] if rng.random() < 0.3 else [])])


def oneliner(rng: Random, recipe: Recipe, style: Style, suffix: str) -> list[str]:
    """The whole recipe in a line, or a heading with bare lines under it."""
    if recipe.serial:
        chain = "; ".join(
            t.split(". ", 1)[1].rstrip(".") for t in _serial_steps(rng, recipe, style)
        )
        return [f"- {title(rng, recipe)}: {chain}."]
    body = rng.random() < 0.5 or len(recipe.volumes) > 1
    lines: list[str] = []
    if body:
        lines = [heading(rng, title(rng, recipe), suffix)] + (
            [""] if rng.random() < 0.6 or suffix != ".md" else []
        )
        if suffix == ".md" and lines[0].startswith("**") and len(lines) == 1:
            lines.append("")
        for column in sections(recipe):
            if len(recipe.volumes) > 1:
                lines += [_subheading(rng, recipe, column, suffix), ""]
            lines += [dose(rng, p, recipe, column) for p in recipe.parts]
            if recipe.finish != "sum":
                lines.append(filled(rng, recipe, style.water, column))
            lines += [f"Total: {token(recipe.total)}"] if recipe.total else []
            lines.append("")
        return lines + [" ".join(recipe.extra), ""] if recipe.extra else lines
    doses = ", ".join(dose(rng, p, recipe) for p in recipe.parts)
    end = (
        ""
        if recipe.finish == "sum"
        else rng.choice((", ", "; ")) + filled(rng, recipe, style.water)
    )
    total = f"; total {token(recipe.total)}" if recipe.total else ""
    joined = rng.choice((": ", ": ", " - ", " — "))
    mark = "- " if suffix == ".md" or rng.random() < 0.5 else ""
    lines = [f"{mark}{title(rng, recipe)}{joined}{doses}{end}{total}."]
    return lines + ["", " ".join(recipe.extra), ""] if recipe.extra else lines


Layout = Callable[[Random, Recipe, Style, str], list[str]]
RENDER: dict[str, Layout] = {
    "steps": steps, "bullets": bullets, "table": table, "prose": prose, "oneliner": oneliner,
}  # fmt: skip
