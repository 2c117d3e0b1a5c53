"""What a review says of right recipes and of recipes with a slip."""

from __future__ import annotations

from collections import defaultdict
from dataclasses import dataclass, field

from random_recipes.slips import Wrong, slipped
from random_recipes.writer import Number, sheet

from soplint.findings.model import Finding, Review
from soplint.intake.model import Span
from soplint.review import review_bytes

ABOVE_REMARK = ("critical", "major", "minor")
# A finding that names two causes gives the kind of the first; its words name both.
CAUSE_WORDS = {"factor-two": ("twice", "half"), "copied-neighbour": ("the figure of",)}


@dataclass
class Tally:
    """Hits out of trials, by group."""

    hits: dict[object, int] = field(default_factory=lambda: defaultdict(int))
    trials: dict[object, int] = field(default_factory=lambda: defaultdict(int))

    def add(self, group: object, hit: bool) -> None:
        self.trials[group] += 1
        self.hits[group] += hit

    def rate(self) -> float:
        """Over all groups, in per cent."""
        trials = sum(self.trials.values())
        return 100.0 * sum(self.hits.values()) / trials if trials else 0.0


@dataclass
class Failure:
    """A text that was not judged as it should be."""

    seed: int
    group: object
    words: str
    text: str


def review(text: str, suffix: str) -> Review | Exception:
    """The review, or the fault that stopped it."""
    try:
        return review_bytes(text.encode(), f"HFL{suffix}")
    except Exception as fault:  # every fault is counted, none stops the run
        return fault


def grave(made: Review) -> list[Finding]:
    return [f for f in made.findings if f.severity in ABOVE_REMARK]


def said(finding: Finding) -> str:
    return (
        f"line {finding.span.line}: {finding.severity} {finding.rule}: {finding.message}"
        f" | {finding.working} | {finding.cause}"
    )


@dataclass
class Alarms:
    """Right recipes: texts with a finding above remark, and quantities that agree."""

    texts: Tally = field(default_factory=Tally)
    quantities: int = 0
    agree: int = 0
    failures: list[Failure] = field(default_factory=list)
    faults: list[Failure] = field(default_factory=list)


def score_right(seeds: range) -> Alarms:
    """Review right recipes."""
    result = Alarms()
    for seed in seeds:
        made = sheet(seed)
        text, _ = made.write()
        reviewed = review(text, made.suffix)
        group = (made.recipe.kind, made.layout)
        if isinstance(reviewed, Exception):
            result.faults.append(Failure(seed, group, repr(reviewed), text))
            continue
        findings = grave(reviewed)
        result.texts.add(group, bool(findings))
        result.quantities += len(reviewed.entries)
        result.agree += sum(e.verdict == "agrees" for e in reviewed.entries)
        if findings:
            words = "\n".join(said(f) for f in findings)
            result.failures.append(Failure(seed, group, words, text))
    return result


@dataclass
class Catches:
    """Recipes with a slip: found, rightly named, computed value right, findings elsewhere."""

    found: Tally = field(default_factory=Tally)  # by kind of slip
    layouts: Tally = field(default_factory=Tally)  # by kind of recipe and layout
    named: Tally = field(default_factory=Tally)  # kinds a hypothesis covers
    uncovered: Tally = field(default_factory=Tally)  # found, kinds no hypothesis covers
    computed: Tally = field(default_factory=Tally)
    elsewhere: Tally = field(default_factory=Tally)
    missed: list[Failure] = field(default_factory=list)
    misnamed: list[Failure] = field(default_factory=list)
    miscomputed: list[Failure] = field(default_factory=list)
    strays: list[Failure] = field(default_factory=list)
    faults: list[Failure] = field(default_factory=list)


def score_slips(seeds: range) -> Catches:
    """Review recipes with one slip each."""
    result = Catches()
    for seed in seeds:
        _judge(seed, slipped(seed), result)
    return result


def _judge(seed: int, wrong: Wrong, result: Catches) -> None:
    slip, recipe = wrong.slip, wrong.sheet.recipe
    reviewed = review(wrong.text, wrong.sheet.suffix)
    group = (recipe.kind, wrong.sheet.layout)
    if isinstance(reviewed, Exception):
        result.faults.append(Failure(seed, group, repr(reviewed), wrong.text))
        return
    findings = grave(reviewed)
    hits = [f for f in findings if _meets(f, wrong)]
    n = wrong.number
    head = f"{slip.kind}: line {n.line} says {n.text}, right is {n.right:.5g} {n.unit}"
    result.found.add(slip.kind, bool(hits))
    result.layouts.add(group, bool(hits))
    if not slip.causes:
        result.uncovered.add(slip.kind, bool(hits))
    stray = [f for f in findings if f not in hits]
    result.elsewhere.add(group, bool(stray))
    if stray:
        words = "\n".join([head, *(said(f) for f in stray)])
        result.strays.append(Failure(seed, group, words, wrong.text))
    if not hits:
        words = "\n".join([head, *(said(f) for f in reviewed.findings)])
        result.missed.append(Failure(seed, group, words, wrong.text))
        return
    words = "\n".join([head, *(said(f) for f in hits)])
    if slip.causes:
        right = any(_names(f, slip.causes) for f in hits)
        result.named.add(slip.kind, right)
        if not right:
            result.misnamed.append(Failure(seed, group, words, wrong.text))
    _computed(seed, wrong, reviewed, result, words)


def _meets(finding: Finding, wrong: Wrong) -> bool:
    """Whether the finding stands at a number of the slip's relations, or names one besides the volume."""
    volumes = set(wrong.sheet.recipe.volumes)
    return any(_overlap(finding.span, number) for number in wrong.near) or any(
        _overlap(related.span, number)
        for related in finding.related
        for number in wrong.near
        if number.key not in volumes
    )


def _overlap(span: Span, number: Number) -> bool:
    return (
        span.line == number.line
        and span.column < number.column + len(number.text)
        and number.column < span.end_column
    )


def _names(finding: Finding, causes: frozenset[str]) -> bool:
    if finding.cause_kind in causes:
        return True
    words = [w for cause in causes for w in CAUSE_WORDS.get(cause, ())]
    return finding.cause is not None and any(w in finding.cause for w in words)


def _computed(seed: int, wrong: Wrong, reviewed: Review, result: Catches, words: str) -> None:
    """The value computed for the slipped number, where the number itself is disproved."""
    lines = {n.line for n in wrong.numbers if n.key == wrong.slip.key}
    texts = {n.text for n in wrong.numbers if n.key == wrong.slip.key}
    entries = [
        e
        for e in reviewed.entries
        if e.verdict == "disagrees" and e.span.line in lines and e.computed and e.text in texts
    ]
    if not entries or entries[0].computed is None or entries[0].computed.value is None:
        return
    value, right = entries[0].computed.value, wrong.number.right
    close = any(abs(value / (right * share) - 1) <= 0.03 for share in _readings(wrong))
    result.computed.add(wrong.slip.kind, close)
    if not close:
        group = (wrong.sheet.recipe.kind, wrong.sheet.layout)
        more = f"{words}\ncomputed {value:.5g}, right {right:.5g}"
        result.miscomputed.append(Failure(seed, group, more, wrong.text))


def _readings(wrong: Wrong) -> list[float]:
    """Shares of the right value that the words leave open: the form of a salt, an acid's strength."""
    shares = [1.0]
    for part in wrong.sheet.recipe.parts:
        if wrong.slip.key not in part.amounts:
            continue
        if part.named and not part.named.named:
            thing = part.named
            shares += [mass / thing.mass for mass in thing.reagent.others(thing.hydrate)]
        if part.how == "acid" and not part.assay:
            shares += [0.82, 0.85, 0.9, 0.95, 1.05, 1.1, 1.15, 1.2]
    return shares
