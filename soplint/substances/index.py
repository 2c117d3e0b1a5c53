"""Finding names of substances in a line of text.

The line is cut into words once.  At each word the longest name of the catalogue that begins there
is looked up by its key, and the longest chemical formula is read; then the words and the water
around it ("anhydrous", "conc.", "·7H2O", "(heptahydrate)") are taken in.
"""

from __future__ import annotations

import re

from .catalogue import Catalogue, catalogue
from .hydration import Water, water_behind
from .model import Match
from .naming import FOLD, LOOK_ALIKE, WORD, spell
from .reading import Found, hydrates_known, made_with_water, meaning, read_formula
from .water import FIRST, water_phrase

_BEFORE = {
    "anhydrous": "anhydrous",
    "anhyd": "anhydrous",
    "conc": "concentrated",
    "concd": "concentrated",
    "concentrated": "concentrated",
    "fuming": "concentrated",
}
_BEHIND = re.compile(
    r" ?,? ?\(?(?:conc\.?|concd\.?|concentrated)(?![^\W_])\.?\)?(?! ?[^\W_])", re.IGNORECASE
)
_JOINT = " -,()[]'"  # what may stand between the words of one name
_JOINT_LENGTH = 4
_SHORT = 6  # keys below this length must stand as one word: "K, I" is no potassium iodide
_REMEMBERED = 20_000  # words and formulas kept; a hostile text must not fill the memory

_RUN = re.compile(r"[A-ZАВЕКМНОРСТХІ][A-Za-z0-9()\[\]АВЕКМНОРСТХІасеохі]*")
_LED = re.compile(r"[(\[][A-Z][A-Za-z0-9]*[)\]]\d*[A-Z][A-Za-z0-9()\[\]]*")


class NameIndex:
    """Names of the catalogue in running text."""

    def __init__(self, data: Catalogue | None = None) -> None:
        self._data = data or catalogue()
        self._spelled: dict[str, str] = {}
        self._formulas: dict[str, Found | None] = {}

    def find(self, chars: str) -> list[Match]:
        """All names in ``chars``, longest first at each place, none overlapping, in order.

        >>> [m.written for m in NameIndex().find("Dissolve 12.1 g Tris base and 3 g KCl in water")]
        ['Tris base', 'KCl', 'water']
        """
        if len(self._spelled) > _REMEMBERED or len(self._formulas) > _REMEMBERED:
            self._spelled.clear()
            self._formulas.clear()
        folded = chars if chars.isascii() else chars.translate(FOLD)
        words = [found.span() for found in WORD.finditer(folded)]
        matches: list[Match] = []
        reached = 0
        for at, (start, _) in enumerate(words):
            if start < reached:
                continue
            found = self._at(folded, words, at)
            if found is None:
                continue
            reached = found[1]
            if found[2].kind != "n":
                matches.append(self._match(chars, folded, *found))
                reached = matches[-1].end
        return matches

    def _at(
        self, chars: str, words: list[tuple[int, int]], at: int
    ) -> tuple[int, int, Found, str] | None:
        """Start, end, what was found at word ``at``, and the word before it that belongs to it."""
        before = _BEFORE.get(self._word(chars, words[at]))
        if before and at + 1 < len(words):
            joint = chars[words[at][1] : words[at + 1][0]]
            if len(joint) <= 2 and not joint.strip(" .-"):
                found = self._plain(chars, words, at + 1)
                if found is not None and found.kind not in ("n", "g"):
                    return words[at][0], found.end, found, before
        found = self._plain(chars, words, at)
        return None if found is None else (found.start, found.end, found, "")

    def _plain(self, chars: str, words: list[tuple[int, int]], at: int) -> Found | None:
        """The longer of the name and the formula that begin at word ``at``."""
        if self._word(chars, words[at]) in FIRST:
            noun = water_phrase(chars, words, at, lambda place: self._word(chars, words[place]))
            if noun is not None:
                found = self._name(chars, words, noun)
                return found and found._replace(start=words[at][0])
        name = self._name(chars, words, at)
        first = chars[words[at][0]]
        if not (first.isupper()):
            return name
        formula = self._formula(chars, words[at][0])
        if formula is None or (name is not None and name.end >= formula.end and name.kind != "f"):
            return name
        return formula

    def _word(self, chars: str, word: tuple[int, int]) -> str:
        """A word in the spelling of the keys."""
        written = chars[word[0] : word[1]]
        known = self._spelled.get(written)
        if known is None:
            known = self._spelled[written] = spell(written)
        return known

    def _name(self, chars: str, words: list[tuple[int, int]], at: int) -> Found | None:
        """The longest name of the catalogue that begins at word ``at``."""
        names, gate, longest = self._data.names, self._data.gate, self._data.longest
        name = self._word(chars, words[at])
        if name[:4] not in gate:
            return None
        best: Found | None = None
        last = at
        start = words[at][0]
        while len(name) <= longest:
            end = words[last][1]
            if name in names and (last == at or len(name) >= _SHORT or " " not in chars[start:end]):
                best = self._entry(chars, start, end, name) or best
            elif name[-1:] == "s" and len(name) > _SHORT and name[:-1] in names:
                best = self._entry(chars, start, end, name[:-1]) or best
            last += 1
            if last >= len(words):
                break
            joint = chars[end : words[last][0]]
            if len(joint) > _JOINT_LENGTH or joint.strip(_JOINT):
                break
            name += self._word(chars, words[last])
            if name[:4] not in gate or (len(name) >= 8 and name[:8] not in gate):
                break
        return best

    def _entry(self, chars: str, start: int, end: int, name: str) -> Found | None:
        """The entry of a name, unless its capitals speak against it; brackets are completed."""
        targets, kind, exact = self._data.entry(name)
        flags: tuple[str, ...] = ()
        if exact:
            written = re.sub(r"[ \-,()\[\]']", "", chars[start:end])
            meant = written in {re.sub(r"[ \-,()\[\]']", "", spelling) for spelling in exact}
            if kind == "f":
                flags = () if meant else ("case",)
                if not meant and written in ("COCl2",):
                    return None
            elif not meant:
                return None
        inside = chars[start:end]
        if inside.count("(") > inside.count(")") and chars[end : end + 1] == ")":
            end += 1
        elif inside.count(")") > inside.count("(") and chars[start - 1 : start] == "(":
            start -= 1
        return Found(start, end, targets, kind, flags)

    def _formula(self, chars: str, start: int) -> Found | None:
        """The compound whose formula begins at ``start``, or one bracket before it."""
        if start and chars[start - 1] in "([":
            led = _LED.match(chars, start - 1)
            if led is not None:
                found = self._run(led[0])
                if found is not None:
                    return found._replace(start=start - 1, end=start - 1 + found.end)
        run = _RUN.match(chars, start)
        if run is None:
            return None
        found = self._run(run[0])
        if found is None:
            return None
        end = start + found.end
        if "unbalanced" in found.flags and chars[end : end + 1] in ("+", "-", "^"):
            return None
        return found._replace(start=start, end=end)

    def _run(self, run: str) -> Found | None:
        if run in self._formulas:
            return self._formulas[run]
        found = self._formulas[run] = read_formula(run)
        return found

    def _match(
        self, chars: str, folded: str, start: int, end: int, found: Found, before: str
    ) -> Match:
        """The match with the water and the word "conc." behind it."""
        known = hydrates_known(found.targets) if found.targets else frozenset({0.0, 99.0})
        water: Water | None = None
        if found.kind != "g" or any(known):
            water = water_behind(folded, end, known)
        flags = found.flags
        if water is not None:
            end = water.end
            flags += water.flags
        elif not before and (behind := _BEHIND.match(folded, end)):
            before, end = "concentrated", _closed(folded, end, behind.end())
        if found.kind == "c":
            before = "concentrated"
        if before == "concentrated":
            flags += ("concentrated",)
        if found.kind == "b":
            flags += ("buffer-name",)
        named, count = water is not None, water.count if water else None
        if found.made:
            read = made_with_water(found, named, count, before)
        else:
            read = meaning(found.targets, found.kind, named, count, before)
        return Match(
            start, end, read.substances, read.form_named, found.kind == "g", chars[start:end], flags
        )


def _closed(chars: str, start: int, end: int) -> int:
    """``end`` without a closing bracket that has no opening one behind ``start``."""
    inside = chars[start:end]
    return end - 1 if inside.endswith(")") and "(" not in inside else end
