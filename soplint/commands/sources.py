"""Finds the procedures that a command line names and reads their bytes."""

from __future__ import annotations

import os
import stat
from dataclasses import dataclass
from typing import TYPE_CHECKING

from soplint.commands.messages import say
from soplint.reports.outcome import NotReviewed

if TYPE_CHECKING:
    from collections.abc import Iterator

ENDINGS = (".sop", ".md")
STANDARD_INPUT = "-"
LARGEST = 20_000_000  # bytes; a procedure is thousands of times smaller


@dataclass(frozen=True, slots=True)
class Source:
    """One text to review: the name it has in reports, and where its bytes are."""

    name: str
    path: str | None  # None: standard input


class Unopened(Exception):
    """The bytes of a source cannot be had; the message says why."""


def gather(paths: list[str], named: str | None) -> tuple[list[Source], list[NotReviewed]]:
    """The sources under ``paths`` in the order given, each once, and the paths that have none.

    ``named`` is the name of the text on standard input, which the path "-" stands for.
    """
    sources: dict[str, Source] = {}
    missed: list[NotReviewed] = []
    for path in paths:
        if path == STANDARD_INPUT:
            name = STANDARD_INPUT if named is None else shown(named)
            sources.setdefault(STANDARD_INPUT, Source(name, None))
        elif os.path.isdir(path):
            found = sorted(in_folder(path))
            if not found:
                reason = f"no procedure in this folder ({' or '.join(ENDINGS)}, not ignored by git)"
                missed.append(NotReviewed(shown(path), reason))
            for file in found:
                sources.setdefault(os.path.realpath(file), Source(shown(file), file))
        else:
            sources.setdefault(os.path.realpath(path), Source(shown(path), path))
    return list(sources.values()), missed


def content(source: Source) -> bytes:
    """The bytes of a source.  Errors: ``Unopened``."""
    if source.path is None:
        return _standard_input()
    try:
        # Opening a pipe or device could wait for ever, so the kind is asked first.
        status = os.stat(source.path)
        if not stat.S_ISREG(status.st_mode):
            raise Unopened("not a regular file; a text from a pipe is reviewed as '-'")
        if status.st_size > LARGEST:
            raise Unopened(_too_large())
        with open(source.path, "rb") as file:
            return file.read()
    except FileNotFoundError:
        raise Unopened("there is no such file or folder") from None
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise Unopened(f"cannot be read: {reason}") from None


def _standard_input() -> bytes:
    import sys

    if sys.stdin is None:
        raise Unopened("standard input is closed")
    data = sys.stdin.buffer.read(LARGEST + 1)
    if len(data) > LARGEST:
        raise Unopened(_too_large())
    return data


def _too_large() -> str:
    return f"larger than {LARGEST // 1_000_000} MB, which no procedure is"


def shown(path: str) -> str:
    """The name of ``path`` in reports: relative where it lies below here, with "/", printable.

    Bytes of a name that are no UTF-8 are written out as ``\\xNN``.
    """
    if os.path.isabs(path):
        below = os.path.relpath(path) if _same_drive(path) else path
        path = path if below.startswith(os.pardir) else below
    plain = os.path.normpath(path).replace(os.sep, "/")
    return os.fsencode(plain).decode("utf-8", "backslashreplace")


def _same_drive(path: str) -> bool:
    return os.path.splitdrive(path)[0] == os.path.splitdrive(os.getcwd())[0]


def in_folder(folder: str) -> Iterator[str]:
    """Procedures below ``folder``; no hidden folders, no symbolic links, nothing git ignores."""
    listed = _listed_by_git(folder) if _in_work_tree(folder) else None
    if listed is None:
        yield from _walk(folder)
        return
    for name in listed:
        path = os.path.join(folder, name)
        if any(part.startswith(".") for part in name.split("/")[:-1]):
            continue
        if os.path.isdir(path) and not os.path.islink(path):
            yield from in_folder(path)  # a repository inside the repository
        elif _wanted(path):
            yield path


def _walk(folder: str) -> Iterator[str]:
    # Links to folders are not followed, so that a loop of links ends nowhere.
    for here, folders, files in os.walk(folder, onerror=_unopened_folder):
        folders[:] = sorted(name for name in folders if not name.startswith("."))
        for name in files:
            path = os.path.join(here, name)
            if _wanted(path):
                yield path


def _wanted(path: str) -> bool:
    """A regular file with the ending of a procedure; a link could lead out of the folder."""
    if not path.lower().endswith(ENDINGS):
        return False
    try:
        mode = os.lstat(path).st_mode
    except OSError:
        return False  # git still lists a file that was deleted
    if stat.S_ISLNK(mode):
        say("symbolic link, not followed; name it on the command line to review it", shown(path))
    return stat.S_ISREG(mode)


def _unopened_folder(error: OSError) -> None:
    say(f"folder cannot be read: {error.strerror}", shown(str(error.filename)))


def _in_work_tree(folder: str) -> bool:
    here = os.path.realpath(folder)
    while not os.path.exists(os.path.join(here, ".git")):
        above = os.path.dirname(here)
        if above == here:
            return False
        here = above
    return True


def _listed_by_git(folder: str) -> list[str] | None:
    """What git tracks or does not ignore below ``folder``; None where git cannot tell."""
    import subprocess

    # A repository's own configuration must not run a program: it could name one as fsmonitor.
    command = ["git", "-c", "core.fsmonitor=false", "ls-files", "-z"]
    command += ["--cached", "--others", "--exclude-standard"]
    try:
        done = subprocess.run(
            command,
            cwd=folder,
            env=_environment(),
            stdin=subprocess.DEVNULL,
            capture_output=True,
            timeout=60,
            check=True,
        )
    except (OSError, subprocess.SubprocessError):
        note = "git does not list this folder; it is searched without git's ignore rules"
        say(note, shown(folder))
        return None
    names = {os.fsdecode(name) for name in done.stdout.split(b"\0") if name}
    return sorted(name.rstrip("/") for name in names)


def _environment() -> dict[str, str]:
    """The environment without the variables by which a running git points at its repository."""
    pointing = ("GIT_DIR", "GIT_WORK_TREE", "GIT_INDEX_FILE", "GIT_PREFIX", "GIT_COMMON_DIR")
    kept = {name: value for name, value in os.environ.items() if name not in pointing}
    return {**kept, "GIT_OPTIONAL_LOCKS": "0"}
