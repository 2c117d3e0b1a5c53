"""Neutralisers against the load that they are said to neutralise."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

from soplint.bench import Bench, Stated
from soplint.bench.facts import Facts
from soplint.bench.portions import equivalents, portions
from soplint.bench.preparation import Taken
from soplint.checks.hazard_words import hazard
from soplint.checks.registry import Disagreement, Judgement, rule
from soplint.findings.model import Interval
from soplint.notation.phrases import Dose, Sentence
from soplint.substances import Substance

_NEUTRALISES = re.compile(
    r"\bneutrali[sz]\w*|\b(?:amount|quantity|enough|sufficient|needed|required)\b.{0,20}\bfor\b",
    re.IGNORECASE,
)
_UNTIL = re.compile(r"\b(?:about|approximately|roughly|ca\.?)\b", re.IGNORECASE)
_AGREES = 0.06  # amounts of waste are not weighed to better than this (convention)
_MINOR = 0.15
_AGENTS = (
    "carbonate",
    "strong base",
    "weak base",
    "strong acid",
    "oxidising acid",
    "weak organic acid",
)


@dataclass(frozen=True, slots=True)
class Load:
    """A stated load in mol and the neutraliser that is to meet it."""

    load: Stated
    words: str
    factors: tuple[float, ...]  # equivalents for each mol of the load, as it can be read
    dose: Stated
    substance: Substance
    moles: float


def loads(bench: Bench) -> Iterator[Load]:
    """Statements "210 g of hydrogen carbonate. This is the amount for 2.5 mol of acid"."""
    if not any(_load(sentence) for read in bench.blocks for sentence in read.sentences):
        return
    held: list[tuple[Stated, Substance, float]] = []
    open_load: tuple[Stated, str, tuple[float, ...]] | None = None
    for read in bench.blocks:
        if read.block.kind == "heading":
            held, open_load = [], None
        for sentence in read.sentences:
            load = _load(sentence)
            agents = list(_agents(sentence, bench.facts, load[0] if load else None))
            if agents:
                held = agents
                if open_load is not None:
                    yield Load(*open_load, *agents[-1])
                    open_load = None
            if load is None:
                continue
            if held:
                yield Load(*load, *held[-1])
                held = []
            else:
                open_load = load


def _load(sentence: Sentence) -> tuple[Stated, str, tuple[float, ...]] | None:
    if not _NEUTRALISES.search(sentence.text.chars):
        return None
    for measure in sentence.measures:
        if measure.dimension != "amount":
            continue
        rest = sentence.text.chars[measure.end : measure.end + 40]
        found = re.match(r"\s*(?:of\s+)?((?:the\s+|spent\s+|waste\s+)?[a-zA-Z ]{3,30})", rest)
        words = found[1].strip().lower() if found else ""
        for phrase in sentence.phrases:
            if (
                isinstance(phrase, Dose)
                and phrase.amount == measure
                and phrase.material is not None
            ):
                match = phrase.material.match
                if match is not None and not match.generic:
                    z = float(equivalents(match.substances[0]))
                    return Stated(sentence.text, measure), match.written, tuple({1.0, z})
        if re.match(r"(?:the |spent |waste )?(?:acid|alkali|base|protons|h\+|hydroxide)\b", words):
            return Stated(sentence.text, measure), words.split(" to ")[0], (1.0,)
    return None


def _agents(
    sentence: Sentence, facts: Facts, load: Stated | None
) -> Iterator[tuple[Stated, Substance, float]]:
    """The neutralisers that a sentence takes, in mol."""
    for phrase in sentence.phrases:
        if not isinstance(phrase, Dose) or phrase.amount.dimension not in ("mass", "volume"):
            continue
        if load is not None and phrase.amount == load.measure:
            continue
        if phrase.role in ("of", "in", "from") or phrase.material is None:
            continue
        near = sentence.text.chars[phrase.start : phrase.end + 25].split(" add ")[0]
        if re.search(r"\b(?:rinse|spent|waste|sample)\b", near, re.IGNORECASE):
            continue
        for portion in portions(Taken(sentence.text, phrase, 0), facts)[:1]:
            substance = portion.substance
            if substance is not None and portion.moles and substance.kind.startswith(_AGENTS):
                yield Stated(sentence.text, phrase.amount), substance, portion.moles


@rule("hazards.neutraliser-meets-load")
def neutraliser_meets_load(bench: Bench) -> Iterator[Judgement]:
    """The quantity of neutraliser is that of the acid or alkali it is meant for."""
    for load in loads(bench):
        given = load.moles * equivalents(load.substance)
        needed = [load.load.measure.base * factor for factor in load.factors]
        ratio = min((given / n for n in needed if n > 0), key=lambda r: abs(r - 1), default=1.0)
        right = given / ratio
        working = (
            f"{load.moles:.4g} mol {load.substance.name} × {equivalents(load.substance)} = {given:.3g} mol "
            f"against {right:.3g} mol of {load.words}"
        )
        scale = load.dose.measure.factor or 1.0
        value = load.dose.measure.base / ratio / scale
        computed = Interval(value, load.dose.measure.unit, 0.97 * value, 1.03 * value)
        if abs(ratio - 1) <= _AGREES:
            mol = load.load.measure.nominal * ratio
            of_load = Interval(mol, load.load.measure.unit, 0.97 * mol, 1.03 * mol)
            bench.ledger.agree(load.load, of_load, working)
            bench.ledger.agree(load.dose, computed, working)
            continue
        yield _misses(load, ratio, value, working, computed)


def _misses(load: Load, ratio: float, value: float, working: str, computed: Interval) -> Judgement:
    measure = load.dose.measure
    about = measure.manner == "about" or _UNTIL.search(load.dose.text.chars)
    grade = "minor" if abs(ratio - 1) <= _MINOR or about else "major"
    how = "is short of" if ratio < 1 else "exceeds"
    stated = load.dose.text.chars[measure.start : measure.end]
    made = hazard(
        "hazards.neutraliser-meets-load",
        grade,
        load.dose.text,
        measure.start,
        measure.end,
        f"{stated} of {load.substance.name} {how} the stated load by {abs(ratio - 1) * 100:.0f} %",
        working=working,
        computed=f"{value:.3g} {measure.unit}",
    )
    return Judgement(made.finding, (Disagreement(load.dose, computed, working),))
