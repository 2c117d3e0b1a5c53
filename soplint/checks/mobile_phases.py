"""Mobile phases: when the pH is set, which salts stay dissolved, what the column and detector bear."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

from soplint.bench import Bench, Preparation, Stated
from soplint.bench.filled import Bottles
from soplint.bench.numbers import shown
from soplint.bench.passages import bottles_of
from soplint.bench.portions import candidates
from soplint.bench.preparation import Taken
from soplint.checks.registry import Judgement, rule
from soplint.checks.telling import about_passage
from soplint.findings.model import Finding, Related
from soplint.notation.phrases import Material

_PHASE = re.compile(r"\b(?:mobile phase|eluent|eluant)\b", re.IGNORECASE)
_ORGANIC = {"methanol", "acetonitrile", "tetrahydrofuran", "2-propanol", "isopropanol", "ethanol"}
_SHARE = 0.05  # organic share of the volume below which the pH scale hardly moves


def _phases(bench: Bench) -> Iterator[tuple[int, Preparation]]:
    for order, preparation in enumerate(bench.preparations):
        titles = [preparation.title, *preparation.parents[:1]]
        if any(t is not None and t.source != "document" and _PHASE.search(t.words) for t in titles):
            yield order, preparation


def _organic(material: Material | None) -> str | None:
    """Name of an organic solvent that is taken neat."""
    if material is None or material.match is None or material.match.generic:
        return None
    if any(m.dimension == "fraction" and m.base < 0.9 for m in material.strengths):
        return None
    name = material.match.substances[0].name.lower()
    return next((solvent for solvent in _ORGANIC if name.startswith(solvent)), None)


@rule("buffers.ph-set-before-organic")
def ph_set_before_organic(bench: Bench) -> Iterator[Judgement]:
    """The pH of a mobile phase is set in the aqueous part, before organic solvent is added."""
    for _, preparation in _phases(bench):
        organic = [
            t
            for t in preparation.taken
            if t.dose.amount.dimension == "volume" and _organic(t.dose.material)
        ]
        total = sum(
            t.dose.amount.base for t in preparation.taken if t.dose.amount.dimension == "volume"
        )
        if not organic or total <= 0:
            continue
        share = sum(t.dose.amount.base for t in organic) / total
        for adjusted in preparation.adjusted:
            before = [
                t
                for t in organic
                if t.step < adjusted.step
                or (t.step == adjusted.step and t.dose.start < adjusted.set_ph.start)
            ]
            if not before or share < _SHARE or "apparent" in adjusted.text.chars.lower():
                continue
            name = _organic(before[0].dose.material)
            set_ph = adjusted.set_ph
            yield about_passage(
                "buffers.ph-set-before-organic", "minor", adjusted.text, set_ph.start, set_ph.end,
                f"pH set after {name} was added: the meter's buffers are aqueous",
                f"{100 * share:.2g} % of the volume is organic when the pH is set; set it in the"
                " aqueous part, or call it an apparent pH",
                (Related(before[0].stated.span, shown(before[0].stated.measure), f"{name}"),),
            )  # fmt: skip


# --- salts in organic solvent ---------------------------------------------------------------------------

# Share of acetonitrile from which potassium or sodium phosphate of that strength in the mixed phase
# (mol/L) falls out: makers' guidance, from memory.
_PHOSPHATE = ((0.90, 0.004), (0.85, 0.008), (0.80, 0.015), (0.75, 0.025))
_CERTAIN = 0.90


@dataclass(frozen=True, slots=True)
class _Mixed:
    solvent: Taken
    share: float
    salt: Taken
    strength: float


@rule("buffers.salt-stays-in-mobile-phase")
def salt_stays_in_mobile_phase(bench: Bench) -> Iterator[Judgement]:
    """The buffer salt stays dissolved at the share of acetonitrile."""
    bottles = bottles_of(bench)
    for order, preparation in enumerate(bench.preparations):
        found = _mixed(preparation, order, bottles)
        if found is None:
            continue
        limit = next((c for share, c in _PHOSPHATE if found.share >= share), None)
        if limit is None or found.strength < limit:
            continue
        grade = "major" if found.share >= _CERTAIN else "minor"
        stated = found.solvent.stated
        yield about_passage(
            "buffers.salt-stays-in-mobile-phase", grade, stated.text, found.solvent.dose.start,
            found.solvent.dose.end,
            f"alkali phosphate {found.strength * 1000:.2g} mmol/L in"
            f" {100 * found.share:.0f} % acetonitrile: the salt precipitates",
            f"at {100 * found.share:.0f} % about {limit * 1000:.2g} mmol/L stays dissolved; ammonium"
            " formate or acetate, or less acetonitrile",
            (Related(found.salt.stated.span, shown(found.salt.stated.measure), "the buffer"),),
        )  # fmt: skip


def _mixed(preparation: Preparation, order: int, bottles: Bottles) -> _Mixed | None:
    liquids = [t for t in preparation.taken if t.dose.amount.dimension == "volume"]
    total = sum(t.dose.amount.base for t in liquids)
    organic = [t for t in liquids if _organic(t.dose.material) == "acetonitrile"]
    if len(liquids) != 2 or len(organic) != 1 or total <= 0 or preparation.adjusted:
        return None
    salt = next(t for t in liquids if t is not organic[0])
    options = bottles.brought(salt, order)
    strength = _phosphate(options[0]) / total if options else _printed(salt) / total
    return _Mixed(organic[0], organic[0].dose.amount.base / total, salt, strength)


def _phosphate(contents: dict[str, float]) -> float:
    """mol of phosphate, where its salts are those of sodium or potassium."""
    from soplint.equilibria import EquilibriumError, acid_systems_of

    total = 0.0
    for name, mol in contents.items():
        try:
            found = acid_systems_of(name)
        except EquilibriumError:
            return 0.0
        if "ammonia" in found:
            return 0.0
        total += found.get("phosphate", 0.0) * mol
    return total


def _printed(taken: Taken) -> float:
    """mol of alkali phosphate in "100 mL of 50 mmol/L potassium phosphate"."""
    material = taken.dose.material
    if material is None or not re.search(
        r"(?:potassium|sodium)\b.*phosphate", material.words, re.I
    ):
        return 0.0
    molar = [m.base for m in material.strengths if m.dimension == "molarity"]
    return molar[0] * taken.dose.amount.base if len(molar) == 1 else 0.0


# --- what the column bears ------------------------------------------------------------------------------

_COLUMN = re.compile(
    r"\bcolumn\b.*?\bpH(?:\s+(?:range|limits?|stability|stable|from))*\s*[:=]?\s*(?:of\s+|from\s+)?"
    r"(\d+(?:[.,]\d+)?)\s*(?:to|-|–|and)\s*(?:pH\s*)?(\d+(?:[.,]\d+)?)",
    re.IGNORECASE,
)


@rule("buffers.ph-suits-column")
def ph_suits_column(bench: Bench) -> Iterator[Judgement]:
    """The pH of the mobile phase lies within the range that the text states for the column."""
    limits = set()
    columns = 0
    for block in bench.blocks:
        for sentence in block.sentences:
            chars = sentence.text.chars
            columns += bool(re.search(r"\bcolumn\b.*\bmm\b", chars, re.IGNORECASE))
            for found in _COLUMN.finditer(chars):
                low, high = (float(g.replace(",", ".")) for g in found.groups())
                limits.add((low, high))
    if len(limits) != 1 or columns > 1:
        return
    ((low, high),) = limits
    if not 0 <= low < high <= 14:
        return
    for _, preparation in _phases(bench):
        stated = _ph_of(preparation)
        if stated is None or low <= stated.measure.nominal <= high:
            continue
        ph = stated.measure.nominal
        finding = Finding(
            rule="buffers.ph-suits-column", severity="major", span=stated.span,
            text=shown(stated.measure),
            message=f"pH {ph:g} lies outside the range of the column, pH {low:g} to {high:g}",
            stated=shown(stated.measure), computed=f"pH {low:g} to {high:g}",
            working="range as stated for the column in this document",
        )  # fmt: skip
        yield Judgement(finding)


def _ph_of(preparation: Preparation) -> Stated | None:
    for adjusted in preparation.adjusted:
        if adjusted.set_ph.ph is not None:
            return Stated(adjusted.text, adjusted.set_ph.ph)
    title = preparation.title
    return title.ph if title is not None and title.source != "document" else None


# --- what the detector bears ----------------------------------------------------------------------------

_MASS_DETECTION = re.compile(
    r"\b(?:LC[-–/ ]?MS|mass (?:spectro\w+|detect\w+)|electrospray|ESI)\b", re.IGNORECASE
)
_HELD_BACK = {"phosphate", "borate", "citrate", "sulfate"}
_DIVERTED = re.compile(r"\b(?:divert|desalt|UV|offline|remove)\w*", re.IGNORECASE)


@rule("buffers.ions-suit-detection")
def ions_suit_detection(bench: Bench) -> Iterator[Judgement]:
    """A mobile phase for mass detection holds volatile buffers only."""
    for _, preparation in _phases(bench):
        titles = [t for t in (preparation.title, *preparation.parents) if t is not None]
        words = " ".join(t.words for t in titles if t.source != "document")
        if not _MASS_DETECTION.search(words) or _DIVERTED.search(words):
            continue
        for taken in preparation.taken:
            material = taken.dose.material
            if material is None or material.is_water:
                continue
            systems = {s.acid_system for s in candidates(material)}
            if not systems & _HELD_BACK:
                continue
            stated = taken.stated
            yield about_passage(
                "buffers.ions-suit-detection", "minor", stated.text, taken.dose.start,
                taken.dose.end,
                f"{material.words} is not volatile and stays in the source of the detector",
                "ammonium formate (pH 2.8 to 4.8), ammonium acetate (pH 3.8 to 5.8) or ammonium"
                " hydrogen carbonate evaporate",
            )  # fmt: skip
