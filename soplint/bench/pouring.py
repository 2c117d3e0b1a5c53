"""In which order strong acids and water come together."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from soplint.bench.preparation import Stated
from soplint.intake.model import Text
from soplint.notation.phrases import Command, Dose, Loose, Material, Phrase, Sentence, ToVolume
from soplint.substances.model import Substance

# % w/w from which pouring water onto the acid is dangerous (issue of the main job).
SULFURIC, OTHER_ACIDS = 50.0, 30.0
_ACIDS = {"H2SO4", "HCl", "HNO3", "H3PO4", "HClO4", "HBr", "HI", "HF"}


@dataclass(frozen=True, slots=True)
class Pouring:
    """Water that reaches a vessel which holds concentrated acid and no water."""

    acid: Substance
    percent: float
    acid_at: Stated | None
    text: Text
    start: int
    end: int
    poured: bool  # an explicit pour of water, not a bare "make up to"
    diluted: bool = False  # "dilute 50 mL of the acid to 1 L": the order is left open
    share: float = 1.0  # of the final volume that is acid


@dataclass(slots=True)
class _Vessel:
    acid: tuple[Substance, float, Stated] | None = None
    wet: bool = False


def pourings(sentences: list[Sentence]) -> Iterator[Pouring]:
    """Follow one vessel through the sentences of a section, step by step."""
    vessel = _Vessel()
    for sentence in sentences:
        yield from _sentence(sentence, vessel)


def strong_acid(material: Material | None) -> tuple[Substance, float] | None:
    """The mineral acid that a material names and its strength in % w/w, if concentrated."""
    if material is None or material.match is None or material.match.generic:
        return None
    substance = next((s for s in material.match.substances if s.family in _ACIDS), None)
    if substance is None:
        return None
    percents = [
        m.base * 100
        for m in (*material.strengths, *material.bracket)
        if m.dimension == "fraction" and m.basis in (None, "w/w")
    ]
    if percents:
        percent = max(percents)
    elif any(
        m.dimension in ("molarity", "normality") for m in (*material.strengths, *material.bracket)
    ):
        molar = max(
            m.base
            for m in (*material.strengths, *material.bracket)
            if m.dimension in ("molarity", "normality")
        )
        percent = _percent(substance, molar)
    elif "dilute" in material.words.lower() or not _concentrated(material, substance):
        return None
    else:
        percent = substance.strength or 0.0
    limit = SULFURIC if substance.family == "H2SO4" else OTHER_ACIDS
    return (substance, percent) if percent >= limit else None


def _concentrated(material: Material, substance: Substance) -> bool:
    words = material.words.lower()
    return substance.family == "H2SO4" or any(
        word in words for word in ("conc", "fuming", "%", "glacial")
    )


def _percent(substance: Substance, molar: float) -> float:
    """% w/w of a mol/L strength, by the density of the catalogue's own concentrate."""
    if not substance.molar_mass or not substance.density or not substance.strength:
        return 0.0
    full = 10 * substance.density * substance.strength / substance.molar_mass
    return substance.strength * molar / full if full else 0.0


def _sentence(sentence: Sentence, vessel: _Vessel) -> Iterator[Pouring]:
    phrases = sentence.phrases
    command: str | None = None
    for index, phrase in enumerate(phrases):
        if isinstance(phrase, Command):
            command = phrase.kind
            if command in ("WEIGH",):
                vessel.acid, vessel.wet = None, False
        elif isinstance(phrase, (Dose, Material)):
            yield from _liquid(sentence, phrase, command, vessel, phrases[index + 1 :])
        elif isinstance(phrase, ToVolume):
            yield from _make_up(sentence, phrase, vessel)


def _liquid(
    sentence: Sentence,
    phrase: Dose | Material,
    command: str | None,
    vessel: _Vessel,
    rest: tuple[Phrase, ...],
) -> Iterator[Pouring]:
    material = phrase.material if isinstance(phrase, Dose) else phrase
    if material is None or command in ("WASH", "STORE", "USE", "CALIBRATE"):
        return
    acid = strong_acid(material)
    water = material.is_water
    if command is None and not water:
        return  # a recipe line states no order
    if rest and isinstance(rest[0], Loose) and rest[0].measure.dimension == "ratio":
        acid = None  # "sulfuric acid 1 + 3" is diluted already
    into = _into(rest)
    if water and into is not None and (hit := strong_acid(_material(into))) is not None:
        yield Pouring(*hit, _place(sentence, into), sentence.text, phrase.start, into.end, True)
    elif water and (phrase.role in ("in", "to", "into") or _new_vessel(sentence, phrase)):
        vessel.wet = True
    elif water:
        if vessel.acid is not None and not vessel.wet and isinstance(phrase, Dose):
            yield Pouring(*vessel.acid, sentence.text, phrase.start, phrase.end, True)
        vessel.wet = True
    elif acid is not None and isinstance(phrase, Dose):
        liquid = phrase.amount.dimension == "volume"
        receiver = _material(into) if into is not None else None
        into_water = receiver is not None and (
            receiver.is_water or receiver.solution or receiver.match is not None
        )
        if liquid and phrase.role in (None, "with") and not into_water and not vessel.wet:
            vessel.acid = (*acid, Stated(sentence.text, phrase.amount))
        else:
            vessel.wet = True
    elif isinstance(phrase, Dose) and phrase.amount.dimension == "volume":
        vessel.wet = True  # another liquid is there: its water meets the acid slowly or first


_VESSEL_VERBS = ("place", "put", "measure", "take", "fill", "charge")


def _new_vessel(sentence: Sentence, phrase: Phrase) -> bool:
    """ "Place 60 mL of water in the receiver": the water is there before anything else."""
    verbs = [p for p in sentence.phrases if isinstance(p, Command) and p.end <= phrase.start]
    if not verbs:
        return False
    word = sentence.text.chars[verbs[-1].start : verbs[-1].end].lower()
    return word.startswith(_VESSEL_VERBS)


def _into(rest: tuple[Phrase, ...]) -> Dose | Material | None:
    """What the thing is poured into: "... to 100 mL of concentrated acid"."""
    for phrase in rest:
        if isinstance(phrase, Command):
            return None
        if isinstance(phrase, (Dose, Material)) and phrase.role in ("to", "into", "in"):
            return phrase
    return None


def _material(phrase: Dose | Material) -> Material | None:
    return phrase.material if isinstance(phrase, Dose) else phrase


def _place(sentence: Sentence, phrase: Dose | Material) -> Stated | None:
    return Stated(sentence.text, phrase.amount) if isinstance(phrase, Dose) else None


def _share(acid: Stated, phrase: ToVolume) -> float:
    """Acid as a share of the volume it is made up to; 1 where no volume is printed."""
    if phrase.volume is None or phrase.volume.base <= 0:
        return 1.0
    return acid.measure.base / phrase.volume.base


def _make_up(sentence: Sentence, phrase: ToVolume, vessel: _Vessel) -> Iterator[Pouring]:
    if vessel.acid is not None and not vessel.wet:
        diluted = phrase.command == "DILUTE"
        share = _share(vessel.acid[2], phrase)
        yield Pouring(*vessel.acid, sentence.text, phrase.start, phrase.end, False, diluted, share)
    vessel.acid, vessel.wet = None, False
