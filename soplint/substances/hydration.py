"""The water of crystallisation as it is written behind a name or formula."""

from __future__ import annotations

import re
from typing import NamedTuple

from .naming import HYDRATE_PREFIXES

_SPELLED = re.compile(
    r"[ ,;]{0,3}[-·.*]? ?(?P<open>[(\[]?) ?"
    r"(?:(?P<prefix>[a-z]{2,9})[- ]?hydrat(?:e|ed)(?![^\W_])"
    r"|(?P<number>\d{1,2}(?:\.5)?)[- ]?(?:hydrat(?:e|ed)|aq)(?![^\W_])"
    r"|(?P<some>hydrat(?:e|ed)|x-hydrate)(?![^\W_])"
    r"|(?P<none>anhydrous|anhydr\.?|anhyd\.?|anh\.|water[- ]free)(?![^\W_]))"
    r"(?P<close> ?[)\]])?",
    re.IGNORECASE,
)
_WRITTEN = re.compile(
    r"(?P<join> ?[·*.+] ?| ?, ?| ?- ?| x ?|x(?=\d)| )(?P<open>[(\[]?)"
    r"(?P<count>\d{1,2}[.,]\d|\d{1,2} ?/ ?\d|\d{1,2}|[½¼¾xXn](?= ?H))? ?"
    r"(?P<water>H2O|H20|H2o|HOH|h2o|h20)(?![A-Za-z0-9])(?P<close>[)\]])?"
)
_FRACTION = {"½": 0.5, "¼": 0.25, "¾": 0.75}
_HINT = re.compile(r"[hH](?:2|y|OH)|nh|aq|free")
_REACH = 24  # characters behind a name within which its hydrate must begin


class Water(NamedTuple):
    """Water named behind a substance: ``molecules`` None means "hydrate" without a number."""

    end: int
    molecules: float | None  # mol per mol
    flags: tuple[str, ...]


def water_behind(chars: str, at: int, known: frozenset[float]) -> Water | None:
    """The hydrate written at ``at``, directly behind a name, or None.

    ``known`` holds the hydrates of the catalogue for that name: a loose joint (a space, a comma, a
    hyphen, a plus sign) counts only if the number is among them or stands close to the H2O.

    >>> water_behind("CuSO4-5H20", 5, frozenset({5.0})).molecules
    5.0
    >>> water_behind("NaCl, H2O", 4, frozenset({0.0})) is None
    True
    """
    if _HINT.search(chars, at, at + _REACH) is None:
        return None
    spelled = _SPELLED.match(chars, at)
    if spelled is not None and not (spelled.end("open") == at and spelled["number"]):
        if not spelled["prefix"] or spelled["prefix"].lower() in HYDRATE_PREFIXES:
            return _spelled(spelled)
    written = _WRITTEN.match(chars, at)
    if written is None:
        return None
    return _written(written, known)


def _spelled(found: re.Match[str]) -> Water:
    end = found.end() if not found["close"] or found["open"] else found.start("close")
    if found["none"]:
        return Water(end, 0.0, ())
    if found["some"]:
        return Water(end, None, ())
    if found["number"]:
        return Water(end, float(found["number"]), ())
    return Water(end, HYDRATE_PREFIXES[found["prefix"].lower()], ())


def _count(text: str | None) -> float | None:
    """The number of water molecules; None for "x" and "n"."""
    if text is None:
        return 1.0
    if text in "xXn":
        return None
    if text in _FRACTION:
        return _FRACTION[text]
    if "/" in text:
        above, below = text.split("/")
        return int(above) / int(below) if int(below) else 1.0
    return float(text.replace(",", "."))


def _written(found: re.Match[str], known: frozenset[float]) -> Water | None:
    count = _count(found["count"])
    joint = found["join"].strip()
    if count == 0:
        return None
    if found["join"] == ". " or (joint in (",", "+") and found["count"] is None):
        return None
    if joint not in ("·", "*", ".", "x") or found["join"] == " . ":
        glued = found["count"] is not None and found.end("count") == found.start("water")
        has_hydrates = any(known)
        if count not in known and not (glued and has_hydrates and joint != "+"):
            return None
    flags = ("zero-for-O",) if "0" in found["water"] else ()
    end = found.end() if not found["close"] or found["open"] else found.start("close")
    return Water(end, count, flags)
