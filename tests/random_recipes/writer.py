"""Random right recipes as texts, with every number that stands in them."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass
from random import Random

from random_recipes import mixtures, single
from random_recipes.figures import Style
from random_recipes.layouts import LAYOUTS, RENDER
from random_recipes.recipe import Recipe
from random_recipes.wording import HEADINGS

KINDS: dict[str, Callable[[Random], Recipe]] = {
    "solid": single.solid, "concentrate": single.concentrate, "dilution": single.dilution,
    "buffer": mixtures.buffer, "pair": mixtures.pair, "mobile": mixtures.mobile,
    "columns": mixtures.columns, "totals": mixtures.totals, "fold": mixtures.fold,
    "serial": mixtures.serial,
}  # fmt: skip
_LABEL_PH = re.compile(r"pH (\d+)\.(\d)")
_TOKEN = re.compile(r"⟦([^⟦⟧|]+)(\|n)?⟧")


@dataclass(frozen=True, slots=True)
class Number:
    """A number as it stands in the text; ``right`` is what it should be, in the same unit."""

    key: str
    text: str
    line: int
    column: int  # from 1
    value: float
    unit: str
    right: float


@dataclass(frozen=True, slots=True)
class Sheet:
    """A recipe with layout and style, before its figures are put in: same words for any figures."""

    recipe: Recipe
    layout: str
    suffix: str
    lines: tuple[str, ...]
    style: Style

    def write(self) -> tuple[str, list[Number]]:
        """The text and its numbers, with the figures as they are now."""
        numbers: list[Number] = []
        lines = []
        for order, line in enumerate(self.lines, 1):
            if self.style.comma:
                line = _LABEL_PH.sub(r"pH \1,\2", line)
            lines.append(self._filled(line, order, numbers))
        return "\n".join(lines) + "\n", numbers

    def _filled(self, line: str, order: int, numbers: list[Number]) -> str:
        """A line with its figures put in, each noted with its place."""
        done, end = "", 0
        for match in _TOKEN.finditer(line):
            figure = self.recipe.figures[match[1]]
            text = self.style.number(figure) if match[2] else self.style.write(figure)
            done += line[end : match.start()]
            column = len(done) + 1
            numbers.append(
                Number(match[1], text, order, column, figure.value, figure.unit, figure.right)
            )
            done, end = done + text, match.end()
        return done + line[end:]


def sheet(seed: int, kind: str | None = None, layout: str | None = None) -> Sheet:
    """A right recipe, by seed; kind and layout may be chosen."""
    rng = Random(f"recipe {seed}")
    kind = kind or rng.choice(list(KINDS))
    layout = layout or rng.choice(LAYOUTS)
    recipe = KINDS[kind](rng)
    style = Style.choose(rng)
    suffix = rng.choice((".md", ".md", ".md", ".txt", ".sop")) if layout != "table" else ".md"
    lines = []
    if suffix == ".md" and rng.random() < 0.5:
        lines = ["# " + rng.choice(HEADINGS).format(n=rng.randint(100, 999)), ""]
    lines += RENDER[layout](rng, recipe, style, suffix)
    while lines and not lines[-1]:
        lines.pop()
    return Sheet(recipe, layout, suffix, tuple(lines), style)


def make(seed: int) -> tuple[str, str, list[Number]]:
    """A right recipe: the text, the ending of its file name, and every number with its line."""
    made = sheet(seed)
    text, numbers = made.write()
    return text, made.suffix, numbers
