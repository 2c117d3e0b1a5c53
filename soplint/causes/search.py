"""Search for the cause of a disagreement."""

from __future__ import annotations

import csv
import os
from dataclasses import dataclass
from functools import lru_cache

from soplint.bench import Bench, Relation
from soplint.causes.hypotheses import ALL, Case, Hypothesis

# A cause must reproduce the stated number this well, beside the rounding of the number itself.
EXACT = 0.01
_TWICE = 2.0  # as plausible as the next one, or both are named


@dataclass(frozen=True, slots=True)
class Cause:
    """A likely cause: its kind, in words, and whether it stands alone."""

    kind: str
    words: str
    alone: bool


@lru_cache(maxsize=1)
def priors() -> dict[str, float]:
    """How often each kind of slip occurs, relative to the others (``data/priors.csv``)."""
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), "data", "priors.csv")
    with open(path, encoding="utf-8", newline="") as file:
        return {row["kind"]: float(row["prior"]) for row in csv.DictReader(file)}


def likely_cause(relation: Relation, bench: Bench) -> Cause | None:
    """The most plausible hypothesis that reproduces the stated number, or None.

    Two hypotheses of nearly the same plausibility are both named.
    """
    found = matching(relation, bench)
    if not found:
        return None
    weights = priors()
    ranked = sorted(found, key=lambda h: -weights.get(h[0], 0.5))
    best = ranked[0]
    others = [h for h in ranked[1:] if h[2] != best[2]]
    if others and weights.get(others[0][0], 0.5) * _TWICE > weights.get(best[0], 0.5):
        return Cause(best[0], f"{best[2]}, or {others[0][2]}", False)
    return Cause(best[0], best[2], True)


def matching(relation: Relation, bench: Bench) -> list[Hypothesis]:
    """All hypotheses whose factor meets stated / computed."""
    factor = 1 + relation.deviation
    if relation.kind == "ph" or factor <= 0:
        return []
    measure = relation.tested.measure
    nominal = abs(measure.nominal) or 1.0
    slack = EXACT + min((measure.high - measure.low) / 2 / nominal, 0.03)
    case = Case(relation, bench)
    return [
        (kind, expected, words)
        for hypothesis in ALL
        for kind, expected, words in hypothesis(case)
        if expected > 0 and abs(expected - 1) > 0.02 and abs(factor / expected - 1) <= slack
    ]
