"""The final volume of a preparation, by the best evidence that the text has.

Priority: explicit make-up, total row, volume in the title or column head, sum of the parts, the
volume of the solvent.  The volume that a recipe starts in never counts when a make-up follows.
"""

from __future__ import annotations

from collections.abc import Sequence

from soplint.bench.numbers import ALIQUOT, EXACT, relative
from soplint.bench.preparation import FinalVolume, Made, Preparation, Stated, Taken
from soplint.notation.phrases import Material
from soplint.quantities.model import Measure

# A solid takes up roughly this volume (mL/g); sums of volumes ignore solids below 2 % of the total.
SOLID_ML_PER_G = 0.6


def final_volume(preparation: Preparation) -> FinalVolume | None:
    """The volume that the strengths of a preparation refer to, or None."""
    made = _made_up(preparation)
    if made is not None:
        return made
    if preparation.total is not None:
        return _volume(preparation.total, "total")
    title = preparation.title
    if title is not None and title.volume is not None:
        provenance = "column" if title.source == "column" else "heading"
        return _volume(title.volume, provenance)
    return _sum(preparation) or _weak(preparation)


def _volume(stated: Stated, provenance: str) -> FinalVolume:
    measure = stated.measure
    half = relative(measure, EXACT)
    return FinalVolume(measure.base, half, provenance, stated)


def _made_up(preparation: Preparation) -> FinalVolume | None:
    """The last make-up; "to the mark" takes the size of the flask."""
    for made in reversed(preparation.made):
        if not _is_final(preparation, made):
            continue
        volume = made.to.volume
        if volume is not None and volume.base > 0:
            return _volume(Stated(made.text, volume), "made-up")
        if volume is None:
            flask = _flask(preparation)
            if flask is not None:
                return _volume(flask, "mark")
    return None


def _is_final(preparation: Preparation, made: Made) -> bool:
    """Whether a make-up has something to make up (an instruction to fill a tank has not)."""
    return bool(preparation.taken) or preparation.kind == "table"


def _flask(preparation: Preparation) -> Stated | None:
    for stated, words in reversed(preparation.flasks):
        if "flask" in words or "cylinder" in words:
            return stated
    return None


def _sum(preparation: Preparation) -> FinalVolume | None:
    """The sum of the parts, where every part is a volume and at least two are mixed."""
    volumes: list[Measure] = []
    grams = 0.0
    for taken in preparation.taken:
        amount = taken.dose.amount
        if amount.dimension == "volume" and taken.dose.material is None and not taken.solvent:
            return None  # of something that is not named: added or taken out
        if amount.dimension == "volume":
            volumes.append(amount)
        elif amount.dimension == "mass":
            grams += amount.base
        elif amount.dimension not in ("amount", "activity", "count"):
            return None
    total = sum(m.base for m in volumes)
    liquids = [t for t in preparation.taken if t.dose.amount.dimension == "volume"]
    if len(volumes) < 2 or total <= 0:
        return None
    if all(t.solvent for t in liquids) or running_text(liquids):
        return None
    if grams * SOLID_ML_PER_G / 1000 > 0.02 * total:
        return FinalVolume(total, 0.05, "weak", None)
    half = sum(m.base * relative(m, ALIQUOT) for m in volumes) / total
    return FinalVolume(total, half, "sum", None)


def running_text(poured: Sequence[Taken]) -> bool:
    """Whether the parts stand in several sentences of one paragraph: not all go into one vessel."""
    sentences = {(taken.block, taken.step) for taken in poured if taken.block >= 0}
    return len(sentences) > len({block for block, _ in sentences})


def _weak(preparation: Preparation) -> FinalVolume | None:
    """ "Dissolve in 100 mL of water": used as if it were the final volume, one class milder."""
    liquids = [t for t in preparation.taken if t.dose.amount.dimension == "volume"]
    if len(liquids) != 1:
        return None
    poured = liquids[0].solvent or liquids[0].dose.role == "to"
    if not poured and not _is_water(liquids[0].dose.material):
        return None
    measure = liquids[0].dose.amount
    return FinalVolume(measure.base, relative(measure, ALIQUOT), "weak", liquids[0].stated)


def _is_water(material: Material | None) -> bool:
    return material is not None and material.is_water
