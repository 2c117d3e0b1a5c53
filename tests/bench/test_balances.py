"""Each kind of relation, agreeing and disagreeing, with the computed value worked out by hand here.

Molar masses are sums of the IUPAC abridged standard atomic weights (Prohaska et al. 2022, Pure Appl.
Chem. 94, 573).  Other sources stand beside their numbers.
"""

from __future__ import annotations

from dataclasses import dataclass

import pytest

H, C, N, OX = 1.008, 12.011, 14.007, 15.999
NA, P, S, CL, K, CU = 22.990, 30.974, 32.06, 35.45, 39.098, 63.546
NACL = NA + CL
KCL = K + CL
CUSO4 = CU + S + 4 * OX
CUSO4_5 = CUSO4 + 5 * (2 * H + OX)
TRIS = 4 * C + 11 * H + N + 3 * OX
GLYCINE = 2 * C + 5 * H + N + 2 * OX
HCL = H + CL
KNO3 = K + N + 3 * OX
NITRIC = H + N + 3 * OX
CITRIC = 6 * C + 8 * H + 7 * OX


@dataclass(frozen=True)
class Case:
    """A number of a text with the value that the others give."""

    name: str
    kind: str
    text: str
    tested: str
    computed: float
    agrees: bool
    rel: float = 0.001  # how well the hand calculation knows the computed value


MASS = "## Sodium chloride, 0.5 mol/L\n\nDissolve {} of sodium chloride and make up to 250 mL.\n"
AMOUNT = "## Mix\n\n- {} of sodium chloride (0.10 mol/L)\n- water to 500 mL\n"
STOCK = "## Potassium chloride, 10 mM\n\nAdd {} of 1 M potassium chloride to water and make up to 100 mL.\n"
SHELF = """\
## Chloride stock, 1000 mg/L

Dissolve 1.649 g of sodium chloride in water and make up to 1 L.

## Chloride working standard, 20 mg/L

Dilute {} of chloride stock to 500 mL with water.
"""
CONCENTRATE = (
    "## Hydrochloric acid, 1 mol/L\n\n"
    "Dilute {} of concentrated hydrochloric acid (37 % w/w, density 1.19 g/mL) to 1 L with water.\n"
)
NEAT = "## Methanol, 30 % v/v\n\nMix {} of methanol with water and make up to 500 mL.\n"
SUM = """\
## Phosphate buffer, 0.10 mol/L

Dissolve {} of sodium dihydrogen phosphate dihydrate and 7.10 g of anhydrous disodium hydrogen
phosphate in water and make up to 1 L.
"""
FOLD = "## 1x running buffer, 1 L\n\nDilute {} of 10x running buffer to 1 L with water.\n"
PARTS = """\
## Mix

- 60 mL of 0.1 mol/L sodium chloride
- {} of 0.1 mol/L potassium chloride
- water to 100 mL
"""
TOTAL = """\
## Mix

| Reagent | Amount |
|---|---|
| 1 mol/L sodium chloride | 50 mL |
| water | 60 mL |
| Total | {} |
"""
RATIO = "## Mobile phase, methanol/water 30:70 v/v\n\nMix {} of methanol and {} of water.\n"
COLUMNS = """\
## Mix

| Reagent | 100 mL | 250 mL | 1 L |
|---|---|---|---|
| sodium chloride | 0.90 g | {} | 9.00 g |
"""
MOLAR = "## Reagents\n\n- potassium chloride (M = {})\n"
LABEL = "## Reagents\n\n- nitric acid, 65 %, density 1.40 g/mL, {}\n"
TWOFOLD = "## Reagents\n\n- sodium chloride, 0.90 % ({})\n"
EQUIVALENT = (
    "## Titration\n\n1 mL of 0.1 mol/L sodium hydroxide corresponds to {} of citric acid.\n"
)
WEIGHED = "## Reagents\n\nWeigh {} of potassium chloride.\n"
PART = "## Copper standard, 1000 mg/L\n\nDissolve {} of copper sulfate pentahydrate and make up to 1 L.\n"
GROUP = "## Nitrate standard, 1000 mg/L\n\nDissolve {} of potassium nitrate and make up to 1 L.\n"
ELEMENT = (
    "## Nitrogen standard, 1000 mg/L as N\n\nDissolve {} of potassium nitrate and make up to 1 L.\n"
)
CLAIM = (
    "## Salt\n\nDissolve 5.844 g of sodium chloride and make up to 500 mL ({} sodium chloride).\n"
)
# Primary standards 0.025 + 0.025 mol/kg phosphate and 0.01 mol/kg borax: pH 6.865 and 9.180 at 25 °C
# (Buck et al. 2002, Pure Appl. Chem. 74, 2169, table 2); made up by volume, which changes pH < 0.01.
PHOSPHATE = """\
## Phosphate buffer pH {} at 25 °C

Dissolve 3.39 g of potassium dihydrogen phosphate and 3.53 g of anhydrous disodium hydrogen phosphate
in water and make up to 1 L.
"""
BORAX = "## Borax buffer pH {} at 25 °C\n\nDissolve 3.80 g of borax decahydrate in water and make up to 1 L.\n"


def two(kind, text, right, wrong, computed, rel=0.001):
    """The relation with a right and with a wrong number."""
    return [
        Case(f"{kind} {right}", kind, text.format(right), right, computed, True, rel),
        Case(f"{kind} {wrong}", kind, text.format(wrong), wrong, computed, False, rel),
    ]  # fmt: skip


CASES = [
    *two("mass", MASS, "7.305 g", "8.305 g", 0.5 * 0.250 * NACL),
    *two("mass", MASS, "7305 mg", "7.305 mg", 0.5 * 0.250 * NACL * 1000),
    *two("mass", PART, "3.929 g", "3.500 g", CUSO4_5 / CU),
    *two("mass", GROUP, "1.631 g", "1.371 g", KNO3 / (N + 3 * OX)),
    *two("mass", ELEMENT, "7.218 g", "6.068 g", KNO3 / N),
    *two("mass", CLAIM, "0.200 mol/L", "0.250 mol/L", 5.844 / NACL / 0.5),
    *two("mass", CLAIM, "11.69 g/L", "14.0 g/L", 5.844 / 0.5),
    *two("amount", AMOUNT, "50 mmol", "25 mmol", 0.10 * 0.5 * 1000),
    *two("stock", STOCK, "1.0 mL", "10.0 mL", 0.010 * 100 / 1),
    *two("stock", SHELF, "10.0 mL", "20.0 mL", 20 * 500 / 1000, rel=0.005),
    *two("concentrate", CONCENTRATE, "82.8 mL", "98.0 mL", 1000 * HCL / (1190 * 0.37), rel=0.002),
    *two("neat", NEAT, "150 mL", "300 mL", 0.30 * 500),
    *two("fold", FOLD, "100 mL", "10 mL", 1 / 10 * 1000),
    *two("columns", COLUMNS, "2.25 g", "2.52 g", 9.00 * 0.250),
    *two("molar-mass", MOLAR, "74.55 g/mol", "58.44 g/mol", KCL),
    *two("label-strength", LABEL, "14.4 mol/L", "16.4 mol/L", 1400 * 0.65 / NITRIC),
    Case("twofold 154 mM", "twofold", TWOFOLD.format("154 mM"), "154 mM", 9.0 / NACL * 1000, True),
    Case("twofold 15.4 mM", "twofold", TWOFOLD.format("15.4 mM"), "15.4 mM", 9.0 / NACL * 1000, False),
    Case("equivalent right", "equivalent", EQUIVALENT.format("6.404 mg"), "6.404 mg", 0.1 * CITRIC / 3, True),
    Case("total right", "total", TOTAL.format("110 mL"), "110 mL", 50 + 60, True),
    Case("total wrong", "total", TOTAL.format("100 mL"), "100 mL", 50 + 60, False),
    Case("ratio right", "ratio", RATIO.format("300 mL", "700 mL"), "300 mL", 1000 * 0.3, True),
    Case("ratio wrong", "ratio", RATIO.format("400 mL", "600 mL"), "400 mL", 1000 * 0.3, False),
    Case("ratio wrong, water", "ratio", RATIO.format("400 mL", "600 mL"), "600 mL", 1000 * 0.7, False),
    Case("parts wrong", "parts", PARTS.format("50 mL"), "50 mL", 100 - 60, False),
    # x g NaH2PO4·2H2O (156.01) + 7.10 g Na2HPO4 (141.96) in 1 L
    Case("sum right", "sum", SUM.format("7.80 g"), "0.10 mol/L", 7.80 / 156.01 + 7.10 / 141.96, True),
    Case("sum wrong", "sum", SUM.format("15.60 g"), "0.10 mol/L", 15.60 / 156.01 + 7.10 / 141.96, False),
    Case("ph phosphate right", "ph", PHOSPHATE.format("6.87"), "pH 6.87", 6.865, True, 0.005),
    Case("ph phosphate wrong", "ph", PHOSPHATE.format("7.8"), "pH 7.8", 6.865, False, 0.005),
    Case("ph borax right", "ph", BORAX.format("9.2"), "pH 9.2", 9.180, True, 0.005),
    Case("ph borax wrong", "ph", BORAX.format("8.4"), "pH 8.4", 9.180, False, 0.005),
    Case("dimension wrong", "dimension", WEIGHED.format("7.46 mL"), "7.46 mL", 7.46, False),
]  # fmt: skip


def relation_of(carried, kind, tested):
    """The one relation of a kind that tests the number written so."""
    found = [
        relation
        for relation in carried.relations
        if relation.kind == kind
        and relation.tested.text.chars[relation.tested.measure.start : relation.tested.measure.end]
        == tested
    ]
    assert len(found) == 1, [
        (r.kind, r.tested.text.chars[r.tested.measure.start : r.tested.measure.end], r.working)
        for r in carried.relations
    ]
    return found[0]


@pytest.mark.parametrize("case", CASES, ids=[case.name for case in CASES])
def test_computed_value(bench, case):
    relation = relation_of(bench(case.text), case.kind, case.tested)
    assert relation.computed.value == pytest.approx(case.computed, rel=case.rel)
    assert relation.agrees == case.agrees
    assert relation.computed.low <= relation.computed.value <= relation.computed.high
    assert relation.working


@pytest.mark.parametrize("case", CASES, ids=[case.name for case in CASES])
def test_verdict(review, entry, case):
    reviewed = review(case.text)
    last = max(e.span.line for e in reviewed.entries if e.text == case.tested)
    found = entry(reviewed, case.tested, last)
    if case.agrees:
        assert found.verdict == "agrees"
        assert reviewed.findings == ()
        return
    disproved = [e.text for e in reviewed.entries if e.verdict == "disagrees"]
    assert len(disproved) == 1, disproved
    if case.kind not in ("sum", "ratio"):  # reported at the member that explains it
        assert found.verdict == "disagrees"
        assert found.computed is not None
        assert found.computed.value == pytest.approx(case.computed, rel=case.rel)


def test_each_kind_is_tried_both_ways():
    kinds = {case.kind for case in CASES}
    agreeing = {case.kind for case in CASES if case.agrees}
    disagreeing = {case.kind for case in CASES if not case.agrees}
    # parts that fit and units that fit are no relation; an equivalent that misses is tried below
    assert kinds - agreeing == {"parts", "dimension"}
    assert kinds - disagreeing == {"equivalent"}


def test_deviation_is_stated_over_computed(bench):
    for case in CASES:
        relation = relation_of(bench(case.text), case.kind, case.tested)
        if relation.kind in ("ph", "parts", "dimension"):
            continue
        stated = relation.tested.measure.nominal
        assert 1 + relation.deviation == pytest.approx(stated / relation.computed.value, rel=1e-6)


def test_parts_that_fit(bench, review):
    text = PARTS.format("40 mL")
    assert not [r for r in bench(text).relations if r.kind == "parts"]
    assert review(text).findings == ()


def test_units_that_fit(bench, review):
    text = WEIGHED.format("7.46 g")
    assert not [r for r in bench(text).relations if r.kind == "dimension"]
    assert review(text).findings == ()


def test_the_wrong_unit_is_amended(review):
    (finding,) = review(WEIGHED.format("7.46 mL")).findings
    assert finding.amendment is None or finding.amendment.replacement == "7.46 g"


def test_equivalent_of_one_proton_for_three(review, entry):
    """19.21 mg would be c · M / 1; citric acid takes up three hydroxide ions: c · M / 3."""
    reviewed = review(EQUIVALENT.format("19.21 mg"))
    found = entry(reviewed, "19.21 mg")
    assert found.verdict == "disagrees"
    anhydrous, monohydrate = 0.1 * CITRIC / 3, 0.1 * (CITRIC + 2 * H + OX) / 3
    assert found.computed.value in (
        pytest.approx(anhydrous, rel=1e-3),
        pytest.approx(monohydrate, rel=1e-3),
    )
    assert [f.severity for f in reviewed.findings] == ["critical"]


# --- readings -----------------------------------------------------------------------------------------

COPPER = "## Copper sulfate, 0.100 mol/L\n\nDissolve {} of {} in water and make up to 1 L.\n"
# (text, quantity, verdict, class of the only finding or None)
READINGS = {
    "hydrate not named, anhydrous mass": (
        COPPER.format("15.96 g", "copper sulfate"), "15.96 g", "agrees", None),
    "hydrate not named, hydrate mass": (
        COPPER.format("24.97 g", "copper sulfate"), "24.97 g", "agrees", None),
    "hydrate not named, neither mass": (
        COPPER.format("19.96 g", "copper sulfate"), "19.96 g", "disagrees", "major"),
    "hydrate named": (
        COPPER.format("24.97 g", "copper sulfate pentahydrate"), "24.97 g", "agrees", None),
    "hydrate named, anhydrous mass": (
        COPPER.format("15.96 g", "copper sulfate pentahydrate"), "15.96 g", "disagrees", "major"),
    "anhydrous named, hydrate mass": (
        COPPER.format("24.97 g", "anhydrous copper sulfate"), "24.97 g", "disagrees", "major"),
    "formula of the hydrate, anhydrous mass": (
        COPPER.format("15.96 g", "CuSO4·5H2O"), "15.96 g", "disagrees", "major"),
    "molar mass printed, its mass": (
        COPPER.format("24.97 g", "copper sulfate (M = 249.68 g/mol)"), "24.97 g", "agrees", None),
    "molar mass printed, the other mass": (
        COPPER.format("15.96 g", "copper sulfate (M = 249.68 g/mol)"), "15.96 g", "disagrees", "major"),
    "plain per cent of a liquid by volume": (
        "## Glycerol, 10 %\n\nMix 50 mL of glycerol with water and make up to 500 mL.\n",
        "50 mL", "agrees", None),
    "plain per cent of a liquid by mass": (
        "## Glycerol, 10 %\n\nMix 50 g of glycerol with water and make up to 500 mL.\n",
        "50 g", "agrees", None),
    "w/v of a liquid, taken by volume": (  # 50 mL weigh 63 g
        "## Glycerol, 10 % w/v\n\nMix 50 mL of glycerol with water and make up to 500 mL.\n",
        "50 mL", "disagrees", "major"),
    "v/v of a liquid, its mass taken": (  # 50 g are 40 mL
        "## Glycerol, 10 % v/v\n\nMix 50 g of glycerol with water and make up to 500 mL.\n",
        "50 g", "disagrees", "major"),
    "w/w: of the whole mass": (
        "## Glycerol, 10 % w/w\n\nMix 50 g of glycerol with 450 g of water.\n", "50 g", "agrees", None),
    "w/w: of the water instead": (
        "## Glycerol, 20 % w/w\n\nMix 50 g of glycerol with 250 g of water.\n",
        "50 g", "disagrees", "major"),
    "fold: strengths of the concentrate": (
        "## Running buffer, 10x, 1 L\n\n- 30.3 g Tris base (250 mM)\n- 144 g glycine (1920 mM)\n",
        "30.3 g", "agrees", None),
    "fold: strengths at use": (
        "## Running buffer, 10x, 1 L\n\n- 30.3 g Tris base (25 mM)\n- 144 g glycine (192 mM)\n",
        "30.3 g", "agrees", None),
    "fold: said at which fold": (
        "## Running buffer, 10x, 1 L\n\n- 30.3 g Tris base (25 mM at 1x)\n", "30.3 g", "agrees", None),
    "fold: no fold stated, ten times too much": (
        "## Running buffer, 1 L\n\n- 30.3 g Tris base (25 mM)\n", "30.3 g", "disagrees", "major"),
    "fold: one reading for all": (
        "## Running buffer, 10x, 1 L\n\n- 30.3 g Tris base (25 mM)\n- 144 g glycine (192 mM)\n"
        "- 5.84 g sodium chloride (100 mM)\n", "5.84 g", "disagrees", "major"),
    "part of a salt, said to be the salt": (
        "## Copper sulfate pentahydrate standard, 1000 mg/L\n\n"
        "Dissolve 1.000 g of copper sulfate pentahydrate and make up to 1 L.\n", "1.000 g", "agrees", None),
    "stock without a name": (
        "## Stock, 1.00 mol/L\n\nDissolve 58.44 g of sodium chloride and make up to 1 L.\n\n"
        "## Working solution, 0.100 mol/L\n\nDilute 50 mL of the stock to 500 mL with water.\n",
        "50 mL", "agrees", None),
    "stock without a name, twice as much": (
        "## Stock, 1.00 mol/L\n\nDissolve 58.44 g of sodium chloride and make up to 1 L.\n\n"
        "## Working solution, 0.100 mol/L\n\nDilute 100 mL of the stock to 500 mL with water.\n",
        "100 mL", "disagrees", "major"),
    "normality of a diprotic acid": (  # 1 N = 0.5 mol/L
        "## Sulfuric acid, 1.00 N\n\nAdd 100 mL of 5.00 mol/L sulfuric acid to water and make up to 1 L.\n",
        "100 mL", "agrees", None),
    "normality taken for molarity": (
        "## Sulfuric acid, 1.00 N\n\nAdd 200 mL of 5.00 mol/L sulfuric acid to water and make up to 1 L.\n",
        "200 mL", "disagrees", "major"),
    "salt or base: Tris as the hydrochloride": (  # 157.60 g/mol
        "## Tris hydrochloride, 0.100 mol/L\n\nDissolve 15.76 g of Tris hydrochloride and make up to 1 L.\n",
        "15.76 g", "agrees", None),
    "salt or base: mass of the base": (
        "## Tris hydrochloride, 0.100 mol/L\n\nDissolve 12.11 g of Tris hydrochloride and make up to 1 L.\n",
        "12.11 g", "disagrees", "major"),
    "assay of a solid": (
        "## Potassium hydroxide, 1.00 mol/L\n\nDissolve 66.0 g of potassium hydroxide (85 %) and make up to 1 L.\n",
        "66.0 g", "agrees", None),
}  # fmt: skip
READINGS_OPEN = {}


def named(cases, reasons):
    """One case a name, those that do not come out yet marked."""
    return [
        pytest.param(
            *case,
            id=name,
            marks=(pytest.mark.xfail(strict=True, reason=reasons[name]),)
            if name in reasons
            else (),
        )
        for name, case in cases.items()
    ]


@pytest.mark.parametrize(("text", "quantity", "verdict", "grade"), named(READINGS, READINGS_OPEN))
def test_reading(review, entry, text, quantity, verdict, grade):
    reviewed = review(text)
    assert entry(reviewed, quantity).verdict == verdict
    found = [f.severity for f in reviewed.findings if f.severity != "remark"]
    assert found == ([] if grade is None else [grade])


# --- intervals and classes ----------------------------------------------------------------------------

# Sodium chloride in 250 mL: 7.305 g are 0.500 mol/L.
INTERVALS = {
    # (strength, mass, make-up): verdict, classes above remark
    "one figure, 4 % off": ("0.5 mol/L", "7.60 g", "make up to 250 mL", "agrees", []),
    "one figure, 8 % off": ("0.5 mol/L", "7.89 g", "make up to 250 mL", "disagrees", ["minor"]),
    "one figure, 20 % off": ("0.5 mol/L", "8.77 g", "make up to 250 mL", "disagrees", ["minor"]),
    "one figure, 30 % off": ("0.5 mol/L", "9.50 g", "make up to 250 mL", "disagrees", ["major"]),
    "three figures, 0.2 % off": ("0.500 mol/L", "7.32 g", "make up to 250 mL", "agrees", []),
    "three figures, 2 % off": ("0.500 mol/L", "7.45 g", "make up to 250 mL", "disagrees", []),
    "three figures, 4 % off": ("0.500 mol/L", "7.60 g", "make up to 250 mL", "disagrees", ["minor"]),
    "three figures, 12 % off": ("0.500 mol/L", "8.18 g", "make up to 250 mL", "disagrees", ["major"]),
    "about, mass 9 % off": ("0.500 mol/L", "about 7.96 g", "make up to 250 mL", "agrees", []),
    "about, mass 20 % off": ("0.500 mol/L", "about 8.77 g", "make up to 250 mL", "disagrees", ["major"]),
    "about, strength 9 % off": ("about 0.500 mol/L", "7.96 g", "make up to 250 mL", "agrees", []),
    "about, volume 9 % off": ("0.500 mol/L", "7.96 g", "make up to about 250 mL", "agrees", []),
    "range of strength, inside": ("0.45-0.55 mol/L", "7.89 g", "make up to 250 mL", "agrees", []),
    "range of strength, outside": ("0.45-0.55 mol/L", "10.2 g", "make up to 250 mL", "disagrees", ["major"]),
    "range of mass, inside": ("0.500 mol/L", "7.0-7.6 g", "make up to 250 mL", "agrees", []),
    "range of mass, outside": ("0.500 mol/L", "9.0-9.4 g", "make up to 250 mL", "disagrees", ["major"]),
    "tolerance of mass, inside": ("0.500 mol/L", "7.0 ± 0.4 g", "make up to 250 mL", "agrees", []),
    "tolerance of mass, outside": ("0.500 mol/L", "6.6 ± 0.1 g", "make up to 250 mL", "disagrees", ["major"]),
    "few figures count 5 % at most": ("0.500 mol/L", "8 g", "make up to 250 mL", "disagrees", ["major"]),
    "weak volume, 4 % off": ("0.500 mol/L", "7.60 g", "WEAK", "not-verified", []),
    "weak volume, 7 % off": ("0.500 mol/L", "7.82 g", "WEAK", "disagrees", []),
    "weak volume, 12 % off": ("0.500 mol/L", "8.18 g", "WEAK", "disagrees", ["minor"]),
    "weak volume, twice as much": ("0.500 mol/L", "14.61 g", "WEAK", "disagrees", ["minor"]),
}  # fmt: skip
INTERVALS_OPEN: dict[str, str] = {}


@pytest.mark.parametrize(
    ("strength", "mass", "make_up", "verdict", "grades"), named(INTERVALS, INTERVALS_OPEN)
)
def test_interval(review, entry, strength, mass, make_up, verdict, grades):
    title = f"## Sodium chloride, {strength}"
    if make_up == "WEAK":
        text = f"{title}\n\nDissolve {mass} of sodium chloride in 250 mL of water.\n"
    else:
        text = f"{title}\n\nDissolve {mass} of sodium chloride in water and {make_up}.\n"
    reviewed = review(text)
    found = [e for e in reviewed.entries if e.role == "mass"]
    assert [e.verdict for e in found] == [verdict]
    assert [f.severity for f in reviewed.findings if f.severity != "remark"] == grades


def test_a_range_is_not_amended(review):
    reviewed = review(
        "## Sodium chloride, 0.500 mol/L\n\nDissolve 9.0-9.4 g of sodium chloride and make up to 250 mL.\n"
    )
    assert [f.amendment for f in reviewed.findings] == [None]


def test_inputs_of_an_open_relation(review, entry):
    """Strength and volume are neither proved nor disproved by a mass that misses."""
    reviewed = review(MASS.format("9.50 g"))
    for quantity in ("0.5 mol/L", "250 mL"):
        found = entry(reviewed, quantity)
        assert (found.verdict, found.reason) == ("not-verified", "relation-open")


def test_range_of_a_buffer(review):
    """Acetate at pH 6.5 lies 1.8 above its pKa of 4.76 (CRC Handbook; from memory)."""
    text = (
        "## Acetate buffer, 0.1 mol/L, pH {}\n\nDissolve 8.203 g of anhydrous sodium acetate in water,"
        " adjust the pH to {} with acetic acid and make up to 1 L.\n"
    )
    rule = "buffers.target-near-pka"
    assert [f.rule for f in review(text.format("6.5", "6.5")).findings] == [rule]
    assert [f.rule for f in review(text.format("4.8", "4.8")).findings] == []
