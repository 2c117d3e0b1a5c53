"""Which reader takes which document."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from soplint.intake.builder import Builder
from soplint.intake.front_matter import front_matter
from soplint.intake.model import Block
from soplint.intake.scan import Line

MARKDOWN = (".md", ".markdown")


@dataclass(frozen=True, slots=True)
class Reading:
    """What a reader found in the lines of a document."""

    blocks: tuple[Block, ...]
    title: str | None
    strict: bool = False
    notes: tuple[str, ...] = ()
    front_matter: dict[str, str] = field(default_factory=dict)


def read_lines(lines: Sequence[str], path: str) -> Reading:
    """The blocks in ``lines``; the ending of ``path`` chooses the reader."""
    name = path.lower()
    if name.endswith(MARKDOWN):
        return _markdown(lines)
    strict = name.endswith(".sop")
    return _plain(lines, strict, rst=name.endswith((".rst", ".rest")))


def _markdown(lines: Sequence[str]) -> Reading:
    from soplint.intake.markdown import read_markdown

    builder = Builder()
    values, skip = front_matter(lines)
    note = read_markdown(builder, lines, skip)
    title = _first_title(builder.blocks) or values.get("title") or values.get("Title") or None
    notes = () if note is None else (note,)
    return Reading(tuple(builder.blocks), title, notes=notes, front_matter=values)


def _plain(lines: Sequence[str], strict: bool, rst: bool) -> Reading:
    from soplint.intake.plain import read_plain
    from soplint.intake.rst import readable

    builder = Builder(strict=strict)
    values, skip = front_matter(lines)
    source = [Line(k + 1, 1, lines[k]) for k in range(skip, len(lines))]
    if rst:
        source = readable(source)
    read_plain(builder, source, first_is_title=strict, by_appearance=rst)
    title = _first_title(builder.blocks) or values.get("title") or values.get("Title") or None
    if title is None and strict and builder.blocks:
        title = builder.blocks[0].text.chars or None
    return Reading(tuple(builder.blocks), title, strict, (), values)


def _first_title(blocks: Sequence[Block]) -> str | None:
    for block in blocks:
        if block.kind == "heading" and block.level == 1:
            return block.text.chars
    return None
