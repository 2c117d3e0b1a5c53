"""The parts of a sentence between parse and meaning: phrases, role words, conditions."""

from __future__ import annotations

from dataclasses import dataclass

from soplint.notation.phrases import Command, Loose, Phrase


@dataclass(frozen=True, slots=True)
class Role:
    """A role word or separator that stands between phrases."""

    start: int
    end: int
    kind: str
    words: str = ""


@dataclass(frozen=True, slots=True)
class Condition:
    """ "at 25 °C": a temperature that belongs to what stands before it."""

    start: int
    end: int
    loose: Loose


Part = Phrase | Role | Condition


def kind_of(part: Part | None) -> str:
    """Kind of a role word or command, else an empty text."""
    return part.kind if isinstance(part, (Role, Command)) else ""
