"""Reads the rule cards: one Markdown file per rule, ``rules/<family>/<requirement>.md``.

The cards are the handbook that ``soplint rules`` prints and the data that the tests run; their
form is described in ``rules/README.md``.
"""

from __future__ import annotations

import os
from dataclasses import dataclass

from soplint.findings.model import SEVERITIES
from soplint.places import folder

FAMILIES = (
    "amounts",
    "units",
    "buffers",
    "titrations",
    "measurement",
    "hazards",
    "document",
)
KEYS = ("severity", "since")
SECTIONS = ("Why", "How it is computed", "Trips", "Passes", "Sources", "Departures")
OPTIONAL = ("Departures",)
ENDINGS = {"procedure": "sop", "markdown": "md"}  # word behind the fence -> kind of document


class CardError(Exception):
    """A card that is not in the form of ``rules/README.md``; names file and line."""

    def __init__(self, path: str, line: int, message: str) -> None:
        super().__init__(f"{path}:{line}: {message}")
        self.path = path
        self.line = line
        self.message = message


@dataclass(frozen=True, slots=True)
class Expectation:
    """A finding that an example must give: its class and its line within the example."""

    severity: str
    line: int


@dataclass(frozen=True, slots=True)
class Example:
    """A short procedure on a card; ``kind`` is ``sop`` or ``md``, ``line`` its place on the card."""

    text: str
    kind: str
    line: int
    expects: tuple[Expectation, ...] = ()


@dataclass(frozen=True, slots=True)
class Card:
    """One rule: what it requires, why, how it is computed, and examples that show it."""

    name: str
    family: str
    summary: str
    severities: tuple[str, ...]  # that the rule may give, most severe first
    since: str
    why: str
    computed: str
    trips: tuple[Example, ...]
    passes: tuple[Example, ...]
    sources: tuple[str, ...]
    departures: str | None
    path: str

    @property
    def severity(self) -> str:
        """The most severe class that the rule may give."""
        return self.severities[0]


def card_paths() -> tuple[str, ...]:
    """Paths of all cards, in order of family and name."""
    root = folder("rules")
    return tuple(
        os.path.join(root, family, name)
        for family in sorted(os.listdir(root))
        if os.path.isdir(os.path.join(root, family))
        for name in sorted(os.listdir(os.path.join(root, family)))
        if name.endswith(".md")
    )


def card_names() -> tuple[str, ...]:
    """Names of all rules, without opening the cards."""
    return tuple(_name(path) for path in card_paths())


def cards() -> dict[str, Card]:
    """All cards by rule name.  Errors: ``CardError`` for a card that is not in form."""
    return {_name(path): load(path) for path in card_paths()}


def load(path: str) -> Card:
    """The card at ``path``.  Errors: ``CardError``, ``OSError``."""
    with open(path, encoding="utf-8") as file:
        try:
            text = file.read()
        except UnicodeDecodeError as error:
            raise CardError(path, 1, f"a card is written in UTF-8: {error.reason}") from None
    return read(text, path)


def read(text: str, path: str) -> Card:
    """A card from its text; ``path`` tells the name that it must carry.  Errors: ``CardError``."""
    return _Reader(text, path).card()


def _name(path: str) -> str:
    family, file = os.path.split(path)
    return f"{os.path.basename(family)}.{file.removesuffix('.md')}"


class _Reader:
    """Reads one card from top to bottom."""

    def __init__(self, text: str, path: str) -> None:
        self.lines = text.removesuffix("\n").split("\n")
        self.path = path

    def card(self) -> Card:
        name = self._title()
        summary, keys, start = self._head()
        sections = self._sections(start)
        trips = self._examples(*sections["Trips"], trips=True)
        severities = self._severities(keys["severity"])
        for example in trips:
            for expected in example.expects:
                if expected.severity not in severities:
                    raise self._error(example.line, f"this rule never gives {expected.severity}")
        departures = sections.get("Departures")
        return Card(
            name=name,
            family=name.partition(".")[0],
            summary=summary,
            severities=severities,
            since=keys["since"][1],
            why=self._prose(*sections["Why"]),
            computed=self._prose(*sections["How it is computed"]),
            trips=trips,
            passes=self._examples(*sections["Passes"], trips=False),
            sources=self._list(*sections["Sources"]),
            departures=None if departures is None else self._prose(*departures),
            path=self.path,
        )

    def _error(self, line: int, message: str) -> CardError:
        return CardError(self.path, line, message)

    def _title(self) -> str:
        name = _name(self.path)
        if not self.lines or self.lines[0].rstrip() != f"# {name}":
            raise self._error(1, f"the first line must be '# {name}', as the file is called")
        if name.partition(".")[0] not in FAMILIES:
            raise self._error(1, f"there is no such family; there are {', '.join(FAMILIES)}")
        return name

    def _head(self) -> tuple[str, dict[str, tuple[int, str]], int]:
        """Summary, key lines with their line numbers, and the index of the first section."""
        end = next((i for i, line in enumerate(self.lines) if line.startswith("## ")), None)
        if end is None:
            raise self._error(len(self.lines), "a card has sections, the first is '## Why'")
        summary: list[str] = []
        keys: dict[str, tuple[int, str]] = {}
        for number, line in enumerate(self.lines[1:end], start=2):
            key, colon, value = line.partition(":")
            if colon and key in KEYS:
                keys[key] = (number, value.strip())
            elif line.strip() and keys:
                raise self._error(number, f"only {' and '.join(KEYS)} stand here")
            elif line.strip():
                summary.append(line.strip())
        if not summary:
            raise self._error(2, "the requirement is missing: one sentence under the title")
        for key in KEYS:
            if not keys.get(key, (0, ""))[1]:
                raise self._error(end + 1, f"the line '{key}: ...' is missing above the sections")
        return " ".join(summary), keys, end

    def _severities(self, key: tuple[int, str]) -> tuple[str, ...]:
        line, value = key
        severities = tuple(word.strip() for word in value.split(","))
        for word in severities:
            if word not in SEVERITIES:
                raise self._error(line, f"{word!r} is no class; there are {', '.join(SEVERITIES)}")
        if sorted(set(severities), key=SEVERITIES.index) != list(severities):
            raise self._error(line, "the classes stand once each, the most severe first")
        return severities

    def _sections(self, start: int) -> dict[str, tuple[int, int]]:
        """First and last index (exclusive) of the body of each section."""
        found: dict[str, tuple[int, int]] = {}
        heads = [i for i in self._outside_fences(start) if self.lines[i].startswith("## ")]
        for head, end in zip(heads, [*heads[1:], len(self.lines)], strict=True):
            title = self.lines[head][3:].strip()
            if title not in SECTIONS or title in found:
                raise self._error(head + 1, f"sections are, once each: {', '.join(SECTIONS)}")
            found[title] = (head + 1, end)
        for title in SECTIONS:
            if title not in found and title not in OPTIONAL:
                raise self._error(len(self.lines), f"the section '## {title}' is missing")
        if list(found) != [title for title in SECTIONS if title in found]:
            raise self._error(heads[0] + 1, f"the order of sections is: {', '.join(SECTIONS)}")
        return found

    def _outside_fences(self, start: int) -> list[int]:
        outside: list[int] = []
        index = start
        while index < len(self.lines):
            if _fence(self.lines[index]):
                index = self._closing(index)
            else:
                outside.append(index)
            index += 1
        return outside

    def _closing(self, opening: int) -> int:
        fence = _fence(self.lines[opening])
        for index in range(opening + 1, len(self.lines)):
            line = self.lines[index].strip()
            if line.startswith(fence) and not line.strip(fence[0]):
                return index
        raise self._error(opening + 1, "this fence is never closed")

    def _prose(self, start: int, end: int) -> str:
        text = "\n".join(self.lines[start:end]).strip()
        if not text:
            raise self._error(start, "this section is empty")
        return text

    def _list(self, start: int, end: int) -> tuple[str, ...]:
        items: list[str] = []
        for number, line in enumerate(self.lines[start:end], start=start + 1):
            if line.startswith("- "):
                items.append(line[2:].strip())
            elif line.strip() and items and line.startswith("  "):
                items[-1] += " " + line.strip()
            elif line.strip():
                raise self._error(number, "sources are a list: each begins with '- '")
        if not items:
            raise self._error(start, "at least one source")
        return tuple(items)

    def _examples(self, start: int, end: int, *, trips: bool) -> tuple[Example, ...]:
        examples: list[Example] = []
        index = start
        while index < end:
            if _fence(self.lines[index]):
                closing = self._closing(index)
                examples.append(self._example(index, closing, end, trips=trips))
                index = closing
            index += 1
        if not examples:
            raise self._error(start, "this section needs an example in a fence")
        return tuple(examples)

    def _example(self, opening: int, closing: int, end: int, *, trips: bool) -> Example:
        word = self.lines[opening].strip().strip("`~").strip()
        if word not in ENDINGS:
            raise self._error(opening + 1, f"a fence is marked {' or '.join(ENDINGS)}")
        text = "".join(f"{line}\n" for line in self.lines[opening + 1 : closing])
        if not text.strip():
            raise self._error(opening + 1, "this example is empty")
        expects = self._expectations(closing + 1, end, closing - opening - 1)
        if trips != bool(expects):
            where = "follow an example that trips" if trips else "do not belong here"
            raise self._error(closing + 1, f"lines 'expects: CLASS at line N' {where}")
        return Example(text, ENDINGS[word], opening + 2, expects)

    def _expectations(self, start: int, end: int, lines: int) -> tuple[Expectation, ...]:
        """The ``expects`` lines up to the next fence."""
        expects: list[Expectation] = []
        for index in range(start, end):
            line = self.lines[index]
            if _fence(line):
                break
            if line.startswith("expects:"):
                expects.append(self._expectation(index + 1, line, lines))
        return tuple(expects)

    def _expectation(self, number: int, line: str, lines: int) -> Expectation:
        match line.removeprefix("expects:").split():
            case [severity, "at", "line", place] if severity in SEVERITIES and place.isdecimal():
                if not 1 <= int(place) <= lines:
                    raise self._error(number, f"the example has lines 1 to {lines}")
                return Expectation(severity, int(place))
        raise self._error(number, "write 'expects: CLASS at line N', for example 'major at line 3'")


def _fence(line: str) -> str:
    """The marks that open or close a fence, empty where the line is none."""
    mark = line[:1]
    if mark not in ("`", "~") or not line.startswith(mark * 3):
        return ""
    return mark * (len(line) - len(line.lstrip(mark)))
