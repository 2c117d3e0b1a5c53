"""A block's text cut into sentences."""

from __future__ import annotations

import re

from soplint.intake.model import Text

_END = re.compile(
    r"((?<![.!?])[.!?]{1,6}[\"')\]”’]{0,3})\s+(?=[\"'(\[“‘]{0,3}[A-ZÀ-ÞА-Я0-9~≈±<>≤≥µα-ω•])|[。！？]|\n"
)
_TOKEN = re.compile(r"\S+$")
# Never the end of a sentence, whatever follows.
_NEVER = frozenset(
    "e.g i.e approx ca conc cf no nos fig figs cat eq ref refs resp incl excl vs dr mr mrs prof "
    "st ed eds art sect sec. vol% dil sat w/w v/v w/v m.w f.w mw fw bp. abs anh glac tech".split()
)
# The end of a sentence only after a number ("for 10 min. Add") or before an imperative.
_PERHAPS = frozenset(
    "min max temp vol vols wt soln sol aq h hr hrs sec s d mol g mg kg l ml q.s etc al std avg "
    "appr equiv b.p m.p r.t a.r p.a".split()
)
_STARTERS = frozenset(
    "add adjust allow bring centrifuge check cool dilute discard dissolve do filter heat if in "
    "incubate it keep label leave let make measure mix note pipette place pour prepare record "
    "repeat rinse spin stir store swirl take the then this titrate transfer use wash wait warm "
    "weigh when while discard remove run after before for".split()
)


def sentences(text: Text) -> list[Text]:
    """The sentences of ``text``, each with its places.

    A point, question or exclamation mark ends a sentence when a capital or a digit follows,
    unless it belongs to an abbreviation, an initial or a list number.  A semicolon ends none.

    >>> [s.chars for s in sentences(Text("Add 5.0 mL of conc. HCl. Mix for 2 min. Cool.", 1, 1))]
    ['Add 5.0 mL of conc. HCl.', 'Mix for 2 min.', 'Cool.']
    """
    chars = text.chars
    found: list[Text] = []
    start = 0
    for end in _END.finditer(chars):
        stop = end.end(1) if end.group(1) else end.end()
        if end.group(1) and not _ends(chars, start, end):
            continue
        _add(found, text, start, stop)
        start = end.end()
    _add(found, text, start, len(chars))
    return found


def _add(found: list[Text], text: Text, start: int, end: int) -> None:
    chars = text.chars[start:end]
    stripped = chars.strip()
    if stripped:
        start += chars.index(stripped)
        found.append(text.piece(start, start + len(stripped)))


def _ends(chars: str, start: int, end: re.Match[str]) -> bool:
    """Whether the mark found closes the sentence that began at ``start``."""
    if not end.group(1).startswith("."):
        return True
    before = _TOKEN.search(chars, max(start, end.start() - 40), end.start())
    token = before.group().lstrip("(\"'[“") if before else ""
    following = re.match(r"[\"'(\[“‘]*(\w*)", chars[end.end() : end.end() + 30])
    word = following.group(1).lower() if following else ""
    lower = token.lower()
    if lower in _NEVER or end.group(1).startswith(".."):
        return word in _STARTERS and end.group(1).startswith("..")
    if token.isdigit() and before is not None and before.start() == start:
        return False
    after_number = (
        re.search(r"\d\s*$", chars[max(start, end.start() - 60) : before.start()])
        if before
        else None
    )
    if lower in _PERHAPS:
        return after_number is not None or word in _STARTERS
    if len(token) == 1 and token.isalpha() and token.isupper():
        return after_number is not None or word in _STARTERS
    return True
