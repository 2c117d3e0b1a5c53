"""The forms that make a buffer: whether they are a pair, whether two recipes make the same."""

from __future__ import annotations

import re
from collections.abc import Iterator

from soplint.bench import Bench, Preparation, Relation, Stated
from soplint.bench.acidity import NO_BUFFERS
from soplint.bench.numbers import shown
from soplint.bench.passages import bottles_of
from soplint.bench.remedies import amounts_for, systems_of
from soplint.checks.registry import Judgement, rule
from soplint.checks.telling import about_ph, about_quantity
from soplint.findings.model import Interval, Related

_STEP = 1.5  # a pair buffers within this of its pKa', at most
_MIXED = re.compile(
    r"\b(?:universal|mixed|mixture|multi-?component|constant ionic)\b", re.IGNORECASE
)


@rule("buffers.pair-shares-a-step")
def pair_shares_a_step(bench: Bench) -> Iterator[Judgement]:
    """Two forms of one acid hold a pH only near the step that lies between them."""
    bottles = bottles_of(bench)
    for relation in bench.relations:
        if relation.kind != "ph" or relation.agrees or relation.preparation is None:
            continue
        if relation.preparation not in bench.preparations:
            continue
        finished = bottles.finished(bench.preparations.index(relation.preparation))
        if finished is None or _other_mistake(bench, relation):
            continue
        title = relation.preparation.title
        if title is not None and _MIXED.search(title.words):
            continue
        ph = relation.tested.measure.nominal
        readings = [_between(contents, finished.litres, ph) for contents in finished.start]
        if None in readings or readings[0] is None:
            continue
        system, forms, remedy = readings[0]
        message = (
            f"{forms} are no pair of {system} for pH {ph:g}: the step between them lies elsewhere"
        )
        yield about_ph(bench, relation, "buffers.pair-shares-a-step", "major", message, remedy)


def _other_mistake(bench: Bench, relation: Relation) -> bool:
    """Whether a wrong amount of the same preparation is reported by itself."""
    return any(
        r.preparation is relation.preparation
        and not r.agrees
        and r.kind in ("mass", "stock", "concentrate", "sum")
        for r in bench.relations
    )


def _between(contents: dict[str, float], litres: float, ph: float) -> tuple[str, str, str] | None:
    """System and forms of a pair whose common step is far from the pH, with amounts that fit."""
    from soplint.equilibria import EquilibriumError, acid_systems_of, solve, system_pkas

    try:
        forms = [n for n in contents if set(acid_systems_of(n)) - NO_BUFFERS]
        systems = systems_of(contents)
        if len(forms) != 2 or len(systems) != 1 or len(contents) != 2:
            return None
        solution = solve(contents)
        (system,) = systems
        pkas = system_pkas(system, 25.0, min(solution.ionic_strength, 0.7))
    except EquilibriumError:
        return None
    nearest = min(pkas, key=lambda value: abs(value - ph))
    between = min(pkas, key=lambda value: abs(value - solution.pH))
    if nearest == between or abs(between - ph) < _STEP:
        return None
    amounts = amounts_for(system, ph, systems[system], litres, 25.0)
    remedy = f"pKa' of the step between them {between:.2f}"
    if amounts:
        remedy += f"; for pH {ph:g} take {amounts}"
    return system, " and ".join(forms), remedy


# --- one buffer, two recipes ------------------------------------------------------------------------------

_SAME = 0.1


@rule("buffers.same-buffer-same-ph")
def same_buffer_same_ph(bench: Bench) -> Iterator[Judgement]:
    """Two recipes for one buffer in a document give one pH."""
    from soplint.equilibria import EquilibriumError, solve

    bottles = bottles_of(bench)
    made: dict[str, list[tuple[Preparation, float, dict[str, float]]]] = {}
    for order, preparation in enumerate(bench.preparations):
        title = preparation.title
        if (
            title is None
            or preparation.adjusted
            or preparation.kind not in ("steps", "list", "line")
        ):
            continue
        if title.source == "document" or not title.targets or title.ph is not None:
            continue
        if not any(m.match is not None for m in title.materials):
            continue
        finished = bottles.finished(order)
        if finished is None or len(finished.start) != 1 or not systems_of(finished.start[0]):
            continue
        try:
            ph = solve(finished.start[0]).pH
        except EquilibriumError:
            continue
        made.setdefault(_same_name(title.words), []).append((preparation, ph, finished.start[0]))
    for recipes in made.values():
        first, ph, contents = recipes[0]
        for preparation, other, others in recipes[1:]:
            if abs(other - ph) > _SAME and set(systems_of(others)) == set(systems_of(contents)):
                yield _two(first, ph, preparation, other)


def _same_name(words: str) -> str:
    bare = re.sub(r"[,;]?\s*\b\d+(?:\.\d+)?\s*m?l\b", " ", words.lower())
    return " ".join(re.findall(r"[\w.%/]+", bare))


def _two(first: Preparation, ph: float, second: Preparation, other: float) -> Judgement:
    doses = [t for t in second.taken if t.dose.material and not t.dose.material.is_water]
    stated = doses[0].stated
    origin = next(t for t in first.taken if t.dose.material and not t.dose.material.is_water)
    from soplint.checks.telling import about_passage

    return about_passage(
        "buffers.same-buffer-same-ph", "minor", stated.text, stated.measure.start,
        stated.measure.end,
        f"this recipe gives pH {other:.2f}, the other one of the same name pH {ph:.2f}",
        "charge balance of both recipes at 25 °C",
        (Related(origin.stated.span, shown(origin.stated.measure), f"gives pH {ph:.2f}"),),
    )  # fmt: skip


# --- digits ------------------------------------------------------------------------------------------------

_FINE = 0.01
_PRIMARY = re.compile(r"\b(?:primary|certif\w+|standard|reference|computed|calculat\w+)\b", re.I)


@rule("buffers.ph-digits-fit-meter")
def ph_digits_fit_meter(bench: Bench) -> Iterator[Judgement]:
    """A pH to be set is stated no finer than a meter and its buffers allow (0.02)."""
    for preparation in bench.preparations:
        stated = [
            Stated(a.text, a.set_ph.ph) for a in preparation.adjusted if a.set_ph.ph is not None
        ]
        for one in stated:
            measure = one.measure
            half = (measure.high - measure.low) / 2
            toleranced = measure.manner == "tolerance" and half < _FINE
            if not toleranced and not (measure.manner == "plain" and measure.places > 2):
                continue
            if _PRIMARY.search(one.text.chars):
                continue
            value = measure.nominal
            judged = about_quantity(
                "buffers.ph-digits-fit-meter", "minor", one,
                f"{shown(measure)} is finer than a meter calibrated with two buffers can set",
                "uncertainty of a calibrated meter 0.02 (buffers 0.01 to 0.02, reading 0.01)",
                Interval(round(value, 2), "pH", value - 0.02, value + 0.02),
                f"pH {value:.2f}",
            )  # fmt: skip
            yield Judgement(judged.finding)
