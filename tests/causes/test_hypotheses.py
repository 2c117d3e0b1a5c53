"""Each hypothesis: a slip of its kind is named, a number close by is not.

The right number of every text is worked out beside it; the slip follows from it by the mechanism that
the hypothesis stands for.
"""

from __future__ import annotations

import ast
import csv
import re
from dataclasses import dataclass
from pathlib import Path

import pytest

import soplint.causes
from soplint.bench import carry_out
from soplint.causes import likely_cause
from soplint.causes.search import matching, priors
from soplint.intake import read_bytes
from soplint.notation.document import read_document
from soplint.review import review_bytes

# 0.500 mol/L × 250 mL × 58.44 g/mol = 7.305 g
SALT = "## Sodium chloride, 0.500 mol/L\n\nDissolve {} of sodium chloride and make up to 250 mL.\n"
# 0.100 mol/L × 1 L: pentahydrate 24.97 g (249.68 g/mol), anhydrous 15.96 g (159.60 g/mol)
COPPER = (
    "## Copper sulfate, 0.100 mol/L\n\n"
    "Dissolve {} of copper sulfate pentahydrate and make up to 1 L.\n"
)
# hydrochloride 15.76 g (157.60 g/mol), base 12.11 g (121.14 g/mol)
TRIS = (
    "## Tris hydrochloride, 0.100 mol/L\n\nDissolve {} of Tris hydrochloride and make up to 1 L.\n"
)
# KH2PO4 136.08 g/mol: 13.61 g; the sodium salt NaH2PO4 119.98 g/mol
POTASSIUM = """\
## Potassium dihydrogen phosphate, 0.100 mol/L

Dissolve {} of potassium dihydrogen phosphate and make up to 1 L.
"""
# 0.500 mol/L × 400 mL × 58.44 g/mol = 11.69 g; for the 250 mL of the neighbour 7.305 g
TWO_VOLUMES = """\
# Stocks

## Sodium chloride, 0.500 mol/L

Dissolve {} of sodium chloride and make up to 400 mL.

## Potassium chloride, 0.100 mol/L

Dissolve 1.864 g of potassium chloride and make up to 250 mL.
"""
# in the 200 mL to begin with: 5.844 g
START = (
    "## Sodium chloride, 0.500 mol/L\n\n"
    "Dissolve {} of sodium chloride in 200 mL of water. Make up to 250 mL.\n"
)
# 0.50 mol/L × 500 mL × 58.44 g/mol = 14.61 g beside 3.728 g of another salt
NEIGHBOUR = """\
## Salts

- {} sodium chloride (0.50 mol/L)
- 3.728 g potassium chloride (0.10 mol/L)
- water to 500 mL
"""
# 0.100 N × 1 L × 105.99 g/mol / 2 = 5.30 g
CARBONATE = (
    "## Sodium carbonate, 0.100 N\n\n"
    "Dissolve {} of anhydrous sodium carbonate and make up to 1 L.\n"
)
HYDROXIDE = "## Sodium hydroxide, 0.100 N\n\nDissolve {} of sodium hydroxide and make up to 1 L.\n"
# 36.46 g / (1.19 g/mL × 0.37) = 82.8 mL; without the strength 30.6 mL, without density too 36.5 mL
MURIATIC = (
    "## Hydrochloric acid, 1.00 mol/L\n\n"
    "Dilute {} of concentrated hydrochloric acid (37 %, density 1.19 g/mL) to 1 L with water.\n"
)
# 60.05 g / 1.05 g/mL = 57.3 mL; grams written as millilitres 60.1 mL
ACETIC = (
    "## Acetic acid, 1.00 mol/L\n\nAdd {} of glacial acetic acid to water and make up to 1 L.\n"
)
# 98.08 g / (1.84 g/mL × 0.96..0.98) = 54 to 56 mL
SULFURIC = (
    "## Sulfuric acid, 1.00 mol/L\n\n"
    "Add {} of concentrated sulfuric acid to 500 mL of water and make up to 1 L.\n"
)
# 0.10 mol/L × 600 mL / 0.50 mol/L = 120 mL; 1 + 5 parts give 100 mL
DILUTED = (
    "## Sodium chloride, 0.10 mol/L\n\n"
    "Mix {} of 0.50 mol/L sodium chloride with water and make up to 600 mL.\n"
)
# 110 mL / 10 = 11 mL; 1 + 10 parts give 10 mL
FOLD = "## 1x running buffer, 110 mL\n\nDilute {} of 10x running buffer to 110 mL with water.\n"


@dataclass(frozen=True)
class Slip:
    """A text with a slip, and with a number that the same slip does not explain."""

    kind: str
    text: str
    slip: str
    near: str
    words: str  # what the explanation must say


SLIPS = [
    Slip("other-hydrate", COPPER, "15.96 g", "18.20 g", "anhydrous"),
    Slip("other-salt-form", TRIS, "12.11 g", "13.40 g", "Tris base"),
    Slip("another-salt", POTASSIUM, "12.00 g", "12.80 g", "sodium dihydrogen phosphate"),
    Slip("factor-ten", SALT, "73.05 g", "66.00 g", "10-fold"),
    Slip("factor-ten", SALT, "0.7305 g", "0.8100 g", "10-fold"),
    Slip("factor-hundred", SALT, "730.5 g", "660.0 g", "100-fold"),
    Slip("factor-thousand", SALT, "7.305 mg", "8.100 mg", "thousand-fold"),
    Slip("factor-thousand", SALT, "7.305 kg", "8.100 kg", "thousand-fold"),
    Slip("copied-volume", TWO_VOLUMES, "7.305 g", "8.100 g", "250 mL"),
    Slip("copied-volume", START, "5.844 g", "6.300 g", "200 mL"),
    Slip("copied-neighbour", NEIGHBOUR, "3.728 g", "3.900 g", "potassium chloride"),
    Slip("normality", CARBONATE, "10.60 g", "9.20 g", "normality"),
    Slip("assay-ignored", MURIATIC, "30.6 mL", "33.5 mL", "strength"),
    Slip("assay-ignored", MURIATIC, "36.5 mL", "39.5 mL", "density"),
    Slip("weight-for-volume", ACETIC, "60.1 mL", "64.5 mL", "grams"),
    Slip("factor-two", SALT, "14.61 g", "13.10 g", "twice"),
    Slip("factor-two", SALT, "3.65 g", "4.30 g", "half"),
    Slip("digits-exchanged", SALT, "7.035 g", "7.020 g", "exchanged"),
    Slip("one-part", DILUTED, "100 mL", "109 mL", "1 + n"),
    Slip("one-part", FOLD, "10 mL", "14 mL", "1 + n"),
]


def disagreements(text, amount):
    """The disagreeing relations that test an amount, with their bench."""
    bench = carry_out(read_document(read_bytes(text.encode(), "procedure.md")))
    found = [
        relation
        for relation in bench.relations
        if not relation.agrees
        and relation.tested.text.chars[relation.tested.measure.start : relation.tested.measure.end]
        == amount
    ]
    assert found, [(r.kind, r.working, r.agrees) for r in bench.relations]
    return found, bench


def cause_of(text, amount):
    """The likely cause of the disagreement of an amount."""
    (relation, *_), bench = disagreements(text.format(amount), amount)
    return likely_cause(relation, bench)


slips = pytest.mark.parametrize("slip", SLIPS, ids=[f"{s.kind} {s.slip}" for s in SLIPS])


@slips
def test_the_slip_is_named(slip):
    cause = cause_of(slip.text, slip.slip)
    assert cause is not None
    assert cause.kind == slip.kind
    assert slip.words in cause.words


@slips
def test_a_number_close_by_is_not(slip):
    (relation, *_), bench = disagreements(slip.text.format(slip.near), slip.near)
    assert slip.kind not in {kind for kind, _, _ in matching(relation, bench)}
    cause = likely_cause(relation, bench)
    assert cause is None or cause.kind != slip.kind


@slips
def test_the_factor_of_the_slip_is_met(slip):
    (relation, *_), bench = disagreements(slip.text.format(slip.slip), slip.slip)
    factors = [factor for kind, factor, _ in matching(relation, bench) if kind == slip.kind]
    assert factors
    assert min(abs((1 + relation.deviation) / f - 1) for f in factors) < 0.02


def test_every_kind_has_a_slip():
    assert {slip.kind for slip in SLIPS} | {"swapped-pair"} == set(priors())


# --- things that must not be so ------------------------------------------------------------------------


def test_no_other_volume_no_copied_volume():
    text = SALT.replace("250 mL", "400 mL")
    cause = cause_of(text, "7.305 g")
    assert cause is None or cause.kind != "copied-volume"


def test_normality_needs_more_than_one_equivalent():
    cause = cause_of(HYDROXIDE, "8.00 g")
    assert cause is not None and cause.kind == "factor-two"
    assert "normality" not in cause.words


def test_water_is_no_neighbour_to_copy_from():
    text = (
        "## Ethylene glycol mix\n\n- {} sodium chloride (0.50 mol/L)\n- 400 g water\n- to 500 mL\n"
    )
    (relation, *_), bench = disagreements(text.format("400 g"), "400 g")
    assert "copied-neighbour" not in {kind for kind, _, _ in matching(relation, bench)}


def test_a_dose_is_not_its_own_neighbour():
    cause = cause_of(NEIGHBOUR, "3.728 g")
    assert cause is not None and "sodium chloride (line 3)" not in cause.words
    assert cause.alone


def test_assay_of_the_reading_taken():
    """98.1 g of pure acid written as millilitres of the concentrate, whatever its strength."""
    cause = cause_of(SULFURIC, "98.1 mL")
    assert cause is not None and cause.kind in ("assay-ignored", "weight-for-volume")


def test_the_better_fit_is_named():
    """0.100 N × 1 L × 126.07 g/mol / 2 = 6.30 g; 12.61 g is 0.100 mol/L exactly."""
    text = "## Oxalic acid, 0.100 N\n\nDissolve {} of oxalic acid dihydrate and make up to 1 L.\n"
    cause = cause_of(text, "12.61 g")
    assert cause is not None and "normality" in cause.words


def test_agreeing_numbers_have_no_cause():
    for slip, right in ((SALT, "7.305 g"), (COPPER, "24.97 g"), (DILUTED, "120 mL")):
        bench = carry_out(read_document(read_bytes(slip.format(right).encode(), "p.md")))
        assert bench.relations
        assert [likely_cause(r, bench) for r in bench.relations] == [None] * len(bench.relations)


# --- several causes ------------------------------------------------------------------------------------


def test_two_of_nearly_the_same_plausibility_are_both_named():
    cause = cause_of(CARBONATE, "10.60 g")
    assert cause is not None
    assert not cause.alone
    assert "normality" in cause.words and "twice the amount" in cause.words


def test_one_that_is_much_more_plausible_stands_alone():
    """Half the amount (prior 1) against the mass for half the volume: the survey's 2, then both."""
    weights = priors()
    cause = cause_of(SALT, "7.305 mg")
    assert cause is not None and cause.alone and " or " not in cause.words
    half = cause_of(TWO_VOLUMES.replace("400 mL", "500 mL"), "7.305 g")
    assert half is not None and half.kind == "copied-volume"
    both = weights["factor-two"] * 2 > weights["copied-volume"]
    assert half.alone is not both


# --- swapped pair: named by the check of the pH, not by a factor ---------------------------------------

PAIR = """\
## Phosphate buffer pH {} at 25 °C

Dissolve {} of anhydrous disodium hydrogen phosphate and {} of potassium dihydrogen phosphate in water
and make up to 1 L.
"""


def pair(ph, base, acid):
    reviewed = review_bytes(PAIR.format(ph, base, acid).encode(), "p.md")
    return [(f.rule, f.cause_kind) for f in reviewed.findings if f.severity != "remark"]


def test_swapped_pair():
    """40 mmol base and 10 mmol acid: 6.8 + log 4 = 7.4; the other way round 6.2."""
    assert pair("7.4", "5.68 g", "1.36 g") == []
    assert pair("7.4", "1.42 g", "5.44 g") == [("buffers.pair-ratio-meets-ph", "swapped-pair")]


def test_another_ratio_is_no_swapped_pair():
    """25 mmol each: pH 6.86 stands as far from 7.4 whichever way round."""
    assert pair("7.4", "3.55 g", "3.40 g") == [("buffers.computed-ph-meets-stated", None)]


# --- priors --------------------------------------------------------------------------------------------

ROOM = Path(soplint.causes.__file__).parent


def rows():
    with (ROOM / "data" / "priors.csv").open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))


def test_each_prior_has_source_and_status():
    assert rows()
    for row in rows():
        assert float(row["prior"]) > 0
        assert row["source"].strip(), row["kind"]
        assert row["status"] in ("survey", "estimate"), row["kind"]
        if row["status"] == "estimate":
            assert "no source" in row["source"], row["kind"]
    kinds = [row["kind"] for row in rows()]
    assert len(kinds) == len(set(kinds))


def kinds_in_code():
    """Kinds of cause written in the code: the first argument of Cause, the hyphenated words."""
    found = set()
    for path in [*ROOM.glob("*.py"), *(ROOM.parent / "checks").glob("*.py")]:
        tree = ast.parse(path.read_text(encoding="utf-8"))
        compared = {  # kinds of relation, asked for
            id(part)
            for node in ast.walk(tree)
            if isinstance(node, ast.Compare)
            for part in ast.walk(node)
        }
        for node in ast.walk(tree):
            if id(node) in compared:
                continue
            if isinstance(node, ast.Call) and getattr(node.func, "id", "") == "Cause":
                first = node.args[0]
                if isinstance(first, ast.Constant):
                    found.add(first.value)
            if path.name == "hypotheses.py" and isinstance(node, ast.Constant):
                if re.fullmatch(r"normality|[a-z]+(-[a-z]+)+", str(node.value)):
                    found.add(node.value)
    return found


def test_all_kinds_used_in_the_code_have_a_prior():
    found = kinds_in_code()
    assert {"swapped-pair", "normality", "other-hydrate"} <= found
    assert found <= set(priors())
    assert set(priors()) <= found
