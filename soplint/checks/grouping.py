"""One cause, one finding: disagreements that one correction repairs."""

from __future__ import annotations

from soplint.bench import Bench, Relation
from soplint.causes import Cause, likely_cause

_ALIKE = 0.02  # factors this close to each other are one factor
_KINDS = ("mass", "stock", "concentrate", "neat", "fold")


def common_factor(bench: Bench) -> dict[int, int]:
    """Relations (by identity) whose preparation is off by one factor as a whole -> group number.

    At least two amounts must share the factor and no amount of the preparation may agree: then the
    volume or the strength is off, not each amount.
    """
    groups: dict[int, list[Relation]] = {}
    agreeing: set[int] = set()
    for relation in bench.relations:
        if relation.kind not in _KINDS or relation.preparation is None:
            continue
        key = id(relation.preparation)
        if relation.agrees:
            agreeing.add(key)
        else:
            groups.setdefault(key, []).append(relation)
    found: dict[int, int] = {}
    for number, (key, relations) in enumerate(groups.items()):
        tested = {r.tested.key for r in relations}
        if key in agreeing or len(tested) < 2:
            continue
        factors = [1 + r.deviation for r in relations]
        if min(factors) <= 0:
            continue
        if max(factors) <= min(factors) * (1 + _ALIKE):
            found.update({id(r): number for r in relations})
    return found


def one_cause(relation: Relation, bench: Bench) -> tuple[Relation, Cause] | None:
    """For a sum that misses: the one member whose slip, by an exact hypothesis, explains it.

    Every member is asked in turn how much it would have to be if the others are right.
    """
    found = []
    for single in relation.members:
        cause = likely_cause(single, bench)
        if cause is not None and cause.kind not in ("factor-two", "copied-volume"):
            found.append((single, cause))
    return found[0] if len(found) == 1 else None
