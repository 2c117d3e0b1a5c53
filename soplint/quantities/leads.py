"""What stands before a number: "about", "at least", "pH", "MW", "density", "step", a sign."""

from __future__ import annotations

from typing import NamedTuple


class Lead(NamedTuple):
    """What the characters before a number say about it."""

    kind: str = ""  # pH, molar-mass, density, pKa, label, money, or "" for nothing
    manner: str = "plain"  # plain, about, at-most, at-least
    start: int = -1  # where the key word begins; -1 without one
    adjacent: bool = False  # only spaces, "=" or ":" between the key word and the number
    between: bool = False
    sign: str = ""  # "±", "-", "×", "$" directly before the number


NOTHING = Lead()

_LABELS = """section sect sec. sections table tables tab fig figure figures figs step steps version ver v rev revision
 lot batch cat catalog catalogue no nr number # sop iso astm din en usp bp. annex appendix chapter page pages p
 pp item ref reference equation lane well tube tubes vial flask sample solution buffer reagent cas un p/n form
 method procedure day week grade type class model room note part phase cycle lines line column row rule code
 issue edition vol. point clause article expt experiment protocol module channel filter position button
 january february march april may june july august september october november december jan feb mar apr jun jul
 aug sep sept oct nov dec guideline directive regulation""".split()
_FILLERS = "of is be to at value was are the between from must should has have a an being".split()
_ABOUT = """about approx approx. approximately ca ca. c. circa roughly around nearly almost some
 approximatively appr appr. ungefähr около ок примерно""".split()

_WORDS: dict[str, str] = {
    **dict.fromkeys(_LABELS, "label"),
    **dict.fromkeys((f"{word}." for word in _LABELS), "label"),
    **dict.fromkeys(_FILLERS, "filler"),
    **dict.fromkeys(_ABOUT, "about"),
    **dict.fromkeys(("ph", "рн", "рh", "pн"), "pH"),
    **dict.fromkeys(("pka", "pka1", "pka2", "pkb", "pks"), "pKa"),
    **dict.fromkeys(("mw", "m.w.", "m.w", "fw", "f.w.", "f.w", "mr", "m.r.", "mol.wt."), "molar-mass"),
    **dict.fromkeys(("mwt", "mol.wt", "r.m.m.", "m.m.", "rmm"), "molar-mass"),
    **dict.fromkeys(("density", "ρ", "rho", "sg", "s.g."), "density"),
    "least": "least", "most": "most", "than": "than", "below": "at-most", "max": "at-most",
    "max.": "at-most", "maximum": "at-most", "minimum": "at-least", "min.": "min", "nmt": "at-most",
    "nlt": "at-least", "exceeding": "at-most", "above": "at-least",
    "weight": "weight", "mass": "mass", "wt": "weight", "wt.": "weight", "gr.": "gravity", "gravity": "gravity",
    "d": "d", "m": "m",
}  # fmt: skip

# Second words that make the first one a key: "molecular weight", "specific gravity", "at least".
_PAIRS = {
    "weight": ({"molecular", "formula", "mol", "mol.", "molar"}, "molar-mass"),
    "mass": ({"molar", "molecular", "formula"}, "molar-mass"),
    "gravity": ({"sp.", "sp", "specific"}, "density"),
    "least": ({"at"}, "at-least"),
    "most": ({"at"}, "at-most"),
}
_MANNERS = {"about", "at-most", "at-least"}
_SIGNS = {
    "~": "about",
    "≈": "about",
    "∼": "about",
    "≥": "at-least",
    "≤": "at-most",
    "⩾": "at-least",
}
_KEYS = {"pH", "pKa", "molar-mass", "density"}
_LAST = frozenset("".join(word[-1] for word in _WORDS) + "HKWMRDV")


def is_lead_word(word: str) -> bool:
    """Whether a word before a number can say something about it."""
    return word.lower() in _WORDS


def read_lead(chars: str, start: int) -> Lead:
    """Read backwards from the number at ``start``; at most five words and forty characters.

    Example:
        >>> read_lead("adjust the pH to about 6.4", 23)
        Lead(kind='pH', manner='about', start=11, adjacent=False, between=False, sign='')
    """
    if start == 0:
        return NOTHING
    floor = start - 40 if start > 40 else 0
    if chars[start - 1] == " ":
        word = chars[chars.rfind(" ", floor, start - 1) + 1 : start - 1]
        if word.isalpha() and word.lower() not in _WORDS:
            return NOTHING
    at, sign, manner, gap = _signs(chars, start, floor)
    last = chars[at - 1 : at]
    if not last or (last not in _LAST and last.lower() not in _LAST):
        return Lead("", manner, sign=sign) if sign or manner != "plain" else NOTHING
    return _words(chars, at, floor, sign, manner, gap)


def _signs(chars: str, start: int, floor: int) -> tuple[int, str, str, str]:
    """Step back over spaces and signs: position, the sign next to the number, manner, what was passed."""
    at, sign, manner, passed = start, "", "plain", ""
    while at > floor:
        char = chars[at - 1]
        if char == " " or char == "\u00a0":
            at -= 1
            continue
        if char in _SIGNS:
            manner = _SIGNS[char]
        elif char in "<>":
            before = chars[at - 2 : at - 1]
            if at - 2 < floor and char == ">":
                break
            if before in ("-", "=", ">", "<", "–") or (char == ">" and before.isalnum()):
                break
            manner = "at-most" if char == "<" else "at-least"
        elif char in "±-−–×$€£xX#@" and not sign:
            if char == "-" and chars[at - 3 : at] == "+/-":
                sign, at = "±", at - 3
                continue
            if char in "xX" and at - 2 >= 0 and chars[at - 2].isalpha():
                break
            sign = char
            if char not in "±@":
                at -= 1
                break
        elif char in "=:([{":
            passed += char
        else:
            break
        at -= 1
    return at, sign, manner, passed


def _word_start(chars: str, at: int, floor: int) -> int:
    begin = max(chars.rfind(" ", floor, at) + 1, floor)
    if chars[begin:at].isalpha():
        return begin
    begin = at
    while begin > floor:
        char = chars[begin - 1]
        if not (
            char.isalpha() or (char == "." and begin > floor + 1 and chars[begin - 2].isalpha())
        ):
            break
        begin -= 1
    return begin


def _words(chars: str, at: int, floor: int, sign: str, manner: str, passed: str) -> Lead:
    between = False
    first = at
    for count in range(5):
        begin = _word_start(chars, at, floor)
        if begin == at or (begin > 0 and chars[begin - 1] in "_/" and begin > floor):
            break
        if begin > 0 and chars[begin - 1].isalnum():
            break
        word = chars[begin:at]
        role = _role(chars, word, begin, floor, passed)
        if role in _KEYS:
            bare = count == 0 and at == first and not set(passed) - set("=:")
            return Lead(role, manner, begin, bare and manner == "plain", between, sign)
        if role == "label":
            if count == 0 and "(" not in passed:
                return Lead("label", manner, begin, True, between, sign)
            break
        if role in _MANNERS:
            manner = role
        elif role != "filler":
            break
        between = between or word.lower() == "between"
        at, _, more, passed_here = _signs(chars, begin, floor)
        passed += passed_here
        manner = more if more != "plain" else manner
    if manner == "plain" and not sign and not between:
        return NOTHING
    return Lead("", manner, -1, False, between, sign)


def _role(chars: str, word: str, begin: int, floor: int, passed: str) -> str:
    """The role of a word before a number, with the word before it where that decides."""
    role = _WORDS.get(word.lower(), "")
    if role in ("", "filler", "about", "pH", "label", "molar-mass", "pKa", "density"):
        if role == "pH" and word[0] == "P" and word != "PH" and word != "Ph":
            return ""
        return role
    if role in ("d", "m"):
        wanted = "density" if word == "d" else "molar-mass" if word == "M" else ""
        opened = word == "M" and chars[begin - 1 : begin] == "("
        return wanted if "=" in passed or opened else ""
    before = _previous_word(chars, begin, floor)
    if role == "than":
        return _than(chars, begin, floor, before)
    if role == "min":
        return "" if before[:1].isdigit() or not before else "at-least"
    if role in _PAIRS:
        firsts, meaning = _PAIRS[role]
        return meaning if before in firsts else ""
    return role


def _previous_word(chars: str, at: int, floor: int) -> str:
    words = chars[floor:at].split()
    return words[-1].lstrip("([").lower() if words else ""


def _than(chars: str, begin: int, floor: int, before: str) -> str:
    words = [word.lower() for word in chars[floor:begin].split()]
    denied = len(words) > 1 and words[-2] in ("not", "no", "never")
    if before in ("more", "greater", "higher", "larger", "above"):
        return "at-most" if denied else "at-least"
    if before in ("less", "lower", "fewer", "smaller"):
        return "at-least" if denied else "at-most"
    return ""
