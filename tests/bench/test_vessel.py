"""The step table of a vessel: volume, temperature, pH and contents after each step."""

import pytest

from soplint.bench import carry_out
from soplint.bench.vessel import vessels
from soplint.intake import read_bytes
from soplint.notation.document import read_document

TRIS = """5 Tris buffer, 50 mmol/L, pH 8.0 at 4 °C, 1000 mL
5.1 Dissolve 6.06 g of Tris base in 900 mL of water.
5.2 Adjust to pH 8.0 at 4 °C with 1 mol/L hydrochloric acid.
5.3 Make up to 1000 mL with water.
"""


def made(text):
    return list(vessels(carry_out(read_document(read_bytes(text.encode(), "a.sop")))))


def test_steps_of_a_buffer():
    (vessel,) = made(TRIS)
    salt, water, set_ph, mark = vessel.steps
    assert salt.litres is None and salt.ph is None  # nothing wet yet
    assert water.litres == pytest.approx(0.9036, abs=1e-3)
    assert water.ph == pytest.approx(10.4, abs=0.2)  # Tris base alone
    assert set_ph.degrees == 4.0
    assert set_ph.ph == pytest.approx(8.0, abs=0.02)
    assert mark.litres == 1.0
    assert dict(mark.holds)["HCl"] == pytest.approx(0.042, abs=0.003)


def test_unknown_contents_have_no_ph():
    (vessel,) = made(TRIS.replace("6.06 g of Tris base", "6.06 g of meat extract"))
    assert vessel.steps[-1].ph is None
    assert vessel.steps[-1].note


def test_no_preparation_no_vessel():
    assert made("Wear gloves.\n") == []
