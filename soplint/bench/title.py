"""What a heading or lead-in says: names, strengths, pH, volume."""

from __future__ import annotations

import re

from soplint.bench.preparation import Mixed, Stated, Target, Title
from soplint.notation.phrases import (
    Claim,
    Dose,
    Loose,
    Material,
    Mixture,
    Phrase,
    Sentence,
    SetPH,
    ToVolume,
    Ware,
)
from soplint.quantities.model import Measure

_STRENGTHS = {
    *("molarity", "molality", "normality", "mass-concentration", "fraction", "ppm"),
    *("activity-concentration", "osmolality"),
}
_NUMBER = re.compile(r"^\s*(?:\d+(?:\.\d+)*|[a-zA-Z])[.)]\s+")


# The diluent that a ratio behind a single name leaves unsaid: "nitric acid (1 + 3)".
WATER = Material(0, 0, "")


def _sequestrant(material: Material) -> bool:
    """EDTA and its like carry the label pH of their stock, not the pH of the mixture."""
    return material.match is not None and any(
        s.acid_system == "edta" for s in material.match.substances
    )


_PORTIONS = re.compile(
    r"\b(?:two|three|four|five|six|ten|\d+)\s+(?:[\w.-]+\s+){0,2}"
    r"(?:gels?|tubes?|plates?|portions?|aliquots?|dishes|bottles|vials)\b",
    re.IGNORECASE,
)


def title_of(sentence: Sentence, source: str = "title") -> Title:
    """The title that a heading or lead-in sentence makes."""
    reader = _Title(sentence, source)
    for phrase in sentence.phrases:
        reader.take(phrase)
    return reader.title()


class _Title:
    def __init__(self, sentence: Sentence, source: str) -> None:
        self.sentence = sentence
        self.source = source
        self.materials: list[Material] = []
        self.targets: list[Target] = []
        self.fold: Stated | None = None
        self.ph: Stated | None = None
        self.temperature: Measure | None = None
        self.volume: Stated | None = None
        self.mixtures: list[Mixed] = []
        self.folds: list[Target] = []
        self.ware: Stated | None = None
        self.marked = False

    def take(self, phrase: Phrase) -> None:
        if isinstance(phrase, Material):
            if phrase.role != "from":  # "KOAc 100 mM from 3 M": the stock, not the aim
                self._material(phrase)
        elif isinstance(phrase, Dose):
            if phrase.amount.dimension == "volume" and self._is_larger(phrase.amount):
                self.volume = self._stated(phrase.amount)
            if phrase.material is not None:
                self._material(phrase.material)
        elif isinstance(phrase, ToVolume):
            self._to_volume(phrase)
        elif isinstance(phrase, Ware):
            self.ware = self.ware or self._stated(phrase.measure)
        elif isinstance(phrase, SetPH) and phrase.ph is not None:
            self.ph = self.ph or self._stated(phrase.ph)
            self.temperature = self.temperature or phrase.temperature
        elif isinstance(phrase, Claim):
            if phrase.kind == "pH":
                self.ph = self.ph or self._stated(phrase.measure)
            elif phrase.material is None:
                self._strength(phrase.measure, None)
            else:
                self._material(phrase.material)
        elif isinstance(phrase, Mixture):
            self.materials.extend(phrase.materials)
            self.mixtures.append(Mixed(self.sentence.text, phrase, 0))
        elif isinstance(phrase, Loose) and phrase.measure.dimension == "temperature":
            self.temperature = self.temperature or phrase.measure

    def _is_larger(self, volume: Measure) -> bool:
        """Whether a volume of the title is the batch; "two gels of 7.5 mL" names portions."""
        if _PORTIONS.search(self.sentence.text.chars[: volume.start + 1]):
            return False
        return self.volume is None or bool(_PORTIONS.search(self.sentence.text.chars))

    def _to_volume(self, phrase: ToVolume) -> None:
        if phrase.volume is not None:
            self.volume = self.volume or self._stated(phrase.volume)
        else:
            self.marked = True  # "50 mL flasks, diluent to the mark"

    def _material(self, material: Material) -> None:
        if material.words and (
            material.match is not None or material.solution or material.strengths
        ):
            self.materials.append(material)
        if material.ph is not None and self.ph is None and not _sequestrant(material):
            self.ph = self._stated(material.ph)
        self.temperature = self.temperature or material.temperature
        for measure in material.bracket:
            if measure.dimension == "ratio" and len(measure.parts) == 2:
                mixture = Mixture(material.start, material.end, measure, (material, WATER))
                self.mixtures.append(Mixed(self.sentence.text, mixture, 0))
        for part in material.contents:
            for strength in part.strengths:
                self._strength(strength, part)
        for strength in (*material.strengths, *material.finals, *material.bracket):
            if strength.dimension == "volume" and self.volume is None:
                self.volume = self._stated(strength)
            else:
                self._strength(strength, material if material.words else None)

    def _strength(self, strength: Measure, material: Material | None) -> None:
        if strength.dimension == "fold" and material is not None:
            self.folds.append(Target(self._stated(strength), material, self.source))
        if strength.dimension == "fold":
            self.fold = self.fold or self._stated(strength)
        elif strength.dimension in _STRENGTHS:
            self.targets.append(Target(self._stated(strength), material, self.source))

    def _stated(self, measure: Measure) -> Stated:
        return Stated(self.sentence.text, measure)

    def title(self) -> Title:
        chars = self.sentence.text.chars.strip().rstrip(":").strip()
        return Title(
            self.sentence.text,
            _NUMBER.sub("", chars),
            tuple(self.materials),
            tuple(self.targets),
            self.fold,
            self.ph,
            self.temperature,
            self.volume or (self.ware if self.marked else None),
            self.source,
            tuple(self.mixtures),
            tuple(self.folds),
        )
