"""Equivalents against masses worked out here from formula and half equation; silence elsewhere."""

from __future__ import annotations

import csv
from pathlib import Path

import pytest

from soplint.bench.stoichiometry import _rows
from soplint.review import review_bytes

molmass = pytest.importorskip("molmass")
DATA = Path(__file__).resolve().parent / "data" / "equivalents.csv"
RULE = "titrations.equivalent-recomputes"


def cases():
    with DATA.open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(line for line in file if not line.startswith("#")))


def stated(case, factor=1.0):
    """The statement with its mass to four figures."""
    mass = _mass(case["formula"])
    strength = float(case["strength"].split()[0])
    grams = factor * strength * float(case["units"]) * mass / float(case["number"])
    figures = f"{grams:#.4g}"
    return (
        f"Each mL of {case['strength']} {case['titrant']}"
        f" is equivalent to {figures} mg of {case['analyte']}."
    ), f"{figures} mg"


def _mass(formula):
    salt, _, water = formula.partition("·")
    waters = int(water.removesuffix("H2O") or 1) if water else 0
    return molmass.Formula(salt).mass + waters * molmass.Formula("H2O").mass


def reviewed(sentence):
    return review_bytes(f"7 Calculation\n7.1 {sentence}\n".encode(), "procedure.sop")


def verdicts(review):
    return {entry.text: (entry.verdict, entry.reason) for entry in review.entries}


RIGHT = [(stated(case)) for case in cases()]
WRONG = [stated(case, float(f)) for case in cases() for f in case["wrong"].split(";")]


def test_the_table_is_not_empty():
    assert len(RIGHT) >= 40 and len(WRONG) >= 40


@pytest.mark.parametrize("sentence, mass", RIGHT)
def test_right_equivalents_agree(sentence, mass):
    review = reviewed(sentence)
    assert [f.message for f in review.findings] == []
    assert verdicts(review)[mass] == ("agrees", None)


@pytest.mark.parametrize("sentence, mass", WRONG)
def test_wrong_equivalents_are_critical(sentence, mass):
    review = reviewed(sentence)
    assert [(f.severity, f.rule) for f in review.findings] == [("critical", RULE)]
    assert verdicts(review)[mass] == ("disagrees", None)


@pytest.mark.parametrize(
    "sentence, mass",
    [
        ("1 mL of 0.1 mol/L sodium thiosulfate corresponds to 3.10 mg of glycerol.", "3.10 mg"),
        ("Each mL of 0.1 mol/L silver nitrate is equivalent to 9.71 mg of caffeine.", "9.71 mg"),
        ("Each mL of 0.1 mol/L HCl is equivalent to 8.75 mg of crude protein.", "8.75 mg"),
        ("Each mL of 0.02 mol/L zinc chloride is equivalent to 5.00 mg of Tris.", "5.00 mg"),
        ("Each mL of 0.1 N iodine is equivalent to 9.005 mg of glucose.", "9.005 mg"),
    ],
)
def test_a_reaction_without_a_row_is_left_open(sentence, mass):
    review = reviewed(sentence)
    assert review.findings == ()
    assert verdicts(review)[mass][0] == "not-verified"
    assert verdicts(review)[mass][1] == "outside-model"


def test_every_mass_of_a_sentence_is_tested():
    review = reviewed(
        "Each mL of 0.01 mol/L EDTA is equivalent to 0.4008 mg of calcium,"
        " to 0.5005 mg of calcium carbonate and to 0.4862 mg of magnesium."
    )
    found = verdicts(review)
    assert found["0.4008 mg"][0] == "agrees"
    assert found["0.5005 mg"][0] == found["0.4862 mg"][0] == "disagrees"
    assert [f.rule for f in review.findings] == [RULE, RULE]


def test_alternatives_are_tested_too():
    review = reviewed(
        "Each mL of 0.1 mol/L silver nitrate is equivalent to 5.844 mg of NaCl or 3.545 mg of Cl"
        " or 14.91 mg of KCl."
    )
    found = verdicts(review)
    assert found["5.844 mg"][0] == found["3.545 mg"][0] == "agrees"
    assert found["14.91 mg"][0] == "disagrees"


def test_a_dose_behind_another_step_is_no_equivalent():
    review = reviewed(
        "Each mL of 0.01 mol/L EDTA is equivalent to 0.4008 mg of calcium; weigh 5 mg of zinc."
    )
    assert review.findings == ()


@pytest.mark.parametrize("strength", ["0.1 mol/L (1/5 KMnO4)", "0.1 N"])
def test_a_strength_in_equivalents_counts_electrons_already(strength):
    sentence = f"Each mL of {strength} potassium permanganate is equivalent to 5.585 mg of iron."
    assert verdicts(reviewed(sentence))["5.585 mg"] == ("agrees", None)


def test_normal_acid_needs_no_name():
    right = "1 mL of 0.02 N acid corresponds to 1.00 mg of CaCO3."
    wrong = "1 mL of 0.02 N acid corresponds to 2.00 mg of CaCO3."
    open_ = "1 mL of 0.02 mol/L acid corresponds to 2.00 mg of CaCO3."
    assert verdicts(reviewed(right))["1.00 mg"] == ("agrees", None)
    assert verdicts(reviewed(wrong))["2.00 mg"] == ("disagrees", None)
    assert verdicts(reviewed(open_))["2.00 mg"] == ("not-verified", "outside-model")


def test_each_kind_of_titration_has_a_titrant_and_each_reaction_once():
    kinds = {row["kind"] for row in _rows("titrants.csv")}
    pairs = [
        (row["family"], kind)
        for row in _rows("stoichiometry.csv")
        for kind in row["reacts_with"].split()
    ]
    assert {kind for _, kind in pairs} <= kinds
    assert len(pairs) == len(set(pairs))
