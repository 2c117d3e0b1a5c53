"""Markup out of lines: readable characters, each with its source place.

One pass over the raw characters stops at those that may mean something else (``_STOP``) and
hands over to a handler; nothing else is touched.  Every look-ahead is bounded or remembered, so
the time is linear in the length of the line whatever it holds.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable
from typing import NamedTuple

from soplint.intake.characters import COMMANDS, ENTITIES, READ_AS, SUPERSCRIPTS
from soplint.intake.model import Text
from soplint.intake.raised import raised

LINE_END = "\r"  # between the lines of one call; no source line can hold it
BREAK = "\n"  # a line break asked for by markup, <br>

_STOP = re.compile(
    r"!(?=\[)|:(?=[a-z-]{2,20}:`)|[*_`~^$&<\\\[\]"
    + re.escape("".join((*READ_AS, *SUPERSCRIPTS)))
    + "\r]"
)
_HYDRATE = re.compile(r"\s?\d*\.?\d*\s?(?:H[2₂0]|HCl|<sub>)")
_SUBSCRIPT_BASE = re.compile(r"(?:(?<![A-Za-z])[A-Za-z]|(?<![A-Z])[A-Z][a-z]?|[CSPN]O|\))$")
_SUBSCRIPT = re.compile(r"_(?:\{([0-9A-Za-z+-]{1,6})\}|\d{1,2}(?![\d_]))")
_PANDOC_LOW = re.compile(r"~([A-Za-z0-9+,.()-]{1,12})~(?!~)")
_PANDOC_HIGH = re.compile(r"\^([A-Za-z0-9+\u2212-]{1,12})\^")
_BRACED_HIGH = re.compile(r"\^\{([^{}\r]{1,12})\}|\^(\\circ)(?![a-z])|\^(o)(?=\s?C\b)")
_SUP_TAG = re.compile(r"<sup>([^<>\r]{1,40})</sup>", re.IGNORECASE)
_TAG = re.compile(r"</?([A-Za-z][A-Za-z0-9]{0,12})(?:\s[^<>]{0,400})?/?>")
_AUTOLINK = re.compile(r"<((?:https?|ftp|mailto):[^<>\s]{1,2000})>")
_ENTITY = re.compile(r"&(?:#[0-9]{1,7}|#[xX][0-9a-fA-F]{1,6}|[A-Za-z][A-Za-z0-9]{1,30});")
_LINK = re.compile(
    r"\[([^\[\]\r]{0,300})\](?:\((?:[^()\s]|\([^()\s]{0,200}\)){0,1000}"
    r"(?:\s{1,3}[\"'][^\"'\r]{0,200}[\"'])?\)|\[[^\[\]\r]{0,100}\])"
)
_FOOTNOTE = re.compile(r"\[\^[^\[\]\s]{1,30}\]")
_ROLE = re.compile(r":[a-z][a-z-]{1,20}:`([^`\r]{0,200})`|(?<!\S):[a-z]{1,12}:(?!\S)")
_COMMAND = re.compile(r"\\([A-Za-z]{2,20})(?![A-Za-z])")
_TEX_STEP = re.compile(
    r"\\d?frac\{([^{}]{0,80})\}\{([^{}]{0,80})\}|\^(?:\{([^{}]{0,30})\}|(\\[A-Za-z]{1,20}|[^\\{}]))"
    r"|\\([A-Za-z]{1,30}) ?|\\(.)|([_{}~])|[^\\^_{}~]{1,400}|."
)
_PUNCTUATION = frozenset("!\"#$%&'()*+,-./:;<=>?@[\\]^_`{|}~")
_BREAKING_TAGS = frozenset("br p div li tr h1 h2 h3 h4 h5 h6 ul ol table dd dt hr pre".split())
_SPACING_TAGS = frozenset("td th".split())
_STRUCK_TAGS = frozenset("del s strike".split())
_PLAIN_TAGS = frozenset(
    "a abbr b big blockquote body caption center cite code col colgroup details dfn dl em "
    "figcaption figure font html i img input ins kbd label mark nobr q samp section small span "
    "strong sub summary sup tbody tfoot thead tt u var wbr".split()
)


class Line(NamedTuple):
    """A stretch of one source line: its number, the column it starts in, its characters."""

    number: int
    column: int
    raw: str


class _Piece(NamedTuple):
    chars: str
    at: int
    literal: bool  # characters stand one for one from ``at`` on; else all of them at ``at``


def clean(lines: Iterable[Line]) -> list[Text]:
    """One text for each line; constructs may run over several lines.

    >>> clean([Line(3, 1, "**0.2 M** Na~2~CO~3~, 5 &micro;L")])[0].chars
    '0.2 M Na2CO3, 5 µL'
    """
    given = lines if isinstance(lines, list) else list(lines)
    if len(given) == 1:
        return [clean_line(*given[0])]
    joined = LINE_END.join([line.raw for line in given])
    if _STOP.search(joined.replace(LINE_END, "")) is None:
        return [_trimmed(line) for line in given]
    scan = _Scan(joined)
    return _texts(given, scan.run())


def clean_line(number: int, column: int, raw: str) -> Text:
    """The text of one line that stands on line ``number`` from ``column`` on."""
    if _STOP.search(raw) is None:
        return _trimmed(Line(number, column, raw))
    line = Line(number, column, raw)
    return _texts([line], _Scan(raw).run())[0]


def _trimmed(line: Line) -> Text:
    left = line.raw.lstrip()
    return Text(left.rstrip(), line.number, line.column + len(line.raw) - len(left))


class _Scan:
    """The pass over one raw string: pieces out, delimiters waiting for their partner."""

    __slots__ = ("raw", "pieces", "delimiters", "skips", "found")

    def __init__(self, raw: str) -> None:
        self.raw = raw
        self.pieces: list[_Piece] = []
        self.delimiters: list[_Delimiter] = []
        self.skips: dict[int, int] = {}
        self.found: dict[str, int] = {}

    def run(self) -> list[_Piece]:
        raw, position = self.raw, 0
        while (stop := _STOP.search(raw, position)) is not None:
            at = stop.start()
            if at > position:
                self.literal(position, at)
            char = raw[at]
            handler = _HANDLERS.get(char)
            position = _character(self, at, char) if handler is None else handler(self, at)
        if position < len(raw):
            self.literal(position, len(raw))
        _pair(self)
        return self.pieces

    def literal(self, start: int, end: int) -> int:
        self.pieces.append(_Piece(self.raw[start:end], start, True))
        return end

    def put(self, chars: str, at: int) -> None:
        if chars:
            self.pieces.append(_Piece(chars, at, False))

    def last(self) -> str:
        return self.pieces[-1].chars[-1:] if self.pieces else ""

    def find(self, token: str, start: int) -> int:
        """``raw.find``, remembered, so that asking from left to right stays linear."""
        known = self.found.get(token, -2)
        if known == -2 or 0 <= known < start:
            known = self.raw.find(token, start)
            self.found[token] = known
        return known

    def raise_(self, content: str, at: int, follow: int) -> None:
        before = "".join(piece.chars for piece in self.pieces[-3:])[-4:]
        self.put(raised(content, before, self.raw[follow : follow + 1]), at)


class _Delimiter:
    """A run of ``*`` or ``_`` that may open or close emphasis."""

    __slots__ = ("piece", "char", "count", "opens", "closes")

    def __init__(self, piece: int, char: str, count: int, opens: bool, closes: bool) -> None:
        self.piece, self.char, self.count = piece, char, count
        self.opens, self.closes = opens, closes


def _character(scan: _Scan, at: int, char: str) -> int:
    raw = scan.raw
    if char in SUPERSCRIPTS:
        end = at + 1
        while end < len(raw) and raw[end] in SUPERSCRIPTS:
            end += 1
        scan.raise_("".join(SUPERSCRIPTS[c] for c in raw[at:end]), at, end)
        return end
    scan.put(READ_AS[char], at)
    return at + 1


def _line_end(scan: _Scan, at: int) -> int:
    scan.pieces.append(_Piece(LINE_END, at, False))
    return at + 1


def _emphasis(scan: _Scan, at: int) -> int:
    raw, char = scan.raw, scan.raw[at]
    end = at + 1
    while end < len(raw) and raw[end] == char:
        end += 1
    before, after = raw[at - 1 : at] if at else "", raw[end : end + 1]
    if char == "_" and end == at + 1 and (low := _subscript(scan, at)):
        return low
    opens, closes = bool(after.strip()), bool(before.strip())
    inside = (before.isalnum() or before in tuple(")]")) and bool(before)
    if char == "_" or end == at + 1:
        opens, closes = opens and not inside, closes and not after.isalnum()
    if char == "*" and end == at + 1 and _HYDRATE.match(raw, end):
        opens = False
    scan.literal(at, end)
    if end - at <= 3 and (opens or closes):
        piece = len(scan.pieces) - 1
        scan.delimiters.append(_Delimiter(piece, char, end - at, opens, closes))
    return end


def _subscript(scan: _Scan, at: int) -> int:
    """The end of a subscript written ``K_2`` or ``V_{max}``; 0 when it is none."""
    match = _SUBSCRIPT.match(scan.raw, at)
    if match is None or not _SUBSCRIPT_BASE.search(scan.raw[max(0, at - 4) : at]):
        return 0
    if match.group(1) is None:
        return scan.literal(at + 1, match.end())
    scan.literal(match.start(1), match.end(1))
    return match.end()


def _pair(scan: _Scan) -> None:
    """Takes out the delimiters that form pairs; what stays alone stays as printed."""
    open_runs: dict[str, list[_Delimiter]] = {"*": [], "_": []}
    for run in scan.delimiters:
        waiting = open_runs[run.char]
        while run.closes and run.count and waiting:
            opener = waiting[-1]
            used = min(2, run.count, opener.count)
            _shorten(scan, opener, used, from_start=False)
            _shorten(scan, run, used, from_start=True)
            if not opener.count:
                waiting.pop()
        if run.opens and run.count:
            waiting.append(run)


def _shorten(scan: _Scan, run: _Delimiter, used: int, from_start: bool) -> None:
    run.count -= used
    piece = scan.pieces[run.piece]
    if from_start:
        scan.pieces[run.piece] = _Piece(piece.chars[used:], piece.at + used, True)
    else:
        scan.pieces[run.piece] = _Piece(piece.chars[:-used], piece.at, True)


def _code(scan: _Scan, at: int) -> int:
    raw = scan.raw
    end = at + 1
    while end < len(raw) and raw[end] == "`":
        end += 1
    ticks = raw[at:end]
    close = scan.find(ticks, end) if len(ticks) <= 3 else -1
    if close < 0:
        return scan.literal(at, end)
    scan.skips[close] = close + len(ticks)
    if at in scan.skips:  # a closing run reached as such
        return scan.skips[at]
    _verbatim(scan, end, close)
    return close + len(ticks)


def _verbatim(scan: _Scan, start: int, end: int) -> None:
    for at in range(start, end):
        char = scan.raw[at]
        if char == LINE_END:
            _line_end(scan, at)
        elif char in READ_AS:
            scan.put(READ_AS[char], at)
        else:
            scan.literal(at, at + 1)


def _tilde(scan: _Scan, at: int) -> int:
    raw = scan.raw
    if raw.startswith("~~", at):
        close = scan.find("~~", at + 2)
        if close > at + 2 and raw[at + 2 : at + 3].strip() and raw[close - 1].strip():
            return close + 2 if LINE_END not in raw[at:close] else scan.literal(at, at + 2)
        return scan.literal(at, at + 2)
    match = _PANDOC_LOW.match(raw, at)
    if match and at and (raw[at - 1].isalnum() or raw[at - 1] in ")]"):
        scan.literal(match.start(1), match.end(1))
        return match.end()
    return scan.literal(at, at + 1)


def _caret(scan: _Scan, at: int) -> int:
    match = _PANDOC_HIGH.match(scan.raw, at) or _BRACED_HIGH.match(scan.raw, at)
    if match is None:
        return scan.literal(at, at + 1)
    content = next(group for group in match.groups() if group)
    scan.raise_(_plain(content), at, match.end())
    return match.end()


def _plain(content: str) -> str:
    """Superscript content as plain characters: entities, commands and odd signs resolved."""
    if "&" in content:
        content = _ENTITY.sub(lambda match: _entity_value(match.group()), content)
    if "\\" in content:
        content = _COMMAND.sub(lambda match: COMMANDS.get(match.group(1), match.group(1)), content)
    return "".join(SUPERSCRIPTS.get(c, READ_AS.get(c, c)) for c in content)


def _dollar(scan: _Scan, at: int) -> int:
    raw = scan.raw
    mark = "$$" if raw.startswith("$$", at) else "$"
    start = at + len(mark)
    close = scan.find(mark, start)
    body = raw[start:close] if 0 < close - start <= 400 else ""
    spaced = not body or body[0].isspace() or body[-1].isspace()
    if not body or LINE_END in body or (mark == "$" and spaced):
        return scan.literal(at, start)
    end = close + len(mark)
    if raw[end : end + 1].isdigit():
        return scan.literal(at, start)
    _mathematics(scan, start, close)
    return end


def _mathematics(scan: _Scan, start: int, end: int) -> None:
    for step in _TEX_STEP.finditer(scan.raw, start, end):
        top, bottom, braced, single, command, escaped, mark = step.groups()
        at = step.start()
        if top is not None:
            _mathematics(scan, step.start(1), step.end(1))
            scan.put("/", at)
            _mathematics(scan, step.start(2), step.end(2))
        elif braced is not None or single is not None:
            scan.raise_(_plain((braced or single or "").strip()), at, step.end())
        elif command is not None:
            scan.put(COMMANDS.get(command, command), at)
        elif escaped is not None:
            scan.put({",": " ", ";": " ", ":": " ", "!": "", "\\": " "}.get(escaped, escaped), at)
        elif mark is not None:
            scan.put(" " if mark == "~" else "", at)
        else:
            _verbatim(scan, at, step.end())


def _backslash(scan: _Scan, at: int) -> int:
    raw = scan.raw
    after = raw[at + 1 : at + 2]
    if after == "(" and 0 < (close := scan.find("\\)", at + 2)) - at < 400:
        if re.search(r"[\\_^{]", raw[at + 2 : close]) and LINE_END not in raw[at:close]:
            _mathematics(scan, at + 2, close)
            return close + 2
    if after in _PUNCTUATION and after:
        return scan.literal(at + 1, at + 2)
    if after in ("", LINE_END):
        return at + 1
    if after == " ":
        return at + 2
    command = _COMMAND.match(raw, at)
    if command and command.group(1) in COMMANDS:
        scan.put(COMMANDS[command.group(1)], at)
        return command.end()
    return scan.literal(at, at + 1)


def _entity_value(entity: str) -> str:
    value = ENTITIES.get(entity[1:-1])
    if value is None:
        from html import unescape

        value = unescape(entity)
    return "".join(READ_AS.get(c, c) for c in value if c not in (LINE_END, BREAK))


def _entity(scan: _Scan, at: int) -> int:
    match = _ENTITY.match(scan.raw, at)
    if match is None:
        return scan.literal(at, at + 1)
    value = _entity_value(match.group())
    if value and value in SUPERSCRIPTS:
        scan.raise_(SUPERSCRIPTS[value], at, match.end())
    else:
        scan.put(value, at)
    return match.end()


def _angle(scan: _Scan, at: int) -> int:
    raw = scan.raw
    if raw.startswith("<!--", at):
        close = scan.find("-->", at + 4)
        end = len(raw) if close < 0 else close + 3
        for offset in range(at, end):
            if raw[offset] == LINE_END:
                _line_end(scan, offset)
        return end
    high = _SUP_TAG.match(raw, at)
    if high:
        scan.raise_(_plain(high.group(1).strip()), high.start(1), high.end())
        return high.end()
    tag = _TAG.match(raw, at)
    if tag:
        return _tag(scan, at, tag)
    link = _AUTOLINK.match(raw, at)
    if link:
        scan.literal(link.start(1), link.end(1))
        return link.end()
    return scan.literal(at, at + 1)


def _tag(scan: _Scan, at: int, tag: re.Match[str]) -> int:
    name = tag.group(1).lower()
    if name in _BREAKING_TAGS:
        scan.put(BREAK, at)
    elif name in _SPACING_TAGS:
        scan.put(" ", at)
    elif name in _STRUCK_TAGS:
        close = scan.find(f"</{tag.group(1)}>", tag.end())
        if close >= 0 and scan.raw[at + 1] != "/" and LINE_END not in scan.raw[at:close]:
            return close + len(name) + 3
    elif name not in _PLAIN_TAGS:
        return scan.literal(at, at + 1)
    for offset in range(at, tag.end()):
        if scan.raw[offset] == LINE_END:
            _line_end(scan, offset)
    return tag.end()


def _bracket(scan: _Scan, at: int) -> int:
    note = _FOOTNOTE.match(scan.raw, at)
    if note:
        return note.end() + scan.raw.startswith(":", note.end())
    link = _LINK.match(scan.raw, at)
    if link is None:
        return scan.literal(at, at + 1)
    scan.skips[link.end(1)] = link.end()
    return at + 1


def _bracket_end(scan: _Scan, at: int) -> int:
    skip = scan.skips.get(at)
    return scan.literal(at, at + 1) if skip is None else skip


def _image(scan: _Scan, at: int) -> int:
    link = _LINK.match(scan.raw, at + 1)
    return scan.literal(at, at + 1) if link is None else link.end()


def _role(scan: _Scan, at: int) -> int:
    role = _ROLE.match(scan.raw, at)
    if role is None or role.group(1) is None:
        return scan.literal(at, at + 1)
    if scan.raw.startswith(":sup:", at):
        scan.raise_(_plain(role.group(1)), role.start(1), role.end())
    else:
        _verbatim(scan, role.start(1), role.end(1))
    return role.end()


_HANDLERS: dict[str, Callable[[_Scan, int], int]] = {
    "\r": _line_end, "*": _emphasis, "_": _emphasis, "`": _code, "~": _tilde, "^": _caret,
    "$": _dollar, "&": _entity, "<": _angle, "\\": _backslash, "[": _bracket,
    "]": _bracket_end, "!": _image, ":": _role,
}  # fmt: skip


def _texts(lines: list[Line], pieces: list[_Piece]) -> list[Text]:
    """The pieces cut at the line ends, each offset turned into a place."""
    texts: list[Text] = []
    own: list[_Piece] = []
    index, start = 0, 0
    for piece in pieces:
        if piece.chars == LINE_END and not piece.literal:
            texts.append(_text(lines[index], start, own))
            own, start, index = [], piece.at + 1, index + 1
        elif piece.chars:
            own.append(piece)
    texts.append(_text(lines[index], start, own))
    texts.extend(Text("", line.number, line.column) for line in lines[index + 1 :])
    return texts


def _text(line: Line, start: int, pieces: list[_Piece]) -> Text:
    chars = "".join([piece.chars for piece in pieces])
    head = len(chars) - len(chars.lstrip())
    shown = chars.strip()
    if not shown:
        return Text("", line.number, line.column)
    shift = line.column - start
    if all(piece.literal for piece in pieces) and len(chars) == (
        pieces[-1].at + len(pieces[-1].chars) - pieces[0].at
    ):
        return Text(shown, line.number, pieces[0].at + shift + head)
    places: list[tuple[int, int]] = []
    for piece in pieces:
        at = piece.at + shift
        if piece.literal:
            places.extend([(line.number, at + k) for k in range(len(piece.chars))])
        else:
            places.extend([(line.number, at)] * len(piece.chars))
    number, column = places[head]
    kept = tuple(places[head : head + len(shown)])
    if all(place[1] == column + k for k, place in enumerate(kept)):
        return Text(shown, number, column)
    return Text(shown, number, column, kept)
