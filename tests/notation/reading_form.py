"""The simple form in which the reference of the notation writes readings.

One line a phrase; quantities and names as they stand in the text.  ``examples`` yields the fenced
blocks of a reference, ``reading`` reads a piece of text.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

from soplint.intake import read_bytes
from soplint.notation.document import read_document
from soplint.notation.phrases import (
    Assigned,
    Claim,
    Command,
    Dose,
    Equivalent,
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

_BLOCK = re.compile(r"^```reading\n(.*?)^```$", re.MULTILINE | re.DOTALL)


@dataclass(frozen=True)
class Example:
    """One example of the reference: a text and how it is read."""

    line: int
    text: str
    expected: tuple[str, ...]

    @property
    def name(self) -> str:
        return f"line {self.line}: {self.text.splitlines()[0][:50]}"


def examples(path: Path) -> Iterator[Example]:
    """The examples of a reference: blocks of lines "> text" followed by their reading."""
    source = path.read_text(encoding="utf-8")
    for block in _BLOCK.finditer(source):
        line = at = source.count("\n", 0, block.start()) + 1
        text: list[str] = []
        expected: list[str] = []
        for row in block[1].splitlines():
            line += 1
            if row.startswith("> ") and (expected or not text):
                if expected:
                    yield Example(at, "\n".join(text) + "\n", tuple(expected))
                at, text, expected = line, [row[2:]], []
            elif row.startswith("> "):
                text.append(row[2:])
            elif row.strip():
                expected.append(row)
        if text:
            yield Example(at, "\n".join(text) + "\n", tuple(expected))


def reading(text: str) -> tuple[str, ...]:
    """All phrases of a Markdown text, one line each; "nothing" where there is none."""
    document = read_bytes(text.encode(), "example.md")
    lines = [
        ("title " if sentence.leads else "") + Form(sentence).phrase(phrase)
        for block in read_document(document)
        for sentence in block.sentences
        for phrase in sentence.phrases
    ]
    return tuple(lines) or ("nothing",)


class Form:
    """Writes the phrases of one sentence."""

    def __init__(self, sentence: Sentence) -> None:
        self.chars = sentence.text.chars

    def phrase(self, phrase: Phrase) -> str:
        if isinstance(phrase, Dose):
            return self.dose(phrase)
        if isinstance(phrase, Material):
            return f"thing {self.role(phrase.role)}{self.material(phrase)}"
        if isinstance(phrase, ToVolume):
            return self.to_volume(phrase)
        if isinstance(phrase, SetPH):
            return self.set_ph(phrase)
        if isinstance(phrase, Claim):
            return self.claim(phrase)
        if isinstance(phrase, Equivalent):
            volume = self.measure(phrase.volume) if phrase.volume else "each mL"
            return (
                f"equivalent {volume} of {self.material(phrase.titrant)} = {self.dose(phrase.mass)}"
            )
        if isinstance(phrase, Mixture):
            things = ", ".join(self.material(m) for m in phrase.materials)
            return f"mixture {self.measure(phrase.ratio)} of {things}"
        if isinstance(phrase, Loose):
            return f"loose {self.measure(phrase.measure)}"
        if isinstance(phrase, Ware):
            return f"ware {self.measure(phrase.measure)}"
        assert isinstance(phrase, Command)
        return f"command {phrase.kind}"

    def measure(self, measure: Measure) -> str:
        text = self.chars[measure.start : measure.end]
        unit = (
            ""
            if measure.unit in text or measure.parts or measure.unit == "pH"
            else f" [{measure.unit}]"
        )
        about = "~" if measure.manner == "about" else ""
        return f"{about}{text}{unit if text.replace('.', '').isdigit() else ''}"

    @staticmethod
    def role(role: str | None) -> str:
        return f"({role}) " if role else ""

    def dose(self, dose: Dose) -> str:
        words = [f"dose {self.role(dose.role)}{self.measure(dose.amount)}"]
        if dose.material is not None and (dose.material.words or dose.material.bracket):
            words.append(f"of {self.material(dose.material)}")
        words.extend(f"= {self.measure(m)}" for m in dose.same)
        words.extend(f"or {self.dose(other)}" for other in dose.alternatives)
        return " ".join(words + (["each"] if dose.each else []))

    def material(self, material: Material) -> str:
        words = [f"'{material.words}'"] if material.words else []
        words.extend(self.measure(m) for m in material.strengths)
        if material.ph is not None:
            words.append(self.measure(material.ph))
        if material.temperature is not None:
            words.append(f"at {self.measure(material.temperature)}")
        words.extend(f"({self.measure(m)})" for m in material.bracket)
        words.extend(f"final {self.measure(m)}" for m in material.finals)
        if material.molar_mass is not None:
            words.append(f"M {self.measure(material.molar_mass)}")
        if material.density is not None:
            words.append(f"density {self.measure(material.density)}")
        words.extend(f"with {self.material(part)}" for part in material.contents)
        return " ".join(words + (["each"] if material.each else []))

    def to_volume(self, to: ToVolume) -> str:
        words = ["volume", self.measure(to.volume) if to.volume else "the mark"]
        if to.diluent is not None:
            words.append(f"with {self.material(to.diluent)}")
        return " ".join(words + (["said final"] if to.said_final else []))

    def set_ph(self, phrase: SetPH) -> str:
        words = ["set pH", self.measure(phrase.ph).removeprefix("pH ") if phrase.ph else "not said"]
        if phrase.temperature is not None:
            words.append(f"at {self.measure(phrase.temperature)}")
        words.extend(f"with {self.material(m)}" for m in phrase.reagents)
        words.extend(f"by {self.dose(d)}" for d in phrase.doses)
        return " ".join(words)

    def claim(self, claim: Claim) -> str:
        words = ["claim", claim.kind, self.measure(claim.measure)]
        if isinstance(claim, Assigned):
            words[1:2] = [f"{claim.kind} of {claim.symbol}"]
        if claim.material is not None and claim.material.words:
            words.append(f"of '{claim.material.words}'")
        return " ".join(words)
