"""Bytes to lines: encodings, marks, line ends, and what is refused."""

from __future__ import annotations

import codecs

import pytest

from soplint.intake import Unreadable, read_bytes

TEXT = "# Saline\n\n- 5 µg of NaCl at 20 °C\n"


@pytest.mark.parametrize(
    ("data", "encoding"),
    [
        (TEXT.encode(), "utf-8"),
        (codecs.BOM_UTF8 + TEXT.encode(), "utf-8"),
        (codecs.BOM_UTF16_LE + TEXT.encode("utf-16-le"), "utf-16"),
        (codecs.BOM_UTF16_BE + TEXT.encode("utf-16-be"), "utf-16"),
        (codecs.BOM_UTF32_LE + TEXT.encode("utf-32-le"), "utf-32"),
        (TEXT.encode("latin-1"), "latin-1"),
    ],
)
@pytest.mark.parametrize("end", ["\n", "\r\n", "\r"])
def test_every_encoding_and_line_end_gives_the_same_lines(
    data: bytes, encoding: str, end: str
) -> None:
    codec = {"utf-16": "utf-16", "utf-32": "utf-32"}.get(encoding, encoding)
    if encoding.startswith("utf-"):
        marked = data.decode(codec)
        mark = data[: len(data) - len(TEXT.encode(_bare(data, encoding)))]
        data = mark + marked.lstrip("\ufeff").replace("\n", end).encode(_bare(data, encoding))
    else:
        data = data.replace(b"\n", end.encode())
    document = read_bytes(data, "saline.md")
    assert document.encoding == encoding
    assert document.lines == ("# Saline", "", "- 5 µg of NaCl at 20 °C")
    item = document.blocks[1]
    assert (item.text.line, item.text.column) == (3, 3)
    assert document.source(item.text.span(0, 4)) == "5 µg"


def _bare(data: bytes, encoding: str) -> str:
    if encoding == "utf-8":
        return encoding
    little = data[:2] == codecs.BOM_UTF16_LE
    return f"{encoding}-{'le' if little else 'be'}"


def test_a_mark_is_no_column() -> None:
    document = read_bytes(codecs.BOM_UTF8 + b"5 g NaCl\n", "a.txt")
    assert (document.blocks[0].text.line, document.blocks[0].text.column) == (1, 1)


def test_latin_1_is_noted_with_its_place() -> None:
    document = read_bytes("pH 7\r\nKühler bei 25 °C".encode("latin-1"), "a.txt")
    assert document.notes == ("read as Latin-1: byte 0xFC on line 2, column 2 is not UTF-8",)
    assert document.lines[1] == "Kühler bei 25 °C"


def test_windows_1252_dashes_are_dashes() -> None:
    document = read_bytes(b"5\x9610 mL\n", "a.txt")
    assert document.encoding == "cp1252"
    assert document.lines == ("5–10 mL",)
    assert document.notes[0].startswith("read as Windows-1252: byte 0x96 on line 1, column 2")


@pytest.mark.parametrize(
    ("data", "message"),
    [
        (b"5 g\n\0 NaCl", "NUL byte on line 2"),
        ("5 g NaCl".encode("utf-16-le"), "UTF-16 needs its byte-order mark"),
        (codecs.BOM_UTF16_LE + b"a", "broken UTF-16"),
        (codecs.BOM_UTF16_LE + b"\x00\xd8a\x00", "broken UTF-16"),
        (codecs.BOM_UTF16_LE + "a\n\0".encode("utf-16-le"), "NUL character on line 2"),
        (
            b"\n" + b"\x01" * 20 + b"abc" * 100,
            "20 control characters in 321, the first (0x01) on line 2",
        ),
        (b"\x89PNG\r\n\x1a\n" + bytes(range(256)), "NUL byte"),
    ],
)
def test_noise_is_refused_with_its_place(data: bytes, message: str) -> None:
    with pytest.raises(Unreadable) as refused:
        read_bytes(data, "a.md")
    assert message in str(refused.value)


def test_a_few_control_characters_are_let_through() -> None:
    document = read_bytes(b"Weigh 5 g\x07 of NaCl. " + b"Mix. " * 40, "a.txt")
    assert "\x07" not in document.blocks[0].text.chars
    assert "5 g of NaCl" in document.blocks[0].text.chars


def test_no_byte_is_an_empty_document() -> None:
    for path in ("a.md", "a.sop", "a.rst"):
        assert read_bytes(b"", path).blocks == ()
        assert read_bytes(b"\n \n", path).lines == ("", " ")


def test_other_separators_end_no_line() -> None:
    document = read_bytes(("a\u2028b\x0cc\u2029d and more text " * 3).encode(), "a.txt")
    assert len(document.lines) == 1
