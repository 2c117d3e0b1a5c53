"""What holds for every hazard finding, and the set of procedures with and without hazards."""

import json
import re
from pathlib import Path

import pytest

from soplint.checks import RULES
from soplint.review import review_bytes

SET = Path(__file__).resolve().parent.parent / "procedures" / "hazards"
KEY = json.loads((SET / "answers.json").read_text(encoding="utf-8"))["procedures"]
GRAVE = ("critical", "major")
# No text says that something is allowed or harmless.
SOOTHING = re.compile(
    r"\b(?:safe|safely|permitted|allowed|harmless|compatible|no risk|approved|may be (?:mixed|poured))\b",
    re.I,
)


def hazards(name):
    review = review_bytes((SET / name).read_bytes(), name)
    return [f for f in review.findings if f.rule.startswith("hazards.")]


def test_the_set_is_there():
    assert len(KEY) >= 15
    assert sum(p["right"] for p in KEY) >= 8


def test_hazards_of_the_set_are_found():
    planted = found = 0
    for procedure in KEY:
        lines = {f.span.line for f in hazards(procedure["file"]) if f.severity != "remark"}
        for mistake in procedure["mistakes"]:
            planted += 1
            found += bool(lines & set(mistake["lines"]))
    assert planted >= 20
    assert found >= 0.8 * planted


@pytest.mark.parametrize("name", [p["file"] for p in KEY if p["right"]])
def test_right_procedure_has_no_hazard_above_remark(name):
    assert [f for f in hazards(name) if f.severity != "remark"] == []


@pytest.mark.parametrize("name", [p["file"] for p in KEY])
def test_each_finding_carries_the_caution_and_soothes_nobody(name):
    for found in hazards(name):
        assert found.caution
        for words in (found.message, found.working or "", found.caution):
            assert not SOOTHING.search(words), words


def test_no_rule_of_the_hazards_soothes():
    names = [name for name in RULES if name.startswith("hazards.")]
    assert len(names) >= 29
    assert not [name for name in names if SOOTHING.search(name)]


# Class by gas, amount and protection (issue of the hazards, point 3).
CLASSES = [
    ("Dissolve 0.651 g of potassium cyanide in 50 mL of water.", "Add 10 mL of sulfuric acid 2 mol/L.", "", "critical"),
    ("Dissolve 0.00651 g of potassium cyanide in 50 mL of water.", "Add 10 mL of sulfuric acid 2 mol/L.", "", "major"),
    (
        "Dissolve 0.651 g of potassium cyanide in 50 mL of water. The gas is distilled into the absorber.",
        "Add 10 mL of sulfuric acid 2 mol/L.",
        "1 Safety\n1.1 Fume cupboard, gloves.\n\n",
        "minor",
    ),
    (
        "Dissolve 0.651 g of potassium cyanide in 50 mL of water.",
        "Add 10 mL of sulfuric acid 2 mol/L.",
        "1 Safety\n1.1 Fume cupboard, gloves.\n\n",
        "critical",
    ),
]  # fmt: skip


@pytest.mark.parametrize(("first", "second", "head", "grade"), CLASSES)
def test_class_of_a_toxic_gas(first, second, head, grade):
    text = f"{head}4 Test\n4.1 {first}\n4.2 {second}\n"
    found = [
        f.severity
        for f in review_bytes(text.encode(), "a.sop").findings
        if f.rule == "hazards.cyanide-alkaline"
    ]
    assert found == [grade]


def test_neutraliser_that_fits_agrees_in_the_ledger():
    text = "3 Acid waste\n3.1 Weigh 210 g of sodium hydrogen carbonate. This is the amount for 2.5 mol of acid.\n"
    entries = {e.text: e.verdict for e in review_bytes(text.encode(), "a.sop").entries}
    assert entries["2.5 mol"] == "agrees"
    assert entries["210 g"] == "agrees"


def test_pairs_are_counted():
    coverage = review_bytes((SET / "m02.md").read_bytes(), "m02.md").coverage
    assert coverage.pairs_assessed >= 2
