"""Settle terminals whose meaning depends on their neighbours.

A volume beside a vessel is the size of ware ("1000 mL volumetric flask"), a bare number after
"adjust the pH to" is a pH, "concentration of" before a strength says nothing of its own.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from soplint.notation.arithmetic import arithmetic
from soplint.notation.asides import asides
from soplint.notation.strength_symbols import strengths_unassigned
from soplint.notation.terminals import Terminal

# Words that may stand between a size and its vessel: "50 mL class A conical flask".
_ADJECTIVES = {
    *("volumetric", "conical", "class", "a", "as", "b", "glass", "plastic", "polyethylene", "pp"),
    *("pe", "hdpe", "ldpe", "ptfe", "sterile", "clean", "dry", "graduated", "measuring", "amber"),
    *(
        "brown",
        "one-mark",
        "screw-cap",
        "screw-capped",
        "centrifuge",
        "erlenmeyer",
        "polypropylene",
    ),
    *(
        "tall",
        "tall-form",
        "borosilicate",
        "wide-neck",
        "wide-mouth",
        "falcon",
        "stoppered",
        "capped",
    ),
    *("polystyrene", "quartz", "silica", "teflon", "pyrex", "duran", "schott", "griffin", "round"),
    *("bottom", "flat", "bottomed", "round-bottom", "round-bottomed", "digestion", "kjeldahl"),
    *("serum", "media", "culture", "storage", "sample", "autoclavable", "low-density", "eppendorf"),
}
_PH_LOWEST, _PH_HIGHEST = -1.0, 15.0
_APART = 40  # terminals between a percentage and its basis, at most
_LINKS = {"COMMA", "AND", "OR", "SLASH", "SEMICOLON"}


def refine(chars: str, found: list[Terminal]) -> list[Terminal]:
    """The terminals with figures of arithmetic, ware sizes and pH values recognised."""
    if any(terminal.kind in ("TIMES", "EQUALS") for terminal in found):
        found = _facts_unassigned(arithmetic(chars, found))
        found = strengths_unassigned(chars, found)
    kinds = {terminal.kind for terminal in found}
    if "BASIS" in kinds:
        found = _bases(chars, found)
    if "NUMBER" in kinds:
        found = _series(found)
    found = asides(chars, _parts_of_whole(chars, _nouns(chars, _adjectives(chars, found))))
    kinds = {terminal.kind for terminal in found}
    if "WARE" in kinds:
        found = _ware(chars, found)
    elif "VOLUME" in kinds and "ADD" in kinds:
        found = _listed_pipettes(found)
    if "NUMBER" in kinds and ("PHWORD" in kinds or "ADJUST" in kinds):
        found = _ph_numbers(found)
    return found


# Facts about a substance stand beside its name, with or without their symbol: "M = 58.44 g/mol".
_FACTS = {"MOLARMASS", "DENSITY", "PH"}
_OF_SOMETHING = {"NAME", "WATER", "SOLUTION", "OTHER", "OF"}


def _facts_unassigned(found: list[Terminal]) -> list[Terminal]:
    """The terminals without the symbol and sign before a fact about a substance.

    A letter before the amount of something is no symbol: "A = 5 mL of KBr".
    """
    result: list[Terminal] = []
    drop = 0
    for index, terminal in enumerate(found):
        if drop:
            drop -= 1
            continue
        if terminal.kind == "SYMBOL" and _kind_at(found, index + 1) == "EQUALS":
            if _kind_at(found, index + 2) in _FACTS:
                drop = 1
                continue
            if _kind_at(found, index + 3) in _OF_SOMETHING:
                terminal = replace(terminal, kind="OTHER")
        result.append(terminal)
    return result


def _bases(chars: str, found: list[Terminal]) -> list[Terminal]:
    """ "10 % CHAPS w/v": a basis apart from its percentage, given back to it."""
    result: list[Terminal] = []
    for terminal in found:
        if terminal.kind != "BASIS":
            result.append(terminal)
            continue
        basis = chars[terminal.start : terminal.end].lower().replace(" ", "").replace("m", "w")
        for index in range(len(result) - 1, max(-1, len(result) - 1 - _APART), -1):
            measure = result[index].measure
            if result[index].kind == "COMMA":
                break
            if result[index].kind == "PERCENT" and measure is not None:
                if measure.basis is None and basis in ("w/v", "v/v", "w/w", "v/w"):
                    result[index] = replace(result[index], measure=replace(measure, basis=basis))
                break
    return [
        terminal
        for index, terminal in enumerate(result)
        # brackets that held nothing but a basis
        if not (
            (terminal.kind == "LPAR" and _kind_at(result, index + 1) == "RPAR")
            or (terminal.kind == "RPAR" and _kind_at(result, index - 1) == "LPAR")
        )
    ]


def _kind_at(found: list[Terminal], index: int) -> str:
    return found[index].kind if 0 <= index < len(found) else ""


_SERIES = {"MASS", "VOLUME", "STRENGTH", "PERCENT", "AMOUNT"}


def _series(found: list[Terminal]) -> list[Terminal]:
    """ "1, 2 and 5 mL": bare numbers in a series take the unit at its end."""
    result = list(found)
    for index, terminal in enumerate(found):
        if terminal.kind not in _SERIES or terminal.measure is None:
            continue
        at, links = index - 1, set()
        while (
            at >= 1 and found[at].kind in ("COMMA", "AND", "OR") and found[at - 1].kind == "NUMBER"
        ):
            links.add(found[at].kind)
            at -= 2
        if at == index - 1 or links == {"COMMA"} and at > index - 5:
            continue  # "in step 2, 5 mL": one number and a comma make no series
        for other in range(at + 1, index, 2):
            bare = result[other].measure
            if bare is not None:
                result[other] = replace(
                    terminal,
                    start=bare.start,
                    end=bare.end,
                    measure=replace(
                        bare,
                        dimension=terminal.measure.dimension,
                        unit=terminal.measure.unit,
                        factor=terminal.measure.factor,
                        basis=terminal.measure.basis,
                    ),
                )
    return result


def _parts_of_whole(chars: str, found: list[Terminal]) -> list[Terminal]:
    """ "5/6 of the final volume": a fraction of a whole is a share like 83 %."""
    result = list(found)
    for index in range(len(found) - 2):
        terminal = found[index]
        measure = terminal.measure
        if measure is None or terminal.kind not in ("NUMBER", "VOLUMES", "FOLD"):
            continue
        if terminal.kind == "FOLD":
            if chars[found[index + 1].start :].lower().startswith("vol"):
                # "3x volume of ethanol"
                parts = replace(measure, dimension="volumes", unit="vol")
                result[index] = replace(terminal, kind="VOLUMES", measure=parts)
                result[index + 1] = replace(found[index + 1], kind="OF")
            continue
        if found[index + 1].kind == "OF" and found[index + 2].kind == "FINAL":
            share = replace(measure, dimension="volumes", unit="vol")
            result[index] = replace(terminal, kind="PERCENT", measure=share)
    return result


# Words that are commands at the head of a clause and things behind a name: "film mix".
_NOUN = re.compile(r"mix|wash|spike", re.IGNORECASE)
_NAMED = {"NAME", "OTHER", "SOLUTION", "FOLD", "STRENGTH", "PERCENT"}


def _nouns(chars: str, found: list[Terminal]) -> list[Terminal]:
    """ "film mix, 60 mL": what looks like a command is a thing behind a name."""
    result = list(found)
    for index in range(1, len(found)):
        terminal = found[index]
        if (
            _NOUN.fullmatch(chars[terminal.start : terminal.end].rstrip("."))
            and terminal.measure is None
        ):
            before = found[index - 1]
            beside = not chars[before.end : terminal.start].strip(" -")
            if before.kind in _NAMED and beside:
                result[index] = replace(terminal, kind="SOLUTION")
    return result


_PARTICIPLE = {
    "MIX",
    "DILUTE",
    "FILTER",
    "HEAT",
    "COOL",
    "STORE",
    "USE",
    "ADJUST",
    "WASH",
    "PREPARE",
}
_NEAR = 200  # characters before a word in which its article is looked for
_ARTICLE = re.compile(
    r"(?:\b(?:the|a|an|of|this|that|each|with|in|to)|[0-9][^ ]*|\d [^ ]+)\s+$", re.IGNORECASE
)


def _adjectives(chars: str, found: list[Terminal]) -> list[Terminal]:
    """ "the mixed intermediate", "of boiled water": a participle before a noun commands nothing."""
    result = list(found)
    for index, terminal in enumerate(found[:-1]):
        if terminal.kind not in _PARTICIPLE or not chars.endswith("ed", 0, terminal.end):
            continue
        following = found[index + 1].kind
        opens = not chars[: terminal.start].strip()
        if following in ("NAME", "WATER", "SOLUTION", "OTHER") and (
            opens or _ARTICLE.search(chars, max(0, terminal.start - _NEAR), terminal.start)
        ):
            result[index] = replace(terminal, kind="OTHER")
    return result


def _ware(chars: str, found: list[Terminal]) -> list[Terminal]:
    """Mark the volumes that are sizes of vessels."""
    result = list(found)
    for index, terminal in enumerate(found):
        if terminal.kind != "WARE":
            continue
        before = index - 1
        while before >= 0 and _is_adjective(chars, found[before]):
            before -= 1
        if before >= 0 and found[before].kind == "VOLUME":
            result[before] = replace(found[before], kind="WARE")
            before -= 1
            while (
                before >= 1 and found[before].kind in _LINKS and found[before - 1].kind == "VOLUME"
            ):
                result[before - 1] = replace(found[before - 1], kind="WARE")
                before -= 2
        _sizes_after(chars, found, index, result)
    return result


def _sizes_after(chars: str, found: Sequence[Terminal], index: int, result: list[Terminal]) -> None:
    """ "Measuring cylinders 50 mL, 100 mL and 1000 mL": sizes listed after the vessel."""
    at = index + 1
    while at < len(found) and (
        found[at].kind in _LINKS or found[at].kind == "OF" or _is_adjective(chars, found[at])
    ):
        at += 1
    while at < len(found) and found[at].kind == "VOLUME" and not _takes_material(found, at):
        result[at] = replace(found[at], kind="WARE")
        at += 1
        while at < len(found) and found[at].kind in _LINKS:
            at += 1


def _takes_material(found: Sequence[Terminal], at: int) -> bool:
    following = found[at + 1].kind if at + 1 < len(found) else ""
    return following in {"OF", "NAME", "WATER", "SOLUTION", "STRENGTH", "PERCENT", "FOLD", "PH"}


def _is_adjective(chars: str, terminal: Terminal) -> bool:
    if terminal.kind != "OTHER" or terminal.measure is not None:
        return False
    words = chars[terminal.start : terminal.end].lower().replace(",", " ").split()
    return all(word in _ADJECTIVES for word in words)


def _listed_pipettes(found: list[Terminal]) -> list[Terminal]:
    """ "Pipette, 10 mL" in an equipment list names the device; "pipette 10 mL" is a command."""
    if len(found) >= 3 and found[0].kind == "ADD" and found[1].kind == "COMMA":
        return [replace(t, kind="WARE") if t.kind == "VOLUME" else t for t in found]
    return found


def _ph_numbers(found: list[Terminal]) -> list[Terminal]:
    """Read bare numbers after "pH ... to / of / is" as pH values."""
    result = list(found)
    armed = False
    for index, terminal in enumerate(found):
        if terminal.kind in ("PHWORD", "ADJUST"):
            armed = True
        elif terminal.kind == "NUMBER" and armed and terminal.measure is not None:
            measure = terminal.measure
            previous = found[index - 1].kind if index else ""
            if previous in (
                "TO",
                "IS",
                "AT",
                "PHWORD",
                "OF",
                "EQUALS",
                "UPTO",
                "COLON",
                "GIVES",
            ) and (_PH_LOWEST <= measure.low and measure.high <= _PH_HIGHEST):
                value = replace(measure, dimension="pH", unit="pH")
                result[index] = replace(terminal, kind="PH", measure=value)
    return result
