"""What a walk over the parts of a sentence remembers: commands and role words."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from soplint.notation.closings import (
    stands_before,
)
from soplint.notation.parts import Part, Role
from soplint.notation.phrases import (
    Claim,
    Command,
    Dose,
    Material,
    Phrase,
    SetPH,
    ToVolume,
)
from soplint.quantities.model import Measure

_ROLES = {
    "IN": "in",
    "WITH": "with",
    "INTO": "into",
    "TO": "to",
    "UPTO": "to",
    "FROM": "from",
    "OF": "of",
    "PER": "per",
}
_CLAIMING = ("GIVES", "FINALCONC", "EQUIVALENT")
# A clause with one of these commands takes nothing; "then" ends it.
_ASIDE = ("WASH", "STORE", "FILTER", "REPEAT")


class State:
    """The phrases so far and what the last words mean for the next."""

    def __init__(self, found: Sequence[Part]) -> None:
        self.found = found
        self.phrases: list[Phrase] = []
        self.command: str | None = None
        self.claiming: str | None = None
        self.adjusting = False
        self.ph_word = False
        self.measured = False  # "checked at pH 9.18 and pH 12.45"
        self.between: list[str] = []  # roles since the last phrase
        self.reagents: list[Material] = []  # named with an adjustment before its pH
        self.bracket = 0  # depth of brackets
        self.final_first = False  # the sentence begins with "final"
        self.reading = False  # after a burette reading: nameless volumes are readings too

    def _last_role(self) -> str | None:
        for kind in reversed(self.between):
            if kind in _ROLES:
                return _ROLES[kind]
        return None

    def _role(self, role: Role, index: int) -> None:
        self.between.append(role.kind)
        last = self.phrases[-1] if self.phrases else None
        self.bracket += (role.kind == "LPAR") - (role.kind == "RPAR")
        if role.kind in ("EQUIVALENT", "EACHML"):
            self.phrases.append(Command(role.start, role.end, role.kind))
        if role.kind in _CLAIMING:
            self.claiming = role.kind
        elif role.kind == "LPAR" and (
            isinstance(last, (ToVolume, Command))
            or (isinstance(last, Claim) and last.kind == "dilution")
        ):
            self.claiming = role.kind  # "bring to 35 mL (0.5 M)": what comes out of it
        elif role.kind == "RPAR" and self.claiming == "LPAR":
            self.claiming = None
        elif role.kind == "TITRE":
            self.reading = True  # "titre of the blank, 17.45 mL"
        elif role.kind == "OF" and isinstance(last, Dose) and self.between == ["OF"]:
            if last.material is None:
                self.phrases[-1] = replace(last, role="of")  # "5 mL of that"
        elif role.kind == "PER" and isinstance(last, Dose) and last.material is None:
            self.phrases[-1] = replace(last, material=Material(last.start, last.end, ""))
        elif role.kind == "OFIT":
            self._part_of(last)
        elif role.kind == "FINAL" and isinstance(last, Dose) and self._is_whole(last, role):
            self.phrases[-1] = ToVolume(
                last.start, role.end, last.amount, last.material, self.command, said_final=True
            )
        elif role.kind == "FINAL" and isinstance(last, (Material, Dose)):
            self._said_final(last)
        elif role.kind == "FINAL" and not self.phrases:
            self.final_first = True
        elif role.kind == "COLON" and self.final_first and not self.phrases:
            self.claiming = "FINALCONC"  # "Final: 20 mM EDTA"
        elif role.kind == "EQUALS" and self._equates(index):
            self.phrases.append(Command(role.start, role.end, "EQUIVALENT"))
        elif (
            role.kind == "EQUALS"
            and self.phrases
            and isinstance(self.phrases[-1], (Dose, ToVolume, Claim))
        ):
            self.claiming = role.kind
        elif role.kind == "PHWORD":
            self.ph_word = True
        elif role.kind == "THEN":
            self.claiming = None
            self.adjusting = False
            if self.command in _ASIDE:
                self._command(Command(role.start, role.end, "THEN"))
        elif role.kind == "OPTIONAL":
            self.phrases.append(Command(role.start, role.end, "OPTIONAL"))

    def _is_whole(self, last: Dose, role: Role) -> bool:
        """ "water, 250 mL final volume": the volume of the mixture, not of its water."""
        if last.amount.dimension != "volume" or self.between != ["FINAL"] or last.role:
            return False
        water = last.material is None or last.material.is_water
        return water and "vol" in role.words

    def _equates(self, index: int) -> bool:
        """ "1 mL of silver nitrate 0.02 mol/L = 0.709 mg chloride": what a titrant stands for."""
        last = self.phrases[-1] if self.phrases else None
        after = self.found[index + 1 : index + 2]
        return (
            isinstance(last, Dose)
            and last.amount.dimension == "volume"
            and last.material is not None
            and bool(last.material.strengths)
            and bool(after)
            and isinstance(after[0], Dose)
            and after[0].amount.dimension in ("mass", "amount")
            and after[0].material is not None
        )

    def _said_final(self, last: Material | Dose) -> None:
        """ "EDTA 5 mM final": the strengths beside the name are those of the mixture."""
        material = last.material if isinstance(last, Dose) else last
        if material is None or not material.words or not material.strengths:
            return
        if self.between != ["FINAL"] or material.strengths[-1].start < material.start + 1:
            return
        moved = replace(material, strengths=(), finals=material.finals + material.strengths)
        self.phrases[-1] = replace(last, material=moved) if isinstance(last, Dose) else moved

    def _flush_reagents(self) -> None:
        """ "Adjust the pH with 2 N NaOH.": the value is not said."""
        if self.reagents and self.ph_word:
            first, last = self.reagents[0], self.reagents[-1]
            self.phrases.append(SetPH(first.start, last.end, None, None, tuple(self.reagents)))
        else:
            self.phrases.extend(self.reagents)
        self.reagents = []

    def _command(self, command: Command) -> None:
        if command.kind != "VERIFY":
            self._flush_reagents()
        self.phrases.append(command)
        self.reading = False
        self.command = command.kind
        self.claiming = None
        if command.kind == "ADJUST":
            self.adjusting = True
            self.reagents = []
        elif command.kind not in ("MIX", "ADD", "VERIFY"):
            self.adjusting = False

    def _part_of(self, last: Phrase | None) -> None:
        """ "water to 55 mL (50 mL of it ice cold)" states a part; elsewhere "it" is taken."""
        if not (isinstance(last, Dose) and last.material is None and self.between == ["OFIT"]):
            return
        if self.bracket:
            before = stands_before(self.phrases[:-1])
            self.phrases[-1] = Claim(last.start, last.end, last.amount, before, "part")
        else:
            self.phrases[-1] = replace(last, role="of")

    def _claim(self, material: Material | None, strength: Measure, kind: str | None = None) -> None:
        start = min(strength.start, material.start) if material else strength.start
        end = max(strength.end, material.end) if material else strength.end
        kind = kind or ("fold" if strength.dimension == "fold" else "strength")
        self.phrases.append(Claim(start, end, strength, material, kind))
