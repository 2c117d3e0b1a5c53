"""The unit that follows a number: glued or spaced, simple or over another, with its basis."""

from __future__ import annotations

import re
from typing import NamedTuple

from soplint.quantities.late import LatePattern
from soplint.quantities.units import Unit, lookup_unit, unit_table


class ReadUnit(NamedTuple):
    """A unit found behind a number."""

    unit: Unit
    end: int
    basis: str | None = None
    flags: tuple[str, ...] = ()


_WORD = re.compile(
    r"[ \u00a0\u2009\u202f]{0,2}(-(?=[A-Za-z]))?"
    r"([%‰€£]|[°º˚] ?[CFCС]?(?![A-Za-z])|[×✕](?: ?g(?![\w]))?|[A-Za-zµμÅΩ\u0400-\u04ff]+[0-9²³]?)"
)
_OVER = re.compile(
    r" ?/ ?(?P<slash>[A-Za-zµμ\u0400-\u04ff]+[3³]?)(?![\w]|-[A-Za-z])"
    r"|/(?P<hundred>100 ?(?:mL|ml|g|L|l))(?!\w)"
    r"| per (?P<per>[A-Za-zµμ]+|100 ?(?:mL|ml|g))(?!\w)"
    r"|[ ·⋅*.]?(?P<inverse>[A-Za-zµμ]+)(?P<power>(?:\^\{?)?[-−–]1\}?|⁻¹)(?!\w)"
    r"|[ ·⋅*.]?(?P<cubed>d?c?m)(?:(?:\^\{?)?[-−–]3\}?|⁻³)(?!\w)"
)
OVER_FIRST = frozenset("/·⋅*.pLlmdckKgsµμh")
_BASIS = LatePattern(
    r" ?[(\[]? ?(?P<basis>(?:w|v|m|wt|vol|W|V|M|Vol|Wt)\.? ?[/:] ?(?:w|v|m|wt|vol|W|V|M|Vol|Wt)"
    r"(?:[/:](?:w|v|m|wt|vol|W|V|M)){0,4}|by (?:volume|weight|mass|vol|wt)|wt(?!\w)|vol(?!\w)|weight(?!\w)|mol(?!\w)"
    r"|об|мас)(?!\w)(?: ?[)\]])?"
)
_BASIS_FIRST = frozenset("([wvmbWVMоm")
_NO_STRENGTH = LatePattern(
    r" ?\(?(?:RH|rel|relative humidity|humidity|confluen|transmi|recover|yield|efficien|of the time)"
)
_PERCENT_WORDS = LatePattern(
    r"[ -]?(?P<basis>w/v|v/v|w/w|m/v|m/m|wt|vol|mol|mass|weight|at)?\.?[ -]{0,2}"
    r"(?:%|per ?cent(?!\w))(?P<more>.)?", re.IGNORECASE
)  # fmt: skip
_DEGREES = LatePattern(r" ?(C|F|[Cc]elsius|[Ff]ahrenheit|[Cc]entigrade)(?!\w)")
_WARE = LatePattern(
    r".{0,24}?\b(?:filter|membrane|pore|nylon|PES|PVDF|PTFE|syringe|cellulose|mesh)", re.IGNORECASE
)
_NO_UNIT = frozenset(("A", "S", "pm", "MU", "time"))
_FIRST_OF_NAME = frozenset("LlDdmhsgCKFUVWJ")  # "L-cysteine", "d-limonene": no unit before a hyphen
_VOLUMES_OVER = {"vol": "v", "wt": "w", "m": "w", "w": "w", "v": "v"}


def read_unit(chars: str, end: int) -> ReadUnit | None:
    """The unit behind the number that ends at ``end``, or None.

    ``x`` and ``X`` are read as the fold unit; whether they count repeats is for the caller.

    Example:
        >>> read_unit("34mls of it", 2).unit.symbol
        'mL'
        >>> read_unit("2 g/L", 1).unit.symbol
        'g/L'
    """
    found = _WORD.match(chars, end)
    if found is None:
        return None
    word, stop = found.group(2), found.end()
    if word == "%":
        return _percent(chars, stop, None)
    first = word[0]
    if first in "°º˚":
        return _degree(chars, word, stop)
    if first in "×✕":
        return ReadUnit(unit_table()["×g" if "g" in word else "X"], stop)
    if first in "xX":
        return _times(chars, word, found.start(2))
    unit = unit_table().get(word)
    if unit is None or word in _NO_UNIT:
        unit, stop = _other_word(chars, word, found.start(2), stop)
        if unit is None:
            return _two_words(chars, word, found.start(2), stop)
    if not _ends_here(chars, word, stop):
        return None
    if unit.symbol in ("vol", "mol") and chars[stop : stop + 2].strip()[:1] == "%":
        return _two_words(chars, "vol" if unit.symbol == "vol" else "mol", found.start(2), stop)
    flags = (word,) if unit.slip else ()
    after = chars[stop : stop + 1]
    if after == " ":
        after = chars[stop + 1 : stop + 2]
    if after and after in OVER_FIRST:
        compound = _compound(chars, unit, stop, flags)
        if compound is not None:
            return compound
    if unit.symbol == "µM" and _WARE.match(chars, stop):
        return ReadUnit(unit_table()["µm"], stop, None, ("uM-length",))
    return ReadUnit(unit, stop, None, flags)


def _ends_here(chars: str, word: str, stop: int) -> bool:
    after = chars[stop : stop + 1]
    if not after or after in " ,.;)(":
        return True
    if after.isalnum() or after == "_":
        return False
    if after == "-" and chars[stop + 1 : stop + 2].isalpha():
        if word in _FIRST_OF_NAME:
            return False
        return not (word == "N" and chars[stop + 1 : stop + 2].islower())
    return not (after in "'′" and len(word) == 1)


def _other_word(chars: str, word: str, start: int, stop: int) -> tuple[Unit | None, int]:
    """A word in capitals ("Liters"), or one whose last digit belongs to what follows."""
    if word[-1].isdigit():
        shorter = word[:-1]
        unit = unit_table().get(shorter)
        if unit is not None and len(shorter) > 1 and unit.symbol == "°C":
            return unit, stop - 1
        return None, stop
    if len(word) >= 4:
        return lookup_unit(word), stop
    return None, stop


def _two_words(chars: str, word: str, start: int, stop: int) -> ReadUnit | None:
    """Units of several words: "degrees C", "per cent", "wt %", "o C", "x g"."""
    lower = word.lower()
    if lower in ("deg", "degree", "degrees"):
        stop += chars[stop : stop + 1] == "."
        scale = _DEGREES.match(chars, stop)
        letter = scale.group(1)[0].upper() if scale else "C"
        end = scale.end() if scale else stop
        return ReadUnit(unit_table()["°F" if letter == "F" else "°C"], end)
    if lower in ("per", "wt", "vol", "w", "v", "m", "mol", "weight", "mass", "at"):
        found = _PERCENT_WORDS.match(chars, start)
        if found is not None:
            end = found.end("more") - 1 if found.group("more") else found.end()
            return _percent(chars, end, found.group("basis"))
    if word in ("mw", "MW", "Mw", "FW", "Fw", "fw"):
        return ReadUnit(unit_table()["g/mol"], stop)
    if word == "o" and chars[stop : stop + 2] == " C" and not chars[stop + 2 : stop + 3].isalnum():
        return ReadUnit(unit_table()["°C"], stop + 2)
    return None


def _degree(chars: str, word: str, stop: int) -> ReadUnit:
    if chars[stop : stop + 1] == "/":
        rate = _compound(chars, unit_table()["°C"], stop, ())
        if rate is not None:
            return rate
    if word[-1] == "F":
        return ReadUnit(unit_table()["°F"], stop)
    flags = ("no-scale",) if len(word.strip()) == 1 else ()
    return ReadUnit(unit_table()["°C"], stop - (len(word) - len(word.rstrip())), None, flags)


def _times(chars: str, word: str, start: int) -> ReadUnit | None:
    """The fold sign x or X, also glued to a name ("10xTBE"), and "x g" for centrifugal force."""
    table = unit_table()
    if word in table and word not in ("x", "X"):
        return ReadUnit(table[word], start + len(word))
    after = chars[start + 1 : start + 3]
    if len(word) == 1:
        if re.compile(r" ?g(?!\w|-)").match(chars, start + 1):
            return ReadUnit(table["×g"], chars.index("g", start) + 1)
        if after[:1] in ("-", "_") and not after[1:].isspace():
            return ReadUnit(table["X"], start + 1) if after[1:].isalpha() else None
        return ReadUnit(table["X"], start + 1)
    return ReadUnit(table["X"], start + 1) if after[:1].isupper() else None


def _percent(chars: str, end: int, basis: str | None) -> ReadUnit:
    percent = unit_table()["%"]
    after = chars[end : end + 2].lstrip()[:1]
    if basis is None and after and after in _BASIS_FIRST:
        found = _BASIS.match(chars, end)
        if found is not None:
            opened = found.group().count("(") + found.group().count("[")
            closed = found.group().count(")") + found.group().count("]")
            stop = found.end() if opened == closed else found.end("basis")
            return ReadUnit(percent, stop, basis_name(found.group("basis")))
    if _NO_STRENGTH.match(chars, end):
        return ReadUnit(Unit("%", "other", 0.01, "1", "0.01"), end)
    return ReadUnit(percent, end, basis_name(basis) if basis else None)


def basis_name(written: str) -> str:
    """The basis of a percentage in its short form.

    Example:
        >>> basis_name("m/V"), basis_name("by volume"), basis_name("wt.")
        ('w/v', 'v/v', 'w/w')
    """
    text = written.lower().replace(" ", "").replace(".", "").removeprefix("by")
    if text.startswith("мас"):
        return "w/w"
    if text.startswith("об"):
        return "v/v"
    for sign in "/:":
        if sign in text:
            over, under = text.split(sign)[:2]  # "v/v/v" of three parts
            return f"{_VOLUMES_OVER.get(over, over)}/{_VOLUMES_OVER.get(under, under)}"
    if text in ("mol", "at"):
        return "mol"
    return "v/v" if text.startswith("vol") else "w/w"


def _compound(chars: str, over: Unit, stop: int, flags: tuple[str, ...]) -> ReadUnit | None:
    found = _OVER.match(chars, stop)
    if found is None:
        return None
    if found.group("hundred") or (found.group("per") or "").startswith("100"):
        written = (found.group("hundred") or found.group("per"))[3:].strip()
        unit = unit_table().get(f"{over.symbol}/100 {written.replace('ml', 'mL')}")
        return ReadUnit(unit, found.end(), None, flags) if unit is not None else None
    word = found.group("slash") or found.group("per") or found.group("inverse")
    if found.group("cubed"):
        word = found.group("cubed") + "3"
    under = unit_table().get(word) or (lookup_unit(word) if len(word) > 3 else None)
    if under is None or under.dimension in ("molarity", "fold", "money", "count"):
        return None
    name = f"{over.symbol}/{under.symbol}"
    unit = unit_table().get(name)
    if unit is None:
        unit = Unit(name, "other", 1.0, name, name)
    if under.slip:
        flags = (*flags, word)
    return ReadUnit(unit, found.end(), None, flags)
