"""``soplint worksheet``: every stated quantity of one procedure with its verdict and working."""

from __future__ import annotations

from soplint.commands.arguments import Option, UsageError, read, review_date, usage_text
from soplint.commands.exits import FAULT, NOT_HELD, NOT_REVIEWED

TYPE_CHECKING = False  # known to type checkers
if TYPE_CHECKING:
    from soplint.commands.sources import Source

FORMS = ("text", "json", "csv")

OPTIONS = (
    Option("--as", "FORM", "form of the worksheet, text if not given", FORMS),
    Option("--to", "FILE", "where the worksheet goes, standard output if not given"),
    Option("--vessels", "", "the steps of each vessel with volume, temperature and pH instead"),
    Option("--on", "DATE", "the review date as YYYY-MM-DD, today if not given"),
    Option("--named", "PATH", "the name of the text on standard input, which '-' stands for"),
)

HEAD = """
soplint worksheet FILE

Lists every stated quantity of one procedure: line, stated, computed, verdict, reason, working.
'-' is the text on standard input.
"""

TAIL = """
Ends with 0 when the worksheet was made, 2 when the file could not be reviewed, 3 on a fault in
soplint.

Example:
  soplint worksheet --as csv --to HFL-SOP-014.csv HFL-SOP-014.md
  soplint worksheet --vessels HFL-SOP-014.md
"""


def usage() -> str:
    """The help of this command."""
    return usage_text(HEAD, OPTIONS, TAIL)


def run(arguments: list[str]) -> int:
    """Writes the worksheet of one file.  Errors: ``UsageError``, ``Unwritten``."""
    told = read(arguments, OPTIONS, "worksheet")
    if len(told.operands) != 1:
        raise UsageError("a worksheet is made of one file, or of '-' for standard input")
    import os
    import sys

    from soplint.commands.output import STANDARD_OUTPUT, write
    from soplint.commands.reviewing import review_source, say_missed
    from soplint.commands.sources import Source, shown
    from soplint.reports import worksheet
    from soplint.reports.layout import Page, page_for
    from soplint.reports.outcome import NotReviewed
    from soplint.settings import Settings

    path = told.operands[0]
    target = told.one("--to") or STANDARD_OUTPUT
    named = told.one("--named")
    if path == "-":
        source = Source("-" if named is None else shown(named), None)
    else:
        if named is not None:
            raise UsageError("--named names the text on standard input, but '-' is not given")
        source = Source(shown(path), path)
        if target != STANDARD_OUTPUT and os.path.realpath(target) == os.path.realpath(path):
            raise UsageError(f"--to {target} would write over the procedure under review")
    if told.one("--vessels") is not None:
        if told.one("--as") not in (None, "text"):
            raise UsageError("--vessels is made as text only")
        return _vessels(source, target)
    result = review_source(source, Settings(on=review_date(told.one("--on"))))
    if isinstance(result, NotReviewed):
        say_missed(result)
        return FAULT if result.fault else NOT_REVIEWED
    form = told.one("--as") or "text"
    page = page_for(sys.stdout) if target == STANDARD_OUTPUT else Page()
    forms = {"text": worksheet.as_text, "json": worksheet.as_json, "csv": worksheet.as_csv}
    write(forms[form](result, page), target, utf8=form != "text")
    return NOT_HELD


def _vessels(source: Source, target: str) -> int:
    """The step table of each vessel of one file."""
    from soplint.commands.messages import fault, say
    from soplint.commands.output import write
    from soplint.commands.sources import Unopened, content
    from soplint.reports.vessels import as_text

    try:
        data = content(source)
    except Unopened as refused:
        say(f"{source.name}: {refused}")
        return NOT_REVIEWED
    from soplint.bench import carry_out
    from soplint.bench.vessel import vessels
    from soplint.intake import Unreadable, read_bytes
    from soplint.notation.document import read_document

    try:
        document = read_bytes(data, source.name)
    except Unreadable as refused:
        say(f"{source.name}: {refused}")
        return NOT_REVIEWED
    try:
        lines = list(as_text(document.path, vessels(carry_out(read_document(document)))))
    except Exception as error:
        say(fault(error, source.name))
        return FAULT
    write(iter(lines), target, utf8=False)
    return NOT_HELD
