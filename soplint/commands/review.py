"""``soplint review``: the main job."""

from __future__ import annotations

from soplint.commands.arguments import Arguments, Option, UsageError, read, review_date, usage_text
from soplint.commands.exits import FAULT, HELD, NOT_HELD, NOT_REVIEWED

TYPE_CHECKING = False  # known to type checkers; importing typing would cost as much as Python
if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from soplint.reports.layout import Page
    from soplint.reports.outcome import Outcome
    from soplint.settings import Settings

    Report = Callable[[Outcome, Page], Iterator[str]]

FORMS = ("text", "lines", "json")
HOLD_LEVELS = ("critical", "major", "minor")

OPTIONS = (
    Option("--as", "FORM", "form of the report, text if not given", FORMS, repeats=True),
    Option(
        "--to",
        "FILE",
        "where the report goes; the first --to belongs to the first --as",
        repeats=True,
    ),
    Option(
        "--hold-at",
        "CLASS",
        "the mildest class that holds a procedure, major if not given",
        HOLD_LEVELS,
    ),
    Option("--only", "NAME", "apply this rule or family and no other", repeats=True),
    Option("--without", "NAME", "leave this rule or family out", repeats=True),
    Option("--on", "DATE", "the review date as YYYY-MM-DD, today if not given"),
    Option("--workers", "N", "number of processes; one up to 30 files, above that one per core"),
    Option("--named", "PATH", "the name of the text on standard input, which '-' stands for"),
)

HEAD = """
soplint review PATH...

Recomputes every stated quantity of the procedures named, or of those in the folders named (.sop and
.md, without what git ignores), and reports what does not agree. '-' is the text on standard input.
"""

TAIL = """
Ends with 0 when nothing is held, 1 when a finding at or above the hold level is open, 2 when
something could not be reviewed, 3 on a fault in soplint; the higher wins.

Examples:
  soplint review procedures/
  soplint review --hold-at minor HFL-SOP-014.md
  soplint review --as text --as json --to - --to record.json procedures/
  soplint review - --named draft.sop < draft.sop
"""


def usage() -> str:
    """The help of this command."""
    return usage_text(HEAD, OPTIONS, TAIL)


def run(arguments: list[str]) -> int:
    """Reviews what is named and writes the reports.  Errors: ``UsageError``, ``Unwritten``."""
    told = read(arguments, OPTIONS, "review")
    targets = _targets(told)
    settings = _settings(told)
    workers = _workers(told.one("--workers"))
    if not told.operands:
        raise UsageError("review what? Name files or folders, or '-' for standard input")
    if told.one("--named") is not None and "-" not in told.operands:
        raise UsageError("--named names the text on standard input, but '-' is not given")
    outcome = _review(told, settings, workers, tuple(target for _, target in targets))
    _write(outcome, targets)
    return _exit(outcome)


def _review(
    told: Arguments, settings: Settings, workers: int | None, targets: tuple[str, ...]
) -> Outcome:
    from soplint.commands.reviewing import review_all, say_missed
    from soplint.commands.sources import gather
    from soplint.findings.model import Review
    from soplint.reports.outcome import Outcome

    sources, missed = gather(told.operands, told.one("--named"))
    _keep_sources({source.path for source in sources if source.path is not None}, targets)
    reviews: list[Review] = []
    for not_reviewed in missed:
        say_missed(not_reviewed)
    for result in review_all(sources, settings, workers):
        if isinstance(result, Review):
            reviews.append(result)
        else:
            say_missed(result)
            missed.append(result)
    assert settings.on is not None  # set by _settings
    return Outcome(tuple(reviews), tuple(missed), settings, settings.on)


def _write(outcome: Outcome, targets: list[tuple[str, str]]) -> None:
    import sys

    from soplint.commands.output import STANDARD_OUTPUT, write
    from soplint.reports.layout import Page, page_for

    for form, target in targets:
        page = page_for(sys.stdout) if target == STANDARD_OUTPUT else Page()
        write(_report(form)(outcome, page), target, utf8=form == "json")


def _report(form: str) -> Report:
    if form == "json":
        from soplint.reports.record import report as record

        return record
    if form == "lines":
        from soplint.reports.lines import report as lines

        return lines
    from soplint.reports.text import report as text

    return text


def _exit(outcome: Outcome) -> int:
    from soplint.reports.outcome import summarise

    if any(missed.fault for missed in outcome.not_reviewed):
        return FAULT
    if outcome.not_reviewed:
        return NOT_REVIEWED
    return HELD if summarise(outcome).held else NOT_HELD


def _targets(told: Arguments) -> list[tuple[str, str]]:
    """Each form with its target, "-" for standard output."""
    forms = told.all("--as") or ("text",)
    files = told.all("--to")
    if len(files) > len(forms):
        raise UsageError("more --to than --as: each --to belongs to the --as of the same rank")
    targets = list(zip(forms, files + ("-",) * (len(forms) - len(files)), strict=True))
    places = [target for _, target in targets]
    for place in places:
        if places.count(place) > 1:
            where = "standard output" if place == "-" else place
            raise UsageError(f"two reports would go to {where}; give each its own --to")
    return targets


def _keep_sources(sources: set[str], targets: tuple[str, ...]) -> None:
    """Refuses a report over one of the procedures under review."""
    import os

    real = {os.path.realpath(source) for source in sources}
    for target in targets:
        if target != "-" and os.path.realpath(target) in real:
            raise UsageError(f"--to {target} would write over a procedure under review")


def _settings(told: Arguments) -> Settings:
    from soplint.settings import Settings

    return Settings(
        only=_rules(told, "--only"),
        without=_rules(told, "--without"),
        hold_at=told.one("--hold-at") or "major",
        on=review_date(told.one("--on")),
    )


def _rules(told: Arguments, option: str) -> tuple[str, ...]:
    names = told.all(option)
    if names:
        from soplint.checks.cards import FAMILIES, card_names

        known = {*card_names(), *FAMILIES}
        for name in names:
            if name not in known:
                raise UsageError(
                    f"{option} {name}: no rule or family has this name; 'soplint rules' lists them"
                )
    return names


def _workers(text: str | None) -> int | None:
    if text is None:
        return None
    if not (text.isascii() and text.isdecimal() and 1 <= int(text[:4]) and len(text) <= 3):
        raise UsageError(f"--workers takes a number from 1 to 999; not {text!r}")
    return int(text)
