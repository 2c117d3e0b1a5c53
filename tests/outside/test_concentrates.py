"""Concentrated reagents: the published millilitres for a litre of 1 mol/L, as procedures.

Source: published tables of concentrated laboratory reagents (reagent makers; ACS Reagent Chemicals
assay ranges).  The millilitres follow from the printed molar strength, not from a density of
soplint's own tables; rows from memory are marked in the data.
"""

from __future__ import annotations

import csv
from pathlib import Path

import pytest

DATA = Path(__file__).parent / "data"
RULE = "amounts.concentrate-gives-concentration"


def read():
    with (DATA / "concentrates.csv").open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))


ROWS = read()
SHAPES = {
    # the strength in the heading, the per cent behind the name
    "steps": (
        "## {product}, 1 mol/L, 1000 mL\n\n"
        "1. Place 500 mL of water in a beaker.\n"
        "2. Slowly add {mL} mL of {concentrate} {percent} %.\n"
        "3. Cool and make up to 1000 mL with water.\n",
        4,
    ),
    # one sentence, per cent and density in brackets
    "sentence": (
        "## {product}, 1 mol/L\n\n"
        "Measure {mL} mL of {concentrate} ({percent} % w/w, density {density} g/mL) into 500 mL of"
        " water, cool and make up to 1000 mL.\n",
        3,
    ),
    # the reagent list says what the bottle holds
    "reagent list": (
        "# {product}\n\n## Reagents\n\n"
        "- {Concentrate}, {percent} % w/w, density {density} g/mL.\n\n"
        "## {product}, 1 mol/L, 1000 mL\n\n"
        "Measure {mL} mL of {concentrate} into 500 mL of water and make up to 1000 mL.\n",
        9,
    ),
}


def procedure(shape, row, factor):
    """The row as a procedure, with the line of the volume taken."""
    text, line = SHAPES[shape]
    name = row["concentrate"]
    volume = f"{float(row['mL_per_L_for_1_mol_L']) * factor:.1f}"
    filled = text.format(
        product=name.removesuffix(" solution").capitalize(),
        concentrate=name,
        Concentrate=name.capitalize(),
        mL=volume,
        percent=row["percent_w_w"],
        density=row["density_g_mL_20C"],
    )
    return filled, line, f"{volume} mL"


def each(factors):
    made = []
    for shape in SHAPES:
        for row in ROWS:
            for factor in factors:
                key = (shape, row["concentrate"], row["percent_w_w"])
                made.append(pytest.param(shape, row, factor, id=f"{factor:g}-{'-'.join(key)}"))
    return pytest.mark.parametrize(("shape", "row", "factor"), made)


def test_the_volumes_follow_from_the_printed_strength():
    assert len(ROWS) == 27
    for row in ROWS:
        volume = 1000 / float(row["mol_per_L"])
        assert float(row["mL_per_L_for_1_mol_L"]) == pytest.approx(volume, rel=0.005), row


@each([1.0])
def test_published_volume_agrees(review, entry, grave, shape, row, factor):
    text, line, volume = procedure(shape, row, factor)
    reviewed = review(text)
    assert [words for words in grave(reviewed) if "hazards." not in words] == []  # amounts alone
    assert entry(reviewed, volume, line).verdict == "agrees"


@each([2.0, 0.5])
def test_twice_or_half_of_it_is_found(review, entry, found_at, shape, row, factor):
    text, line, volume = procedure(shape, row, factor)
    reviewed = review(text)
    assert entry(reviewed, volume, line).verdict == "disagrees"
    assert found_at(reviewed, line)
