"""The worksheet lists every quantity, for people, spreadsheets and programs."""

import csv
import io
import json
from dataclasses import replace

from soplint.reports import worksheet
from soplint.reports.layout import Page

EXPECTED = """\
buffers/acetate.md: Acetate buffer 0.0676 mol/L, 1 L

   1  # Acetate buffer 0.0676 mol/L, 1 L
      0.0676 mol/L  sodium acetate             not verified: relation-open

   2  Weigh 4.87 g of sodium acetate trihydrate.
      4.87 g        sodium acetate trihydrate  disagrees                    9.199 g
        0.0676 mol/L × 1 L × 136.08 g/mol = 9.199 g

   3  Dissolve and make up to 1000 mL.
      1000 mL                                  agrees                       at most 1000 mL

3 quantities: 1 agree, 1 disagree, 1 not verified.
Set aside: 1 speed, 2 time.
Not read, line 4: Add a pinch of 5 % magic.
Note: read as Latin-1
"""


def test_text(made):
    assert "".join(f"{line}\n" for line in worksheet.as_text(made.review(), Page())) == EXPECTED


def test_wide_characters_count_two_columns(made):
    first, *rest = made.entries()
    wide = replace(first, of="醋酸钠")
    lines = list(worksheet.as_text(replace(made.review(), entries=(wide, *rest)), Page()))
    plain = list(worksheet.as_text(made.review(), Page()))
    assert lines[3].index("not") == plain[3].index("not") - 3  # three characters, six columns


def test_json_has_the_quantities_of_the_record(made):
    document = json.loads("".join(worksheet.as_json(made.review(), Page())))
    assert document["record"] == "soplint-worksheet"
    assert [q["verdict"] for q in document["quantities"]] == ["not-verified", "disagrees", "agrees"]
    assert document["quantities"][2]["computed"] == {
        "value": None,
        "unit": "mL",
        "low": None,
        "high": 1000.1,
    }


def rows(review):
    text = "".join(line + "\n" for line in worksheet.as_csv(review, Page()))
    return list(csv.reader(io.StringIO(text)))


def test_csv_has_one_row_per_quantity(made):
    head, *body = rows(made.review())
    assert tuple(head) == worksheet.COLUMNS
    assert [row[2] for row in body] == ["0.0676 mol/L", "4.87 g", "1000 mL"]
    assert body[1][7:9] == ["9.19945", "g"]


def test_csv_holds_no_live_formula(made):
    first, *_ = made.entries()
    evil = replace(first, text="-5 °C", of="=HYPERLINK(1)", working="-cmd")
    _, row = rows(replace(made.review(), entries=(evil,)))
    assert row[2] == "-5 °C"  # a negative quantity is no formula
    assert row[3] == "'=HYPERLINK(1)"
    assert row[9] == "'-cmd"


def test_text_is_inert(made):
    first, *_ = made.entries()
    evil = replace(first, of="\x1b]0;x\x07", working="a\u202eb")
    report = list(worksheet.as_text(replace(made.review(), entries=(evil,)), Page()))
    assert all(char.isprintable() for line in report for char in line)
