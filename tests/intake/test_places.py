"""Every character of every block points at its source character."""

from __future__ import annotations

import re
from collections.abc import Iterator
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from soplint.intake import Block, Document, Text, read, read_bytes, sentences
from soplint.intake.characters import READ_AS, SUPERSCRIPTS

DOCUMENTS = sorted(
    path.with_suffix("") for path in Path(__file__).with_name("documents").glob("*.blocks")
)
# What may stand in the source where these characters are read.
MARKUP = set("<&\\$^`~:*_[{}")


def texts(block: Block) -> Iterator[Text]:
    yield block.text
    if block.table is not None:
        yield from block.table.head
        for row in block.table.rows:
            yield from row


def check_places(document: Document) -> int:
    """Checks every character; returns how many there are."""
    count = 0
    for block in document.blocks:
        for text in texts(block):
            previous = (0, 0)
            for offset, char in enumerate(text.chars):
                place = text.place(offset)
                assert previous <= place, (text, offset)
                previous = place
                source = document.source(text.span(offset, offset + 1))
                assert related(char, source), (char, source, text)
                count += 1
    return count


def related(char: str, source: str) -> bool:
    if char == source:
        return True
    if len(source) != 1:
        return char == " " and source == ""  # the space between two joined lines
    if char in READ_AS.get(source, "") or source in SUPERSCRIPTS:
        return True
    return source in MARKUP or char in " ^°" or (char in "⁰¹²³⁴⁵⁶⁷⁸⁹" and source.isdigit())


@pytest.mark.parametrize("path", DOCUMENTS, ids=lambda path: path.name)
def test_documents(path: Path) -> None:
    document = read(path)
    assert check_places(document) > 190
    for block in document.blocks:
        for sentence in sentences(block.text):
            assert sentence.chars in block.text.chars
            for offset, char in enumerate(sentence.chars):
                assert related(char, document.source(sentence.span(offset, offset + 1)))


def test_joined_lines_are_found_again() -> None:
    source = "Weigh 5.0 g of sodium chloride into a beaker and dissolve it in 100 mL of the\nTris buffer.\n"
    document = read_bytes(source.encode(), "a.md")
    (block,) = document.blocks
    start = block.text.chars.index("Tris")
    assert block.text.place(start) == (2, 1)
    assert document.source(block.text.span(start - 4, start + 4)) == "the\nTris"


PIECES = st.sampled_from(
    ["5 g", "NaCl", " ", "\n", "\n\n", "# ", "- ", "1. ", "5.1 ", "**", "*", "_", "`", "~2~", "^5^"]
    + ["$K_2$", "&micro;", "<sub>2</sub>", "<br>", "| a | b |\n|---|---|\n", "| 5 g | x |\n", "> "]
    + [
        "```\n",
        "```procedure\n",
        "<!-- ",
        " -->",
        "[a](b)",
        "![",
        "\\",
        "µ",
        "\u00a0",
        "⁵",
        "²",
        "℃",
    ]
    + [
        "    ",
        "\t",
        "  ",
        "===\n",
        "---\n",
        "+--+--+\n",
        "|a |b |\n",
        "Table 1. x\n",
        "<table>",
        "<td>",
    ]
    + [
        ".. note:: ",
        ".. list-table::\n",
        "   * - a\n",
        "word ",
        "Word ",
        ":sub:`2`",
        "–",
        "•",
        ":",
        "10",
    ]
)


@settings(max_examples=250, deadline=None)
@given(st.lists(PIECES, max_size=40), st.sampled_from([".md", ".sop", ".txt", ".rst"]))
def test_any_mixture_keeps_its_places(pieces: list[str], ending: str) -> None:
    source = "".join(pieces)
    document = read_bytes(source.encode(), "a" + ending)
    check_places(document)


@settings(max_examples=150, deadline=None)
@given(
    st.lists(
        st.sampled_from(["5 g NaCl", "Add it.", "- KBr 2 g", "1. Weigh", "", "word word"]),
        max_size=15,
    )
)
def test_plain_words_are_never_lost(lines: list[str]) -> None:
    source = "\n".join(lines)
    for ending in (".md", ".sop"):
        document = read_bytes(source.encode(), "a" + ending)
        read_words = [
            w for block in document.blocks for w in re.findall(r"[A-Za-z]+", block.text.chars)
        ]
        assert sorted(read_words) == sorted(re.findall(r"[A-Za-z]+", source))
