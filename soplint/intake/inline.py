"""Markup out of lines: readable characters, each with its source place.

One pass over the raw characters stops at those that may mean something else (``_STOP``) and
hands over to a handler; nothing else is touched.  Every look-ahead is bounded or remembered, so
the time is linear in the length of the line whatever it holds.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable

from soplint.intake.characters import COMMANDS, READ_AS, SUPERSCRIPTS
from soplint.intake.model import Text
from soplint.intake.scan import BREAK, LINE_END, Delimiter, Line, Piece, Scan, texts
from soplint.intake.tex import COMMAND, ENTITY, entity_value, mathematics, plain_superscript

# Characters that may mean something else; a class and nothing else, which is what is fast.
_STOP = re.compile(r"[*_`~^$&<\\\[\]" + re.escape("".join((*READ_AS, *SUPERSCRIPTS))) + "\r]")
_STOP_ASCII = re.compile(r"[*_`~^$&<\\\[\]\x01-\x1f\x7f]")
_HYDRATE = re.compile(r"\s?\d*\.?\d*\s?(?:H[2₂0]|HCl|<sub>)")
_SUBSCRIPT_BASE = re.compile(r"(?:(?<![A-Za-z])[A-Za-z]|(?<![A-Z])[A-Z][a-z]?|[CSPN]O|\))$")
_SUBSCRIPT = re.compile(r"_(?:\{([0-9A-Za-z+-]{1,6})\}|\d{1,2}(?![\d_]))")
_PANDOC_LOW = re.compile(r"~([A-Za-z0-9+,.()-]{1,12})~(?!~)")
_PANDOC_HIGH = re.compile(r"\^([A-Za-z0-9+\u2212-]{1,12})\^")
_BRACED_HIGH = re.compile(r"\^\{([^{}\r]{1,12})\}|\^(\\circ)(?![a-z])|\^(o)(?=\s?C\b)")
_SUP_TAG = re.compile(r"<sup>([^<>\r]{1,40})</sup>", re.IGNORECASE)
_TAG = re.compile(r"</?([A-Za-z][A-Za-z0-9]{0,12})(?:\s[^<>]{0,400})?/?>")
_AUTOLINK = re.compile(r"<((?:https?|ftp|mailto):[^<>\s]{1,2000})>")
_LINK = re.compile(
    r"\[([^\[\]\r]{0,300})\](?:\((?:[^()\s]|\([^()\s]{0,200}\)){0,1000}"
    r"(?:\s{1,3}[\"'][^\"'\r]{0,200}[\"'])?\)|\[[^\[\]\r]{0,100}\])"
)
_FOOTNOTE = re.compile(r"\[\^[^\[\]\s]{1,30}\]")
_ROLE = re.compile(r":[a-z][a-z-]{1,20}:$")
_TARGET = re.compile(r" ?<[^<>\r]{1,300}>$")
# Text struck out, ~~so~~, is left out up to this length; a longer stretch is not taken for one.
LONGEST_STRUCK = 2000
_BRACES = re.compile(r"\{([^{}\r]{0,200})\}")
_PUNCTUATION = frozenset("!\"#$%&'()*+,-./:;<=>?@[\\]^_`{|}~")
_BREAKING_TAGS = frozenset("br p div li tr h1 h2 h3 h4 h5 h6 ul ol table dd dt hr pre".split())
_SPACING_TAGS = frozenset("td th".split())
_STRUCK_TAGS = frozenset("del s strike".split())
_PLAIN_TAGS = frozenset(
    "a abbr b big blockquote body caption center cite code col colgroup details dfn dl em "
    "figcaption figure font html i img input ins kbd label mark nobr q samp section small span "
    "strong sub summary sup tbody tfoot thead tt u var wbr".split()
)


def clean(lines: Iterable[Line]) -> list[Text]:
    """One text for each line; constructs may run over several lines.

    >>> clean([Line(3, 1, "**0.2 M** Na~2~CO~3~, 5 &micro;L")])[0].chars
    '0.2 M Na2CO3, 5 µL'
    """
    given = lines if isinstance(lines, list) else list(lines)
    if len(given) == 1:
        return [clean_line(*given[0])]
    if not any(_is_marked(line.raw) for line in given):
        return [_trimmed(line) for line in given]
    return texts(given, _run(Scan(LINE_END.join([line.raw for line in given]))))


def clean_line(number: int, column: int, raw: str) -> Text:
    """The text of one line that stands on line ``number`` from ``column`` on."""
    line = Line(number, column, raw)
    return texts([line], _run(Scan(raw)))[0] if _is_marked(raw) else _trimmed(line)


def _is_marked(raw: str) -> bool:
    """Whether the line holds a character that may mean something else."""
    return (_STOP_ASCII if raw.isascii() else _STOP).search(raw) is not None


def _trimmed(line: Line) -> Text:
    number, column, raw = line
    left = raw.lstrip()
    return Text(left.rstrip(), number, column + len(raw) - len(left))


def _run(scan: Scan) -> list[Piece]:
    raw, position = scan.raw, 0
    while (stop := _STOP.search(raw, position)) is not None:
        at = stop.start()
        if at > position:
            scan.literal(position, at)
        char = raw[at]
        handler = _HANDLERS.get(char)
        position = _character(scan, at, char) if handler is None else handler(scan, at)
    if position < len(raw):
        scan.literal(position, len(raw))
    if scan.delimiters:
        _pair(scan)
    return scan.pieces


def _character(scan: Scan, at: int, char: str) -> int:
    raw = scan.raw
    if char in SUPERSCRIPTS:
        end = at + 1
        while end < len(raw) and raw[end] in SUPERSCRIPTS:
            end += 1
        scan.raise_("".join(SUPERSCRIPTS[c] for c in raw[at:end]), at, end)
        return end
    scan.put(READ_AS[char], at)
    return at + 1


def _emphasis(scan: Scan, at: int) -> int:
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
        scan.delimiters.append(Delimiter(piece, char, end - at, opens, closes))
    return end


def _subscript(scan: Scan, at: int) -> int:
    """The end of a subscript written ``K_2`` or ``V_{max}``; 0 when it is none."""
    match = _SUBSCRIPT.match(scan.raw, at)
    if match is None or not _SUBSCRIPT_BASE.search(scan.raw[max(0, at - 4) : at]):
        return 0
    if match.group(1) is None:
        return scan.literal(at + 1, match.end())
    scan.literal(match.start(1), match.end(1))
    return match.end()


def _pair(scan: Scan) -> None:
    """Takes out the delimiters that form pairs; what stays alone stays as printed."""
    open_runs: dict[str, list[Delimiter]] = {"*": [], "_": []}
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


def _shorten(scan: Scan, run: Delimiter, used: int, from_start: bool) -> None:
    run.count -= used
    piece = scan.pieces[run.piece]
    if from_start:
        scan.pieces[run.piece] = Piece(piece.chars[used:], piece.at + used, True)
    else:
        scan.pieces[run.piece] = Piece(piece.chars[:-used], piece.at, True)


def _code(scan: Scan, at: int) -> int:
    """Code between back-ticks; what a role before it asks for, the target after it left out."""
    raw = scan.raw
    end = at + 1
    while end < len(raw) and raw[end] == "`":
        end += 1
    ticks = raw[at:end]
    close = scan.find(ticks, end) if len(ticks) <= 3 else -1
    if close < 0:
        return scan.literal(at, end)
    role = _ROLE.search(scan.ending()[-24:])
    if role is not None:
        scan.take_back(len(role.group()))
        if role.group() == ":sup:" and close - end <= 40:
            scan.raise_(plain_superscript(raw[end:close]), end, close + 1)
            return close + 1
    target = _TARGET.search(raw, max(end, close - 300), close)
    scan.verbatim(end, close if target is None else target.start())
    return close + len(ticks) + (target is not None and raw.startswith("_", close + 1))


def _tilde(scan: Scan, at: int) -> int:
    raw = scan.raw
    if raw.startswith("~~", at):
        close = scan.find("~~", at + 2)
        struck = at + 2 < close < at + LONGEST_STRUCK
        if struck and raw[at + 2].strip() and raw[close - 1].strip():
            return scan.skip(at, close + 2)
        return scan.literal(at, at + 2)
    match = _PANDOC_LOW.match(raw, at)
    if match and at and (raw[at - 1].isalnum() or raw[at - 1] in ")]"):
        scan.literal(match.start(1), match.end(1))
        return match.end()
    return scan.literal(at, at + 1)


def _caret(scan: Scan, at: int) -> int:
    match = _PANDOC_HIGH.match(scan.raw, at) or _BRACED_HIGH.match(scan.raw, at)
    if match is None:
        return scan.literal(at, at + 1)
    content = next(group for group in match.groups() if group)
    scan.raise_(plain_superscript(content), at, match.end())
    return match.end()


def _dollar(scan: Scan, at: int) -> int:
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
    mathematics(scan, start, close)
    return end


def _backslash(scan: Scan, at: int) -> int:
    raw = scan.raw
    after = raw[at + 1 : at + 2]
    if after == "(" and 0 < (close := scan.find("\\)", at + 2)) - at < 400:
        if re.search(r"[\\_^{]", raw[at + 2 : close]) and LINE_END not in raw[at:close]:
            mathematics(scan, at + 2, close)
            return close + 2
    if after in _PUNCTUATION and after:
        return scan.literal(at + 1, at + 2)
    if after in ("", LINE_END):
        return at + 1
    if after == " ":
        return at + 2
    command = COMMAND.match(raw, at)
    if command and command.group(1) in COMMANDS:
        value = COMMANDS[command.group(1)]
        scan.put(value, at)
        body = _BRACES.match(raw, command.end()) if not value else None
        if body is not None:
            mathematics(scan, body.start(1), body.end(1))
            return body.end()
        return command.end() + (value == "µ" and raw.startswith(" ", command.end()))
    return scan.literal(at, at + 1)


def _entity(scan: Scan, at: int) -> int:
    match = ENTITY.match(scan.raw, at)
    if match is None:
        return scan.literal(at, at + 1)
    value = entity_value(match.group())
    if value and value in SUPERSCRIPTS:
        scan.raise_(SUPERSCRIPTS[value], at, match.end())
    else:
        scan.put(value, at)
    return match.end()


def _angle(scan: Scan, at: int) -> int:
    raw = scan.raw
    if raw.startswith("<!--", at):
        close = scan.find("-->", at + 4)
        return scan.literal(at, at + 1) if close < 0 else scan.skip(at, close + 3)
    high = _SUP_TAG.match(raw, at)
    if high:
        scan.raise_(plain_superscript(high.group(1).strip()), high.start(1), high.end())
        return high.end()
    tag = _TAG.match(raw, at)
    if tag:
        return _tag(scan, at, tag)
    link = _AUTOLINK.match(raw, at)
    if link:
        scan.literal(link.start(1), link.end(1))
        return link.end()
    return scan.literal(at, at + 1)


def _tag(scan: Scan, at: int, tag: re.Match[str]) -> int:
    name = tag.group(1).lower()
    if name in _BREAKING_TAGS:
        scan.put(BREAK, at)
    elif name in _SPACING_TAGS:
        scan.put(" ", at)
    elif name in _STRUCK_TAGS:
        close = scan.find(f"</{tag.group(1)}>", tag.end())
        if scan.raw[at + 1] != "/" and at < close < at + LONGEST_STRUCK:
            return scan.skip(at, close + len(name) + 3)
    elif name not in _PLAIN_TAGS:
        return scan.literal(at, at + 1)
    return scan.skip(at, tag.end())


def _bracket(scan: Scan, at: int) -> int:
    note = _FOOTNOTE.match(scan.raw, at)
    if note:
        return note.end() + scan.raw.startswith(":", note.end())
    link = _LINK.match(scan.raw, at)
    if link is None:
        return scan.literal(at, at + 1)
    if scan.ending().endswith("!") and scan.raw[at - 1] == "!":
        scan.take_back(1)
        return link.end()
    scan.skips[link.end(1)] = link.end()
    return at + 1


def _bracket_end(scan: Scan, at: int) -> int:
    skip = scan.skips.get(at)
    return scan.literal(at, at + 1) if skip is None else skip


_HANDLERS: dict[str, Callable[[Scan, int], int]] = {
    "\r": Scan.line_end, "*": _emphasis, "_": _emphasis, "`": _code, "~": _tilde, "^": _caret,
    "$": _dollar, "&": _entity, "<": _angle, "\\": _backslash, "[": _bracket,
    "]": _bracket_end,
}  # fmt: skip
