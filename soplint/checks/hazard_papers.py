"""What the safety section should name for the substances that are used."""

from __future__ import annotations

import re
from collections.abc import Iterator

from soplint.bench import Bench, Stated
from soplint.bench.contents import Content
from soplint.bench.vessels import vessels
from soplint.checks.hazard_words import (
    ELSEWHERE,
    absence,
    at,
    excerpt,
    hazard,
    place,
    plain,
    protection,
)
from soplint.checks.registry import Judgement, rule

_FATAL = {"H300", "H310", "H330"}
_CMR = ("H340", "H350", "H360")
_CORROSIVE = "H314"
_NAMED = re.compile(r"\b(?:EUH|H)\d{3}", re.IGNORECASE)
_REASON = re.compile(
    r"substitut|replac|HFL-RA|risk assessment|permit names|required by|compendial|no other (?:substance|method)"
    r"|pharmacop|prescribed|reference method",
    re.IGNORECASE,
)


def _used(bench: Bench) -> Iterator[Content]:
    """Each substance once, where a step first brings it in."""
    seen: set[str] = set()
    for vessel in vessels(bench):
        if vessel.kind == "stream":
            continue
        for content in vessel.contents:
            if content.substance is not None and content.key not in seen and not content.diluted:
                seen.add(content.key)
                yield content


def _strong(content: Content) -> bool:
    """Whether the substance comes neat or concentrated, not as a thin solution."""
    return (content.percent or 0.0) >= 10.0 and not (
        content.litres is not None and content.litres < 0.002
    )


@rule("hazards.protection-named")
def protection_named(bench: Bench) -> Iterator[Judgement]:
    """A text that uses corrosive or deadly substances names protective equipment."""
    shield = protection(bench)
    if shield.wear or ELSEWHERE.search(shield.words) or shield.hood or excerpt(bench):
        return
    for content in _used(bench):
        substance = content.substance
        assert substance is not None
        codes = {h for h in substance.hazards if h in _FATAL or h == _CORROSIVE}
        if codes and _strong(content):
            yield at(
                "hazards.protection-named",
                absence(bench),
                content,
                f"{plain(content)} is used and no gloves, goggles or other protection is named",
                working=f"{', '.join(sorted(codes))} (catalogue, from memory); looked for in the whole text",
            )
            return


@rule("hazards.hazard-statements-named")
def hazard_statements_named(bench: Bench) -> Iterator[Judgement]:
    """Where a text lists hazard statements, those of deadly and carcinogenic substances are there."""
    words = protection(bench).words
    if not _NAMED.search(words):
        return
    for content in _used(bench):
        substance = content.substance
        assert substance is not None
        codes = {h for h in substance.hazards if h[:4] in _FATAL or h.startswith(_CMR)}
        if not codes or not _strong(content) or _spoken(words, plain(content), content.words):
            continue
        yield at(
            "hazards.hazard-statements-named",
            "remark",
            content,
            f"the text lists hazard statements and leaves out those of {plain(content)} ({', '.join(sorted(codes))})",
            working="statements of the catalogue, from memory; the safety data sheet takes precedence",
        )


_WORDS = re.compile(
    r"toxic|fatal|poison|cancer|carcino|reproduct|burns|hood|fume|harm|mutagen", re.IGNORECASE
)


def _spoken(words: str, name: str, written: str) -> bool:
    """Whether a sentence that names the substance says a hazard."""
    keys = {name.lower(), written.lower().strip(" .,;")}
    for line in re.split(r"[.\n]", words):
        if any(key and key in line for key in keys) and (
            _NAMED.search(line) or _WORDS.search(line)
        ):
            return True
    return False


@rule("hazards.substitution-considered")
def substitution_considered(bench: Bench) -> Iterator[Judgement]:
    """Mercury and carcinogenic chromium are used only with a word on substitution."""
    words = protection(bench).words
    if _REASON.search(words):
        return
    for content in _used(bench):
        substance = content.substance
        assert substance is not None
        mercury = "mercury" in content.classes
        carcinogen = any(h.startswith(("H340", "H350")) for h in substance.hazards)
        if not (mercury or carcinogen) or not _strong(content) or not _said_dangerous(words):
            continue
        yield at(
            "hazards.substitution-considered",
            "remark",
            content,
            f"{plain(content)} is used and no word says why nothing less harmful will do",
            working=f"{'mercury compound' if mercury else ', '.join(h for h in substance.hazards if h.startswith('H3'))} (catalogue, from memory)",
        )


def _said_dangerous(words: str) -> bool:
    return bool(_NAMED.search(words))


_SCOPE = re.compile(
    r"\b(?:controls?|assessed|assessment|written|valid|covers?|applies|batches|scope)\b[^.;]{0,60}?"
    r"\bup to\b",
    re.IGNORECASE,
)


@rule("hazards.amount-within-scale")
def amount_within_scale(bench: Bench) -> Iterator[Judgement]:
    """The largest batch is no larger than the scale that the text sets for itself."""
    limit: Stated | None = None
    for read in bench.blocks:
        for sentence in read.sentences:
            hit = _SCOPE.search(sentence.text.chars)
            if hit is None:
                continue
            for measure in sentence.measures:
                if measure.dimension == "volume" and measure.start >= hit.end() - 8:
                    limit = Stated(sentence.text, measure)
                    break
    if limit is None:
        return
    for vessel in vessels(bench):
        volume = vessel.volume
        if (
            vessel.kind == "stream"
            or volume is None
            or volume <= 1.05 * limit.measure.high * limit.measure.factor
        ):
            continue
        last = vessel.contents[-1]
        yield hazard(
            "hazards.amount-within-scale",
            "minor",
            last.text,
            last.start,
            last.end,
            f"the batch of {volume:.3g} L exceeds the {limit.text.chars[limit.measure.start : limit.measure.end]} the text was written for",
            working="volume of the vessel against the scale stated in the text",
        )
        return


_REACTIVE = {
    *(
        "hypochlorite",
        "cyanide",
        "sulfide",
        "azide",
        "nitric",
        "perchloric",
        "peroxide",
        "permanganate",
    ),
    *("dichromate", "nitrite", "hydride", "chlorite", "chlorate", "hydrofluoric"),
}


@rule("hazards.contents-known")
def contents_known(bench: Bench) -> Iterator[Judgement]:
    """What meets a reactive substance in a vessel is known, so that the pair can be assessed."""
    for vessel in vessels(bench):
        strangers = {c.key: c for c in vessel.contents if not c.known}
        for content in vessel.contents:
            reactive = content.classes & _REACTIVE
            if not reactive or not strangers or not _strong(content):
                continue
            first = next(iter(strangers.values()))
            names = ", ".join(sorted(c.words.strip(" .,;") for c in strangers.values()))
            yield at(
                "hazards.contents-known",
                "remark",
                first,
                f"not assessed: {names} with {plain(content)} in {place(vessel)}; the catalogue does not know what it is",
                working="pairs with an unknown substance are counted as not assessed",
                others=((content, "the reactive substance"),),
            )
            break
