"""Bytes to lines: encodings, byte-order marks, line ends, and what is no text at all."""

from __future__ import annotations

import codecs
import re
from dataclasses import dataclass

from soplint.intake.model import Unreadable

# Share of control characters above which bytes are not taken for text.
CONTROL_SHARE = 0.01

_CONTROL = re.compile("[\x01-\x08\x0b\x0e-\x1f\x7f-\x9f]")
_LINE_END = re.compile("\r\n|\r|\n")
# The longer mark first: a UTF-32 mark begins like the UTF-16 one.
_MARKS = (
    (codecs.BOM_UTF32_LE, "utf-32-le", "UTF-32"),
    (codecs.BOM_UTF32_BE, "utf-32-be", "UTF-32"),
    (codecs.BOM_UTF16_LE, "utf-16-le", "UTF-16"),
    (codecs.BOM_UTF16_BE, "utf-16-be", "UTF-16"),
)
# Bytes 0x80 to 0x9F are letters and dashes in Windows-1252, control codes in Latin-1.
_WINDOWS = re.compile(rb"[\x80-\x9f]")
_UNDEFINED_IN_WINDOWS = re.compile(rb"[\x81\x8d\x8f\x90\x9d]")


@dataclass(frozen=True, slots=True)
class Decoded:
    """Lines without their ends, the encoding they were read in, and notes for the record."""

    lines: tuple[str, ...]
    encoding: str
    notes: tuple[str, ...]


def decode(data: bytes) -> Decoded:
    """The lines in ``data``; raises ``Unreadable`` when it is not text.

    UTF-8 with or without mark and UTF-16 (or UTF-32) with mark are read as such; anything else
    falls back to Latin-1, or Windows-1252 when it has bytes that only that code can print.

    >>> decode(b"pH 7\\r\\n25 \\xb0C").notes
    ('read as Latin-1: byte 0xB0 on line 2, column 4 is not UTF-8',)
    """
    text, encoding, notes = _characters(data)
    _refuse_noise(text)
    lines = _LINE_END.split(text)
    if lines[-1] == "":
        lines.pop()
    return Decoded(tuple(lines), encoding, notes)


def _characters(data: bytes) -> tuple[str, str, tuple[str, ...]]:
    for mark, codec, name in _MARKS:
        if data.startswith(mark):
            try:
                return data[len(mark) :].decode(codec), name.lower(), ()
            except UnicodeDecodeError as error:
                offset = error.start + len(mark)
                raise Unreadable(f"not text: broken {name} at byte {offset}") from None
    if data.startswith(codecs.BOM_UTF8):
        data = data[len(codecs.BOM_UTF8) :]
    nul = data.find(0)
    if nul >= 0:
        raise Unreadable(
            f"not text: NUL byte on line {_line_of(data, nul)} (UTF-16 needs its byte-order mark)"
        )
    try:
        return data.decode("utf-8"), "utf-8", ()
    except UnicodeDecodeError as error:
        return _one_byte_code(data, error.start)


def _one_byte_code(data: bytes, bad: int) -> tuple[str, str, tuple[str, ...]]:
    name, codec = "Latin-1", "latin-1"
    if _WINDOWS.search(data) and not _UNDEFINED_IN_WINDOWS.search(data):
        name, codec = "Windows-1252", "cp1252"
    line_start = max(data.rfind(b"\n", 0, bad), data.rfind(b"\r", 0, bad)) + 1
    column = len(data[line_start:bad].decode("utf-8")) + 1
    note = (
        f"read as {name}: byte 0x{data[bad]:02X} on line {_line_of(data, bad)}, "
        f"column {column} is not UTF-8"
    )
    return data.decode(codec), codec, (note,)


def _line_of(data: bytes, offset: int) -> int:
    before = data[:offset]
    return 1 + before.count(b"\n") + before.count(b"\r") - before.count(b"\r\n")


def _refuse_noise(text: str) -> None:
    nul = text.find("\0")
    if nul >= 0:
        line = len(_LINE_END.findall(text, 0, nul)) + 1
        raise Unreadable(f"not text: NUL character on line {line}")
    controls = len(_CONTROL.findall(text))
    if controls > CONTROL_SHARE * len(text):
        first = _CONTROL.search(text)
        assert first is not None
        line = len(_LINE_END.findall(text, 0, first.start())) + 1
        raise Unreadable(
            f"not text: {controls} control characters in {len(text)}, the first "
            f"(0x{ord(first.group()):02X}) on line {line}"
        )
