"""Prints the blocks of a document in the form of the ``.blocks`` files beside the documents.

    python tests/intake/show_blocks.py tests/intake/documents/borate.sop

One line for each block: place, kind, level, number, flags (B bold, S strict, O ordered), text.
A table adds lines for caption, heading row and rows, cells set apart by " ¦ ".
"""

from __future__ import annotations

import sys
from collections.abc import Iterator

from soplint.intake import Block, Document, Text, read


def shown(document: Document) -> Iterator[str]:
    yield f"title: {document.title}"
    for key, value in document.front_matter.items():
        yield f"{key} = {value}"
    for block in document.blocks:
        yield from _block(block)


def _block(block: Block) -> Iterator[str]:
    flags = "B" * block.bold + "S" * block.strict + "O" * block.ordered
    place = f"{block.text.line}:{block.text.column}"
    parts = (place, block.kind, str(block.level), block.number or "-", flags or "-")
    yield f"{' '.join(parts)} | {_chars(block.text)}"
    if block.table is not None:
        if block.table.caption is not None:
            yield f"    caption | {_chars(block.table.caption)}"
        yield f"    head | {_cells(block.table.head)}"
        for row in block.table.rows:
            yield f"    row | {_cells(row)}"


def _cells(cells: tuple[Text, ...]) -> str:
    return " ¦ ".join(_chars(cell) for cell in cells).rstrip()


def _chars(text: Text) -> str:
    return text.chars.replace("\n", "⏎")


if __name__ == "__main__":
    print("\n".join(shown(read(sys.argv[1]))))
