"""Classes of disagreements at the edges of their bands (design: amounts 3 %, 8 %; weak; one figure)."""

from __future__ import annotations

import pytest

from soplint.bench.preparation import FinalVolume, Stated
from soplint.bench.relation import Relation
from soplint.checks.bands import lower, milder, severity
from soplint.findings.model import SEVERITIES, Interval
from soplint.intake.model import Text
from soplint.quantities.model import Measure
from soplint.review import review_bytes


def relation(deviation, provenance="made-up", one_figure=False, exact=False):
    """A mass off by ``deviation``, in a volume of the provenance."""
    measure = Measure(0, 5, "mass", 1.0, 0.995, 1.005, "g", 1.0, 3)
    stated = Stated(Text("1.00 g", 1, 1), measure)
    return Relation(
        "mass",
        stated,
        "sodium chloride",
        Interval(1 / (1 + deviation), "g", 0.0, 9.0),
        False,
        deviation,
        "worked out",
        volume=FinalVolume(1.0, 0.005, provenance, stated),
        exact=exact,
        one_figure=one_figure,
    )


PLAIN = [
    (0.0299, "remark"),
    (0.0301, "minor"),
    (0.0799, "minor"),
    (0.0801, "major"),
    (0.5, "major"),
    (9.0, "major"),
    (-0.0299, "remark"),
    (-0.0301, "minor"),
    (-0.0799, "minor"),
    (-0.0801, "major"),
    (-0.999, "major"),
]


@pytest.mark.parametrize(("deviation", "grade"), PLAIN)
@pytest.mark.parametrize("provenance", ["made-up", "mark", "total", "heading", "column", "sum"])
def test_plain_bands(deviation, grade, provenance):
    assert severity(relation(deviation, provenance), False) == grade
    assert severity(relation(deviation, provenance), True) == grade


@pytest.mark.parametrize(
    ("deviation", "grade"),
    [
        (0.02, None),
        (0.0499, None),
        (0.0501, "remark"),
        (0.0799, "remark"),
        (0.0801, "minor"),
        (9.0, "minor"),
        (-0.0499, None),
        (-0.0501, "remark"),
        (-0.0801, "minor"),
    ],
)
def test_weak_volume_is_one_class_milder_and_silent_under_5_percent(deviation, grade):
    assert severity(relation(deviation, "weak"), False) == grade
    assert severity(relation(deviation, "weak"), True) == grade


@pytest.mark.parametrize(
    ("deviation", "cause", "grade"),
    [
        (0.0501, False, "minor"),
        (0.0801, False, "minor"),
        (0.2499, False, "minor"),
        (0.2501, False, "major"),
        (-0.2499, False, "minor"),
        (-0.2501, False, "major"),
        (0.0801, True, "major"),
        (-0.2, True, "major"),
        (0.0501, True, "minor"),
    ],
)
def test_one_figure_is_major_above_25_percent_or_with_a_cause(deviation, cause, grade):
    assert severity(relation(deviation, one_figure=True), cause) == grade


def test_weak_and_one_figure():
    assert severity(relation(0.2, "weak", one_figure=True), False) == "remark"
    assert severity(relation(0.3, "weak", one_figure=True), False) == "minor"


@pytest.mark.parametrize("deviation", [0.0021, 0.01, 0.05, -0.0021, -0.5])
def test_exact_claims_have_no_percent_band(deviation):
    assert severity(relation(deviation, exact=True), False) == "major"


def test_no_volume_needed():
    plain = relation(0.2)
    without = Relation("twofold", plain.tested, None, plain.computed, False, 0.2, "worked out")
    assert severity(without, False) == "major"


def test_no_deviation_is_milder_than_a_smaller_one():
    order = {name: number for number, name in enumerate(reversed(SEVERITIES))} | {None: -1}
    for provenance in ("made-up", "weak"):
        for one_figure in (False, True):
            for cause in (False, True):
                grades = [
                    order[severity(relation(step / 1000, provenance, one_figure), cause)]
                    for step in range(1, 600)
                ]
                assert grades == sorted(grades)
                assert max(grades) > min(grades)


def test_lower_and_milder():
    assert [lower(name) for name in SEVERITIES] == ["major", "minor", "remark", "remark"]
    assert milder("critical", "minor") == milder("minor", "critical") == "minor"
    assert milder("remark", "remark") == "remark"


# --- the same edges in a review ------------------------------------------------------------------------

# 0.500 mol/L × 1 L × 58.44 g/mol = 29.22 g
SALT = (
    "## Sodium chloride, 0.500 mol/L\n\nDissolve {:.3f} g of sodium chloride and make up to 1 L.\n"
)
WEAK = "## Sodium chloride, 0.500 mol/L\n\nDissolve {:.3f} g of sodium chloride in 1 L of water.\n"
ONE = "## Sodium chloride, 0.5 mol/L\n\nDissolve {:.3f} g of sodium chloride and make up to 1 L.\n"


@pytest.mark.parametrize(
    ("text", "deviation", "grades"),
    [
        (SALT, 0.001, []),
        (SALT, 0.028, ["remark"]),
        (SALT, 0.032, ["minor"]),
        (SALT, 0.078, ["minor"]),
        (SALT, 0.083, ["major"]),
        (SALT, -0.028, ["remark"]),
        (SALT, -0.032, ["minor"]),
        (SALT, -0.078, ["minor"]),
        (SALT, -0.083, ["major"]),
        (WEAK, 0.045, []),
        (WEAK, 0.055, ["remark"]),
        (WEAK, 0.083, ["minor"]),
        (WEAK, 0.300, ["minor"]),
        (ONE, 0.045, []),
        (ONE, 0.070, ["minor"]),
        (ONE, 0.150, ["minor"]),
        (ONE, 0.240, ["minor"]),
        (ONE, 0.270, ["major"]),
        (ONE, 1.000, ["major"]),
    ],
)
def test_edges_in_a_review(text, deviation, grades):
    review = review_bytes(text.format(29.22 * (1 + deviation)).encode(), "p.md")
    assert [f.severity for f in review.findings] == grades


# Exact claims: M(KCl) = 74.55 g/mol; mg of citric acid per mL: 0.1 × 192.12 / 3 = 6.404.
MOLAR = "## Reagents\n\n- potassium chloride (M = {} g/mol)\n"
EQUIVALENT = (
    "## Titration\n\n1 mL of 0.1000 mol/L sodium hydroxide corresponds to {} mg of citric acid.\n"
)
PH = """\
## Phosphate buffer pH {} at 25 °C

Dissolve 3.39 g of potassium dihydrogen phosphate and 3.53 g of anhydrous disodium hydrogen phosphate
in water and make up to 1 L.
"""


@pytest.mark.parametrize(
    ("text", "number", "grades"),
    [
        (MOLAR, "74.55", []),
        (MOLAR, "74.6", []),
        (MOLAR, "74.60", []),  # 0.07 %: older tables differ as much
        (MOLAR, "75.20", ["minor"]),  # 0.9 %
        (MOLAR, "75.40", ["major"]),  # 1.1 %
        (EQUIVALENT, "6.404", []),
        (EQUIVALENT, "6.40", []),
        (EQUIVALENT, "6.450", ["critical"]),
        (EQUIVALENT, "19.21", ["critical"]),
        # computed 6.86, allowance 0.10 and the uncertainty of the pKa
        (PH, "6.86", []),
        (PH, "6.95", []),
        (PH, "7.2", ["minor"]),
        (PH, "7.4", ["major"]),
        (PH, "6.5", ["minor"]),
        (PH, "6.3", ["major"]),
    ],
)
def test_edges_of_other_kinds(text, number, grades):
    review = review_bytes(text.format(number).encode(), "p.md")
    assert [f.severity for f in review.findings] == grades
