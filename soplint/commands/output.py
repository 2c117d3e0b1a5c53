"""Writes reports to standard output or to files."""

from __future__ import annotations

import os
import sys

TYPE_CHECKING = False  # known to type checkers; importing typing would cost as much as Python
if TYPE_CHECKING:
    from collections.abc import Iterable

STANDARD_OUTPUT = "-"


class Unwritten(Exception):
    """A report could not be written; the message names the file and says why."""


def write(lines: Iterable[str], target: str = STANDARD_OUTPUT, *, utf8: bool = False) -> None:
    """Writes a report line by line.

    A file is written as UTF-8 with LF.  Standard output has the encoding of the terminal, which
    may lack characters: they are written out; ``utf8`` (a record for programs) forces UTF-8.
    A reader of standard output that has gone (``| head``) is no error.  Errors: ``Unwritten``.
    """
    if target == STANDARD_OUTPUT:
        _to_standard_output(lines, utf8)
        return
    try:
        with open(target, "w", encoding="utf-8", newline="\n", errors="backslashreplace") as file:
            file.writelines(line + "\n" for line in lines)
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise Unwritten(f"{target}: the report cannot be written: {reason}") from None


def _to_standard_output(lines: Iterable[str], utf8: bool) -> None:
    stream = sys.stdout
    if stream is None:
        raise Unwritten("standard output is closed")
    encoding = "utf-8" if utf8 else stream.encoding or "utf-8"
    try:
        stream.flush()
        for line in lines:
            text = (line + ("\n" if utf8 else os.linesep)).encode(encoding, "backslashreplace")
            stream.buffer.write(text)
        stream.buffer.flush()
    except BrokenPipeError:
        _let_go()
    except OSError as error:
        _let_go()
        raise Unwritten(f"standard output cannot be written: {error.strerror}") from None


def _let_go() -> None:
    """Points standard output at nothing, or Python would fail on it once more at its end."""
    nothing = os.open(os.devnull, os.O_WRONLY)
    os.dup2(nothing, sys.stdout.fileno())
    os.close(nothing)
