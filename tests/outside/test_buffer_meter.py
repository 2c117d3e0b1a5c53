"""Standard buffers at every temperature of the published table are accepted, shifted ones are not.

Buck et al. 2002, Pure Appl. Chem. 74, 2169 (IUPAC Recommendations 2002).
"""

import csv
from pathlib import Path

import pytest

NAMES = {"borax": "borax", "phosphate-1:1": "phosphate", "phthalate": "phthalate"}
with (Path(__file__).parent / "data" / "standard_ph.csv").open(encoding="utf-8", newline="") as f:
    ROWS = [row for row in csv.DictReader(f) if row["standard"] in NAMES]
RULE = "measurement.ph-buffer-value-at-temperature"


def text(row, shift=0.0):
    ph = float(row["pH"]) + shift
    return (
        "## Meter\n\nCalibrate the meter with the "
        f"{NAMES[row['standard']]} buffer, pH {ph:.2f} at {row['temperature_C']} °C.\n"
    )


def test_rows_are_there():
    assert len(ROWS) > 30


@pytest.mark.parametrize("row", ROWS, ids=lambda r: f"{r['standard']}-{r['temperature_C']}C")
def test_published_value(review, row):
    assert not [f for f in review(text(row)).findings if f.rule == RULE]
    assert len([f for f in review(text(row, 0.08)).findings if f.rule == RULE]) == 1
