"""Which volume the strengths of a preparation refer to, and on what evidence.

Order (from a survey of published recipe texts): explicit make-up, the mark of a flask, a total row,
the volume of the heading or of the column head, the sum of the parts, the solvent.
"""

from __future__ import annotations

import pytest

from soplint.bench.volumes import final_volume

# name: (text, amount, mL, provenance).  In each text several volumes compete; one is the best.
CASES = {
    "make-up before total row and heading": (
        """\
## Saline, 0.5 mol/L, 300 mL

| Reagent | Amount |
|---|---|
| sodium chloride | 7.305 g |
| water | 200 mL |
| Total | 350 mL |

Make up to 250 mL.
""",
        "7.305 g",
        250,
        "made-up",
    ),
    "make-up before the size of a flask": (
        """\
## Saline, 0.5 mol/L

Weigh 7.305 g of sodium chloride into a 500 mL volumetric flask. Make up to 250 mL with water.
""",
        "7.305 g",
        250,
        "made-up",
    ),
    "make-up before the start volume": (
        """\
## Saline, 0.5 mol/L

Dissolve 7.305 g of sodium chloride in 200 mL of water. Make up to 250 mL.
""",
        "7.305 g",
        250,
        "made-up",
    ),
    "the last make-up counts": (
        """\
## Saline, 0.5 mol/L

Dissolve 7.305 g of sodium chloride, bring to 225 mL with water. Adjust to 20 °C. Make up to 250 mL.
""",
        "7.305 g",
        250,
        "made-up",
    ),
    "mark before heading and start volume": (
        """\
## Saline, 0.5 mol/L, 300 mL

Weigh 7.305 g of sodium chloride into a 250 mL volumetric flask, dissolve in 200 mL of water and fill
to the mark.
""",
        "7.305 g",
        250,
        "mark",
    ),
    "mark of the flask, not of the beaker": (
        """\
## Saline, 0.5 mol/L

Dissolve 7.305 g of sodium chloride in a 600 mL beaker, transfer to a 250 mL volumetric flask and fill
to the mark with water.
""",
        "7.305 g",
        250,
        "mark",
    ),
    "total row before heading": (
        """\
## Saline, 0.5 mol/L, 300 mL

| Reagent | Amount |
|---|---|
| sodium chloride | 7.305 g |
| Total | 250 mL |
""",
        "7.305 g",
        250,
        "total",
    ),
    "total row before sum": (
        """\
## Saline

| Reagent | Amount |
|---|---|
| 1 mol/L sodium chloride | 125 mL |
| water | 100 mL |
| Total | 250 mL |
""",
        "125 mL",
        250,
        "total",
    ),
    "column head before heading": (
        """\
## Saline, 0.5 mol/L, 300 mL

| Reagent | Amount for 250 mL |
|---|---|
| sodium chloride | 7.305 g |
""",
        "7.305 g",
        250,
        "column",
    ),
    "column head before sum": (
        """\
## Saline

| Reagent | for 250 mL |
|---|---|
| 1 mol/L sodium chloride | 125 mL |
| water | 100 mL |
""",
        "125 mL",
        250,
        "column",
    ),
    "heading before sum": (
        """\
## Saline, 0.5 mol/L, 250 mL

Mix 125 mL of 1 mol/L sodium chloride and 100 mL of water.
""",
        "125 mL",
        250,
        "heading",
    ),
    "heading before solvent": (
        """\
## Saline, 0.5 mol/L, 250 mL

Dissolve 7.305 g of sodium chloride in 200 mL of water.
""",
        "7.305 g",
        250,
        "heading",
    ),
    "the nearer heading": (
        """\
# Salts, 1 L

## Saline, 0.5 mol/L, 250 mL

Dissolve 7.305 g of sodium chloride in water.
""",
        "7.305 g",
        250,
        "heading",
    ),
    "lead-in 'per'": (
        """\
## Saline, 0.5 mol/L

Per 250 mL:

- 7.305 g sodium chloride
- water
""",
        "7.305 g",
        250,
        "heading",
    ),
    "sum of the parts": (
        "## Saline\n\nMix 125 mL of 1 mol/L sodium chloride and 125 mL of water.\n",
        "125 mL",
        250,
        "sum",
    ),
    "sum of a table without a total": (
        """\
## Mix

| Reagent | Amount |
|---|---|
| 1 mol/L sodium chloride | 50 mL |
| 0.5 mol/L potassium chloride | 75 mL |
| water | 125 mL |
""",
        "50 mL",
        250,
        "sum",
    ),
    "a pinch of solid does not change the sum": (
        """\
## Mix

- 50 mL of 1 mol/L sodium chloride
- 200 mL of water
- 0.5 g sodium azide
""",
        "50 mL",
        250,
        "sum",
    ),
    "much solid makes the sum weak": (
        """\
## Mix

- 50 mL of 1 mol/L sodium chloride
- 200 mL of water
- 50 g sucrose
""",
        "50 mL",
        250,
        "weak",
    ),
    "dissolve in": (
        "## Saline, 0.5 mol/L\n\nDissolve 7.305 g of sodium chloride in 250 mL of water.\n",
        "7.305 g",
        250,
        "weak",
    ),
    "water as an item": (
        "## Saline, 0.5 mol/L\n\n- 7.305 g sodium chloride\n- 250 mL water\n",
        "7.305 g",
        250,
        "weak",
    ),
    "salt added to the water": (
        "## Saline, 0.5 mol/L\n\nAdd 7.305 g of sodium chloride to 250 mL of water.\n",
        "7.305 g",
        250,
        "weak",
    ),
}


def carried_volume(bench, text, amount):
    """The final volume of the first preparation that takes the amount."""
    for preparation in bench(text).preparations:
        for taken in preparation.taken:
            if taken.text.chars[taken.dose.amount.start : taken.dose.amount.end] == amount:
                assert final_volume(preparation) == preparation.volume
                return preparation.volume
    raise AssertionError(f"{amount} was not taken")


@pytest.mark.parametrize(("text", "amount", "millilitres", "provenance"), CASES.values(), ids=CASES)
def test_best_evidence(bench, text, amount, millilitres, provenance):
    volume = carried_volume(bench, text, amount)
    assert volume is not None
    assert (volume.provenance, volume.litres * 1000) == (provenance, pytest.approx(millilitres))


def test_all_kinds_of_evidence_are_tried():
    assert {case[3] for case in CASES.values()} == {
        *("made-up", "mark", "total", "heading", "column", "sum", "weak")
    }


MAKE_UPS = [
    "Make up to 250 mL.",
    "Make up to 250 mL with water.",
    "Make up with water to 250 mL.",
    "Made up to 250 mL.",
    "Bring the volume up to 250 mL.",
    "Bring to 250 mL, RO water.",
    "Top up with pure water to 250 mL.",
    "Fill up to 250 mL.",
    "Fill to 250 mL with water.",
    "Complete to 250 mL, ddH2O.",
    "Adjust the volume to 250 mL.",
    "Adjust to 250 mL with water.",
    "Dilute to 250 mL.",
    "Dilute with water to 250 mL.",
    "Water to 250 mL.",
    "Water up to 250 mL.",
    "dH2O to 250 mL.",
    "Set the final volume to 250 mL.",
    "Final volume: 250 mL.",
    "Final volume 250 mL.",
    "The final volume is 250 mL.",
    "Total volume: 250 mL.",
    "ad 250 mL.",
]
MAKE_UPS_OPEN: dict[str, str] = {}


def sentences(texts, reasons):
    """One case a sentence, those that do not come out yet marked."""
    return pytest.mark.parametrize(
        "sentence",
        [
            pytest.param(
                text,
                marks=(pytest.mark.xfail(strict=True, reason=reasons[text]),)
                if text in reasons
                else (),
            )
            for text in texts
        ],
    )


@sentences(MAKE_UPS, MAKE_UPS_OPEN)
def test_sentences_that_make_up(bench, sentence):
    text = f"## Saline, 0.5 mol/L\n\nDissolve 7.305 g of sodium chloride in water. {sentence}\n"
    volume = carried_volume(bench, text, "7.305 g")
    assert volume is not None and volume.provenance == "made-up"
    assert volume.litres == pytest.approx(0.250)


ROWS = [
    "water to 250 mL",
    "water, to 250 mL",
    "water up to 250 mL",
    "H2O up to 250 mL",
    "ddH2O to 250 mL",
    "make up to 250 mL",
    "ad 250 mL",
    "final volume 250 mL",
    "water, 250 mL final volume",
    "water q.s. 250 mL",
    "water qs to 250 mL",
]
ROWS_OPEN: dict[str, str] = {}


@sentences(ROWS, ROWS_OPEN)
def test_items_that_make_up(bench, sentence):
    text = f"## Saline, 0.5 mol/L\n\n- 7.305 g sodium chloride\n- {sentence}\n"
    volume = carried_volume(bench, text, "7.305 g")
    assert volume is not None and volume.provenance == "made-up"
    assert volume.litres == pytest.approx(0.250)


NO_VOLUME = [
    "Transfer to a 250 mL beaker.",
    "Transfer to a 250 mL bottle.",
    "Filter through a 0.22 µm membrane.",
    "Rinse the funnel with 250 mL of water.",
    "Store in 250 mL bottles.",
    "Fill to the mark.",
    "Dispense 250 mL portions into bottles.",
]


@sentences(NO_VOLUME, {})
def test_volumes_that_are_none(bench, sentence):
    text = f"## Saline, 0.5 mol/L\n\nDissolve 7.305 g of sodium chloride in water. {sentence}\n"
    volume = carried_volume(bench, text, "7.305 g")
    assert volume is None, volume


WIDTHS = [
    # half a unit of the last digit, zeros counted, but never more than 0.5 % (design, "Intervals")
    ("Make up to 250 mL.", 0.002),
    ("Make up to 1 L.", 0.005),
    ("Make up to 1000.0 mL.", 0.00005),
    ("Make up to 250 ± 5 mL.", 0.02),
    ("Make up to about 250 mL.", 0.10),
    ("Make up to 240-260 mL.", 0.04),
]


@pytest.mark.parametrize(("sentence", "relative"), WIDTHS)
def test_half_width_of_a_volume(bench, sentence, relative):
    text = f"## Saline\n\nDissolve 7.305 g of sodium chloride in water. {sentence}\n"
    volume = carried_volume(bench, text, "7.305 g")
    assert volume is not None
    assert volume.relative == pytest.approx(relative, rel=0.01)


def test_half_width_of_a_sum(bench):
    """Parts count ±1 % at most, so the sum does: 125 mL ± 0.5 mL twice is ±0.4 % of 250 mL."""
    text = "## Saline\n\nMix 125 mL of 1 mol/L sodium chloride and 125 mL of water.\n"
    volume = carried_volume(bench, text, "125 mL")
    assert volume is not None and volume.provenance == "sum"
    assert volume.relative == pytest.approx((0.5 + 0.5) / 250)
    rough = carried_volume(bench, text.replace("125", "5"), "5 mL")
    assert rough is not None and rough.relative == pytest.approx(0.01)


def test_the_volume_of_the_heading_is_confirmed_by_the_make_up(review, entry):
    text = (
        "## Saline, 0.5 mol/L, 250 mL\n\nDissolve 7.305 g of sodium chloride and make up to {}.\n"
    )
    same = review(text.format("0.250 L"))
    assert entry(same, "250 mL").verdict == "agrees"
    assert entry(same, "0.250 L").verdict == "agrees"
