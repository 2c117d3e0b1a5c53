"""Published temperature coefficients and dilution values of buffers, stated in procedures.

Temperature coefficients dpH/dT: Good et al. 1966, Biochemistry 5, 467 (Tris, HEPES, MES, MOPS; from
memory) and Bates & Hetzer 1961, J. Phys. Chem. 65, 667 (Tris; from memory).  Dilution value of the
equimolal phosphate 0.025 mol/kg, +0.080 for twofold: Bates, Determination of pH (from memory).
"""

import pytest

# substance, molar mass, pH set at 25 °C, dpH/dT, hydroxide or acid that sets it
COEFFICIENTS = [
    ("Tris base", 121.14, 8.0, -0.028, "hydrochloric acid"),
    ("HEPES free acid", 238.30, 7.5, -0.014, "sodium hydroxide"),
    ("MES free acid", 195.24, 6.1, -0.011, "sodium hydroxide"),
    ("MOPS free acid", 209.26, 7.2, -0.015, "sodium hydroxide"),
]


def procedure(name, mass, ph, adjuster, degrees, there):
    return (
        f"## {name.split()[0]} buffer, 50 mmol/L, pH {ph} at 25 °C, 1000 mL\n\n"
        f"1. Dissolve {mass / 20:.2f} g of {name} in 900 mL of water.\n"
        f"2. Adjust to pH {ph} at 25 °C with 1 mol/L {adjuster} and make up to 1000 mL.\n"
        f"3. The buffer has pH {there:.2f} at {degrees} °C.\n"
    )


def of_rule(reviewed, rule):
    return [f for f in reviewed.findings if f.rule == rule]


@pytest.mark.parametrize("degrees", [4, 37])
@pytest.mark.parametrize(("name", "mass", "ph", "slope", "adjuster"), COEFFICIENTS)
def test_published_coefficient(review, entry, name, mass, ph, slope, adjuster, degrees):
    there = ph + slope * (degrees - 25)
    right = review(procedure(name, mass, ph, adjuster, degrees, there))
    assert not of_rule(right, "buffers.ph-holds-at-temperature")
    assert entry(right, f"pH {there:.2f}").verdict == "agrees"
    wrong = review(procedure(name, mass, ph, adjuster, degrees, there + 0.6))
    assert len(of_rule(wrong, "buffers.ph-holds-at-temperature")) == 1
    assert entry(wrong, f"pH {there + 0.6:.2f}").verdict == "disagrees"


@pytest.mark.parametrize(("stated", "found"), [("6.95", 0), ("6.40", 1)])
def test_dilution_value_of_phosphate(review, stated, found):
    text = (
        "# HFL-SOP-510 Phosphate standard\n\n"
        "## Phosphate buffer, pH 6.87 at 25 °C, 1000 mL\n\n"
        "1. Weigh 3.39 g of potassium dihydrogen phosphate and 3.53 g of anhydrous disodium hydrogen"
        " phosphate, dissolve in water and make up to 1000 mL.\n"
        f"2. For use dilute 500 mL to 1000 mL with water. The dilution has pH {stated}.\n"
    )
    assert len(of_rule(review(text), "buffers.dilution-ph-meets-stated")) == found
