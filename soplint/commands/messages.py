"""Messages to the person at the terminal, on standard error."""

from __future__ import annotations

import os
import sys

TRACE = "SOPLINT_TRACE"


def say(message: str, path: str | None = None) -> None:
    """One message on one line, with the path that it is about; live characters written out."""
    from soplint.reports.inert import inert

    place = "" if path is None else f"{inert(path)}: "
    _print(f"soplint: {place}{inert(message)}")


def fault(error: Exception, path: str | None = None) -> str:
    """Reports a fault of soplint itself and returns the reason for the record."""
    kind = type(error).__name__
    detail = f"{kind}: {error}" if str(error) else kind
    what = "this file" if path else "this command line"
    say(
        f"fault in soplint ({detail}). Please report it to its maintainers together with {what}; "
        f"with {TRACE}=1 in the environment the place in the program is shown",
        path,
    )
    if os.environ.get(TRACE):
        import traceback

        _print("".join(traceback.format_exception(error)).rstrip())
    return f"fault in soplint ({kind})"


def _print(text: str) -> None:
    if sys.stderr is None:
        return
    try:
        encoding = sys.stderr.encoding or "utf-8"
        print(text.encode(encoding, "backslashreplace").decode(encoding), file=sys.stderr)
    except (OSError, ValueError):
        pass  # nobody is left to read it
