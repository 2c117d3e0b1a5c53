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
from .naming import FOLD, spell
from .reading import (
    Found,
    hydrates_known,
    made_with_water,
    meaning,
    read_formula,
    sold_concentrated,
)
from .water import FIRST, water_phrase
from .words import Line, Names

_BEFORE = {
    "anhydrous": "anhydrous",
    "anhyd": "anhydrous",
    **dict.fromkeys(
        (
            "wasserfrei",
            "wasserfreie",
            "wasserfreies",
            "wasserfreier",
            "wasserfreien",
            "wasserfreiem",
        ),
        "anhydrous",
    ),
    "conc": "concentrated",
    "concd": "concentrated",
    "concentrated": "concentrated",
    "fuming": "concentrated",
}
_BEHIND = re.compile(
    r" ?,? ?\(?(?:conc\.?|concd\.?|concentrated)(?![^\W_])\.?\)?(?! ?[^\W_])", re.IGNORECASE
)
_FOLDED = re.compile("[" + "".join(map(chr, FOLD)) + "]")
_GOES_ON = ("-", ",", "'", "(", "[")  # "2-propanol", "1,4-dioxane", "N,N'-", "K[...]"
_REMEMBERED = 20_000  # words and formulas kept; a hostile text must not fill the memory

_RUN = re.compile(r"[A-ZАВЕКМНОРСТХІ][A-Za-z0-9()\[\]АВЕКМНОРСТХІасеохі]{0,80}")
_LIKE_FORMULA = re.compile(r"(?:[A-ZАВЕКМНОРСТХІ][a-zасеохі]?\d*)+$")
_LED = re.compile(r"[(\[][A-Z][A-Za-z0-9]{0,20}[)\]]\d{0,3}[A-Z][A-Za-z0-9()\[\]]{0,60}")


# Words before "HCl" that are no organic base.
_NO_BASE = {
    *("combine", "determine", "examine", "define", "machine", "fine", "line", "refine", "chlorine"),
    *(
        "brine",
        "urine",
        "routine",
        "saline",
        "bromine",
        "iodine",
        "fluorine",
        "examine",
        "medicine",
    ),
    *("baseline", "turbine", "marine", "nine", "wine", "mine", "online", "discipline", "pipeline"),
}
_BASE = re.compile(r"\b([A-Za-z-]{3,}(?:ine|min|cin|nolol|olol|amil))[ -]$", re.IGNORECASE)


def _salt_of_another(chars: str, start: int, end: int) -> bool:
    """ "dopamine HCl": the salt of a base that is not in the catalogue, no hydrochloric acid."""
    if chars[start:end] not in ("HCl", "HBr", "2HCl"):
        return False
    before = _BASE.search(chars[max(0, start - 40) : start])
    return before is not None and before[1].lower() not in _NO_BASE


class NameIndex:
    """Names of the catalogue in running text."""

    def __init__(self, data: Catalogue | None = None) -> None:
        self._names = Names(data or catalogue())
        self._spelled: dict[str, str] = {}
        self._formulas: dict[str, Found | None] = {}
        self._dull: set[str] = set()  # words with which nothing can begin

    def find(self, chars: str) -> list[Match]:
        """All names in ``chars``, longest first at each place, none overlapping, in order.

        >>> [m.written for m in NameIndex().find("Dissolve 12.1 g Tris base and 3 g KCl in water")]
        ['Tris base', 'KCl', 'water']
        """
        self._forget()
        folded = chars.translate(FOLD) if _FOLDED.search(chars) else chars
        line = Line(folded, self._spelled)
        dull = self._dull
        matches: list[Match] = []
        reached = 0
        for at, (start, end) in enumerate(line.spans):
            if start < reached or folded[start:end] in dull:
                continue
            if end - start == 1 and folded[end : end + 1] not in _GOES_ON and folded[start] != "K":
                continue  # a number or letter by itself; "K phosphate" is written so
            if self._is_dull(folded[start:end]):
                continue
            found = self._at(line, at)
            if found is None:
                continue
            reached = found[1]
            if found[2].kind != "n":
                if _salt_of_another(folded, found[0], found[1]):
                    continue
                matches.append(self._match(chars, folded, *found))
                reached = matches[-1].end
        return matches

    def _forget(self) -> None:
        """Keep the memory of words and formulas within bounds."""
        for memory in (self._spelled, self._formulas, self._dull):
            if len(memory) > _REMEMBERED:
                memory.clear()

    def _is_dull(self, written: str) -> bool:
        """Whether nothing can begin with this word; such words are remembered."""
        word = spell(written)
        if (
            self._names.can_begin(word)
            or word in _BEFORE
            or word in FIRST
            or _LIKE_FORMULA.match(written) is not None
        ):
            return False
        self._dull.add(written)
        return True

    def _at(self, line: Line, at: int) -> tuple[int, int, Found, str] | None:
        """Start, end, what was found at word ``at``, and the word before it that belongs to it."""
        before = _BEFORE.get(line.word(at))
        if before and at + 1 < len(line.spans):
            joint = line.joint(at)
            if len(joint) <= 2 and not joint.strip(" .-"):
                found = self._plain(line, at + 1)
                fits = before == "anhydrous" or (found and sold_concentrated(found.targets))
                if found is not None and found.kind not in ("n", "g") and fits:
                    return line.spans[at][0], found.end, found, before
        found = self._plain(line, at)
        return None if found is None else (found.start, found.end, found, "")

    def _plain(self, line: Line, at: int) -> Found | None:
        """The longer of the name and the formula that begin at word ``at``."""
        if line.word(at) in FIRST:
            noun = water_phrase(line, at)
            if noun is not None:
                found = self._names.longest(line, noun)
                return found and found._replace(start=line.spans[at][0])
        name = self._names.longest(line, at)
        start = line.spans[at][0]
        if not line.chars[start].isupper():
            return name
        formula = self._formula(line.chars, start)
        if formula is None or (name is not None and name.end >= formula.end and name.kind != "f"):
            return name
        return formula

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
        elif (
            not before
            and (behind := _BEHIND.match(folded, end))
            and sold_concentrated(found.targets)
        ):
            before, end = "concentrated", _closed(folded, end, behind.end())
        if found.kind == "c":
            before = "concentrated"
        if before == "concentrated":
            flags += ("concentrated",)
        if found.kind == "b":
            flags += ("buffer-name",)
        named, count = water is not None, water.molecules if water else None
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
