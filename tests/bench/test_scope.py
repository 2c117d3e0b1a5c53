"""Every way in which a make-up line or a volume can be lost on its way to a dose, or leak to another.

Each layout is one way to write a recipe.  Amounts in guillemets are the doses that a strength tests;
beside them stands the volume that they belong to.  All are right as written:
m = c · V · M with M(NaCl) = 58.44, M(KCl) = 74.55, M(KNO3) = 101.10, M(H3BO3) = 61.83 g/mol
(sums of the IUPAC abridged standard atomic weights 2021, rounded to 0.01 g/mol).
"""

from __future__ import annotations

import re
from dataclasses import dataclass

import pytest

MARKED = re.compile(r"«([^»]+)»")


@dataclass(frozen=True)
class Layout:
    """A recipe with the volume (mL) that each marked amount belongs to."""

    name: str
    text: str
    volumes: tuple[float, ...]
    kind: str = "md"

    @property
    def amounts(self) -> list[str]:
        return MARKED.findall(self.text)

    def written(self, wrong: int | None = None, factor: float = 1.3) -> str:
        """The procedure, the amount with the number ``wrong`` changed."""
        numbers = iter(range(len(self.amounts)))

        def one(match: re.Match[str]) -> str:
            return changed(match[1], factor) if next(numbers) == wrong else match[1]

        return MARKED.sub(one, self.text)


def changed(amount: str, factor: float) -> str:
    """The amount times a factor, in its own digits.

    >>> changed("7.305 g", 1.3)
    '9.496 g'
    """
    number, unit = amount.split()
    places = len(number.partition(".")[2])
    return f"{float(number) * factor:.{places}f} {unit}"


LAYOUTS = [
    Layout(
        "heading volume, steps below",
        """\
## Saline, 0.5 mol/L, 250 mL

1. Weigh «7.305 g» of sodium chloride.
2. Dissolve in water.
""",
        (250,),
    ),
    Layout(
        "heading volume passes to a child section",
        """\
# Stocks

## Saline, 0.5 mol/L, 250 mL

### Steps

Dissolve «7.305 g» of sodium chloride in water.
""",
        (250,),
    ),
    Layout(
        "heading volume passes over two levels",
        """\
# Stocks

## Saline, 0.5 mol/L, 250 mL

### Day before use

#### Weighing

Dissolve «7.305 g» of sodium chloride in water.
""",
        (250,),
    ),
    Layout(
        "sibling sections, each with its own make-up",
        """\
# Stocks

## Saline, 0.5 mol/L

Dissolve «7.305 g» of sodium chloride in water and make up to 250 mL.

## Potassium chloride, 0.1 mol/L

Dissolve «3.728 g» of potassium chloride in water and make up to 500 mL.
""",
        (250, 500),
    ),
    Layout(
        "underlined headings",
        """\
Saline, 0.5 mol/L
-----------------

Dissolve «7.305 g» of sodium chloride in water and make up to 250 mL.

Potassium chloride, 0.1 mol/L
-----------------------------

Dissolve «3.728 g» of potassium chloride in water and make up to 500 mL.
""",
        (250, 500),
    ),
    Layout(
        "bold lines as headings",
        """\
## Solutions

**Saline, 0.5 mol/L**

Dissolve «7.305 g» of sodium chloride in water and make up to 250 mL.

**Potassium chloride, 0.1 mol/L**

Dissolve «3.728 g» of potassium chloride in water and make up to 500 mL.
""",
        (250, 500),
    ),
    Layout(
        "bold line with the volume",
        """\
## Solutions

**Saline, 0.5 mol/L, 250 mL**

- sodium chloride «7.305 g»
- water

**Potassium chloride, 0.1 mol/L, 500 mL**

- potassium chloride «3.728 g»
- water
""",
        (250, 500),
    ),
    Layout(
        "lead-ins with volumes",
        """\
# Stocks

Saline 0.5 mol/L, 250 mL:

- «7.305 g» sodium chloride
- water

Potassium chloride, 0.1 mol/L, 500 mL:

- «3.728 g» potassium chloride
- water
""",
        (250, 500),
    ),
    Layout(
        "lead-ins, volumes in the lists",
        """\
# Stocks

Saline, 0.5 mol/L:

- «7.305 g» sodium chloride
- water to 250 mL

Potassium chloride, 0.1 mol/L:

- «3.728 g» potassium chloride
- water to 500 mL
""",
        (250, 500),
    ),
    Layout(
        "lead-in before a table",
        """\
# Stocks

Saline, 0.5 mol/L, 250 mL:

| Reagent | Amount |
|---|---|
| sodium chloride | «7.305 g» |
| water | to volume |
""",
        (250,),
    ),
    Layout(
        "nested lists",
        """\
## Buffer rack

- Saline, 0.5 mol/L, 250 mL
  - «7.305 g» sodium chloride
  - water to 250 mL
- Potassium chloride, 0.1 mol/L, 500 mL
  - «3.728 g» potassium chloride
  - water to 500 mL
""",
        (250, 500),
    ),
    Layout(
        "nested lists, volumes in the leading items only",
        """\
## Buffer rack

- Saline, 0.5 mol/L, 250 mL
  - «7.305 g» sodium chloride
  - water
- Potassium chloride, 0.1 mol/L, 500 mL
  - «3.728 g» potassium chloride
  - water
""",
        (250, 500),
    ),
    Layout(
        "one line with a colon",
        """\
## Stock solutions

- Sodium chloride 0.5 mol/L: «7.305 g» in water, make up to 250 mL
- Potassium chloride 0.1 mol/L: «3.728 g» in water, make up to 500 mL
""",
        (250, 500),
    ),
    Layout(
        "one line, strength first",
        """\
## Stock solutions

- 0.5 mol/L sodium chloride: «7.305 g», water to 250 mL
- 0.1 mol/L potassium chloride: «3.728 g», water to 500 mL
""",
        (250, 500),
    ),
    Layout(
        "one line with a dash",
        """\
## Stock solutions

- Sodium chloride 0.5 mol/L - «7.305 g», water to 250 mL
- Potassium chloride 0.1 mol/L – «3.728 g», water to 500 mL
""",
        (250, 500),
    ),
    Layout(
        "one line with its own volume before the colon",
        """\
## Stock solutions

- Sodium chloride, 0.5 mol/L, 250 mL: «7.305 g» sodium chloride, water
- Boric acid 0.1 mol/L, 1 L: «6.183 g» boric acid, water to the mark
""",
        (250, 1000),
    ),
    Layout(
        "one line takes the volume of the heading",
        """\
## Stock solutions, 500 mL each

- Sodium chloride 0.5 mol/L: «14.61 g» in water
- Potassium chloride 0.1 mol/L: «3.728 g» in water
""",
        (500, 500),
    ),
    Layout(
        "column heads with volumes",
        """\
## Saline, 0.5 mol/L

| Reagent | 250 mL | 1 L |
|---|---|---|
| sodium chloride | «7.305 g» | «29.22 g» |
| water | to 250 mL | to 1 L |
""",
        (250, 1000),
    ),
    Layout(
        "column head 'for' a volume",
        """\
## Saline, 0.5 mol/L

| Reagent | Amount for 250 mL |
|---|---|
| sodium chloride | «7.305 g» |
| water | to volume |
""",
        (250,),
    ),
    Layout(
        "total row",
        """\
## Saline, 0.5 mol/L

| Reagent | Amount |
|---|---|
| sodium chloride | «7.305 g» |
| water | to volume |
| Total | 250 mL |
""",
        (250,),
    ),
    Layout(
        "make-up as a row of the table",
        """\
## Saline, 0.5 mol/L

| Reagent | Amount |
|---|---|
| sodium chloride | «7.305 g» |
| water | to 250 mL |
""",
        (250,),
    ),
    Layout(
        "make-up in the sentence below the table",
        """\
## Saline, 0.5 mol/L

| Reagent | Amount |
|---|---|
| sodium chloride | «7.305 g» |

Dissolve in water and make up to 250 mL.
""",
        (250,),
    ),
    Layout(
        "two stages: start volume, then make-up",
        """\
## Saline, 0.5 mol/L

1. Dissolve «7.305 g» of sodium chloride in 200 mL of water.
2. Make up to 250 mL with water.
""",
        (250,),
    ),
    Layout(
        "two stages in one sentence",
        """\
## Saline, 0.5 mol/L

Dissolve «7.305 g» of sodium chloride in about 200 mL of water and make up to 250 mL.
""",
        (250,),
    ),
    Layout(
        "two make-ups: nearly full, then full",
        """\
## Saline, 0.5 mol/L

Dissolve «7.305 g» of sodium chloride in water and bring to 220 mL. Cool. Make up to 250 mL.
""",
        (250,),
    ),
    Layout(
        "make-up after the adjustment",
        """\
## Sodium acetate buffer, 0.1 mol/L

1. Dissolve «8.203 g» of anhydrous sodium acetate in 800 mL of water.
2. Adjust the pH to 4.8 with acetic acid.
3. Make up to 1 L with water.
""",
        (1000,),
    ),
    Layout(
        "make-up before the adjustment",
        """\
## Sodium acetate buffer, 0.1 mol/L

1. Dissolve «8.203 g» of anhydrous sodium acetate in 800 mL of water.
2. Make up to 1 L with water.
3. Adjust the pH to 4.8 with acetic acid.
""",
        (1000,),
    ),
    Layout(
        "notes between dose and make-up",
        """\
## Saline, 0.5 mol/L

1. Weigh «7.305 g» of sodium chloride.
2. Stir for 10 min at 400 rpm.
3. Cool to 20 °C.
4. Rinse the beaker with 5 mL of water.
5. Make up to 250 mL with water.
6. Store at 4 °C for up to 30 days.
""",
        (250,),
    ),
    Layout(
        "paragraph titles",
        """\
## Solutions

Saline, 0.5 mol/L, 250 mL. Dissolve «7.305 g» of sodium chloride in water.

Potassium chloride, 0.1 mol/L, 500 mL. Dissolve «3.728 g» of potassium chloride in water.
""",
        (250, 500),
    ),
    Layout(
        "paragraph titles, volumes made up",
        """\
## Solutions

Saline, 0.5 mol/L. Dissolve «7.305 g» of sodium chloride in water and make up to 250 mL.

Potassium chloride, 0.1 mol/L. Dissolve «3.728 g» of potassium chloride in water. Make up to 500 mL.
""",
        (250, 500),
    ),
    Layout(
        "numbered sub-headings",
        """\
## 5 Solutions

### 5.1 Saline, 0.5 mol/L, 250 mL

5.1.1 Weigh «7.305 g» of sodium chloride.

5.1.2 Dissolve in water.

### 5.2 Potassium chloride, 0.1 mol/L, 500 mL

5.2.1 Weigh «3.728 g» of potassium chloride.

5.2.2 Dissolve in water.
""",
        (250, 500),
    ),
    Layout(
        "numbered sub-items as plain paragraphs",
        """\
## 5 Solutions

5.1 Saline, 0.5 mol/L, 250 mL

5.1.1 Weigh «7.305 g» of sodium chloride.

5.1.2 Dissolve in water.

5.2 Potassium chloride, 0.1 mol/L, 500 mL

5.2.1 Weigh «3.728 g» of potassium chloride.

5.2.2 Dissolve in water.
""",
        (250, 500),
    ),
    Layout(
        "plain text with numbered sections",
        """\
5 SOLUTIONS

5.1 Saline, 0.5 mol/L, 250 mL

5.1.1 Weigh «7.305 g» of sodium chloride.
5.1.2 Dissolve in water.

5.2 Potassium chloride, 0.1 mol/L, 500 mL

5.2.1 Weigh «3.728 g» of potassium chloride.
5.2.2 Dissolve in water.
""",
        (250, 500),
        "sop",
    ),
    Layout(
        "to the mark, flask in the sentence before",
        """\
## Saline, 0.5 mol/L

1. Weigh «7.305 g» of sodium chloride into a 250 mL volumetric flask.
2. Dissolve in water and fill to the mark.
""",
        (250,),
    ),
    Layout(
        "to the mark, beaker and flask",
        """\
## Saline, 0.5 mol/L

Weigh «7.305 g» of sodium chloride into a 400 mL beaker. Dissolve, transfer to a 250 mL volumetric
flask and fill to the mark with water.
""",
        (250,),
    ),
    Layout(
        "to the mark, two flasks for two solutions",
        """\
## Saline, 0.5 mol/L

Weigh «7.305 g» of sodium chloride into a 250 mL volumetric flask and dilute to the mark with water.

## Potassium chloride, 0.1 mol/L

Weigh «3.728 g» of potassium chloride into a 500 mL volumetric flask and dilute to the mark with water.
""",
        (250, 500),
    ),
    Layout(
        "per 50 mL",
        """\
## Saline, 0.5 mol/L

Per 50 mL:

- «1.461 g» sodium chloride
- water
""",
        (50,),
    ),
    Layout(
        "for 50 mL, in one line",
        """\
## Saline, 0.5 mol/L

For 50 mL: «1.461 g» sodium chloride in water.
""",
        (50,),
    ),
    Layout(
        "several preparations in one section",
        """\
## Preparation of solutions

Dissolve «7.305 g» of sodium chloride in water and make up to 250 mL (0.5 mol/L).

Dissolve «3.728 g» of potassium chloride in water and make up to 500 mL (0.1 mol/L).

Dissolve «6.183 g» of boric acid in water and make up to 1 L (0.1 mol/L).
""",
        (250, 500, 1000),
    ),
    Layout(
        "several preparations as steps of one list",
        """\
## Preparation of solutions

1. Dissolve «7.305 g» of sodium chloride (0.5 mol/L) in water and make up to 250 mL.
2. Dissolve «3.728 g» of potassium chloride (0.1 mol/L) in water and make up to 500 mL.
""",
        (250, 500),
    ),
    Layout(
        "strengths in brackets behind the doses",
        """\
## Mixed salts, 500 mL

- sodium chloride «14.61 g» (0.5 mol/L)
- potassium chloride «3.728 g» (0.1 mol/L)
- water
""",
        (500, 500),
    ),
    Layout(
        "column of final strengths",
        """\
## Mixed salts

| Reagent | Amount | Final |
|---|---|---|
| sodium chloride | «14.61 g» | 0.5 mol/L |
| potassium chloride | «3.728 g» | 0.1 mol/L |
| water | to 500 mL | |
""",
        (500, 500),
    ),
    Layout(
        "stock named before it is used",
        """\
# Stocks

## Saline stock, 1 mol/L

Dissolve «58.44 g» of sodium chloride in water and make up to 1 L.

## Working solution, 0.1 mol/L

Dilute «50 mL» of saline stock to 500 mL with water.
""",
        (1000, 500),
    ),
    Layout(
        "stock named after it is used",
        """\
# Stocks

## Working solution, 0.1 mol/L

Dilute «50 mL» of saline stock to 500 mL with water.

## Saline stock, 1 mol/L

Dissolve «58.44 g» of sodium chloride in water and make up to 1 L.
""",
        (500, 1000),
    ),
    Layout(
        "document title holds where one solution is made",
        """\
# Sodium chloride, 0.5 mol/L, 250 mL

## Apparatus

Balance, 250 mL volumetric flask.

## Procedure

Dissolve «7.305 g» of sodium chloride in water.
""",
        (250,),
    ),
    Layout(
        "quoted volume of ware in the section before",
        """\
# Saline

## Apparatus

A 500 mL beaker and a 1000 mL bottle.

## Saline, 0.5 mol/L

Dissolve «7.305 g» of sodium chloride in water and make up to 250 mL.
""",
        (250,),
    ),
    Layout(
        "standard and its dilution in one paragraph",
        """\
## Standards

Weigh «1.000 g» of sodium chloride into a 100 mL volumetric flask, dissolve and fill to the
mark (10 g/L). Pipette «10.0 mL» of this solution into a 250 mL volumetric flask and dilute
to the mark with water (0.4 g/L).
""",
        (100, 250),
    ),
    Layout(
        "line wrapped early, before a bracket",
        """\
## Standards

Weigh «1.000 g» of sodium chloride, dissolve and make up to 100 mL
(10 g/L). Pipette «10.0 mL» of this solution and dilute it to 250 mL with water
(0.4 g/L).
""",
        (100, 250),
    ),
    Layout(
        "line wrapped inside a bracket",
        """\
## Saline, 0.5 mol/L

Dissolve sodium chloride («7.305 g», dried at 110 °C for 2 h and cooled; keep for 30
d) in water and make up to 250 mL.
""",
        (250,),
    ),
    Layout(
        "claim in the sentence behind",
        """\
## Solutions

Dissolve «7.305 g» of sodium chloride in water and make up to 250 mL. This gives 0.5 mol/L sodium chloride.

Dissolve «3.728 g» of potassium chloride in water and make up to 500 mL. The concentration is 0.1 mol/L.
""",
        (250, 500),
    ),
    Layout(
        "second dose after the start volume",
        """\
## Sodium chloride, 0.5 mol/L

1. Dissolve «14.61 g» of sodium chloride in 300 mL of water.
2. Add «3.728 g» of potassium chloride (0.1 mol/L).
3. Make up to 500 mL.
""",
        (500, 500),
    ),
    Layout(
        "note inside a step",
        """\
## Saline, 0.5 mol/L

1. Dissolve «7.305 g» of sodium chloride in water.

   Note: the salt dissolves slowly.

2. Make up to 250 mL.
""",
        (250,),
    ),
    Layout(
        "quoted recipe",
        """\
## Saline, 0.5 mol/L, 250 mL

> Dissolve «7.305 g» of sodium chloride in water.
""",
        (250,),
    ),
    Layout(
        "volume on a line of its own",
        """\
## Saline, 0.5 mol/L

Volume: 250 mL

- sodium chloride: «7.305 g»
- water
""",
        (250,),
    ),
    Layout(
        "strength and volume on lines of their own",
        """\
## Sodium chloride solution

Concentration: 0.5 mol/L

Volume: 250 mL

- sodium chloride: «7.305 g»
- water
""",
        (250,),
    ),
    Layout(
        "amounts and volumes in brackets",
        """\
## Saline, 0.5 mol/L (250 mL)

- Sodium chloride («7.305 g»)
- water (to volume)
""",
        (250,),
    ),
    Layout(
        "bare document title lends its volume",
        """\
# Salt solutions, 500 mL

## Saline, 0.5 mol/L

Dissolve «14.61 g» of sodium chloride in water.

## Potassium chloride, 0.1 mol/L

Dissolve «3.728 g» of potassium chloride in water.
""",
        (500, 500),
    ),
    Layout(
        "rows with their own volumes and strengths",
        """\
## Chloride standards

| Level | Stock 100 mg/L taken | made up to | Chloride |
|---|---|---|---|
| 1 | «1.00 mL» | 100 mL | 1.0 mg/L |
| 2 | «5.00 mL» | 200 mL | 2.5 mg/L |
| 3 | «2.50 mL» | 50 mL | 5.0 mg/L |
""",
        (100, 200, 50),
    ),
]

# Layouts that do not come out yet: which of the three tests below fail, and why.
OPEN: dict[str, tuple[str, frozenset[str]]] = {
    "numbered sub-items as plain paragraphs": (
        "a numbered paragraph that names a solution is taken for a dose of the volume in it",
        frozenset({"volume", "right", "wrong"}),
    ),
    "standard and its dilution in one paragraph": (
        "a claim behind 'this solution' is taken for that of an unknown substance",
        frozenset({"right", "wrong 10.0 mL"}),
    ),
    "line wrapped early, before a bracket": (
        "a line that begins with a bracket is taken for a new paragraph",
        frozenset({"right", "wrong"}),
    ),
    "strength and volume on lines of their own": (
        "'Concentration: 0.5 mol/L' becomes no target of the preparation",
        frozenset({"right", "wrong"}),
    ),
}
OPEN_LEAKS = {
    "from the document title into one of several preparations": (
        "a document title with a target lends its volume although several solutions are made"
    ),
}


def _marks(name: str, *tests: str):
    reason, open_tests = OPEN.get(name, ("", frozenset()))
    marked = open_tests.intersection(tests)
    return (pytest.mark.xfail(strict=True, reason=reason),) if marked else ()


def layouts(test: str):
    """One case a layout."""
    made = [pytest.param(x, id=x.name, marks=_marks(x.name, test)) for x in LAYOUTS]
    return pytest.mark.parametrize("layout", made)


def doses(test: str):
    """One case a marked amount."""
    made = []
    for x in LAYOUTS:
        for number, amount in enumerate(x.amounts):
            marks = _marks(x.name, test, f"{test} {amount}")
            made.append(pytest.param(x, number, id=f"{x.name}-{amount}", marks=marks))
    return pytest.mark.parametrize(("layout", "number"), made)


@layouts("volume")
def test_each_dose_has_its_own_volume(bench, volume_of, layout):
    assert len(layout.volumes) == len(layout.amounts) > 0
    carried = bench(layout.written(), f"p.{layout.kind}")
    found = [volume_of(carried, amount) for amount in layout.amounts]
    assert [volume and volume[0] for volume in found] == list(layout.volumes), found


@layouts("right")
def test_right_amounts_agree(review, grave, entry, layout):
    reviewed = review(layout.written(), f"p.{layout.kind}")
    assert grave(reviewed) == []
    verdicts = {amount: entry(reviewed, amount).verdict for amount in layout.amounts}
    assert verdicts == dict.fromkeys(layout.amounts, "agrees")


@doses("wrong")
def test_a_wrong_amount_is_found_and_no_other(review, entry, layout, number):
    text = layout.written(wrong=number)
    reviewed = review(text, f"p.{layout.kind}")
    wrong = entry(reviewed, changed(layout.amounts[number], 1.3))
    found = {f.span.line for f in reviewed.findings if f.severity in ("major", "minor")}
    related = {r.span.line for f in reviewed.findings for r in f.related}
    assert wrong.span.line in found | related
    for other, amount in enumerate(layout.amounts):
        if other != number:
            assert entry(reviewed, amount).verdict != "disagrees"
    assert sum(e.verdict == "disagrees" for e in reviewed.entries) >= 1


# The marked amount has no volume: what stands elsewhere in the document is not its own.  The amounts
# fit no volume near them, so that a leak would show as a finding.
LEAKS = {
    "from the nested list before": """\
## Solutions

- Saline, 0.5 mol/L, 250 mL
  - 7.305 g sodium chloride
  - water
- Potassium chloride, 0.1 mol/L
  - «9.9 g» potassium chloride
  - water
""",
    "from the section before": """\
# Solutions

## Saline, 0.5 mol/L, 250 mL

Dissolve 7.305 g of sodium chloride in water.

## Potassium chloride, 0.1 mol/L

Dissolve «9.9 g» of potassium chloride in water.
""",
    "from a make-up in the section before": """\
# Solutions

## Saline, 0.5 mol/L

Dissolve 7.305 g of sodium chloride in water and make up to 250 mL.

## Potassium chloride, 0.1 mol/L

Dissolve «9.9 g» of potassium chloride in water.
""",
    "from the section behind": """\
# Solutions

## Potassium chloride, 0.1 mol/L

Dissolve «9.9 g» of potassium chloride in water.

## Saline, 0.5 mol/L

Dissolve 7.305 g of sodium chloride in water and make up to 250 mL.
""",
    "from a deeper heading before": """\
# Solutions

### Saline, 0.5 mol/L, 250 mL

Dissolve 7.305 g of sodium chloride in water.

## Potassium chloride, 0.1 mol/L

Dissolve «9.9 g» of potassium chloride in water.
""",
    "from the bold line before": """\
# Solutions

**Saline, 0.5 mol/L, 250 mL**

Dissolve 7.305 g of sodium chloride in water.

**Potassium chloride, 0.1 mol/L**

Dissolve «9.9 g» of potassium chloride in water.
""",
    "from the lead-in before": """\
# Solutions

Saline, 0.5 mol/L, 250 mL:

- 7.305 g of sodium chloride

Potassium chloride, 0.1 mol/L:

- «9.9 g» of potassium chloride
""",
    "from the paragraph title before": """\
# Solutions

Saline, 0.5 mol/L, 250 mL. Dissolve 7.305 g of sodium chloride in water.

Potassium chloride, 0.1 mol/L. Dissolve «9.9 g» of potassium chloride in water.
""",
    "from the line before": """\
## Solutions

- Sodium chloride 0.5 mol/L: 7.305 g, water to 250 mL
- Potassium chloride 0.1 mol/L: «9.9 g» in water
""",
    "from the run-in heading before": """\
## Solutions

Saline. Dissolve 7.305 g of sodium chloride in water and make up to 250 mL (0.5 mol/L).

Potassium. Dissolve «9.9 g» of potassium chloride (0.1 mol/L) in water.
""",
    "from the column head of another table": """\
## Saline, 0.5 mol/L

| Reagent | Amount for 250 mL |
|---|---|
| sodium chloride | 7.305 g |

## Potassium chloride, 0.1 mol/L

| Reagent | Amount |
|---|---|
| potassium chloride | «9.9 g» |
""",
    "from the total row of another table": """\
## Saline, 0.5 mol/L

| Reagent | Amount |
|---|---|
| sodium chloride | 7.305 g |
| Total | 250 mL |

## Potassium chloride, 0.1 mol/L

| Reagent | Amount |
|---|---|
| potassium chloride | «9.9 g» |
""",
    "from the flask of another solution": """\
## Saline, 0.5 mol/L

Dissolve 7.305 g of sodium chloride in a 250 mL volumetric flask and fill to the mark.

## Potassium chloride, 0.1 mol/L

Dissolve «9.9 g» of potassium chloride in water and fill to the mark.
""",
    "from a beaker": """\
## Potassium chloride, 0.1 mol/L

Dissolve «9.9 g» of potassium chloride in a 400 mL beaker.
""",
    "from the equipment list": """\
# Procedure

## Equipment

- 500 mL volumetric flask
- 1000 mL beaker

## Potassium chloride, 0.1 mol/L

Dissolve «9.9 g» of potassium chloride in water.
""",
    "from rinsing and storing": """\
## Potassium chloride, 0.1 mol/L

Dissolve «9.9 g» of potassium chloride in water. Rinse the electrode with 50 mL of water. Store in
100 mL bottles.
""",
    "from the sample volume of the next section": """\
## Potassium chloride, 0.1 mol/L

Dissolve «9.9 g» of potassium chloride in water.

## Measurement

Measure 100 mL of the sample and add 5 mL of the reagent.
""",
    "from the document title into one of several preparations": """\
# Sodium chloride, 0.5 mol/L, 250 mL

## Potassium chloride, 0.1 mol/L

Dissolve «9.9 g» of potassium chloride in water.

## Boric acid, 0.1 mol/L

Dissolve 6.183 g of boric acid in water and make up to 1 L.
""",
}


def leaks():
    """One case a leak."""
    made = []
    for name, text in LEAKS.items():
        reason = OPEN_LEAKS.get(name)
        marks = (pytest.mark.xfail(strict=True, reason=reason),) if reason else ()
        made.append(pytest.param(text, id=name, marks=marks))
    return pytest.mark.parametrize("text", made)


@leaks()
def test_no_volume_leaks(bench, review, entry, volume_of, text):
    (amount,) = MARKED.findall(text)
    plain = MARKED.sub(r"\1", text)
    assert volume_of(bench(plain), amount) is None
    reviewed = review(plain)
    assert entry(reviewed, amount).verdict == "not-verified"
    assert reviewed.findings == ()


STRENGTH_LEAKS = {
    "a document title is no target of several preparations": """\
# Sodium chloride, 0.5 mol/L

## Diluted

Dissolve «1.0 g» of sodium chloride in water and make up to 250 mL.

## Concentrated

Dissolve «90.0 g» of sodium chloride in water and make up to 500 mL.
""",
    "the strength of a section ends with it": """\
# Solutions

## Saline, 0.5 mol/L

Dissolve 7.305 g of sodium chloride in water and make up to 250 mL.

## Rinse

Dissolve «1.0 g» of sodium chloride in water and make up to 250 mL.
""",
    "the strength of a lead-in ends with the next": """\
# Solutions

Saline, 0.5 mol/L:

- 7.305 g of sodium chloride
- water to 250 mL

Rinse:

- «1.0 g» of sodium chloride
- water to 250 mL
""",
    "a stock's own strength is no target": """\
# Solutions

## Rinse

Mix «20 mL» of 0.5 mol/L sodium chloride with water and make up to 250 mL.
""",
}


@pytest.mark.parametrize("text", STRENGTH_LEAKS.values(), ids=STRENGTH_LEAKS)
def test_no_strength_leaks(review, entry, text):
    amounts = MARKED.findall(text)
    assert amounts
    reviewed = review(MARKED.sub(r"\1", text))
    assert [entry(reviewed, amount).verdict for amount in amounts] == ["not-verified"] * len(
        amounts
    )
    assert reviewed.findings == ()


def test_no_preparation_is_left_behind(bench):
    """Every dose that is read belongs to exactly one preparation."""
    for layout in LAYOUTS:
        carried = bench(layout.written(), f"p.{layout.kind}")
        keys = [t.stated.key for p in carried.preparations for t in p.taken]
        assert len(keys) == len(set(keys)) >= len(layout.amounts), layout.name


def test_the_changed_amount_is_another_one():
    assert changed("7.305 g", 1.3) == "9.496 g"
    assert all(changed(a, 1.3) != a for layout in LAYOUTS for a in layout.amounts)
