"""Amounts: mass, volume and dilution against the strength that the text states."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from soplint.bench import Bench, Relation
from soplint.causes import Cause, likely_cause
from soplint.checks.bands import REMARK, severity
from soplint.checks.grouping import common_factor, one_cause
from soplint.checks.registry import Disagreement, Judgement, rule
from soplint.checks.wording import computed_text, judgement
from soplint.findings.model import Related

_FORMS = ("other-hydrate", "other-salt-form", "another-salt")


def _open(bench: Bench, *kinds: str) -> Iterator[Relation]:
    """Disagreeing relations of the kinds, each tested number once."""
    seen = set()
    for relation in bench.relations:
        if relation.agrees or relation.kind not in kinds or relation.tested.key in seen:
            continue
        if bench.ledger.verdict(relation.tested) == "agrees":
            continue  # another relation closed with this number: readings differ
        seen.add(relation.tested.key)
        yield relation


def _single(bench: Bench, *kinds: str) -> Iterator[tuple[Relation, Cause | None]]:
    """Disagreements about one amount, those with a cause in common left to the group rule."""
    grouped = common_factor(bench)
    for relation in _open(bench, *kinds):
        if id(relation) not in grouped:
            yield relation, likely_cause(relation, bench)


def _amount(
    bench: Bench, relation: Relation, cause: Cause | None, rule_name: str, what: str
) -> Iterator[Judgement]:
    grade = severity(relation, cause is not None)
    if grade is None or _all_for_more(bench, relation):
        return
    words = (
        f"{what}: {_stated(relation)} of {relation.of or 'it'} stated,"
        f" {computed_text(relation)} computed"
    )
    yield judgement(bench, relation, rule_name, grade, words, cause)


def _stated(relation: Relation) -> str:
    measure = relation.tested.measure
    return relation.tested.text.chars[measure.start : measure.end]


def _is_thousand(relation: Relation, cause: Cause | None) -> bool:
    return cause is not None and cause.kind == "factor-thousand" and not relation.exact


def _percent(relation: Relation) -> bool:
    target = relation.target
    return target is not None and target.measure.dimension == "fraction"


@rule("amounts.columns-scale-alike")
def columns_scale_alike(bench: Bench) -> Iterator[Judgement]:
    """Rows of a table grow with the volume of the column."""
    for relation in _open(bench, "columns"):
        deviation = abs(relation.deviation)
        grade = "remark" if deviation < REMARK else "minor" if deviation < 0.08 else "major"
        message = (
            f"cell does not scale with its column: {_stated(relation)} stated,"
            f" {computed_text(relation)} computed"
        )
        cause = likely_cause(relation, bench)
        yield judgement(bench, relation, "amounts.columns-scale-alike", grade, message, cause)


@rule("amounts.mass-gives-concentration")
def mass_gives_concentration(bench: Bench) -> Iterator[Judgement]:
    """The mass weighed gives the stated strength in the final volume."""
    for relation, cause in _single(bench, "mass", "sum", "amount"):
        if _percent(relation) or _is_thousand(relation, cause):
            continue
        if cause is not None and cause.kind in _FORMS:
            continue
        what = "mass does not give the stated strength"
        if relation.kind == "sum":
            what = "amounts do not add up to the stated strength"
            if one_cause(relation, bench) is not None:
                continue
        yield from _amount(bench, relation, cause, "amounts.mass-gives-concentration", what)
    yield from _common(bench)


def _common(bench: Bench) -> Iterator[Judgement]:
    """Several amounts of one preparation off by one factor: one finding about all of them."""
    groups: dict[int, list[Relation]] = {}
    grouped = common_factor(bench)
    for relation in bench.relations:
        number = grouped.get(id(relation))
        if number is not None:
            groups.setdefault(number, []).append(relation)
    for relations in groups.values():
        first = relations[0]
        cause = likely_cause(first, bench)
        if _rest_follows(first):
            continue
        grade = severity(replace(first, one_figure=False), cause is not None)
        if grade is None:
            continue
        factor = 1 + first.deviation
        message = (
            f"{len(relations)} amounts are {factor:.4g} times what the stated strengths need"
            f" in the final volume"
        )
        made = judgement(
            bench, first, "amounts.mass-gives-concentration", grade, message, cause, amend=False
        )
        others = tuple(
            Related(r.tested.span, _stated(r), f"computed {computed_text(r)}")
            for r in relations[1:]
        )
        finding = replace(made.finding, related=others + made.finding.related)
        disproved = tuple(Disagreement(r.tested, r.computed, r.working) for r in relations)
        yield Judgement(finding, disproved)


_REST = 0.25


def _rest_follows(relation: Relation) -> bool:
    """Whether the strengths may refer to a larger volume: the sample is added to the mix later."""
    volume = relation.volume
    if volume is None or volume.provenance not in ("total", "sum", "weak"):
        return False
    return 0 < relation.deviation <= _REST


_MORE = 0.5


def _excess(relation: Relation) -> float:
    """How many times too large the amount is for the volume, from either side of the balance."""
    factor = 1 + relation.deviation
    about_strength = relation.target is not None and relation.tested.key == relation.target.key
    return 1 / factor if about_strength and factor > 0 else factor


def _all_for_more(bench: Bench, relation: Relation) -> bool:
    """Whether several amounts are too large by one factor: the sample comes to the mix later."""
    volume = relation.volume
    if volume is None or volume.provenance not in ("total", "sum", "weak"):
        return False
    excess = _excess(relation)
    if not 1 < excess <= 1 + _MORE:
        return False
    alike = [
        other
        for other in bench.relations
        if other.kind in ("stock", "fold", "mass")
        and other.tested.key != relation.tested.key
        and not other.agrees
        and abs(_excess(other) / excess - 1) < 0.01
    ]
    own = [other for other in alike if other.preparation is relation.preparation]
    rows = [o for o in alike if o.preparation is not None and o.preparation.kind == "row"]
    of_row = relation.preparation is not None and relation.preparation.kind == "row"
    return bool(own) or (of_row and len(rows) > 1)


@rule("amounts.mass-fits-named-form")
def mass_fits_named_form(bench: Bench) -> Iterator[Judgement]:
    """The mass belongs to the hydrate or salt form that is named."""
    for relation, cause in _single(bench, "mass"):
        if cause is not None and cause.kind in _FORMS:
            yield from _amount(
                bench, relation, cause, "amounts.mass-fits-named-form", "mass of another form"
            )
    for relation in _open(bench, "sum"):
        found = one_cause(relation, bench)
        if found is None:
            continue
        single, cause = found
        name = "amounts.mass-fits-named-form"
        if cause.kind not in _FORMS:
            name = "amounts.mass-gives-concentration"
        made = list(_amount(bench, single, cause, name, "one amount breaks the stated strength"))
        for item in made:
            extra = Disagreement(single.tested, single.computed, single.working)
            yield replace(item, disproved=(extra,))


@rule("amounts.concentrate-gives-concentration")
def concentrate_gives_concentration(bench: Bench) -> Iterator[Judgement]:
    """The volume of a concentrated liquid gives the stated strength."""
    for relation, cause in _single(bench, "concentrate", "neat"):
        if not _percent(relation) and not _is_thousand(relation, cause):
            yield from _amount(
                bench,
                relation,
                cause,
                "amounts.concentrate-gives-concentration",
                "volume of the concentrate does not give the stated strength",
            )


@rule("amounts.dilution-balances")
def dilution_balances(bench: Bench) -> Iterator[Judgement]:
    """c1·V1 = c2·V2."""
    for relation, cause in _single(bench, "stock"):
        if not _is_thousand(relation, cause):
            yield from _amount(
                bench, relation, cause, "amounts.dilution-balances", "dilution does not balance"
            )


@rule("amounts.fold-balances")
def fold_balances(bench: Bench) -> Iterator[Judgement]:
    """X-fold stock × volume = fold aimed at × final volume."""
    for relation, cause in _single(bench, "fold"):
        yield from _amount(
            bench, relation, cause, "amounts.fold-balances", "volume of the X-fold stock is off"
        )


@rule("amounts.percent-recomputes")
def percent_recomputes(bench: Bench) -> Iterator[Judgement]:
    """A stated percentage follows from amount and volume."""
    for relation, cause in _single(bench, "mass", "neat", "concentrate", "sum"):
        if _percent(relation) and not _is_thousand(relation, cause):
            yield from _amount(
                bench,
                relation,
                cause,
                "amounts.percent-recomputes",
                "percentage does not recompute",
            )


_SUM = 0.002  # a sum has no percent band: only rounding counts (design: "Exact claims")


@rule("amounts.parts-fit-volume")
def parts_fit_volume(bench: Bench) -> Iterator[Judgement]:
    """Parts do not exceed the final volume and add up to a printed total."""
    ratios = {id(r.preparation) for r in bench.relations if r.kind == "ratio" and not r.agrees}
    for relation in _open(bench, "parts", "total"):
        if id(relation.preparation) in ratios or _explained(bench, relation):
            continue
        deviation = abs(relation.deviation)
        grade = "remark" if deviation < _SUM else "major"
        message = (
            "parts exceed the final volume" if relation.kind == "parts" else "rows miss the total"
        )
        if relation.kind == "total":
            message += f": {_stated(relation)} stated, {computed_text(relation)} computed"
        yield judgement(bench, relation, "amounts.parts-fit-volume", grade, message, amend=False)


def _explained(bench: Bench, relation: Relation) -> bool:
    """Whether a wrong amount of the same preparation, reported by itself, explains the sum."""
    return any(
        other.preparation is relation.preparation
        and not other.agrees
        and other.kind in ("stock", "concentrate", "neat", "fold")
        and abs(other.deviation) > REMARK
        for other in bench.relations
        if other.preparation is not None
    )


@rule("amounts.ratio-matches-parts")
def ratio_matches_parts(bench: Bench) -> Iterator[Judgement]:
    """Volumes mixed stand in the stated ratio: one finding a mixture, at the part that is most off."""
    mixtures: dict[tuple[int, object], list[Relation]] = {}
    for relation, _ in _single(bench, "ratio"):
        key = (id(relation.preparation), relation.target.key if relation.target else None)
        mixtures.setdefault(key, []).append(relation)
    for relations in mixtures.values():
        worst = max(relations, key=lambda r: abs(r.deviation))
        yield from _amount(
            bench,
            worst,
            likely_cause(worst, bench),
            "amounts.ratio-matches-parts",
            "volume misses the stated ratio",
        )


@rule("amounts.strengths-agree")
def strengths_agree(bench: Bench) -> Iterator[Judgement]:
    """A strength printed in two units is one strength."""
    for relation, cause in _single(bench, "twofold"):
        yield from _amount(
            bench,
            relation,
            cause,
            "amounts.strengths-agree",
            "strength in brackets is another strength",
        )


@rule("amounts.concentrate-strength-agrees")
def concentrate_strength_agrees(bench: Bench) -> Iterator[Judgement]:
    """The printed strength of a concentrate follows from density and per cent."""
    for relation, cause in _single(bench, "label-strength"):
        yield from _amount(
            bench,
            relation,
            cause,
            "amounts.concentrate-strength-agrees",
            "printed strength does not follow from density and per cent",
        )
