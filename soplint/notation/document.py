"""Read a whole document: every block becomes sentences or a recipe table."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import lru_cache

from soplint.intake import sentences
from soplint.intake.model import Block, Document, Text
from soplint.notation.led_lines import led, opens_batch
from soplint.notation.long_sentences import LONGEST
from soplint.notation.long_sentences import pieces as cut
from soplint.notation.phrases import Sentence
from soplint.notation.read import Reading, read_sentence
from soplint.notation.rows import RecipeTable
from soplint.notation.tables import read_table
from soplint.quantities import number_style
from soplint.substances import NameIndex


@dataclass(frozen=True, slots=True)
class ReadBlock:
    """A block with what was read in it."""

    block: Block
    sentences: tuple[Sentence, ...] = ()
    table: RecipeTable | None = None


def read_document(document: Document) -> tuple[ReadBlock, ...]:
    """Every block of the document, read in order."""
    reading = Reading(number_style(_texts(document)), _names())
    context: list[Text] = []
    result: list[ReadBlock] = []
    for index, block in enumerate(document.blocks):
        strict = block.strict or document.strict
        if block.table is not None:
            table = read_table(block.table, reading, index, strict, context[-2:])
            result.append(ReadBlock(block, tuple(row.sentence for row in table.rows), table))
            continue
        if block.kind == "heading" and len(block.text.chars) <= LONGEST:
            read = [read_sentence(block.text, reading, index, strict, always=True)]
        else:
            read = list(_read_block(block.text, reading, index, strict))
        result.append(ReadBlock(block, tuple(read)))
        context.append(block.text)
    return tuple(result)


def _read_block(text: Text, reading: Reading, index: int, strict: bool) -> Iterator[Sentence]:
    """The sentences of a block; one that holds title and recipe is two."""

    def read(piece: Text, always: bool = True) -> Sentence:
        return read_sentence(piece, reading, index, strict, always)

    pieces = [piece for sentence in sentences(text) for piece in cut(sentence, reading.style)]
    for number, piece in enumerate(pieces):
        sentence = read(piece, number == 0)
        both = led(sentence, read)
        if both is not None:
            yield from both
            continue
        if number + 1 < len(pieces) and opens_batch(sentence, pieces[number + 1]):
            sentence = replace(sentence, leads=True)
        yield sentence


@lru_cache(maxsize=1)
def _names() -> NameIndex:
    """The index of names; it does not change while the program runs."""
    return NameIndex()


def _texts(document: Document) -> Iterator[str]:
    for block in document.blocks:
        if block.table is None:
            yield block.text.chars
            continue
        for row in block.table.rows:
            for cell in row:
                yield cell.chars
