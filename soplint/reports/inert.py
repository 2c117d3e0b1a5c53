"""Takes the life out of text from documents and file names before a terminal sees it."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import re

_SPACES = "\u00a0\u1680\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u2007\u2008\u2009\u200a\u202f\u205f\u3000"
# Characters that JSON lets through raw although a terminal would obey them, and lone surrogates.
_LIVE_IN_JSON = "[\x7f-\x9f\u061c\u200b-\u200f\u2028-\u202e\u2060-\u206f\ud800-\udfff\ufeff]"


def inert(text: str) -> str:
    """``text`` on one line, with control characters, bidi marks and line ends written out.

    Spaces of every width stay, since laboratories print "4.87 g" with thin ones.

    >>> inert("a\\x1b[31mb\\n")
    'a\\\\x1b[31mb\\\\n'
    >>> inert("4.87\\u202fg") == "4.87\\u202fg"
    True
    """
    if text.isprintable():
        return text
    return "".join(
        char if char.isprintable() or char in _SPACES else _written_out(char) for char in text
    )


def inert_json(document: str) -> str:
    """A finished JSON text with the live characters of its strings as escapes: the same JSON.

    >>> inert_json('{"a": "\\u202e"}')
    '{"a": "\\\\u202e"}'
    """
    import re

    return re.sub(_LIVE_IN_JSON, _json_escape, document)


def _written_out(char: str) -> str:
    return char.encode("unicode_escape").decode("ascii")


def _json_escape(found: re.Match[str]) -> str:
    char = found.group()
    if "\ud800" <= char <= "\udfff":  # half a character: strict readers refuse its escape
        return "\\ufffd"
    return f"\\u{ord(char):04x}"
