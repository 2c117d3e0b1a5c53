"""The ledger and the findings answer to each other, over every procedure that is kept here."""

from __future__ import annotations

from functools import cache
from pathlib import Path

import pytest

from soplint.findings.model import REASONS, SEVERITIES
from soplint.review import review_bytes
from soplint.settings import Settings

ROOT = Path(__file__).resolve().parents[2]
FOLDERS = {
    "samples": ROOT / "samples",
    "first look": ROOT / "tests" / "procedures" / "first-look",
    "second look": ROOT / "tests" / "procedures" / "second-look",
    "right": ROOT / "tests" / "procedures" / "right",
}
FILES = [
    path
    for folder in FOLDERS.values()
    for path in sorted(folder.iterdir())
    if path.suffix in (".md", ".sop")
]
VERDICTS = {"agrees", "disagrees", "not-verified"}

each_file = pytest.mark.parametrize("path", FILES, ids=[path.name for path in FILES])


@cache
def reviewed(path, settings=None):
    """The review of a file, made once."""
    if settings is None:
        return review_bytes(path.read_bytes(), path.name)
    return review_bytes(path.read_bytes(), path.name, settings)


def place(span):
    return span.line, span.column, span.end_line, span.end_column


def claims(findings):
    """Per place the findings that name it, by their own span or as related."""
    named = {}
    for number, finding in enumerate(findings):
        for key in {place(finding.span)} | {place(r.span) for r in finding.related}:
            named.setdefault(key, []).append((number, finding.rule))
    return named


def test_every_folder_holds_procedures():
    for name, folder in FOLDERS.items():
        assert sum(path.parent == folder for path in FILES) >= 10, name


@each_file
def test_each_disagreement_belongs_to_one_finding(path):
    review = reviewed(path)
    named = claims((*review.findings, *review.withheld))
    for entry in review.entries:
        if entry.verdict == "disagrees":
            owners = named.get(place(entry.span), [])
            assert len(owners) == 1, (entry.span, entry.text, owners)
            assert entry.rule == owners[0][1]


@each_file
def test_a_finding_about_a_number_names_a_disagreement(path):
    review = reviewed(path)
    disproved = {place(e.span) for e in review.entries if e.verdict == "disagrees"}
    for finding in (*review.findings, *review.withheld):
        if finding.computed is None:
            continue
        own = {place(finding.span)} | {place(r.span) for r in finding.related}
        assert own & disproved, (finding.rule, finding.span)


@each_file
def test_reasons_and_verdicts_come_from_the_closed_lists(path):
    for entry in reviewed(path).entries:
        assert entry.verdict in VERDICTS
        if entry.verdict == "not-verified":
            assert entry.reason in REASONS, (entry.span, entry.reason)
        else:
            assert entry.reason is None
            assert entry.computed is not None and entry.working, (entry.span, entry.text)
        assert (entry.rule is not None) == (entry.verdict == "disagrees")


@each_file
def test_entries_are_unique_ordered_and_apart(path):
    places = [place(e.span) for e in reviewed(path).entries]
    assert places == sorted(set(places))
    for first, second in zip(places, places[1:], strict=False):
        assert first[2:] <= second[:2], (first, second)


@each_file
def test_entries_quote_the_source(path):
    review = reviewed(path)
    for entry in review.entries:
        span = entry.span
        if span.line == span.end_line:
            line = review.lines[span.line - 1]
            assert line[span.column - 1 : span.end_column - 1] == entry.text


@each_file
def test_intervals_hold_their_values(path):
    for entry in reviewed(path).entries:
        for interval in filter(None, (entry.stated, entry.computed)):
            assert interval.low <= interval.high
            if interval.value is not None:
                assert interval.low <= interval.value * (1 + 1e-9) + 1e-12
                assert interval.value <= interval.high * (1 + 1e-9) + 1e-12


@each_file
def test_an_input_of_a_broken_relation_is_no_proof(path):
    """ "relation-open" stands only where something else of the document disagrees."""
    entries = reviewed(path).entries
    if any(e.reason == "relation-open" for e in entries):
        assert any(e.verdict == "disagrees" for e in entries)


@each_file
def test_findings_are_ordered_and_graded(path):
    findings = reviewed(path).findings
    order = [(f.span, SEVERITIES.index(f.severity)) for f in findings]
    assert order == sorted(order)
    for finding in findings:
        assert finding.message and finding.severity in SEVERITIES


@each_file
def test_a_withheld_rule_keeps_its_disagreements(path):
    """An option may withhold findings; the verdicts stay what they are."""
    full = reviewed(path)
    rules = frozenset(f.rule for f in full.findings)
    if not rules:
        assert not any(e.verdict == "disagrees" for e in full.entries)
        return
    settings = Settings(without=tuple(sorted(rules)))
    hidden = reviewed(path, settings)
    assert hidden.findings == ()
    assert hidden.withheld == full.findings
    assert hidden.entries == full.entries


@each_file
def test_the_same_again(path):
    assert review_bytes(path.read_bytes(), path.name) == reviewed(path)


def test_right_procedures_have_no_disagreement_above_remark():
    for path in FILES:
        if path.parent == FOLDERS["right"]:
            grave = [f for f in reviewed(path).findings if f.severity != "remark"]
            assert grave == [], path.name


# Quantities that take part in a preparation: each must stand in the ledger, whatever its verdict.
LISTED = {
    "dose and make-up": (
        "Dissolve 7.305 g of sodium chloride and make up to 250 mL.\n",
        {"7.305 g", "250 mL"},
    ),
    "flask filled to the mark": (
        "Dissolve 7.305 g of sodium chloride in a 250 mL volumetric flask and fill to the mark.\n",
        {"7.305 g", "250 mL"},
    ),
    "strength and volume on lines of their own": (
        "## Saline\n\nConcentration: 0.5 mol/L\n\nVolume: 250 mL\n\n- sodium chloride: 7.305 g\n",
        {"0.5 mol/L", "250 mL", "7.305 g"},
    ),
    "table of standards": (
        "## Standards from sodium chloride stock, 1000 mg/L\n\n"
        "| Standard | Stock | Flask | Result |\n|---|---|---|---|\n"
        "| S1 | 1.00 mL | 100 mL | 10 mg/L |\n| S2 | 5.00 mL | 200 mL | 25 mg/L |\n",
        {"1000 mg/L", "1.00 mL", "100 mL", "10 mg/L", "5.00 mL", "200 mL", "25 mg/L"},
    ),
    "unknown substance": (
        "## Dye, 0.1 % w/v\n\nDissolve 50 mg of quandrine blue in 50 mL of water.\n",
        {"0.1 % w/v", "50 mg", "50 mL"},
    ),
}
LISTED_OPEN: dict[str, str] = {}


@pytest.mark.parametrize(
    ("text", "quantities"),
    [
        pytest.param(
            *case,
            id=name,
            marks=(pytest.mark.xfail(strict=True, reason=LISTED_OPEN[name]),)
            if name in LISTED_OPEN
            else (),
        )
        for name, case in LISTED.items()
    ],
)
def test_nothing_is_silent(text, quantities):
    entries = review_bytes(text.encode(), "p.md").entries
    assert quantities <= {e.text for e in entries}
