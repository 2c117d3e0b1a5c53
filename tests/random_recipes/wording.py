"""Phrases: how an amount, a stock and a finish are put into words."""

from __future__ import annotations

from random import Random

from random_recipes.recipe import Part, Recipe, token

WEIGH = ("Weigh", "Weigh out", "Add", "Add", "Take", "Weigh accurately")
POUR = ("Add", "Add", "Add", "Pipette", "Transfer", "Measure")
CLOSING = (
    "Store at 4 °C.", "Mix well.", "Filter through a 0.45 µm membrane.", "Autoclave for 20 min.",
    "Label with name and date.", "Keep at room temperature for up to 3 months.", "Stir for 15 min.",
    "Use within 7 days.", "Wear gloves.", "Sterilise by filtration (0.22 um).",
)  # fmt: skip
HEADINGS = ("HFL-SOP-{n} Reagents", "HFL-SOP-{n} Preparation of solutions", "Solutions", "Recipes")


def thing(part: Part, recipe: Recipe) -> str:
    """The name of what is taken with its strength, assay or molar mass."""
    words = part.words
    if part.assay:
        words += " (" + ", ".join(token(k) for k in part.assay) + ")"
    if part.molar_mass:
        words += f" (MW {token(part.molar_mass)})"
    return words


def stocked(rng: Random, part: Part) -> str:
    """A stock with strength in front, behind or in brackets."""
    label = f" {part.label}" if part.label else ""
    strength = token(part.stock)
    shapes = [
        f"{strength} {part.words}{label}",
        f"{strength} {part.words}{label}",
        f"{strength} {part.words}{',' if label else ''}{label}",
        f"{part.words} ({strength}{',' if label else ''}{label})",
        f"{strength} {part.words}{label} stock"
        if not label
        else f"{strength} {part.words} ({part.label})",
    ]
    return rng.choice(shapes)


def final(rng: Random, part: Part, recipe: Recipe) -> str:
    """The final strength in brackets, or nothing."""
    if part.final is None or recipe.finals_in_title:
        return ""
    at = f" at {recipe.finals_at}" if recipe.finals_at else ""
    if at:
        return f" ({token(part.final)}{at})"
    word = rng.choice(("", "", " final", "final "))
    if word == "final ":
        return f" (final {token(part.final)})"
    return f" ({token(part.final)}{word})"


def dose(
    rng: Random, part: Part, recipe: Recipe, column: int = 0, *, of: bool | None = None
) -> str:
    """An amount with its thing: "25 mL of 2 M NaCl (50 mM)"."""
    amount = token(part.amounts[column])
    named = stocked(rng, part) if part.how == "stock" else thing(part, recipe)
    joined = " of " if (rng.random() < 0.5 if of is None else of) else " "
    return f"{amount}{joined}{named}{final(rng, part, recipe)}"


def made_up(rng: Random, recipe: Recipe, water: str, column: int = 0) -> str:
    """The sentence that finishes a recipe."""
    volume = token(recipe.volumes[column])
    if recipe.finish == "water":
        return rng.choice(
            (
                f"Add {token(recipe.water[column])} of {water}",
                f"Add {token(recipe.water[column])} {water}",
            )
        )
    return rng.choice(
        (
            f"Make up to {volume} with {water}",
            f"Make up to {volume} with {water}",
            f"Bring to {volume} with {water}",
            f"Bring the volume to {volume} with {water}",
            f"Bring the volume up to {volume}",
            f"Fill up to {volume} with {water}",
            f"Adjust the volume to {volume} with {water}",
            f"Top up to {volume} with {water}",
            f"Dilute to {volume} with {water}",
            f"Make up to the {volume} mark with {water}",
            f"Complete to {volume} with {water}",
            f"Adjust to a final volume of {volume}",
        )
    )


def filled(rng: Random, recipe: Recipe, water: str, column: int = 0) -> str:
    """The line that finishes a list."""
    volume = token(recipe.volumes[column])
    if recipe.finish == "water":
        amount = token(recipe.water[column])
        return rng.choice((f"{amount} {water}", f"{amount} of {water}"))
    return rng.choice(
        (
            f"{water} to {volume}",
            f"{water} to {volume}",
            f"{water} up to {volume}",
            f"to {volume} with {water}",
            f"make up to {volume} with {water}",
            f"up to {volume} with {water}",
            f"fill up to {volume} with {water}",
        )
    )


def capital(text: str) -> str:
    """With a capital first letter, but "dH2O" as it is."""
    return text if "H2O" in text.split(" ")[0] else text[:1].upper() + text[1:]
