"""Text that is no procedure, or a strange one, through a whole review.

Whatever comes in, a review or ``Unreadable`` comes out.  Bytes that are no text, missing files and
options are held in ``tests/commands`` and ``tests/intake``; here the words are readable.
"""

from __future__ import annotations

import json
import time
from datetime import date

import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st

from soplint.intake import Unreadable
from soplint.reports.outcome import Outcome
from soplint.reports.record import record
from soplint.review import review_bytes
from soplint.settings import Settings

ENDINGS = (".md", ".sop", ".txt")


def reviewed(text, name="procedure.md"):
    """The review, after its record was written: no NaN, no infinite number, all places in the text."""
    result = review_bytes(text.encode("utf-8"), name)
    outcome = Outcome((result,), (), Settings(), date(2026, 12, 1))
    json.dumps(record(outcome), allow_nan=False)
    for place in (*result.entries, *result.findings):
        assert 1 <= place.span.line <= place.span.end_line <= len(result.lines), place
    return result


# --- units and sentences that nobody knows --------------------------------------------------------


@pytest.mark.parametrize("unit", ["smoots", "firkin", "blorg/L", "mgg", "°Q", "µ"])
def test_unknown_unit_is_no_number_that_agrees(unit, grave):
    result = reviewed(
        f"## Sodium chloride, 1 mol/L, 1000 mL\n\nDissolve 58.44 {unit} of sodium chloride in water"
        " and make up to 1000 mL.\n"
    )
    assert grave(result) == []
    assert all(e.verdict != "agrees" for e in result.entries if "58.44" in e.text)


def test_unknown_unit_leaves_the_rest_reviewed(review, entry, found_at):
    result = review(
        "## Sodium chloride, 1 mol/L, 1000 mL\n\n"
        "1. Add 3 smoots of rope.\n"
        "2. Dissolve 5.844 g of sodium chloride in water and make up to 1000 mL.\n"
    )
    assert entry(result, "5.844 g").verdict == "disagrees"
    assert found_at(result, 4)


UNREADABLE = "Thereupon of 5 mL the and to into 3 g whichever with of of."


def test_a_sentence_without_sense_is_accounted_for(review, entry):
    """Both of its numbers are in the ledger, among what was set aside, or listed as not read."""
    result = review(
        f"## Sodium chloride, 1 mol/L, 1000 mL\n\n{UNREADABLE}\n\n"
        "Dissolve 58.44 g of sodium chloride in water and make up to 1000 mL.\n"
    )
    assert entry(result, "58.44 g").verdict == "agrees"
    listed = sum(e.span.line == 3 for e in result.entries)
    aside = sum(result.coverage.set_aside.values())
    assert listed + aside == 2 or (3, UNREADABLE) in result.coverage.unread


# --- shapes ---------------------------------------------------------------------------------------


@pytest.mark.parametrize("name", [f"a{ending}" for ending in ENDINGS])
@pytest.mark.parametrize("text", ["", "\n", " \t \n\n", "\ufeff", "---\n---\n", "\n" * 1000])
def test_empty_text(text, name):
    result = reviewed(text, name)
    assert result.entries == () and result.findings == ()
    assert result.coverage.sentences_with_quantities == 0


@pytest.mark.parametrize("name", [f"a{ending}" for ending in ENDINGS])
def test_only_headings(name):
    result = reviewed("# Buffers\n\n## Acetate\n\n### Purpose\n\n## Acetate again\n", name)
    assert result.findings == () and result.entries == ()


def test_headings_that_promise_without_a_recipe(grave):
    result = reviewed("# Buffers\n\n## 0.1 mol/L acetate buffer pH 4.6, 500 mL\n\n## End\n")
    assert grave(result) == []
    assert {e.verdict for e in result.entries} == {"not-verified"}


BRACKETS = {
    "round": ("(", ")"),
    "square": ("[", "]"),
    "mixed": ("([{", "}])"),
    "unclosed": ("(", ""),
    "unopened": ("", ")"),
    "strong": ("**(", ")**"),
}


@pytest.mark.parametrize("depth", [3, 50, 2000])
@pytest.mark.parametrize("kind", BRACKETS)
def test_nested_brackets(kind, depth):
    before, after = BRACKETS[kind]
    line = f"Dissolve 5.844 g of sodium chloride {before * depth}0.1 mol/L{after * depth} in water."
    start = time.perf_counter()
    result = reviewed(f"## Salt\n\n{line}\n\nMake up to 1000 mL with water.\n")
    assert time.perf_counter() - start < HANG
    assert any(e.text == "5.844 g" for e in result.entries) or result.coverage.unread


NUMBERS = [
    "0",
    "0.0",
    "00000",
    "-5",
    "1e308",
    "1e-320",
    "1E99999",
    "10^999999",
    "1 × 10^400",
    "9" * 400,
    "0." + "0" * 400 + "1",
    "1" + ",000" * 200,
    "1/0",
    "0/0",
    "5 ± 1e400",
    "1 to 9" + "9" * 350,
    "٥",
    "½",
    "inf",
    "nan",
]
PATTERNS = [
    "## Sodium chloride, {n} mol/L, 1000 mL\n\nDissolve {n} g of NaCl and make up to {n} mL.\n",
    "## Buffer, pH {n} at {n} °C, 100 mL\n\nMix {n} g of KH2PO4 and {n} g of Na2HPO4, make up to {n} mL.\n",
    "## {n}x stock, {n} mL\n\nDilute {n} mL of {n}x stock to {n} L ({n} : {n}).\n",
    "- NaCl, M = {n} g/mol\n- HCl {n} %, density {n} g/mL ({n} mol/L)\n",
    "Each mL of {n} mol/L NaOH is equivalent to {n} mg of KHP.\n",
    "| Salt | g/mol | mM | g for {n} L |\n|---|---|---|---|\n| NaCl | {n} | {n} | {n} |\n",
]


@pytest.mark.parametrize("number", NUMBERS, ids=[n[:12] for n in NUMBERS])
@pytest.mark.parametrize("pattern", range(len(PATTERNS)))
def test_enormous_and_odd_numbers(number, pattern):
    reviewed(PATTERNS[pattern].replace("{n}", number))
    reviewed(PATTERNS[pattern].replace("{n}", number), "a.sop")


def test_fold_of_nothing():
    reviewed(
        "## 0x buffer, 100 mL\n\n- 5 g of NaCl\n\n## 1x buffer, 1 L\n\n"
        "Dilute 10 mL of 10x buffer to 1 L.\n"
    )


# --- size -----------------------------------------------------------------------------------------

# One line of many pieces: words without a full stop are one sentence, however long.
PIECES = {
    "words": "lorem ipsum dolor ",
    "steps": "Dissolve 5 g of NaCl in 10 mL of water. ",
    "digits": "1234567890",
    "letters": "abcdefghij",
    "percent signs": "% ",
    "formulas": "Na2HPO4·12H2O",
    "names": "NaCl ",
    "commands": "add ",
    "temperatures": "at 5 °C ",
    "commas": "a, b, ",
    "doses": "5 g NaCl, ",
    "volumes": "5 mL ",
    "brackets": "(5 g) ",
    "ratios": "1:2:",
    "equations": "5 g = ",
    "volumes with to": "to 5 mL ",
}
LONG = ("words", "steps", "digits", "letters", "formulas")
HANG = 20.0  # seconds; 200 kB of steps take 2 s


@pytest.mark.parametrize("kind", LONG)
def test_one_line_of_200_kB(kind):
    part = PIECES[kind]
    start = time.perf_counter()
    reviewed(part * (200_000 // len(part)))
    assert time.perf_counter() - start < HANG


def seconds(text):
    best = 9.0
    for _ in range(3):
        start = time.perf_counter()
        review_bytes(text.encode(), "a.md")
        best = min(best, time.perf_counter() - start)
    return best


@pytest.mark.parametrize("kind", PIECES)
def test_time_grows_with_the_size(kind):
    part = PIECES[kind]
    few, many = (seconds(part * (size // len(part))) for size in (800, 6_400))
    assert many < 13 * few + 0.02  # eight times the size: linear is 8, quadratic 64


# The grammar nests one level for each of these; no reader may call itself for each.
ROWS = {
    "strengths": "1 mol/L ",
    "percents": "5 % ",
    "pH": "pH 5 ",
    "alternatives": "5 g or ",
    "brackets of an amount": "(1 mol/L) ",
}


@pytest.mark.parametrize("kind", ROWS)
def test_a_row_of_strengths_is_no_fault(kind):
    result = review_bytes(("5 mL " + ROWS[kind] * 2000).encode(), "a.md")
    assert result.entries or result.coverage.unread


@pytest.mark.parametrize("separator", ["; ", ", ", " and ", " ", ") ("])
def test_a_long_sentence_loses_no_quantity(separator):
    """It is cut before it is read; every one of its quantities is in the ledger all the same."""
    doses = [f"{number} mg NaCl" for number in range(1001, 2001)]
    result = reviewed("Weigh " + separator.join(doses) + ".\n")
    assert [e.text for e in result.entries] == [dose[:7] for dose in doses]


# --- anything -------------------------------------------------------------------------------------

WORDS = (
    "Dissolve|Weigh|Add|Dilute|Make up|to|with|in|of|and|the|each|per|buffer|stock|water|pH|adjust"
    "|sodium chloride|NaCl|HCl|acetic acid|Na2HPO4·2H2O|Tris|phosphate|5|0.1|1000|37|10x|1:10|7.4"
    "|g|mg|mL|L|mol/L|mM|%|% w/v|°C|M =|g/mol|final|equivalent|Titrate|:|,|.|;|(|)|[|]|\n|\n\n|## |- "
    "|1. |=|+|×|/|±|about|~|–||<br>|**|$|µ|²|−"
).split("|")


@settings(max_examples=150, deadline=None)
@given(st.lists(st.sampled_from(WORDS), max_size=40), st.sampled_from(ENDINGS))
def test_any_order_of_laboratory_words(words, ending):
    reviewed(" ".join(words), "a" + ending)


@settings(max_examples=100, deadline=None)
@given(st.text(max_size=200), st.sampled_from(ENDINGS))
@example("\x85 5 g\u2028 NaCl", ".md")
def test_any_text(text, ending):
    try:
        reviewed(text, "a" + ending)
    except Unreadable as refused:
        assert str(refused)


@settings(max_examples=100, deadline=None)
@given(st.data())
def test_a_sample_cut_and_spliced_anywhere(data):
    """Real sentences torn apart: a piece is taken out or put in twice."""
    text = data.draw(st.sampled_from(SAMPLES))
    start = data.draw(st.integers(0, len(text)))
    end = data.draw(st.integers(start, min(len(text), start + 200)))
    piece = text[start:end] if data.draw(st.booleans()) else ""
    reviewed(text[:start] + piece + piece + text[end:])


SAMPLES = [
    "# Phosphate buffer\n\n## Buffer P1, 0.1 mol/L, pH 7.4, 1000 mL\n\n1. Weigh 14.51 g of disodium"
    " hydrogen phosphate dihydrate and 2.55 g of sodium dihydrogen phosphate monohydrate.\n2. Dissolve"
    " in about 850 mL of water and make up to 1000 mL.\n",
    "# Titrant\n\n- Hydrochloric acid, 37 % w/w, density 1.18 g/mL (12.0 mol/L).\n\n## Hydrochloric"
    " acid, 0.1 mol/L\n\nRun 16.7 mL of the acid into 1500 mL of water and make up to 2000 mL.\n\nEach"
    " mL of 0.1 mol/L hydrochloric acid is equivalent to 5.30 mg of sodium carbonate.\n",
    "# Stocks\n\n| Salt | M (g/mol) | mmol/L | g for 1 L |\n|---|---|---|---|\n| NaCl | 58.44 | 150 |"
    " 8.77 |\n| MgCl2·6H2O | 203.30 | 10 | 2.03 |\n\n10x stock: dilute 100 mL to 1 L (1 in 10).\n",
]
