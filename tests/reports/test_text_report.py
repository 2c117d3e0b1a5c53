"""The text report in the form of the design: GNU first line, worksheet block, closing sentence."""

from soplint.findings.model import Amendment
from soplint.intake.model import Span
from soplint.reports import lines, text
from soplint.reports.layout import Page
from soplint.reports.outcome import NotReviewed, summarise

EXPECTED = """\
buffers/acetate.md:2:7: major, amounts.mass-gives-concentration: 4.87 g of sodium acetate trihydrate in 1000 mL is 0.0358 mol/L
    stated    4.87 g
    computed  9.20 g
    working   0.0676 mol/L × 1 L × 136.08 g/mol = 9.199 g
              allowance 8 %
    cause     4.87 g is near the mass of the anhydrous salt
    amend     4.87 g -> 9.20 g
    related   line 1, "0.0676 mol/L": the strength in the heading
    see       soplint rules amounts.mass-gives-concentration

Not read:
  buffers/acetate.md:4: Add a pinch of 5 % magic.

Not verified:
  1 relation-open (soplint worksheet FILE shows each)

Notes:
  buffers/acetate.md: read as Latin-1
  pairs of substances: 1 assessed, 2 not assessed

Reviewed on 2026-12-01.
This is a check of written statements by calculation; it does not replace safety data sheets, local rules, risk assessment, validation or review by a qualified person.
No finding means that no listed rule fired: the coverage tells what was read and what was not.
Pairs of substances that are not in the table were not assessed; that says nothing about whether they may meet.
Heat, gas and pH figures are estimates for review.
Held: 1 major. 1 procedure, 3 quantities: 1 agree, 1 disagree, 1 not verified; 1 sentence not read.
"""


def closing(made, *reviews, **told):
    run = made.outcome(*reviews, **told)
    return text.closing(summarise(run), len(run.not_reviewed))


def test_whole_report(made):
    report = text.report(made.outcome(made.review(made.finding())), Page())
    assert "".join(line + "\n" for line in report) == EXPECTED


def test_lines_report_is_the_first_lines_of_the_text_report(made):
    run = made.outcome(made.review(made.finding(), made.finding(severity="minor")))
    first = list(lines.report(run, Page()))
    assert first == [line for line in text.report(run, Page()) if "acetate.md:2:7: m" in line]
    assert len(first) == 2


def test_closing_counts_every_class_and_says_not_held_below_the_level(made):
    minor, remark = made.finding(severity="minor"), made.finding(severity="remark")
    sentence = closing(made, made.review(minor, remark, remark), made.review())
    assert sentence == (
        "Not held: 1 minor, 2 remarks. 2 procedures, 6 quantities: 2 agree, 2 disagree, "
        "2 not verified; 2 sentences not read."
    )
    assert closing(made, made.review(minor), hold_at="minor").startswith("Held: 1 minor.")
    assert closing(made, made.review()).startswith("Not held: no findings.")
    critical = made.finding(severity="critical")
    assert closing(made, made.review(critical), hold_at="critical").startswith("Held: 1 critical.")


def test_what_was_not_reviewed_is_in_the_closing_sentence(made):
    missed = (NotReviewed("gone.md", "there is no such file or folder"),)
    assert closing(made, missed=missed) == "Nothing reviewed; 1 path not reviewed."
    assert closing(made, made.review(), missed=missed).endswith("; 1 path not reviewed.")
    report = list(text.report(made.outcome(made.review(), missed=missed), Page()))
    assert "  gone.md: there is no such file or folder" in report


def test_permit_releases_a_major_finding_but_stays_listed(made):
    covered = made.finding(permit=made.permit)
    run = made.outcome(made.review(covered))
    assert closing(made, made.review(covered)).startswith("Not held: 1 under deviation permit.")
    report = list(text.report(run, Page()))
    assert report[0].endswith("(under deviation permit until 2027-11-02)")
    assert '    permit    "checked in VR-12", approved QA 2026-11-02, until 2027-11-02' in report


def test_permit_never_releases_a_critical_hazard(made):
    hazard = made.finding(rule="hazards.acid-into-water", severity="critical", permit=made.permit)
    assert closing(made, made.review(hazard)).startswith("Held: 1 critical.")
    elsewhere = made.finding(severity="critical", permit=made.permit)
    assert closing(made, made.review(elsewhere)).startswith("Not held: 1 under deviation permit.")


def test_withheld_findings_are_listed_and_counted(made):
    run = made.outcome(made.review(withheld=(made.finding(),)))
    report = list(text.report(run, Page()))
    assert report[0] == "Withheld:"
    assert report[1].startswith("  buffers/acetate.md:2:7: major, amounts.")
    assert "; 1 finding withheld." in report[-1]
    assert report[-1].startswith("Not held: no findings.")


def test_amendment_elsewhere_names_its_line(made):
    moved = made.finding(amendment=Amendment(Span(3, 25, 3, 32), "1900 mL"))
    report = list(text.report(made.outcome(made.review(moved)), Page()))
    assert "    amend     line 3: 1000 mL -> 1900 mL" in report


def test_nothing_from_a_document_is_live_in_the_terminal(made):
    evil = made.finding(message="red \x1b[31m and \u202eturned\n", cause="bell \x07")
    for form in (text, lines):
        report = list(form.report(made.outcome(made.review(evil)), Page()))
        assert all(char.isprintable() for line in report for char in line)
        assert "red \\x1b[31m and \\u202eturned\\n" in report[0]


def test_narrow_page_breaks_the_block_but_never_the_first_line(made):
    run = made.outcome(made.review(made.finding()))
    wide = list(text.report(run, Page()))
    narrow = list(text.report(run, Page(width=44)))
    assert narrow[0] == wide[0]
    assert max(len(line) for line in narrow[1:]) <= 48  # "amounts.mass-..." is one long word
    assert narrow != wide
    assert " ".join(" ".join(narrow).split()) == " ".join(" ".join(wide).split())


def test_bold_only_where_the_page_has_it(made):
    run = made.outcome(made.review(made.finding()))
    assert "\x1b" not in "".join(text.report(run, Page()))
    assert "\x1b[1mmajor\x1b[0m, amounts." in next(text.report(run, Page(bold=True)))
