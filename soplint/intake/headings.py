"""Which lines of plain text are headings, and of which level."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass

from soplint.intake.numbering import bullet, printed_number, starts_with_quantity
from soplint.intake.scan import Line

LONGEST_TITLE = 100

_RULE = re.compile(r"\s*([=~^\"'*+#`.:_-])\1{2,}\s*$")
_HASH = re.compile(r"\s{0,3}(#{1,6})(?:[ \t]+(?=\S)|(?<=##)(?=[A-Za-z0-9]))")
_LEVELS = {"=": 1, "#": 1, "-": 2, "*": 2, "~": 3, "^": 4, '"': 4}
_END_OF_SENTENCE = frozenset(".:;!?,")
_CAPITALS = re.compile(r"[A-ZÀ-ÞА-Я]")
_SMALL = re.compile(r"[a-zß-ÿа-я]")
_COUNT = re.compile(r"[^\W\d_]")
_VERBS = frozenset(
    """
    add adjust allow aliquot apply aspirate attach autoclave boil bring calculate calibrate carry
    centrifuge check chill clean close collect combine complete confirm connect continue cool cover
    degas dilute discard dispense dissolve do drain draw dry equilibrate fill filter find flush
    freeze gently grind heat hold immerse incubate inject invert keep label leave let load make
    measure melt mix move neutralise neutralize note open pass perform pipet pipette place pour
    prepare press pull put read record reduce refill remove repeat replace report rest resuspend
    rinse rotate run sample seal select set shake sonicate spin spray stand sterilise sterilize
    stir stop store suspend swirl switch take tare thaw titrate top transfer turn use verify
    vortex wait warm wash wear weigh wipe withdraw write
    """.split()
)


@dataclass(frozen=True, slots=True)
class Title:
    """A heading line without its marks, its level, and the index of the line after it."""

    line: Line
    level: int
    end: int


class Titles:
    """Finds the headings of one text; knows what number comes next after each line."""

    def __init__(self, lines: Sequence[Line], first_is_title: bool, by_appearance: bool) -> None:
        self.lines = lines
        self.by_appearance = by_appearance
        self.ranks: dict[str, int] = {}
        self.first = _first_title(lines) if first_is_title else -1
        self.following = _following_numbers(lines)
        self.previous = ("", False)  # the last printed number, and whether it was a title's

    def at(self, index: int) -> Title | None:
        """The heading that begins with the line at ``index``."""
        line = self.lines[index]
        hashed = _HASH.match(line.raw)
        if hashed is not None:
            start = hashed.end()
            title = without_closing_hashes(line.raw[start:])
            shown = Line(line.number, line.column + start, title)
            return Title(shown, len(hashed.group(1)), index + 1)
        ruled = self.ruled(index)
        if ruled is not None:
            return ruled
        stripped = line.raw.strip()
        if len(stripped) > LONGEST_TITLE:
            return None
        if index == self.first:
            return Title(line, 1, index + 1)
        number = self.numbered(index, stripped)
        if number is not None:
            return Title(line, 2 + number.count("."), index + 1)
        if self.alone(index) and is_all_capitals(stripped):
            return Title(line, 1 if index == 0 else 2, index + 1)
        return None

    def ruled(self, index: int) -> Title | None:
        """A title with a rule under it, perhaps over it too."""
        over = _RULE.match(self.lines[index].raw)
        first = index + 1 if over else index
        if first + 1 >= len(self.lines):
            return None
        title, under = self.lines[first], _RULE.match(self.lines[first + 1].raw)
        shown = title.raw.strip()
        if under is None or not shown or len(shown) > 2 * LONGEST_TITLE or _RULE.match(title.raw):
            return None
        rule = self.lines[first + 1].raw.strip()
        if over and over.group().strip() != rule:
            return None
        if len(rule) * 2 < len(shown) or (bullet(shown) and not over) or not self.alone(index):
            return None
        if rule[0] not in '=-~^*#"' and not self.by_appearance:
            return None
        return Title(title, self.rank(rule[0] + ("o" if over else "")), first + 2)

    def rank(self, rule: str) -> int:
        if not self.by_appearance:
            return _LEVELS.get(rule[0], 3)
        return self.ranks.setdefault(rule, len(self.ranks) + 1)

    def alone(self, index: int) -> bool:
        """Whether no text stands right above the line."""
        if index == 0:
            return True
        above = self.lines[index - 1].raw
        return not above.strip() or index - 1 == self.first or _RULE.match(above) is not None

    def blank(self, index: int) -> bool:
        return index >= len(self.lines) or not self.lines[index].raw.strip()

    def numbered(self, index: int, stripped: str) -> str | None:
        """The number of a numbered line that is a title, not a step; None for any other line."""
        if not stripped[:1].isdigit():
            return None
        mark = printed_number(stripped, heading=True)
        if mark is None or mark.number is None or stripped[mark.length - 1] == ")":
            return None
        titled = self.titled(index, mark.number, stripped[: mark.length], stripped[mark.length :])
        self.previous = (mark.number, titled)
        return mark.number if titled else None

    def titled(self, index: int, number: str, printed: str, title: str) -> bool:
        """Whether a numbered line is no sentence and has parts or a gap below it."""
        if not title or title[-1] in _END_OF_SENTENCE:
            return False
        following = self.following[index]
        if following is not None and following[1].startswith(number + "."):
            return True
        if _is_next(self.previous[0], number) and not self.previous[1]:
            return False  # the step before was an item
        word = title.split(maxsplit=1)[0].lower().strip(",")
        if word in _VERBS or starts_with_quantity(title) or ". " in title:
            return False
        sibling = following is not None and _is_next(number, following[1])
        if self.blank(index + 1):
            bare = following is None or self.text_between(index + 1, following[0])
            return bare or not sibling or (printed.strip()[-1].isdigit() and title[0].isupper())
        if sibling and following is not None and following[0] == index + 1:
            return False
        below = self.lines[index + 1].raw.strip()
        return self.alone(index) and not below[:1].islower() and len(title) < 70

    def text_between(self, start: int, end: int) -> bool:
        """Whether lines with text stand from ``start`` to ``end``; a few are looked at."""
        return any(self.lines[k].raw.strip() for k in range(start, min(end, start + 5)))


def _is_next(number: str, following: str) -> bool:
    """Whether ``following`` counts on from ``number`` at the same depth."""
    stem, _, last = number.rpartition(".")
    next_stem, _, next_last = following.rpartition(".")
    if stem != next_stem or not (last.isdecimal() and next_last.isdecimal()):
        return False
    return int(next_last) == int(last) + 1


def without_closing_hashes(title: str) -> str:
    """A ``#`` heading without the hashes that may close it."""
    bare = title.rstrip().rstrip("#")
    return bare if not bare or bare[-1].isspace() else title


def _following_numbers(lines: Sequence[Line]) -> list[tuple[int, str] | None]:
    """For each line the next numbered line after it: index and number."""
    following: list[tuple[int, str] | None] = [None] * len(lines)
    known: tuple[int, str] | None = None
    for index in range(len(lines) - 1, -1, -1):
        following[index] = known
        stripped = lines[index].raw.strip()
        if stripped[:1].isdigit():
            mark = printed_number(stripped, heading=True)
            if mark is not None and mark.number is not None:
                known = (index, mark.number)
    return following


def _first_title(lines: Sequence[Line]) -> int:
    """The index of the first line with text when it can be a title, else -1."""
    for index, line in enumerate(lines):
        stripped = line.raw.strip()
        if stripped:
            sentence = stripped[-1] in ".:;"
            listed = bullet(stripped) is not None or starts_with_quantity(stripped)
            return -1 if sentence or listed or len(stripped) > LONGEST_TITLE else index
    return -1


def is_all_capitals(chars: str) -> bool:
    """Whether the line is a title in capitals: no small letter, more than an abbreviation.

    >>> is_all_capitals("REAGENTS AND STOCKS"), is_all_capitals("KH2PO4"), is_all_capitals("TAE")
    (True, False, False)
    """
    if _SMALL.search(chars) or not _CAPITALS.match(chars) or chars[-1] in _END_OF_SENTENCE:
        return False
    words = chars.split()
    if any(char.isdigit() for char in chars) and (
        len(words) < 2 or any(starts_with_quantity(" ".join(words[k:])) for k in range(len(words)))
    ):
        return False
    return len(_COUNT.findall(chars)) >= 6
