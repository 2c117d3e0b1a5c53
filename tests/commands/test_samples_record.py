"""The record over the sample procedures keeps its invariants, whatever the rules say."""

import json
import subprocess
import sys
from pathlib import Path

import pytest

SAMPLES = Path(__file__).resolve().parents[2] / "samples"
CHECKOUT = SAMPLES.parent
NUMBERS = ("line", "column", "end_line", "end_column")
CLASSES = ("critical", "major", "minor", "remark")


def soplint(*arguments, input=None):
    return subprocess.run(
        [sys.executable, "-m", "soplint", *arguments],
        input=input,
        capture_output=True,
        cwd=CHECKOUT,
        timeout=120,
    )


def review(*arguments, input=None):
    done = soplint("review", "--as", "json", "--on", "2026-12-01", *arguments, input=input)
    assert done.stderr == b""
    return done


@pytest.fixture(scope="module")
def printed():
    return review("samples/").stdout


@pytest.fixture(scope="module")
def documents(printed):
    documents = json.loads(printed)["documents"]
    assert documents
    return documents


def span(value):
    return tuple(value[name] for name in NUMBERS)


def about_numbers(document):
    """The findings, withheld ones too, that rest on a computed number."""
    every = document["findings"] + document["withheld"]
    return [finding for finding in every if finding["computed"] is not None]


def places(finding):
    return {span(finding), *(span(related) for related in finding["related"])}


def test_every_sample_is_reviewed(documents):
    files = {p.name for p in SAMPLES.iterdir() if p.suffix in (".sop", ".md")}
    reviewed = {Path(document["path"]).name for document in documents}
    assert {name for name in files if name != "README.md"} <= reviewed
    assert all(document["path"].startswith("samples/") for document in documents)


def test_every_quantity_has_one_verdict_with_what_belongs_to_it(documents):
    for document in documents:
        seen = [span(quantity) for quantity in document["quantities"]]
        assert seen == sorted(set(seen)), document["path"]
        for quantity in document["quantities"]:
            unverified = quantity["verdict"] == "not-verified"
            assert unverified == (quantity["reason"] is not None), quantity
            assert unverified or quantity["computed"] is not None, quantity


def test_every_disagreement_belongs_to_one_finding_and_the_reverse(documents):
    for document in documents:
        wrong = {span(q) for q in document["quantities"] if q["verdict"] == "disagrees"}
        findings = about_numbers(document)
        for place in wrong:
            owners = [finding for finding in findings if place in places(finding)]
            assert len(owners) == 1, (document["path"], place)
        for finding in findings:
            assert places(finding) & wrong, (document["path"], finding["message"])


def test_every_place_holds_the_text_that_is_told(documents):
    for document in documents:
        text = (CHECKOUT / document["path"]).read_text(encoding="utf-8-sig")
        lines = text.split("\n")
        told = document["quantities"] + document["findings"]
        told += [related for finding in document["findings"] for related in finding["related"]]
        for item in told:
            if item["line"] == item["end_line"]:
                line = lines[item["line"] - 1]
                assert line[item["column"] - 1 : item["end_column"] - 1] == item["text"]


def test_counts_add_up(printed, documents):
    summary = json.loads(printed)["summary"]
    assert summary["documents"] == len(documents)
    totals = dict.fromkeys(("quantities", "agrees", "disagrees", "not_verified"), 0)
    for document in documents:
        coverage = document["coverage"]
        assert coverage["quantities"] == len(document["quantities"])
        assert coverage["sentences_with_quantities"] - coverage["sentences_read"] == len(
            coverage["unread"]
        )
        for name in totals:
            totals[name] += coverage[name]
    assert totals == {name: summary[name] for name in totals}
    assert totals["quantities"] == sum(totals.values()) - totals["quantities"]
    findings = [finding for document in documents for finding in document["findings"]]
    for severity in CLASSES:
        open_ones = [f for f in findings if f["severity"] == severity and f["permit"] is None]
        assert summary[severity] == len(open_ones)


def test_findings_stand_in_order_of_place(documents):
    for document in documents:
        assert [span(f)[:2] for f in document["findings"]] == sorted(
            span(f)[:2] for f in document["findings"]
        )


def test_same_bytes_on_each_run_and_over_processes(printed):
    assert review("samples/").stdout == printed
    assert review("--workers", "2", "samples/").stdout == printed


def test_one_document_reads_the_same_alone_and_from_standard_input(documents):
    for document in documents[:3]:
        path = document["path"]
        alone = json.loads(review(path).stdout)["documents"]
        assert alone == [document]
        data = (CHECKOUT / path).read_bytes()
        piped = review("--named", path, "-", input=data).stdout
        assert json.loads(piped)["documents"] == [document]


def test_lines_and_text_tell_the_same_findings_as_the_record(documents):
    expected = [
        f"{document['path']}:{f['line']}:{f['column']}: {f['severity']}, {f['rule']}: "
        for document in documents
        for f in document["findings"]
    ]
    for form in ("lines", "text"):
        done = soplint("review", "--as", form, "samples/")
        first = [
            line
            for line in done.stdout.decode().splitlines()
            if line.startswith("samples/") and ": " in line
        ]
        assert len(first) == len(expected)
        assert all(line.startswith(start) for line, start in zip(first, expected, strict=True))


def test_worksheet_has_every_quantity_of_the_record(documents):
    for document in documents[:3]:
        done = soplint("worksheet", "--as", "json", document["path"])
        assert json.loads(done.stdout)["quantities"] == document["quantities"]
        assert soplint("worksheet", document["path"]).returncode == 0
