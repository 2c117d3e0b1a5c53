"""Intake: bytes to a document of blocks, every character of which knows its source place.

``read`` takes a file, ``read_bytes`` takes bytes and the path they came from.  The ending of the
path decides the reader: ``.md`` and ``.markdown`` are Markdown, ``.sop`` is plain text in the
notation (strict), ``.rst`` is plain text with the shapes of reStructuredText, anything else is
plain text.  What cannot be text raises ``Unreadable``; everything else gives a ``Document``.

    bytes -> decoding -> lines -> markdown | plain -> paragraphs, tables -> blocks
                                        (inline: markup out of a line; numbering: printed numbers)

The Markdown parser is loaded only for Markdown.
"""

from __future__ import annotations

import hashlib
from pathlib import Path

from soplint.intake.decoding import decode
from soplint.intake.model import Block, Document, Span, Table, Text, Unreadable
from soplint.intake.reading import read_lines
from soplint.intake.sentences import sentences

__all__ = [
    "Block",
    "Document",
    "Span",
    "Table",
    "Text",
    "Unreadable",
    "read",
    "read_bytes",
    "sentences",
]


def read(path: str | Path) -> Document:
    """The document in the file ``path``; its path is kept as given, with ``/``.

    Raises ``OSError`` when the file cannot be opened, ``Unreadable`` when it holds no text.
    """
    return read_bytes(Path(path).read_bytes(), Path(path).as_posix())


def read_bytes(data: bytes, path: str) -> Document:
    """The document in ``data``; the ending of ``path`` decides how it is read.

    Raises ``Unreadable`` when the bytes are no text.

    >>> document = read_bytes(b"# Saline\\n- Weigh **9.0 g** of NaCl.\\n", "saline.md")
    >>> [(block.kind, block.text.chars) for block in document.blocks]
    [('heading', 'Saline'), ('item', 'Weigh 9.0 g of NaCl.')]
    >>> document.source(document.blocks[1].text.span(6, 11))
    '9.0 g'
    """
    decoded = decode(data)
    reading = read_lines(decoded.lines, path)
    return Document(
        path=path,
        sha256=hashlib.sha256(data).hexdigest(),
        encoding=decoded.encoding,
        notes=decoded.notes + reading.notes,
        title=reading.title,
        lines=decoded.lines,
        blocks=reading.blocks,
        strict=reading.strict,
        front_matter=reading.front_matter,
    )
