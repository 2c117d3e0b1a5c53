"""A line cut into words, and the catalogue names that begin at one of them."""

from __future__ import annotations

from .catalogue import Catalogue
from .naming import WORD, spell
from .reading import NOT_MEANT, Found

_JOINT = " -,()[]'"  # what may stand between the words of one name
_GLUE = frozenset(" -.·*")  # one of these alone is looked at without further ado
_JOINT_LENGTH = 5
_SHORT = 6  # keys below this length must stand without a space: "K, I" is no potassium iodide
_SQUEEZE = str.maketrans("", "", " -,()[]'.·*+")
_SIZES = (4, 8)  # lengths of the beginnings by which a growing name is given up early


def _joins(joint: str) -> bool:
    """Whether this may stand between two words of one name: "D-(+)-glucose"."""
    return len(joint) <= _JOINT_LENGTH and not joint.replace("(+)", "").strip(_JOINT)


class Line:
    """The words of one line: places, and spelling on demand."""

    __slots__ = ("chars", "spans", "_spelled")

    def __init__(self, chars: str, spelled: dict[str, str]) -> None:
        self.chars = chars
        self.spans = [found.span() for found in WORD.finditer(chars)]
        self._spelled = spelled

    def word(self, at: int) -> str:
        """Word number ``at`` in the spelling of the keys."""
        start, end = self.spans[at]
        written = self.chars[start:end]
        known = self._spelled.get(written)
        if known is None:
            known = self._spelled[written] = spell(written)
        return known

    def joint(self, at: int) -> str:
        """What stands between word ``at`` and the next one."""
        return self.chars[self.spans[at][1] : self.spans[at + 1][0]]


class Names:
    """The names of the catalogue by key, with what is needed to give up early."""

    def __init__(self, data: Catalogue) -> None:
        self._data = data
        self._names = data.names
        self._firsts = data.firsts
        self._openings: dict[str, int] = {}  # the longest name with this beginning
        for name in data.names:
            for size in _SIZES:
                opening = name[:size]
                self._openings[opening] = max(len(name), self._openings.get(opening, 0))

    def can_begin(self, word: str) -> bool:
        """Whether a name can begin with this word (in the spelling of the keys)."""
        return (
            word in self._firsts
            or word in self._names
            or (word[-1:] == "s" and word[:-1] in self._names)
            or (len(word) >= 8 and word[:8] in self._openings)
        )

    def longest(self, line: Line, at: int) -> Found | None:
        """The longest name that begins at word ``at``, or None."""
        name = line.word(at)
        names, openings = self._names, self._openings
        chars, spans = line.chars, line.spans
        start, end = spans[at]
        best: Found | None = None
        loose = False  # a space stands inside the name
        last, final = at, len(spans) - 1
        while True:
            if name in names and not (loose and len(name) < _SHORT):
                best = self._entry(chars, start, end, name) or best
            elif name[-1:] == "s" and len(name) > _SHORT and name[:-1] in names:
                best = self._entry(chars, start, end, name[:-1]) or best
            if last == final:
                return best
            following, after = spans[last + 1]
            joint = chars[end:following]
            if joint not in _GLUE and not _joins(joint):
                return best
            loose = loose or " " in joint
            last += 1
            end = after
            name += line.word(last)
            size = len(name)
            if size >= 4 and size > openings.get(name[: 8 if size >= 8 else 4], 0) + 1:
                return best

    def _entry(self, chars: str, start: int, end: int, name: str) -> Found | None:
        """The entry of a name, unless its capitals speak against it; brackets are completed."""
        targets, kind, exact = self._data.entry(name)
        flags: tuple[str, ...] = ()
        inside = chars[start:end]
        if exact:
            meant = inside.translate(_SQUEEZE) in {word.translate(_SQUEEZE) for word in exact}
            if kind == "f":
                if inside in NOT_MEANT:
                    return None
                flags = () if meant else ("case",)
            elif not meant:
                return None
        if "(" in inside or ")" in inside:
            surplus = inside.count("(") - inside.count(")")
            if surplus > 0 and chars[end : end + 1] == ")":
                end += 1
            elif surplus < 0 and chars[start - 1 : start] == "(":
                start -= 1
        return Found(start, end, targets, kind, flags)
