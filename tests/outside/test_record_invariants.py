"""The record, as another program reads it, over every procedure of the checkout, right or wrong.

That verdicts and findings answer to each other is held in ``tests/bench/test_ledger.py``, the
command line over the samples in ``tests/commands/test_samples_record.py``.  Here: the JSON record
of each set by itself, and that line ends and a byte order mark change nothing in it.
"""

from __future__ import annotations

import json
import math
from datetime import date
from pathlib import Path

import pytest

from soplint.reports.outcome import Outcome
from soplint.reports.record import record
from soplint.review import review_bytes
from soplint.settings import Settings

CHECKOUT = Path(__file__).resolve().parents[2]
SETS = ("samples", *(f"tests/procedures/{name}" for name in ("first-look", "second-look", "right")))
FILES = sorted(
    path for name in SETS for path in (CHECKOUT / name).iterdir() if path.suffix in (".md", ".sop")
)
SETTINGS = Settings(on=date(2026, 12, 1))
ROLES = {
    *("mass", "volume", "amount", "concentration", "fraction", "pH", "molar-mass", "density"),
    *("ratio", "factor", "temperature", "titre", "heat", "other"),
}
VERDICTS = {"agrees": "agrees", "disagrees": "disagrees", "not_verified": "not-verified"}


def record_of(data, path):
    reviewed = review_bytes(data, path.name, SETTINGS)
    whole = record(Outcome((reviewed,), (), SETTINGS, date(2026, 12, 1)))
    return json.loads(json.dumps(whole, allow_nan=False))  # a NaN or an infinite number raises


@pytest.fixture(scope="module")
def records():
    return {path: record_of(path.read_bytes(), path) for path in FILES}


@pytest.fixture
def document(records, path):
    return records[path]["documents"][0]


each_file = pytest.mark.parametrize(
    "path", [pytest.param(path, id=f"{path.parent.name}-{path.stem[:11]}") for path in FILES]
)


def test_there_are_procedures_of_each_set():
    counts = {name: sum(path.parent == CHECKOUT / name for path in FILES) for name in SETS}
    assert all(count >= 9 for count in counts.values()), counts


@each_file
def test_computed_is_in_the_stated_unit_and_finite(document):
    assert document["quantities"]
    for q in document["quantities"]:
        assert q["role"] in ROLES, q
        assert (q["computed"] is None) == (q["verdict"] == "not-verified"), q
        for side in (q["stated"], q["computed"]):
            if side is not None:
                assert all(math.isfinite(side[name]) for name in ("low", "high")), q
                assert side["unit"] == q["stated"]["unit"], q


@each_file
def test_intervals_are_apart_where_a_quantity_disagrees(document):
    """No band decides a verdict; bands only grade what is apart (design, section 5)."""
    for q in document["quantities"]:
        stated, computed = q["stated"], q["computed"]
        if q["verdict"] == "disagrees":
            apart = stated["high"] < computed["low"] or computed["high"] < stated["low"]
            assert apart, q


@each_file
def test_each_place_holds_the_text_that_is_told(document, path):
    lines = path.read_text(encoding="utf-8-sig").split("\n")
    told = document["quantities"] + document["findings"]
    told += [related for f in document["findings"] for related in f["related"]]
    told += [f["amendment"] for f in document["findings"] if f["amendment"] is not None]
    for item in told:
        if item["line"] == item["end_line"]:
            assert item["column"] < item["end_column"] <= len(lines[item["line"] - 1]) + 1
            words = lines[item["line"] - 1][item["column"] - 1 : item["end_column"] - 1]
            assert words == item.get("text", words)
    for unread in document["coverage"]["unread"]:
        assert 1 <= unread["line"] <= len(lines) and unread["text"], unread


@each_file
def test_coverage_and_summary_count_what_is_listed(records, document, path):
    coverage, quantities = document["coverage"], document["quantities"]
    summary = records[path]["summary"]
    assert coverage["quantities"] == summary["quantities"] == len(quantities)
    for key, verdict in VERDICTS.items():
        listed = sum(q["verdict"] == verdict for q in quantities)
        assert coverage[key] == summary[key] == listed
    unread = coverage["sentences_with_quantities"] - coverage["sentences_read"]
    assert unread == len(coverage["unread"]) == summary["sentences_not_read"]
    for severity in ("critical", "major", "minor", "remark"):
        assert summary[severity] == sum(f["severity"] == severity for f in document["findings"])
    assert summary["held"] == (summary["critical"] + summary["major"] > 0)


@each_file
@pytest.mark.parametrize("how", ["crlf", "cr", "bom", "utf-16"])
def test_line_ends_and_encoding_change_nothing(document, path, how):
    data = path.read_bytes()
    assert b"\r" not in data
    other = {
        "crlf": data.replace(b"\n", b"\r\n"),
        "cr": data.replace(b"\n", b"\r"),
        "bom": b"\xef\xbb\xbf" + data,
        "utf-16": data.decode("utf-8").encode("utf-16"),
    }[how]
    changed = record_of(other, path)["documents"][0]
    assert changed | {"sha256": document["sha256"]} == document
