"""What a text says about protection, and the form of a hazard finding."""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import lru_cache

from soplint.bench import Bench
from soplint.bench.contents import Content
from soplint.bench.vessels import Vessel
from soplint.checks.hazards import CAUTION
from soplint.checks.registry import Judgement
from soplint.findings.model import Finding, Related
from soplint.intake.model import Text

HOOD = re.compile(
    r"\b(?:fume|hoods?|extract(?:ion|ed) (?:hood|arm|bench)|extraction|scrubber|ventilated|glove ?box"
    r"|abzug)\b",
    re.IGNORECASE,
)
TRAP = re.compile(
    r"\b(?:traps?|absorbers?|absorption|scrubber|gas wash\w*|receiver)\b", re.IGNORECASE
)
PURPOSE = re.compile(
    r"\b(?:on purpose|distil\w*|evolv\w*|liberat\w*|set free|sets free|purg\w*|generat\w*|escapes)\b",
    re.IGNORECASE,
)
WEAR = re.compile(
    r"\b(?:gloves?|goggles?|glasses|face shield|visor|apron|coat|handschuhe|brille|ppe|protective)\b",
    re.IGNORECASE,
)
ELSEWHERE = re.compile(
    r"\b(?:see|as in|per|according to|risk assessment|sds|safety data)\b", re.IGNORECASE
)
CAREFUL = re.compile(
    r"\b(?:cool\w*|ice\w*|chill\w*|cold|portions?|slow\w*|gradual\w*|dropwise|drops?|small amounts?"
    r"|little by little|thin stream|careful\w*|cautious\w*|in parts|stepwise|borosilicate|pyrex"
    r"|heat-resistant|heat-proof|below \d\d ?°|temperature (?:below|under)|water bath)\b",
    re.IGNORECASE,
)


@lru_cache(maxsize=16)
def said(pattern: re.Pattern[str], words: str) -> bool:
    """Whether a pattern is found in a text; a long text with many vessels is searched once."""
    return pattern.search(words) is not None


@dataclass(frozen=True, slots=True)
class Protection:
    """What the document says anywhere about how work is protected."""

    words: str  # the whole text in lower case

    @property
    def hood(self) -> bool:
        """A fume cupboard or another extraction is named."""
        return said(HOOD, self.words)

    @property
    def trap(self) -> bool:
        """A trap or absorber for gas is named."""
        return said(TRAP, self.words)

    @property
    def wear(self) -> bool:
        """Protective equipment is named."""
        return said(WEAR, self.words)


_KEPT: list[tuple[object, Protection]] = []


def protection(bench: Bench) -> Protection:
    """The protection that a document names; kept for the bench that was asked last."""
    if not _KEPT or _KEPT[0][0] is not bench:
        words = " \n".join(read.block.text.chars for read in bench.blocks).lower()
        _KEPT[:] = [(bench, Protection(words))]
    return _KEPT[0][1]


_SAFETY = re.compile(r"\b(?:safety|protection|hazards?|precautions?|sicherheit)\b", re.IGNORECASE)


def absence(bench: Bench, against: re.Pattern[str] | None = None) -> str:
    """Class of something that is not named: a text with a section on safety should name it.

    A text without such a section (a recipe, an excerpt) gets a remark, unless its words speak
    ``against`` protection.
    """
    if against is not None and said(against, protection(bench).words):
        return "minor"
    for read in bench.blocks:
        head = read.block.kind == "heading" or read.block.bold
        if head and _SAFETY.search(read.block.text.chars):
            return "minor"
    return "remark"


_WHOLE = 3  # headings; a text with fewer is a recipe or an excerpt of a procedure


def excerpt(bench: Bench) -> bool:
    """Whether a text is too short a piece for what it leaves out to mean anything."""
    heads = [read.block for read in bench.blocks if read.block.kind == "heading" or read.block.bold]
    if any(_SAFETY.search(head.text.chars) for head in heads):
        return False
    return sum(head.kind == "heading" for head in heads) < _WHOLE


def hazard(
    rule: str,
    severity: str,
    text: Text,
    start: int,
    end: int,
    message: str,
    working: str | None = None,
    others: tuple[tuple[Content, str], ...] = (),
    computed: str | None = None,
    see: tuple[str, ...] = (),
) -> Judgement:
    """A hazard finding with the caution that each carries."""
    return Judgement(
        Finding(
            rule=rule,
            severity=severity,
            span=text.span(start, end),
            text=text.chars[start:end],
            message=message,
            computed=computed,
            working=working,
            related=tuple(
                Related(other.text.span(other.start, other.end), "", words)
                for other, words in others
                if (other.text, other.start) != (text, start)
            ),
            caution=CAUTION,
            see=see,
        )
    )


def at(rule: str, severity: str, content: Content, message: str, **more: object) -> Judgement:
    """A hazard finding at a content of a vessel."""
    return hazard(rule, severity, content.text, content.start, content.end, message, **more)  # type: ignore[arg-type]


def plain(content: Content) -> str:
    """How a content is called in a message."""
    substance = content.substance
    if substance is None:
        return content.words.strip(" .,;")
    return substance.name.split(", ")[0].rstrip("0123456789.% ").strip() or substance.name


def place(vessel: Vessel) -> str:
    """How a vessel is called in a message."""
    name = vessel.name.strip(" .:;")
    if vessel.kind == "stream":
        return f"the {name}"
    return f'"{name}"' if name else "the vessel"
