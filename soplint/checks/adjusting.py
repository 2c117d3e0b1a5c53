"""How a pH is set: when, with what, with how much."""

from __future__ import annotations

import re
from collections.abc import Iterator

from soplint.bench import Bench, Preparation
from soplint.bench.adjusting import adjuster_volume, wrong_way
from soplint.bench.filled import Finished, setting_of
from soplint.bench.numbers import shown
from soplint.bench.passages import bottles_of
from soplint.bench.portions import candidates
from soplint.bench.preparation import Adjusted
from soplint.checks.registry import Judgement, rule
from soplint.checks.telling import about_passage, about_ph, about_quantity
from soplint.checks.wording import computed_text, judgement
from soplint.findings.model import Interval

_LITTLE, _MUCH, _GRAVE = (
    0.002,
    0.01,
    0.05,
)  # adjuster as a share of the final volume (common practice, no source)
_CORRECTION = re.compile(
    r"\b(?:drops?|if (?:it|necessary|needed|required|the)|small|fine|final adjustment|trim|slight"
    r"|correct\w*|re-?adjust\w*|check\w*|verif\w*|confirm\w*|minor|as (?:needed|required))\b",
    re.IGNORECASE,
)


def _finished(bench: Bench) -> Iterator[Finished]:
    bottles = bottles_of(bench)
    for order, preparation in enumerate(bench.preparations):
        if preparation.adjusted:
            found = bottles.finished(order)
            if found is not None:
                yield found


def _is_last(adjusted: Adjusted, preparation: Preparation) -> bool:
    """Whether no make-up follows an adjustment."""
    return not any(
        made.step > adjusted.step
        or (made.step == adjusted.step and made.to.start > adjusted.set_ph.start)
        for made in preparation.made
    )


def _is_step(preparation: Preparation) -> bool:
    """Whether the make-up is an instruction; a list of ingredients states no order."""
    return any(made.to.command is not None for made in preparation.made)


@rule("buffers.ph-set-before-mark")
def ph_set_before_mark(bench: Bench) -> Iterator[Judgement]:
    """The pH is set before the solution is made up to its volume."""
    for finished in _finished(bench):
        setting, preparation = finished.setting, finished.preparation
        if setting is None or setting.adjusted is None or not preparation.made:
            continue
        adjusted = setting.adjusted
        if not adjusted.after_volume or not _is_last(adjusted, preparation):
            continue
        if _CORRECTION.search(adjusted.text.chars) or not _is_step(preparation):
            continue
        shares = adjuster_volume(finished)
        if shares is None or shares[1] <= _LITTLE:
            continue
        if len(setting.adjusters) > 1 and shares[1] <= _MUCH:
            continue  # acid or base: the recipe is right, the last hundredths are trimmed
        least, usual = shares
        grade = "major" if least > _GRAVE else "minor" if usual > _MUCH else "remark"
        percent = (
            f"{100 * least:.2g} to {100 * usual:.2g}" if least != usual else f"{100 * usual:.2g}"
        )
        message = (
            f"pH set after making up to volume: the adjuster adds about {percent} % of the volume"
        )
        working = (
            f"adjuster for pH {setting.ph.measure.nominal:g}: {percent} % of"
            f" {finished.litres * 1000:g} mL; dissolve in less, set the pH, then make up"
        )
        set_ph = adjusted.set_ph
        yield about_passage(
            "buffers.ph-set-before-mark", grade, adjusted.text, set_ph.start, set_ph.end, message,
            working,
        )  # fmt: skip


_EITHER = re.compile(
    r"\b(?:as needed|as required|acid or base|or base|or alkali|accordingly|whichever|back)\b",
    re.IGNORECASE,
)


@rule("buffers.adjuster-works-toward-ph")
def adjuster_works_toward_ph(bench: Bench) -> Iterator[Judgement]:
    """The acid or base named moves the pH toward the value that is to be set."""
    for finished in _finished(bench):
        found = wrong_way(finished)
        if found is None:
            continue
        setting, adjuster, start = found
        adjusted = setting.adjusted
        if adjusted is None or _EITHER.search(adjusted.text.chars):
            continue
        aim = setting.ph.measure.nominal
        needed = "an acid" if aim < start else "a base"
        material = adjuster.material
        working = (
            f"charge balance of the contents: pH {start:.2f} before it is set; {material.words}"
            f" leads away from pH {aim:g}, {needed} is needed"
        )
        yield about_passage(
            "buffers.adjuster-works-toward-ph", "major", adjusted.text, material.start,
            material.end,
            f"{material.words} cannot bring this solution from pH {start:.1f} to {aim:g}",
            working,
        )  # fmt: skip


@rule("buffers.adjuster-quantity-reaches-ph")
def adjuster_quantity_reaches_ph(bench: Bench) -> Iterator[Judgement]:
    """The quantity of acid or base that the text states brings the pH it states."""
    for relation in bench.relations:
        if relation.kind != "adjuster" or relation.agrees:
            continue
        if bench.ledger.verdict(relation.tested) == "agrees":
            continue
        message = (
            f"{shown(relation.tested.measure)} of {relation.of} stated for"
            f" pH {relation.target.measure.nominal:g}, {computed_text(relation)} computed"
            if relation.target is not None
            else f"{shown(relation.tested.measure)} stated, {computed_text(relation)} computed"
        )
        name = "buffers.adjuster-quantity-reaches-ph"
        yield judgement(bench, relation, name, "minor", message)


@rule("buffers.adjuster-fits-below-mark")
def adjuster_fits_below_mark(bench: Bench) -> Iterator[Judgement]:
    """Water, solids and adjuster leave room below the mark."""
    for relation in bench.relations:
        if relation.kind == "room" and not relation.agrees:
            unit = relation.tested.measure.unit
            message = (
                f"{shown(relation.tested.measure)} of water leaves no room for solids and adjuster:"
                f" at most {relation.computed.high:.4g} {unit}"
            )
            grade = "major" if relation.deviation > 0.02 else "minor"
            name = "buffers.adjuster-fits-below-mark"
            yield judgement(bench, relation, name, grade, message, amend=False)


@rule("buffers.starting-ph-is-possible")
def starting_ph_is_possible(bench: Bench) -> Iterator[Judgement]:
    """The pH expected before the adjustment is the one that the contents give."""
    for relation in bench.relations:
        if relation.kind == "ph-start" and not relation.agrees:
            value = relation.computed.value
            message = (
                f"pH {relation.tested.measure.nominal:g} expected before adjustment,"
                f" pH {value:.1f} computed"
            )
            yield about_ph(bench, relation, "buffers.starting-ph-is-possible", "minor", message)


# --- counter-ions --------------------------------------------------------------------------------------

_CATIONS = {"sodium": "NaOH", "potassium": "KOH"}


@rule("buffers.counter-ion-belongs")
def counter_ion_belongs(bench: Bench) -> Iterator[Judgement]:
    """A buffer named for its cation is set with the base of that cation."""
    for preparation in bench.preparations:
        title = preparation.title
        if title is None or title.source == "document":
            continue
        named = [word for word in _CATIONS if re.search(rf"\b{word}\b", title.words.lower())]
        if len(named) != 1:
            continue
        setting = setting_of(preparation, bench.facts)
        if setting is None or setting.adjusted is None or len(setting.adjusters) != 1:
            continue
        adjuster = setting.adjusters[0]
        other = _CATIONS["potassium" if named[0] == "sodium" else "sodium"]
        if adjuster.family != other or not _holds_only(preparation, named[0]):
            continue
        material = adjuster.material
        yield about_passage(
            "buffers.counter-ion-belongs", "remark", setting.adjusted.text, material.start,
            material.end,
            f"{material.words} brings another cation into a {named[0]} buffer;"
            f" {_CATIONS[named[0]]} matches",
        )  # fmt: skip


def _holds_only(preparation: Preparation, cation: str) -> bool:
    """Whether all salts of the recipe bring the cation of the name."""
    symbol, other = ("Na", "K") if cation == "sodium" else ("K", "Na")
    formulas = [
        s.formula
        for t in preparation.taken
        if t.dose.material is not None and not t.dose.material.is_water
        for s in candidates(t.dose.material)[:1]
        if s.formula
    ]
    has = any(re.search(rf"{symbol}(?![a-z])", f) for f in formulas)
    return has and not any(re.search(rf"{other}(?![a-z])", f) for f in formulas)


# --- EDTA -------------------------------------------------------------------------------------------------

_EDTA_STRENGTH = 0.2  # mol/L; below about 0.1 mol/L the disodium salt dissolves at its own pH
_EDTA_PH = 7.0


@rule("buffers.edta-dissolves-at-its-ph")
def edta_dissolves_at_its_ph(bench: Bench) -> Iterator[Judgement]:
    """A strong stock of disodium EDTA is set near pH 8, where it dissolves."""
    for finished in _finished(bench):
        setting = finished.setting
        strength = max((_edta(c) for c in finished.start), default=0.0)
        if setting is None or strength < _EDTA_STRENGTH:
            continue
        ph = setting.ph.measure
        if ph.nominal >= _EDTA_PH:
            continue
        working = (
            f"{strength:.2g} mol/L of disodium EDTA: soluble to about 0.1 mol/L as it is, at this"
            f" strength only when the third proton is taken up, near pH 8 (about one mol of NaOH"
            f" for each mol)"
        )
        yield about_quantity(
            "buffers.edta-dissolves-at-its-ph", "major", setting.ph,
            f"disodium EDTA {strength:.2g} mol/L does not dissolve at pH {ph.nominal:g}; it needs"
            " pH 8",
            working, Interval(8.0, "pH", 7.5, 8.5), "pH 8",
        )  # fmt: skip


def _edta(contents: dict[str, float]) -> float:
    from soplint.equilibria import EquilibriumError
    from soplint.equilibria.dissociation import dissociation

    total = 0.0
    for name, mol in contents.items():
        try:
            found = dissociation(name)
        except EquilibriumError:
            continue
        if "edta" in dict(found.systems) and dict(found.ions).get("Na+", 0) == 2:
            total += mol
    return total


# --- an adjustment without an aim --------------------------------------------------------------------------

_ADJUST_IF = re.compile(
    r"\b(?:adjust|correct) (?:the )?ph\b(?![^.]*\bto\b[^.]*\d)[^.]*?\b(?:if (?:necessary|needed|required)"
    r"|as (?:necessary|needed|required))",
    re.IGNORECASE,
)


@rule("buffers.adjustment-states-its-aim")
def adjustment_states_its_aim(bench: Bench) -> Iterator[Judgement]:
    """An adjustment "if necessary" says to what pH and within what limits."""
    for index, block in enumerate(bench.blocks):
        if index in bench.scope.aside:
            continue
        section = " ".join(s.text.chars for s in block.sentences)
        if re.search(r"pH\D{0,12}\d", section):
            continue
        for sentence in block.sentences:
            found = _ADJUST_IF.search(sentence.text.chars)
            if found is None or _aim_near(bench, sentence.text.line):
                continue
            yield about_passage(
                "buffers.adjustment-states-its-aim", "remark", sentence.text, found.start(),
                found.end(), "pH to be adjusted if necessary, but no pH and no limits are stated",
            )  # fmt: skip


def _aim_near(bench: Bench, line: int) -> bool:
    """Whether a preparation that the line belongs to states a pH."""
    for preparation in bench.preparations:
        texts = [t.text.line for t in preparation.taken] + [m.text.line for m in preparation.made]
        if not texts or not min(texts) - 3 <= line <= max(texts) + 6:
            continue
        title = preparation.title
        if (title is not None and title.ph is not None) or any(
            c.claim.kind == "pH" for c in preparation.claimed
        ):
            return True
        if any(a.set_ph.ph is not None for a in preparation.adjusted):
            return True
    return False
