"""Volumes that a mixture is brought to, and volumes that something is poured into."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from soplint.notation.closings import (
    without_claims,
)
from soplint.notation.parts import Part, Role
from soplint.notation.phrases import (
    Dose,
    Loose,
    Material,
    ToVolume,
)
from soplint.notation.state import State
from soplint.quantities.model import Measure


class Volumes(State):
    """A volume behind "to": made up to, or poured into."""

    def _to_volume(self, part: ToVolume, index: int) -> int:
        after = self.found[index + 1 : index + 3]
        if self._pours(part, after[:1]):
            material = after[0]
            assert isinstance(material, Material) and part.volume is not None
            self.phrases.append(
                Dose(
                    part.start, material.end, part.volume, material, role="to", command=self.command
                )
            )
            return 2
        poured = (
            len(after) == 2
            and isinstance(after[0], Role)
            and after[0].kind == "OF"
            and isinstance(after[1], Material)
            and not part.said_final
        )
        if poured and part.volume is not None and self.command not in ("MAKE_UP", "DILUTE"):
            material = after[1]
            assert isinstance(material, Material)
            self.phrases.append(
                Dose(
                    part.start, material.end, part.volume, material, role="to", command=self.command
                )
            )
            return 3
        diluent: Material | None = None
        last = self.phrases[-1] if self.phrases else None
        if (
            after
            and isinstance(after[0], Material)
            and (after[0].is_water or after[0].solution)
            and self.command in ("MAKE_UP", "DILUTE", None)
            and not isinstance(last, Material)
        ):
            # "make up to 500 mL water"
            self._made_to(part, after[0])
            return 2
        beside = not self.between or self.between == ["COMMA"]
        if isinstance(last, Material) and beside:
            if last.match is not None or last.solution or self.command in ("MAKE_UP", "ADD"):
                diluent = last
                self.phrases.pop()
            elif self.command is None and not (part.said_final or self._filled(after)):
                # "read to 0.02 mL": no liquid and no command to make up
                if part.volume is not None:
                    self.phrases.append(Loose(part.start, part.end, part.volume))
                    return 1
        self._made_to(part, diluent)
        return 1

    @staticmethod
    def _filled(after: Sequence[Part]) -> bool:
        """Whether "with" something follows: "ingredients up to 70 mL with water"."""
        return (
            len(after) == 2
            and isinstance(after[0], Role)
            and after[0].kind == "WITH"
            and isinstance(after[1], Material)
        )

    def _made_to(self, part: ToVolume, diluent: Material | None) -> None:
        """A make-up; a strength in brackets behind its water is that of the whole."""
        strengths: tuple[Measure, ...] = ()
        if diluent is not None:
            diluent, strengths = without_claims(diluent)
        self.phrases.append(replace(part, command=self.command, diluent=diluent))
        for strength in strengths:
            self._claim(None, strength)
        self.adjusting = False

    def _pours(self, part: ToVolume, after: Sequence[Part]) -> bool:
        """ "Add 10 µL to 90 µL medium": something is added to a volume of something else."""
        if part.volume is None or part.said_final or self.command not in ("ADD", "POUR"):
            return False
        last = self.phrases[-1] if self.phrases else None
        if not after or not isinstance(last, (Dose, Material)):
            return False
        into = after[0]
        if isinstance(last, Material) and (last.is_water or not last.words):
            return False  # "water to 500 mL"
        known = isinstance(into, Material) and (
            into.match is not None or into.solution or bool(into.strengths)
        )
        return known or (isinstance(last, Dose) and isinstance(into, Material) and bool(into.words))
