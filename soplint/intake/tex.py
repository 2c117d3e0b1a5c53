"""Formulas in LaTeX, and the content of superscripts."""

from __future__ import annotations

import re

from soplint.intake.characters import COMMANDS, ENTITIES, READ_AS, SUPERSCRIPTS
from soplint.intake.scan import BREAK, LINE_END, Scan

ENTITY = re.compile(r"&(?:#[0-9]{1,7}|#[xX][0-9a-fA-F]{1,6}|[A-Za-z][A-Za-z0-9]{1,30});")
COMMAND = re.compile(r"\\([A-Za-z]{2,20})(?![A-Za-z])")
_STEP = re.compile(
    r"\\d?frac\{([^{}]{0,80})\}\{([^{}]{0,80})\}|\^(?:\{([^{}]{0,30})\}|(\\[A-Za-z]{1,20}|[^\\{}]))"
    r"|\\([A-Za-z]{1,30}) ?|\\(.)|([_{}~])|[^\\^_{}~]{1,400}|."
)


def mathematics(scan: Scan, start: int, end: int) -> None:
    """Takes the formula between ``start`` and ``end``: type commands out, signs resolved."""
    for step in _STEP.finditer(scan.raw, start, end):
        top, bottom, braced, single, command, escaped, mark = step.groups()
        at = step.start()
        if top is not None:
            mathematics(scan, step.start(1), step.end(1))
            scan.put("/", step.end(1))
            mathematics(scan, step.start(2), step.end(2))
        elif braced is not None or single is not None:
            scan.raise_(plain_superscript((braced or single or "").strip()), at, step.end())
        elif command is not None:
            scan.put(COMMANDS.get(command, command), at)
        elif escaped is not None:
            scan.put(
                {",": " ", ";": " ", ":": " ", "!": "", "\\": " "}.get(escaped, escaped),
                step.start(6),
            )
        elif mark is not None:
            scan.put(" " if mark == "~" else "", at)
        else:
            scan.verbatim(at, step.end())


def plain_superscript(content: str) -> str:
    """Superscript content as plain characters: entities, commands and odd signs resolved."""
    if "&" in content:
        content = ENTITY.sub(lambda match: entity_value(match.group()), content)
    if "\\" in content:
        content = COMMAND.sub(lambda match: COMMANDS.get(match.group(1), match.group(1)), content)
    return "".join(SUPERSCRIPTS.get(c, READ_AS.get(c, c)) for c in content)


def entity_value(entity: str) -> str:
    """The characters that an HTML entity is read as."""
    value = ENTITIES.get(entity[1:-1])
    if value is None:
        from html import unescape

        value = unescape(entity)
    return "".join(READ_AS.get(c, c) for c in value if c not in (LINE_END, BREAK))
