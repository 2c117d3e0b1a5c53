"""Balances: amounts of a preparation against the strengths that it is said to have.

Every strength of a title, bracket, column or claim is compared with what the doses give in the
final volume.  All reasonable readings are tried before a disagreement is recorded.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import islice, product

from soplint.bench.facts import Facts
from soplint.bench.numbers import EXACT, nominal_relative, relative, shown
from soplint.bench.portions import candidates
from soplint.bench.preparation import (
    FinalVolume,
    Preparation,
    Target,
)
from soplint.bench.relation import Relation
from soplint.bench.shares import Share, shares
from soplint.bench.targets import targets_of
from soplint.bench.things import Bearers, bearers
from soplint.bench.volumes import final_volume
from soplint.findings.model import Interval
from soplint.quantities.model import Measure

_MOST_READINGS = 64  # combinations of readings that are tried for one sum


@dataclass(frozen=True, slots=True)
class Balance:
    """One way to make sense of a strength: the doses that bear it, each under one reading."""

    target: Target
    how: str
    chosen: tuple[Share, ...]
    volume: FinalVolume
    scale: float  # the amounts are for this multiple of the strength (fold)

    @property
    def wanted(self) -> float:
        """The strength aimed at times the volume, base units."""
        return self.target.stated.measure.base * self.scale * self.volume.litres

    @property
    def given(self) -> float:
        """What the doses bring."""
        return sum(share.quantity for share in self.chosen)

    @property
    def ratio(self) -> float:
        """Brought / aimed at."""
        return self.given / self.wanted if self.wanted else 0.0

    @property
    def spread(self) -> float:
        """Relative half-width of the comparison: strength, volume and doses together."""
        given = self.given or 1.0
        doses = sum(s.quantity * s.relative for s in self.chosen) / given
        return nominal_relative(self.target.stated.measure) + self.volume.relative + doses

    @property
    def closes(self) -> bool:
        """Whether stated and computed intervals meet."""
        return _meets(self.ratio, self.target.stated.measure, self.spread)


def _meets(ratio: float, measure: Measure, spread: float) -> bool:
    if measure.manner == "range":
        low, high = measure.low / measure.nominal, measure.high / measure.nominal
        return low * (1 - spread) <= ratio <= high * (1 + spread)
    return abs(ratio - 1) <= spread + 1e-9


# --- testing --------------------------------------------------------------------------------------


def balance_relations(preparation: Preparation, facts: Facts, order: int) -> Iterator[Relation]:
    """Every strength of the preparation, tested."""
    volume = preparation.volume or final_volume(preparation)
    targets = list(targets_of(preparation))
    for scale in _best_scale(preparation, targets, volume, facts, order):
        for target in targets:
            own = _own_scale(preparation, target, scale)
            if own is None:
                continue
            relation = _test(preparation, target, volume, facts, order, own)
            if relation is not None:
                yield relation


def _own_scale(preparation: Preparation, target: Target, scale: float) -> float | None:
    """The scale of a claim at another fold than the preparation's; None where that is not known."""
    if target.fold is None or not target.fold.base:
        return scale
    fold = preparation.title.fold if preparation.title is not None else None
    return fold.measure.base / target.fold.base if fold is not None else None


def _best_scale(
    preparation: Preparation,
    targets: Sequence[Target],
    volume: FinalVolume | None,
    facts: Facts,
    order: int,
) -> Iterator[float]:
    """The fold reading for the preparation as a whole: the one under which most numbers agree."""
    fold = preparation.title.fold if preparation.title else None
    scales = [1.0]
    if fold is not None and fold.measure.base > 0 and fold.measure.base != 1.0:
        scales += [fold.measure.base, 1 / fold.measure.base]
    if len(scales) == 1:
        yield 1.0
        return
    counts = []
    for scale in scales:
        agreeing = 0
        for target in targets:
            relation = _test(preparation, target, volume, facts, order, scale)
            agreeing += relation is not None and relation.agrees
        counts.append(agreeing)
    yield scales[counts.index(max(counts))]


def _test(
    preparation: Preparation,
    target: Target,
    volume: FinalVolume | None,
    facts: Facts,
    order: int,
    scale: float,
) -> Relation | None:
    """One strength against the doses that bear it, or None where nothing bears it."""
    measure = target.stated.measure
    if not measure.base:
        return None
    first: Balance | None = None
    ways, sure = 0, True
    for group in _groups(preparation, target, facts, order):
        for candidate in _balances(preparation, target, group, volume, scale):
            if candidate.closes:
                return _relation(preparation, candidate, ways)
            if group.how != "any":
                first = first or candidate
        ways += 1
        if group.how != "any":
            sure = sure and group.sure and not _many(group)
    if first is None:
        if target.source == "maybe" and target.fold is None:
            return None  # "10 mL of NaF (0.5 mol/l)": the strength of what is taken
        return _solid_by_volume(preparation, target, volume, facts, order, scale)
    if not sure or target.source == "maybe" or _of_other_sentences(preparation, first):
        return None
    return _other_digits(preparation, first, ways) or _relation(preparation, first, ways)


def _of_other_sentences(preparation: Preparation, balance: Balance) -> bool:
    """Whether a claim stands with doses of its own, none of which is among those compared."""
    if balance.target.source != "claim":
        return False
    text = balance.target.stated.text
    own = [t for t in preparation.taken if t.text is text and not t.solvent]
    return bool(own) and all(share.taken.text is not text for share in balance.chosen)


def _other_digits(preparation: Preparation, balance: Balance, ways: int) -> Relation | None:
    """The relation with the other reading of "1,250": it may close with that."""
    readings = [(share, *_other_shares(share)) for share in balance.chosen]
    for chosen in islice(product(*readings), _MOST_READINGS):
        changed = replace(balance, chosen=chosen)
        if changed.closes:
            return _relation(preparation, changed, ways)
    return None


def _other_shares(share: Share) -> Iterator[Share]:
    """The share under the other readings of its amount's digits."""
    amount = share.taken.dose.amount
    for value in amount.alternatives:
        factor = value / amount.nominal if amount.nominal else 0.0
        if factor:
            changed = replace(
                amount, value=value, low=amount.low * factor, high=amount.high * factor
            )
            taken = replace(share.taken, dose=replace(share.taken.dose, amount=changed))
            yield replace(share, quantity=share.quantity * factor, taken=taken)


_AS_MASS = {"mL": ("g", 1.0), "µL": ("mg", 1e-3), "L": ("kg", 1000.0)}


def _solid_by_volume(
    preparation: Preparation,
    target: Target,
    volume: FinalVolume | None,
    facts: Facts,
    order: int,
    scale: float,
) -> Relation | None:
    """ "Add 8.49 mL silver nitrate": the figure fits as grams, a solid is not taken by volume."""
    for index, taken in enumerate(preparation.taken):
        dose = taken.dose
        if dose.material is None or dose.amount.unit not in _AS_MASS or dose.material.strengths:
            continue
        meant = candidates(dose.material)
        if not meant or dose.material.solution or any(s.state != "solid" for s in meant):
            continue
        unit, factor = _AS_MASS[dose.amount.unit]
        amount = replace(dose.amount, dimension="mass", unit=unit, factor=factor)
        weighed = replace(taken, dose=replace(dose, amount=amount))
        others = list(preparation.taken)
        others[index] = weighed
        aim = target
        if target.material is dose.material:
            aim = replace(target, material=weighed.dose.material)
        relation = _test(replace(preparation, taken=others), aim, volume, facts, order, scale)
        if relation is not None and relation.agrees and relation.taken is not None:
            return replace(
                relation,
                kind="dimension",
                tested=taken.stated,
                agrees=False,
                exact=True,
                computed=replace(relation.computed, unit=unit),
                preparation=preparation,
                taken=taken,
            )
    return None


def _many(group: Bearers) -> bool:
    """Whether one dose can mean several stocks of different strength."""
    return any(
        len({s.label.base for s in readings if s.label is not None}) > 1
        for readings in group.shares
    )


def _groups(
    preparation: Preparation, target: Target, facts: Facts, order: int
) -> Iterator[Bearers]:
    if target.source in ("bracket", "maybe"):
        for taken in preparation.taken:
            for dose in (taken.dose, *taken.dose.alternatives):
                if dose.material is target.material:
                    bare = dose
                    if target.source == "maybe" and dose.material is not None:
                        bare = replace(dose, material=replace(dose.material, bracket=()))
                    found = shares(replace(taken, dose=bare), target.stated.measure, facts)
                    if found:
                        yield Bearers("substance", (tuple(found),))
                    return
        return
    yield from bearers(preparation, target.material, target.stated.measure, facts, order)


def _balances(
    preparation: Preparation,
    target: Target,
    group: Bearers,
    volume: FinalVolume | None,
    scale: float,
) -> Iterator[Balance]:
    """The readings of a group of doses, the nearest to the text first."""
    for chosen in islice(product(*group.shares), _MOST_READINGS):
        for final in _volumes(preparation, chosen, volume, target):
            yield Balance(target, group.how, chosen, final, scale)


def _volumes(
    preparation: Preparation,
    chosen: tuple[Share, ...],
    volume: FinalVolume | None,
    target: Target,
) -> Iterator[FinalVolume]:
    """The final volume; where only a solvent volume is known, that of the dose's own line."""
    if target.stated.measure.dimension == "fraction" and target.stated.measure.basis != "w/v":
        mass = _total_mass(preparation)
        if mass is not None:
            yield FinalVolume(mass, EXACT, "weighed", None)
            return
        if target.stated.measure.basis == "w/w" and _other_solvent(preparation):
            return  # the density of the mixture is not known
    strong = volume is not None and volume.provenance not in ("weak", "sum", "heading")
    strong = strong and not any(share.taken.late for share in chosen)
    if volume is not None:
        yield volume
        late = sum(
            t.dose.amount.base
            for t in preparation.taken
            if t.late and t.dose.amount.dimension == "volume"
        )
        if late:
            yield replace(volume, litres=volume.litres + late)
    if strong:
        return
    steps = {share.taken.step for share in chosen}
    if volume is not None and volume.provenance == "sum":
        so_far = [
            t.dose.amount.base
            for t in preparation.taken
            if t.step <= max(steps) and t.dose.amount.dimension == "volume"
        ]
        if len(so_far) > 1:
            yield replace(volume, litres=sum(so_far))  # at the step itself
    if len(steps) != 1:
        return
    for taken in preparation.taken:
        amount = taken.dose.amount
        into = taken.solvent or taken.dose.role in ("to", "into")
        if amount.dimension != "volume" or amount.base <= 0:
            continue
        if taken.step in steps and into:
            local = FinalVolume(amount.base, relative(amount, EXACT), "weak", taken.stated)
            if volume is None or abs(local.litres / volume.litres - 1) > 1e-9:
                yield local
            added = sum(
                share.taken.dose.amount.base
                for share in chosen
                if share.taken.dose.amount.dimension == "volume"
            )
            if added:
                yield replace(local, litres=local.litres + added)


def _other_solvent(preparation: Preparation) -> bool:
    """Whether a good part of the liquid is another solvent than water."""
    poured = [t.dose for t in preparation.taken if t.dose.amount.dimension == "volume"]
    total = sum(dose.amount.base for dose in poured)
    return any(
        dose.material is not None
        and not dose.material.is_water
        and any(s.state == "liquid" for s in candidates(dose.material))
        and dose.amount.base > 0.2 * total
        for dose in poured
    )


def _total_mass(preparation: Preparation) -> float | None:
    """kg of everything, where the solvent is weighed: per cent by mass refers to it."""
    amounts = [t.dose.amount for t in preparation.taken]
    weighed = any(
        t.dose.amount.dimension == "mass"
        and t.dose.material is not None
        and t.dose.material.is_water
        for t in preparation.taken
    )
    if not weighed or any(a.dimension != "mass" for a in amounts):
        return None
    return sum(a.base for a in amounts) / 1000


def _relation(preparation: Preparation, balance: Balance, ways: int) -> Relation:
    target = balance.target
    single = len(balance.chosen) == 1
    share = balance.chosen[0]
    volume = balance.volume
    inputs = tuple(s for s in (target.stated, volume.stated) if s is not None)
    about_claim = target.source == "claim" and target.stated.measure.manner != "about"
    if single and not about_claim:
        tested = share.taken.stated
        measure = tested.measure
        value = _needed(balance, measure)
        working = _amount_working(balance, value, measure)
        deviation = balance.ratio - 1
    else:
        tested = target.stated
        measure = tested.measure
        value = measure.nominal * balance.ratio
        working = _sum_working(balance, value, measure)
        deviation = 1 / balance.ratio - 1 if balance.ratio else 0.0
        inputs = (
            *(s.taken.stated for s in balance.chosen),
            *((volume.stated,) if volume.stated else ()),
        )
    half = abs(value) * balance.spread
    reading = ", ".join(dict.fromkeys(s.reading for s in balance.chosen if s.reading))
    return Relation(
        kind=share.kind if single else "sum",
        tested=tested,
        of=_name(share, target),
        computed=Interval(value, measure.unit, value - half, value + half),
        agrees=balance.closes,
        deviation=deviation,
        working=working,
        inputs=inputs,
        reading=reading,
        preparation=preparation,
        volume=volume,
        target=target.stated,
        taken=share.taken if single else None,
        substance=share.substance,
        one_figure=target.stated.measure.digits <= 1,
        note=_scale_note(balance),
        several=ways > 0,
        members=() if single or balance.closes else tuple(_members(preparation, balance)),
    )


def _needed(balance: Balance, measure: Measure) -> float:
    """The amount of the only dose that gives the strength, in its printed unit.

    Where the solvent is weighed the dose counts in the whole as well: x·q = p·(x·m + w).
    """
    if not balance.ratio:
        return 0.0
    share = balance.chosen[0]
    dose = share.taken.dose.amount
    if balance.volume.provenance == "weighed" and dose.dimension == "mass":
        strength = balance.target.stated.measure.base * balance.scale
        own = dose.base / 1000
        rest = balance.volume.litres - own
        brought = share.quantity - strength * own
        if brought > 0 and rest > 0:
            return measure.nominal * strength * rest / brought
    return measure.nominal / balance.ratio


def _members(preparation: Preparation, balance: Balance) -> Iterator[Relation]:
    """Each dose of a sum, with the amount that the others leave to it."""
    for share in balance.chosen:
        left = balance.wanted - (balance.given - share.quantity)
        measure = share.taken.dose.amount
        if left <= 0 or share.quantity <= 0:
            continue
        value = measure.nominal * left / share.quantity
        half = value * balance.spread
        others = " − ".join(f"({s.working})" for s in balance.chosen if s is not share)
        yield Relation(
            share.kind,
            share.taken.stated,
            _name(share, balance.target),
            Interval(value, measure.unit, value - half, value + half),
            False,
            measure.nominal / value - 1,
            f"{shown(balance.target.stated.measure)} × {_volume_shown(balance.volume)} − {others}"
            f" leaves {value:.4g} {measure.unit}",
            (balance.target.stated, *(s.taken.stated for s in balance.chosen if s is not share)),
            share.reading,
            preparation,
            balance.volume,
            balance.target.stated,
            share.taken,
            share.substance,
        )


def _name(share: Share, target: Target) -> str | None:
    if share.substance is not None:
        return share.substance.name
    material = share.taken.dose.material or target.material
    return material.words if material else None


def _scale_note(balance: Balance) -> str:
    return f"amounts read as {balance.scale:g} times the strength" if balance.scale != 1 else ""


def _amount_working(balance: Balance, value: float, measure: Measure) -> str:
    share, target = balance.chosen[0], balance.target.stated.measure
    scale = f" × {balance.scale:g}" if balance.scale != 1 else ""
    volume = _volume_shown(balance.volume)
    if balance.volume.provenance == "weighed":
        dose = share.taken.dose.amount
        rest = balance.volume.litres - dose.base / 1000 if dose.dimension == "mass" else 0.0
        if rest > 0:
            return (
                f"{shown(target)}{scale} (w/w) with {rest * 1000:.4g} g of the rest:"
                f" {value:.4g} {measure.unit}"
            )
    if share.kind == "stock" and share.label is not None:
        return (
            f"{shown(target)}{scale} × {volume} / {shown(share.label)} = {value:.4g} {measure.unit}"
        )
    substance = share.substance
    if substance is not None and substance.molar_mass and share.kind == "mass":
        return (
            f"{shown(target)}{scale} × {volume} × {substance.molar_mass:.2f} g/mol"
            f" = {value:.4g} {measure.unit}"
        )
    return (
        f"{shown(target)}{scale} × {volume}; {share.working} brings"
        f" {balance.ratio:.4g} of it; {shown(measure)} / {balance.ratio:.4g}"
        f" = {value:.4g} {measure.unit}"
    )


def _sum_working(balance: Balance, value: float, measure: Measure) -> str:
    parts = " + ".join(f"({share.working})" for share in balance.chosen)
    scale = f" / {balance.scale:g}" if balance.scale != 1 else ""
    return f"{parts} in {_volume_shown(balance.volume)}{scale} = {value:.4g} {measure.unit}"


def _volume_shown(volume: FinalVolume) -> str:
    if volume.stated is not None and abs(volume.stated.measure.base / volume.litres - 1) < 1e-9:
        return shown(volume.stated.measure)
    return f"{volume.litres * 1000:.4g} {'g' if volume.provenance == 'weighed' else 'mL'}"
