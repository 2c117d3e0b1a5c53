"""The block of ``key: value`` lines that may open a Markdown document."""

from __future__ import annotations

import re
from collections.abc import Sequence

# A block that is not closed within so many lines is no front matter.
LONGEST = 400

_KEY = re.compile(r"([A-Za-z][\w .-]{0,60}?)\s*[:=](?:\s+|$)(.*)")


def front_matter(lines: Sequence[str]) -> tuple[dict[str, str], int]:
    """The keys and values at the top of ``lines``, and how many lines they take.

    Values are plain strings; nested and listed values are put in one string, set apart by
    commas.  Without front matter the result is empty and takes no line.

    >>> front_matter(["---", "title: Borate buffer", "---", "# 1 Scope"])
    ({'title': 'Borate buffer'}, 3)
    """
    fence = lines[0].rstrip() if lines else ""
    closing = {"---": ("---", "..."), "+++": ("+++",)}.get(fence)
    if closing is None:
        return {}, 0
    for index in range(1, min(len(lines), LONGEST)):
        if lines[index].rstrip() in closing:
            values = _values(lines[1:index])
            return (values, index + 1) if values else ({}, 0)
    return {}, 0


def _values(lines: Sequence[str]) -> dict[str, str]:
    values: dict[str, str] = {}
    key = ""
    for line in lines:
        stripped = line.strip()
        if not stripped or stripped.startswith("#"):
            continue
        match = _KEY.match(line)
        if match is not None:
            key = match.group(1)
            values[key] = _unquoted(match.group(2).strip())
        elif key and (line[:1].isspace() or stripped.startswith("- ")):
            more = _unquoted(stripped.removeprefix("- ").strip())
            values[key] = f"{values[key]}, {more}".lstrip(", ")
        else:
            return {}
    return values


def _unquoted(value: str) -> str:
    if len(value) >= 2 and value[0] == value[-1] and value[0] in "\"'":
        return value[1:-1]
    return "" if value in ("|", ">", "|-", ">-") else value
