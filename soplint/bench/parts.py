"""Relations that need no chemistry: folds, sums of parts, ratios, columns that scale alike."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from math import isclose

from soplint.bench.facts import Facts, tokens
from soplint.bench.numbers import ALIQUOT, EXACT, relative, shown
from soplint.bench.preparation import FinalVolume, Preparation, Stated, Taken
from soplint.bench.relation import Relation
from soplint.bench.volumes import running_text
from soplint.findings.model import Interval
from soplint.notation.phrases import Material
from soplint.quantities.model import Measure

# Volumes of mixed liquids shrink by up to 4 % (ethanol and water); below 3 % a sum says nothing.
CONTRACTION = 0.03


def fold_relations(preparation: Preparation, facts: Facts, order: int) -> Iterator[Relation]:
    """X-fold stock × volume taken = fold aimed at × final volume."""
    volume = preparation.volume
    if volume is None or volume.litres <= 0:
        return
    for taken in preparation.taken:
        stock = _stock_fold(taken, facts, order, preparation)
        if stock is None or taken.dose.amount.dimension != "volume":
            continue
        aim = _fold_aim(preparation, taken)
        if aim is None or isclose(aim.measure.base, stock.base):
            continue
        yield _fold(preparation, taken, stock, aim, volume)


def _stock_fold(taken: Taken, facts: Facts, order: int, preparation: Preparation) -> Measure | None:
    material = taken.dose.material
    if material is None:
        return None
    folds = [m for m in material.strengths if m.dimension == "fold"]
    if folds:
        return max(folds, key=lambda m: m.base)
    title = preparation.title
    bracket = [m for m in material.bracket if m.dimension == "fold"]
    if len(bracket) == 1 and title is not None and title.fold is not None:
        if bracket[0].base > title.fold.measure.base:
            return bracket[0]
    if material.match is not None or not (material.solution or tokens(material.words)):
        return None
    solution = facts.solution(material, order, preparation.section)
    return solution.fold if solution is not None and solution.order < order else None


def _fold_aim(preparation: Preparation, taken: Taken) -> Stated | None:
    """The fold that this stock shall have in the preparation, where the text says it."""
    material = taken.dose.material
    assert material is not None
    stock = any(m.dimension == "fold" for m in material.strengths)
    printed = (*material.finals, *(material.bracket if stock else ()))
    beside = [m for m in printed if m.dimension == "fold"]
    if len(beside) == 1:
        return Stated(taken.text, beside[0])
    folds = [m for m in material.strengths if m.dimension == "fold"]
    if len(folds) == 2:
        return Stated(taken.text, min(folds, key=lambda m: m.base))
    others = [
        t
        for t in preparation.taken
        if t is not taken and not (t.dose.material is not None and t.dose.material.is_water)
    ]
    title = preparation.title
    for target in title.folds if title is not None and title.source != "document" else ():
        assert target.material is not None
        shared = tokens(target.material.words) & tokens(material.words)
        if (
            shared
            and len(title.folds if title else ()) == 1
            and len(title.targets if title else ()) > 0
        ):
            return target.stated
    if title is not None and title.fold is not None and title.source != "document":
        alike = bool(tokens(title.words) & tokens(material.words))
        if not others and (alike or not tokens(material.words) or title.source == "inline"):
            return title.fold
        if alike and title.fold.measure.base == 1.0:
            return title.fold
    for claimed in preparation.claimed:
        if claimed.claim.kind == "fold" and not others:
            return Stated(claimed.text, claimed.claim.measure)
    return None


def _fold(
    preparation: Preparation, taken: Taken, stock: Measure, aim: Stated, volume: FinalVolume
) -> Relation:
    amount = taken.dose.amount
    value = aim.measure.base * volume.litres / stock.base / amount.factor
    ratio = amount.nominal / value if value else 0.0
    spread = relative(amount, ALIQUOT) + volume.relative + EXACT
    return Relation(
        "fold",
        taken.stated,
        taken.dose.material.words if taken.dose.material else None,
        Interval(value, amount.unit, value * (1 - spread), value * (1 + spread)),
        abs(ratio - 1) <= spread,
        ratio - 1,
        f"{shown(aim.measure)} × {volume.litres * 1000:.4g} mL / {shown(stock)}"
        f" = {value:.4g} {amount.unit}",
        tuple(s for s in (aim, volume.stated) if s is not None),
        preparation=preparation,
        volume=volume,
        target=aim,
        taken=taken,
    )


# --- sums ------------------------------------------------------------------------------------------


def sum_relations(preparation: Preparation) -> Iterator[Relation]:
    """Parts against the final volume: never more than fits, and equal where a total is printed."""
    volume = preparation.volume
    if volume is None or volume.stated is None or volume.provenance in ("sum", "weak"):
        return
    poured = [t for t in preparation.taken if t.dose.amount.dimension == "volume" and not t.late]
    if len(poured) < 2 or any(t.dose.alternatives or t.dose.each for t in poured):
        return
    if any(t.dose.material is None and not t.solvent for t in poured):
        return
    total = sum(t.dose.amount.base for t in poured)
    slack = sum(t.dose.amount.base * relative(t.dose.amount, ALIQUOT) for t in poured)
    complete = preparation.total is not None and not preparation.made
    complete = complete or _ends_in_total(preparation)
    if complete and all(t.dose.amount.dimension == "volume" for t in preparation.taken):
        yield _total(preparation, volume, poured, total, slack)
    elif total > volume.litres * (1 + CONTRACTION) + slack and not running_text(poured):
        yield _too_much(preparation, volume, poured, total, slack)
    elif _all_poured(preparation) and abs(total / volume.litres - 1) <= 0.01:
        yield _total(preparation, volume, poured, total, slack + 0.01 * volume.litres)
    elif _complete_line(preparation) and total < volume.litres * (1 - CONTRACTION) - slack:
        yield _too_much(preparation, volume, poured, total, slack)


def _ends_in_total(preparation: Preparation) -> bool:
    """ "- 700 µL water, - Total: 1 mL": every part is poured and the sum is printed."""
    if not preparation.made or not _poured_with_water(preparation):
        return False
    last = preparation.made[-1].to
    return last.said_final and last.diluent is None and last.command in (None, "MIX", "ADD")


def fills_up(preparation: Preparation) -> bool:
    """Whether poured parts, water among them, make up the stated volume by themselves."""
    volume = preparation.volume
    if volume is None or volume.litres <= 0 or not _all_poured(preparation):
        return False
    total = sum(t.dose.amount.base for t in preparation.taken)
    return abs(total / volume.litres - 1) <= CONTRACTION


def _all_poured(preparation: Preparation) -> bool:
    """Whether nothing is made up, every part is a volume and water is one of them."""
    return not preparation.made and _poured_with_water(preparation)


def _poured_with_water(preparation: Preparation) -> bool:
    return any(
        t.dose.material is not None and t.dose.material.is_water for t in preparation.taken
    ) and all(t.dose.amount.dimension == "volume" for t in preparation.taken)


def _complete_line(preparation: Preparation) -> bool:
    """ "X, 50 mL: 5 mL of A and 45 mL of water": a line that lists all of its parts."""
    if preparation.kind != "line" or preparation.made or preparation.adjusted:
        return False
    liquids = [t for t in preparation.taken if t.dose.amount.dimension == "volume"]
    return len(liquids) == len(preparation.taken) and any(
        t.dose.material is not None and t.dose.material.is_water and not t.solvent for t in liquids
    )


def _total(
    preparation: Preparation,
    volume: FinalVolume,
    poured: Sequence[Taken],
    total: float,
    slack: float,
) -> Relation:
    assert volume.stated is not None
    measure = volume.stated.measure
    value = total / measure.factor
    half = (slack + volume.relative * volume.litres) / measure.factor
    return Relation(
        "total",
        volume.stated,
        None,
        Interval(value, measure.unit, value - half, value + half),
        abs(total - volume.litres) <= slack + volume.relative * volume.litres + 1e-12,
        volume.litres / total - 1 if total else 0.0,
        " + ".join(shown(t.dose.amount) for t in poured) + f" = {value:.4g} {measure.unit}",
        tuple(t.stated for t in poured),
        preparation=preparation,
        volume=volume,
        exact=True,
    )


def _too_much(
    preparation: Preparation,
    volume: FinalVolume,
    poured: Sequence[Taken],
    total: float,
    slack: float,
) -> Relation:
    """The parts exceed the volume: tested is the part whose reduction is nearest, the last one."""
    assert volume.stated is not None
    last = poured[-1]
    amount = last.dose.amount
    value = max(0.0, (volume.litres - (total - amount.base)) / amount.factor)
    half = slack / amount.factor
    return Relation(
        "parts",
        last.stated,
        last.dose.material.words if last.dose.material else None,
        Interval(value, amount.unit, value - half, value + half),
        False,
        total / volume.litres - 1,
        " + ".join(shown(t.dose.amount) for t in poured)
        + f" = {total * 1000:.4g} mL; final volume {shown(volume.stated.measure)}",
        (*(t.stated for t in poured[:-1]), volume.stated),
        preparation=preparation,
        volume=volume,
        taken=last,
    )


def volume_relations(preparation: Preparation) -> Iterator[Relation]:
    """The volume of the title against the volume made up, where they are the same."""
    title, volume = preparation.title, preparation.volume
    if title is None or title.volume is None or volume is None or volume.stated is None:
        return
    if (
        volume.provenance not in ("made-up", "mark", "total")
        or volume.stated.key == title.volume.key
    ):
        return
    measure = title.volume.measure
    value = volume.litres / measure.factor
    if abs(measure.nominal / value - 1) <= EXACT:
        yield Relation(
            "volume",
            title.volume,
            None,
            Interval(value, measure.unit, value * (1 - EXACT), value * (1 + EXACT)),
            True,
            measure.nominal / value - 1,
            f"made up to {shown(volume.stated.measure)}",
            preparation=preparation,
            volume=volume,
        )


# --- ratios ----------------------------------------------------------------------------------------


def ratio_relations(preparation: Preparation) -> Iterator[Relation]:
    """Parts of a mixture (70 : 30 v/v) against the volumes that are mixed."""
    titled = preparation.title.mixtures if preparation.title is not None else ()
    for mixed in (*preparation.mixed, *titled):
        ratio = mixed.mixture.ratio
        parts = ratio.parts
        doses = [_dose_of(preparation, material) for material in mixed.mixture.materials]
        if len(parts) != len(doses) or any(d is None for d in doses) or sum(parts) <= 0:
            continue
        found = [d for d in doses if d is not None]
        if len({id(d) for d in found}) != len(found):
            continue
        if ratio.unit in (":", "in") and not mixed.mixture.materials[-1].words:
            parts = _nearer_convention(parts, [t.dose.amount.base for t in found])
        yield from _parts_of(preparation, Stated(mixed.text, ratio), parts, found)


def _nearer_convention(parts: Sequence[float], amounts: Sequence[float]) -> tuple[float, ...]:
    """1:4 as 1 + 4 or as 1 in 4: the convention that the volumes follow."""
    one, many = parts[0], parts[-1]
    if many <= one or amounts[-1] <= 0:
        return tuple(parts)
    given = amounts[0] / amounts[-1]
    plus, within = one / many, one / (many - one)
    return (one, many - one) if abs(given - within) < abs(given - plus) else (one, many)


def _parts_of(
    preparation: Preparation, ratio: Stated, parts: Sequence[float], doses: Sequence[Taken]
) -> Iterator[Relation]:
    amounts = [d.dose.amount.base for d in doses]
    volume = preparation.volume
    whole = sum(amounts)
    if volume is not None and volume.provenance in ("made-up", "mark", "heading", "column"):
        whole = volume.litres
    for dose, part, amount in zip(doses, parts, amounts, strict=True):
        measure = dose.dose.amount
        value = whole * part / sum(parts) / measure.factor
        deviation = measure.nominal / value - 1 if value else 0.0
        spread = relative(measure, ALIQUOT) + EXACT
        scale = amount / part if part else 0.0
        alike = all(
            isclose(a / p, scale, rel_tol=0.01) for a, p in zip(amounts, parts, strict=True) if p
        )
        yield Relation(
            "ratio",
            dose.stated,
            dose.dose.material.words if dose.dose.material else None,
            Interval(value, measure.unit, value * (1 - spread), value * (1 + spread)),
            alike or abs(deviation) <= spread,
            deviation,
            f"{whole * 1000:.4g} mL × {part:g} / {sum(parts):g} = {value:.4g} {measure.unit}",
            (ratio, *((volume.stated,) if volume and volume.stated else ())),
            preparation=preparation,
            volume=volume,
            target=ratio,
            taken=dose,
        )


def _dose_of(preparation: Preparation, material: Material) -> Taken | None:
    if not material.words:
        waters = [
            t
            for t in preparation.taken
            if t.dose.amount.dimension == "volume"
            and t.dose.material is not None
            and (t.dose.material.is_water or t.dose.material.words.lower() == "diluent")
        ]
        return waters[0] if len(waters) == 1 else None
    wanted = tokens(material.words)
    found = [
        t
        for t in preparation.taken
        if t.dose.amount.dimension == "volume"
        and t.dose.material is not None
        and _named_alike(t.dose.material, material, wanted)
    ]
    return found[0] if len(found) == 1 else None


def _named_alike(own: Material, material: Material, wanted: frozenset[str]) -> bool:
    if own.match is not None and material.match is not None:
        return own.match.substances[0].family == material.match.substances[0].family
    if wanted and wanted <= tokens(own.words) | {"buffer"}:
        return True
    return not wanted and not tokens(own.words) and own.solution and material.solution
