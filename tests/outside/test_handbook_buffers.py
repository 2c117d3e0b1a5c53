"""Handbook buffer tables as procedures: what the table itself prints is never held against it.

Tables: Bates & Bower 1956, Anal. Chem. 28, 1322 (with Bower & Bates 1955); Sørensen's M/15
phosphates (Documenta Geigy); acetate after Lurie; glycine, citrate after Gomori 1955; carbonate
after Delory & King 1945.  Each row of the data names its source and says whether it was confirmed
by a second one or is from memory.
"""

from __future__ import annotations

import csv
from pathlib import Path

import pytest

DATA = Path(__file__).parent / "data"
MOVED = 0.6
ROUNDING = 0.005  # the record prints a computed pH with two decimals
# The old tables lie about 0.04 below the present scale; a procedure that copies them does too.
SCALE = {"present": 0.0, "Sorensen": 0.04}

# No pH is computed for a strong acid or base beside a neutral salt.
UNCOMPUTED = {
    "potassium chloride + hydrochloric acid (Bates & Bower)",
    "potassium chloride + sodium hydroxide (Bates & Bower)",
}
# The computed pH is 3.39: it needs the remark of DOUBTFUL.  A row that is mended makes its test fail
# until it is taken out here.
KNOWN_OPEN = {("glycine + hydrochloric acid (Sorensen, after Gomori)", "3.6")}
# Tables that no calculation reproduces as printed, see the note of the data: the design asks for a
# remark that names the table, which is not made yet.
DOUBTFUL = {
    "citric acid + trisodium citrate (Gomori, after Lillie)",
    "sodium carbonate + sodium hydrogen carbonate (Delory & King)",
}


def read():
    with (DATA / "handbook_tables.csv").open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))


ROWS = read()
SOUND = [row for row in ROWS if row["table"] not in UNCOMPUTED | DOUBTFUL]
SORENSEN = [row for row in ROWS if row["table"].startswith("M/15")]


def name_of(row):
    table = row["table"].partition(" (")[0].replace(" ", "-")
    return f"{table}-pH{row['pH']}"


def each(rows, known_open=frozenset()):
    why = "computed pH 3.39: no remark names a handbook table yet"
    made = []
    for row in rows:
        is_open = (row["table"], row["pH"]) in known_open
        marks = pytest.mark.xfail(strict=True, reason=why) if is_open else ()
        made.append(pytest.param(row, id=name_of(row), marks=marks))
    return pytest.mark.parametrize("row", made)


def procedure(row, ph):
    """The row as a procedure that states a pH."""
    first = f"{row['first_mL']} mL of {row['first_mol_L']} mol/L {row['first']}"
    second = f"{row['second_mL']} mL of {row['second_mol_L']} mol/L {row['second']}"
    return (
        f"## Buffer, pH {ph} at {row['temperature_C']} °C, {row['final_mL']} mL\n\n"
        f"1. Pipette {first} into a volumetric flask.\n"
        f"2. Add {second}.\n"
        f"3. Make up to {row['final_mL']} mL with water.\n"
    )


def test_the_tables_are_whole():
    assert len(ROWS) == 207
    assert {row["table"] for row in ROWS} > UNCOMPUTED | DOUBTFUL
    assert len({row["table"] for row in SOUND}) == 10
    assert {(row["table"], row["pH"]) for row in SOUND} > KNOWN_OPEN


@each(SOUND, KNOWN_OPEN)
def test_the_printed_ph_agrees(review, entry, grave, row):
    reviewed = review(procedure(row, row["pH"]))
    assert grave(reviewed) == []
    stated = entry(reviewed, f"pH {row['pH']}")
    assert stated.verdict == "agrees"
    assert stated.computed is not None and stated.computed.value is not None
    gap = stated.computed.value - float(row["pH"]) - SCALE[row["scale"]]
    assert abs(gap) <= float(row["tolerance"]) + ROUNDING


@each(SOUND)
def test_another_ph_is_found(review, entry, found_at, row):
    for moved in (float(row["pH"]) - MOVED, float(row["pH"]) + MOVED):
        wrong = f"{moved:.2f}"
        reviewed = review(procedure(row, wrong))
        assert entry(reviewed, f"pH {wrong}").verdict == "disagrees"
        assert found_at(reviewed, 1)


@each([row for row in ROWS if row["table"] in UNCOMPUTED])
def test_what_is_not_computed_is_said_and_not_held(review, entry, grave, row):
    reviewed = review(procedure(row, row["pH"]))
    assert grave(reviewed) == []
    assert entry(reviewed, f"pH {row['pH']}").verdict in ("agrees", "not-verified")


@pytest.mark.xfail(strict=True, reason="no remark names a handbook table yet")
@pytest.mark.parametrize("table", sorted(DOUBTFUL))
def test_a_doubtful_table_is_no_more_than_a_remark(review, grave, table):
    rows = [row for row in ROWS if row["table"] == table]
    assert [words for row in rows for words in grave(review(procedure(row, row["pH"])))] == []


# --- other shapes of the same table ---------------------------------------------------------------


def as_table(rows):
    """The table as it is printed: a row for each pH, a column for each solution."""
    lines = [
        "## M/15 phosphate buffers at 20 °C",
        "",
        "| pH | KH2PO4 0.06667 mol/L | Na2HPO4 0.06667 mol/L |",
        "|---|---|---|",
    ]
    lines += [f"| {ph} | {row['second_mL']} mL | {row['first_mL']} mL |" for ph, row in rows]
    return "\n".join(lines) + "\n"


def test_sorensen_as_one_table(review, grave):
    reviewed = review(as_table([(row["pH"], row) for row in SORENSEN]))
    assert grave(reviewed) == []
    printed = [e for e in reviewed.entries if e.role == "pH"]
    assert [e.text for e in printed] == [row["pH"] for row in SORENSEN]
    assert {e.verdict for e in printed} == {"agrees"}


def test_one_wrong_row_of_a_table_is_found(review, found_at):
    rows = [(row["pH"], row) for row in SORENSEN]
    rows[5] = (f"{float(rows[5][0]) + MOVED:.3f}", rows[5][1])
    reviewed = review(as_table(rows))
    first_row = 5
    lines = [n for n in range(1, 30) if found_at(reviewed, n)]
    assert lines == [first_row + 5]


WEIGHED = """# Phosphate buffers

## Solution {a}, 1000 mL

Dissolve 9.073 g of potassium dihydrogen phosphate in water and make up to 1000 mL.

## Solution {b}, 1000 mL

Dissolve 11.87 g of disodium hydrogen phosphate dihydrate in water and make up to 1000 mL.

## Phosphate buffer, pH {ph} at 20 °C, 100 mL

Mix {first} mL of solution {a} and {second} mL of solution {b}.
"""
NAMES = [
    pytest.param("P1", "P2", id="P1-P2"),
    pytest.param("K", "N", id="K-N"),
    pytest.param("A", "B", id="A-B"),
]


@pytest.mark.parametrize(("a", "b"), NAMES)
def test_sorensen_from_weighed_stocks(review, entry, grave, found_at, a, b):
    """9.073 g KH2PO4 and 11.87 g Na2HPO4·2H2O per litre, as the table prescribes (from memory)."""
    for row in SORENSEN:
        if (row["table"], row["pH"]) in KNOWN_OPEN:
            continue  # judged above
        mixed = {"a": a, "b": b, "first": row["second_mL"], "second": row["first_mL"]}
        right = review(WEIGHED.format(ph=row["pH"], **mixed))
        assert grave(right) == []
        assert entry(right, f"pH {row['pH']}").verdict == "agrees"
        wrong = review(WEIGHED.format(ph=f"{float(row['pH']) + MOVED:.2f}", **mixed))
        assert found_at(wrong, 11)
