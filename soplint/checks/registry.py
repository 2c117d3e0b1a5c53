"""The registry of rules: it knows name and function of each and no chemistry."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass

from soplint.bench import Bench, Stated
from soplint.findings.model import Finding, Interval


@dataclass(frozen=True, slots=True)
class Disagreement:
    """A quantity that a finding disproves."""

    stated: Stated
    computed: Interval | None
    working: str | None


@dataclass(frozen=True, slots=True)
class Judgement:
    """A finding with the quantities that it disproves."""

    finding: Finding
    disproved: tuple[Disagreement, ...] = ()


Function = Callable[[Bench], Iterable[Judgement]]


@dataclass(frozen=True, slots=True)
class Rule:
    """A rule: its name and the function that yields its findings."""

    name: str
    function: Function


RULES: dict[str, Rule] = {}


def rule(name: str) -> Callable[[Function], Function]:
    """Register a function as the rule ``name``."""

    def register(function: Function) -> Function:
        RULES[name] = Rule(name, function)
        return function

    return register
