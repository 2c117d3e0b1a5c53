"""Litres of gas by stoichiometry, worked by hand beside each case."""

import re

import pytest

from soplint.review import review_bytes

# Molar volume of an ideal gas at 25 °C and 101.325 kPa: 8.314462618 × 298.15 / 101.325 = 24.465 L/mol
# (CODATA 2018 gas constant).
MOLAR = 8.314462618 * 298.15 / 101.325

CASES = [
    # KCN + H+ -> HCN: 0.651 g / 65.116 g/mol = 0.010 mol
    ("Dissolve 0.651 g of potassium cyanide in 50 mL of water.", "Add 10 mL of sulfuric acid 2 mol/L.", 0.0100),
    # Na2S·9H2O + 2 H+ -> H2S: 4.804 g / 240.18 g/mol = 0.020 mol
    ("Dissolve 4.804 g of sodium sulfide nonahydrate in 50 mL of water.", "Add 20 mL of hydrochloric acid 6 mol/L.", 0.0200),
    # NaN3 + H+ -> HN3: 0.65 g / 65.01 g/mol = 0.010 mol, acid in excess
    ("Dissolve 0.65 g of sodium azide in 20 mL of water.", "Add 5 mL of hydrochloric acid 6 mol/L.", 0.0100),
    # the scarcer is the acid: 5 mL × 1 mol/L = 0.005 mol H+ for 0.010 mol azide
    ("Dissolve 0.65 g of sodium azide in 20 mL of water.", "Add 5 mL of hydrochloric acid 1 mol/L.", 0.0050),
    # NaHCO3 + H+ -> CO2: 84 g = 1.0 mol against 1.0 mol of acid
    ("Pour 2 L of hydrochloric acid 0.5 mol/L into the open tub.", "Add 84.01 g of sodium hydrogen carbonate in portions.", 1.000),
    # Zn + 2 H+ -> H2: 6.538 g / 65.38 g/mol = 0.100 mol
    ("Place 500 mL of hydrochloric acid 2 mol/L in the beaker.", "Add 6.538 g of zinc powder.", 0.100),
]  # fmt: skip


@pytest.mark.parametrize(("first", "second", "moles"), CASES)
def test_litres_of_gas(first, second, moles):
    review = review_bytes(f"4 Test\n4.1 {first}\n4.2 {second}\n".encode(), "a.sop")
    litres = [
        float(f.computed.removesuffix(" L"))
        for f in review.findings
        if f.rule.startswith("hazards.") and f.computed and f.computed.endswith(" L")
    ]
    assert litres == [pytest.approx(moles * MOLAR, rel=0.01)]


def test_overpressure_of_a_closed_bottle():
    """0.1 mol of acid sets 2.45 L free into 150 mL of headspace: 16.3 bar by p = n R T / V."""
    text = (
        "5 Foam test\n5.1 Place 100 mL of hydrochloric acid 1 mol/L in a 250 mL bottle.\n"
        "5.2 Add 10 g of sodium hydrogen carbonate and close the bottle tightly.\n"
    )
    found = [
        f
        for f in review_bytes(text.encode(), "a.sop").findings
        if f.rule == "hazards.gas-can-escape"
    ]
    bar = float(re.search(r"([\d.]+) bar", found[0].message)[1])
    assert bar == pytest.approx(0.1 * MOLAR / 0.150, rel=0.05)


@pytest.mark.parametrize(("ph", "share"), [(7.0, 0.994), (9.0, 0.619), (10.0, 0.140)])
def test_share_of_hydrogen_cyanide(ph, share):
    """Share of HCN at pKa 9.21: 1/(1 + 10^(pH - pKa)) (acids table, Goldberg et al. 2002 for the form)."""
    text = f"4 Test\n4.1 Dissolve 6.51 g of potassium cyanide in 50 mL of water.\n4.2 Adjust to pH {ph} with hydrochloric acid 6 mol/L.\n"
    found = [
        f
        for f in review_bytes(text.encode(), "a.sop").findings
        if f.rule == "hazards.cyanide-alkaline"
    ]
    assert found[0].severity == "critical"
    assert float(found[0].computed.removesuffix(" L")) == pytest.approx(
        0.1 * share * MOLAR, rel=0.02
    )
