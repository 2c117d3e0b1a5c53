"""The JSON record keeps its contract: keys, their order, no NaN, the same bytes on each run."""

import json
from datetime import date
from math import nan
from pathlib import Path

from soplint.findings.model import Interval
from soplint.reports.digests import constants_digest, rules_digest, settings_digest
from soplint.reports.layout import Page
from soplint.reports.outcome import NotReviewed, Outcome
from soplint.reports.quantities import interval
from soplint.reports.record import report
from soplint.settings import Settings

KEYS = {
    "": "record record_version reviewed_on tool rules_off terms_changed cautions not_reviewed "
    "documents summary",
    "tool": "name version rules_digest constants_digest settings_digest",
    "not_reviewed": "path reason",
    "documents": "path sha256 title quantities findings withheld coverage",
    "quantities": "line column end_line end_column text of role verdict reason stated computed "
    "working rule",
    "stated": "value unit low high",
    "computed": "value unit low high",
    "findings": "rule severity line column end_line end_column text message stated computed "
    "working cause cause_kind amendment related permit caution see",
    "amendment": "line column end_line end_column replacement",
    "related": "line column end_line end_column text message",
    "permit": "reason approved_by on until",
    "coverage": "quantities agrees disagrees not_verified sentences_with_quantities "
    "sentences_read unread set_aside pairs",
    "unread": "line text",
    "pairs": "assessed not_assessed",
    "summary": "documents held critical major minor remark under_permit quantities agrees "
    "disagrees not_verified sentences_not_read",
}


def printed(outcome):
    return "".join(report(outcome, Page()))


def walk(value, name=""):
    """Every object of a record with the key that it stands under."""
    if isinstance(value, dict):
        yield name, value
        for key, inner in value.items():
            yield from walk(inner, key)
    elif isinstance(value, list):
        for inner in value:
            yield from walk(inner, name)


def test_keys_and_their_order(made):
    missed = (NotReviewed("gone.md", "there is no such file or folder"),)
    run = made.outcome(
        made.review(made.finding(), made.finding(permit=made.permit), withheld=(made.finding(),)),
        missed=missed,
    )
    seen = set()
    for name, value in walk(json.loads(printed(run))):
        if name == "set_aside":
            continue
        wanted = KEYS["findings" if name == "withheld" else name]
        assert list(value) == wanted.split(), name
        seen.add(name)
    assert seen == {*KEYS, "withheld"}


def test_values_of_the_record(made):
    record = json.loads(printed(made.outcome(made.review(made.finding()))))
    assert record["record"] == "soplint-review"
    assert record["record_version"] == 1
    assert record["reviewed_on"] == "2026-12-01"
    assert record["summary"]["held"] is True
    assert record["summary"]["quantities"] == 3
    assert "buffers/acetate.md: read as Latin-1" in record["cautions"]
    document = record["documents"][0]
    assert document["coverage"]["set_aside"] == {"speed": 1, "time": 2}
    assert document["coverage"]["pairs"] == {"assessed": 1, "not_assessed": 2}
    assert document["findings"][0]["amendment"]["replacement"] == "9.20 g"
    assert document["quantities"][1]["computed"]["value"] == 9.19945


def test_no_number_that_json_lacks(made):
    text = printed(made.outcome(made.review()))
    assert "NaN" not in text and "Infinity" not in text
    assert interval(Interval(nan, "g", float("-inf"), 1.0)) == {
        "value": None,
        "unit": "g",
        "low": None,
        "high": 1.0,
    }


def test_same_run_same_bytes_and_text_kept_as_it_is(made):
    run = made.outcome(made.review(made.finding()))
    assert printed(run) == printed(run)
    assert "0.0676 mol/L × 1 L" in printed(run)


def test_live_characters_are_escaped_and_read_back_the_same(made):
    evil = "turned \u202e, C1 \x9b31m, escape \x1b, half \ud800"
    text = printed(made.outcome(made.review(made.finding(message=evil))))
    assert all(char.isprintable() or char == "\n" for char in text)
    text.encode("utf-8")
    message = json.loads(text)["documents"][0]["findings"][0]["message"]
    assert message == evil.replace("\ud800", "\ufffd")


def test_rules_off_lists_rules_by_full_name(made, monkeypatch):
    names = ("amounts.a", "amounts.b", "hazards.c")
    monkeypatch.setattr("soplint.checks.cards.card_names", lambda: names)

    def off(**told):
        run = Outcome((), (), Settings(**told), date(2026, 12, 1))
        return json.loads(printed(run))["rules_off"]

    assert off() == []
    assert off(without=("amounts",)) == ["amounts.a", "amounts.b"]
    assert off(only=("amounts",), without=("amounts.b",)) == ["amounts.b", "hazards.c"]


def test_digests_change_with_what_they_cover(tmp_path, monkeypatch):
    assert settings_digest(Settings()) == settings_digest(Settings(on=date(2026, 1, 1)))
    assert settings_digest(Settings(only=("a", "b"))) == settings_digest(Settings(only=("b", "a")))
    assert settings_digest(Settings()) != settings_digest(Settings(without=("hazards",)))
    site = tmp_path / "soplint.toml"
    site.write_text("a = 1\n")
    first = settings_digest(Settings(site=site))
    site.write_text("a = 2\n")
    assert settings_digest(Settings(site=site)) != first

    card = tmp_path / "rules" / "amounts" / "a.md"
    card.parent.mkdir(parents=True)
    monkeypatch.setattr("soplint.reports.digests.folder", lambda name: str(tmp_path / name))
    monkeypatch.setattr("soplint.checks.cards.folder", lambda name: str(tmp_path / name))
    card.write_bytes(b"one\r\ntwo\n")
    mixed = rules_digest()
    card.write_bytes(b"one\ntwo\n")
    assert rules_digest() == mixed
    card.write_bytes(b"one\nthree\n")
    assert rules_digest() != mixed
    card.rename(card.with_name("b.md"))
    assert rules_digest() not in (mixed, "sha256:")


def test_constants_digest_covers_the_data_folders(tmp_path, monkeypatch):
    package = tmp_path / "soplint"
    (package / "substances" / "data").mkdir(parents=True)
    monkeypatch.setattr("soplint.reports.digests.folder_of_package", lambda: str(package))
    table = package / "substances" / "data" / "masses.csv"
    table.write_text("H,1.008\n")
    first = constants_digest()
    Path(package / "substances" / "code.py").write_text("x = 1\n")
    assert constants_digest() == first
    table.write_text("H,1.009\n")
    assert constants_digest() != first
