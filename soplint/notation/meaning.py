"""Commands and role words give the joined phrases their meaning.

"to 500 mL" after "make up" is a final volume, after "add ... to 500 mL of water" it is a dose;
"pH 7.2" after "adjust" is an instruction, after "the pH is" a claim.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from soplint.notation.closings import close, stands_before
from soplint.notation.doses import Doses
from soplint.notation.litre import per_litre
from soplint.notation.parts import Condition, Part, Role
from soplint.notation.phrases import (
    Claim,
    Command,
    Dose,
    Loose,
    Material,
    Mixture,
    Phrase,
    SetPH,
    ToVolume,
    Ware,
)

_LITRE = re.compile(r"l|litre|liter|ltr", re.IGNORECASE)


class Meaning(Doses):
    """Walks the parts of one sentence once."""

    def read(self) -> list[Phrase]:
        """The typed phrases of the sentence."""
        index = 0
        if _in_brackets(self.found):
            self.claiming = "FINALCONC"  # "(3 M NaCl, 0.3 M citrate)" says what came out
        while index < len(self.found):
            index += self._step(index)
        self._flush_reagents()
        self._mark_unsaid()
        return close(self.phrases)

    def _mark_unsaid(self) -> None:
        """ "make up with assay buffer": to the mark of the flask, though no mark is named."""
        if any(isinstance(phrase, ToVolume) for phrase in self.phrases):
            return
        for index, phrase in enumerate(self.phrases[:-1]):
            after = self.phrases[index + 1]
            if isinstance(phrase, Command) and phrase.kind == "MAKE_UP":
                if isinstance(after, Material) and after.role == "with" and after.words:
                    self.phrases[index + 1] = ToVolume(
                        phrase.start, after.end, None, after, "MAKE_UP"
                    )
                    return

    def _step(self, index: int) -> int:
        part = self.found[index]
        if isinstance(part, Role):
            self._role(part, index)
            return 1
        used = 1
        if isinstance(part, Command):
            self._command(part)
        elif isinstance(part, ToVolume):
            used = self._to_volume(part, index)
        elif isinstance(part, Dose):
            self._dose(part, index)
        elif isinstance(part, Material):
            self._material(part, index)
        elif isinstance(part, Condition):
            self._condition(part)
        elif isinstance(part, Ware):
            self.phrases.append(replace(part, role=self._last_role()))
        elif isinstance(part, Loose):
            self._loose(part, index)
        elif isinstance(part, Mixture):
            self.phrases.append(part)
        elif isinstance(part, Claim):
            self.phrases.append(part)
            self.reading = part.kind == "titre"
        self.between = []
        return used

    def _material(self, material: Material, index: int) -> None:
        if self._per_litre(material):
            return
        role = self._last_role()
        material = replace(material, role=role)
        last = self.phrases[-1] if self.phrases else None
        if self.between == ["AT"] and self._at_a_fold(material, index):
            self.claiming = "FINALCONC"
            self.phrases.append(material)
        elif material.ph is not None and self._says_ph(material):
            # "the pH is 4.7 without adjustment"
            bare = replace(material, words="", end=material.ph.end)
            self._nameless(bare, role, index)
        elif material.ph is not None and self._sets_ph(material, role):
            self._set_ph(material)
        elif material.ph is not None and not material.words and self._with_follows(index):
            self._set_ph(material)
        elif (
            material.ph is not None
            and not material.words
            and role == "to"
            and (isinstance(last, Material) and last.match is not None and not last.is_water)
        ):
            self.phrases.pop()  # "KOH to pH 6.8"
            self.reagents = [last]
            self._set_ph(material)
        elif not material.words:
            self._nameless(material, role, index)
        elif (material.strengths or material.finals) and (self.claiming or self._is_said()):
            for strength in material.strengths or material.finals:
                self._claim(material, strength)
        elif isinstance(last, SetPH) and (
            role == "with" or (last.reagents and self.between and self.between[-1] in ("OR", "AND"))
        ):
            self.phrases[-1] = replace(last, reagents=(*last.reagents, material))
        elif self.adjusting and role == "with":
            self.reagents.append(material)
        elif self.adjusting and self.reagents and self.between[-1:] == ["OR"]:
            self.reagents.append(material)
        elif isinstance(last, ToVolume) and last.diluent is None and role in ("with", "of"):
            self.phrases.pop()
            self._made_to(last, material)
        elif isinstance(last, ToVolume) and self.between == ["COMMA"] and material.is_water:
            self.phrases.pop()
            self._made_to(last, material)
        else:
            self.phrases.append(material)

    def _at_a_fold(self, material: Material, index: int) -> bool:
        """ "At 1x: 0.1 M Tris, 0.15 M NaCl": strengths after a dilution."""
        after = self.found[index + 1 : index + 2]
        colon = bool(after) and isinstance(after[0], Role) and after[0].kind == "COLON"
        folds = material.strengths and all(m.dimension == "fold" for m in material.strengths)
        return bool(folds) and not material.words and colon and not self.phrases

    def _says_ph(self, material: Material) -> bool:
        """Whether a pH with unknown words behind it is the pH that "the pH is" speaks of."""
        return (
            bool(material.words)
            and material.match is None
            and not (material.strengths or material.solution)
            and material.ph is not None
            and material.start == material.ph.start
            and self.ph_word
            and self.between[-1:] == ["IS"]
        )

    def _is_said(self) -> bool:
        """ "The bath is 0.9 mol/L sulfuric acid", "1X is 30 mM Tris, 15 mM acetate"."""
        if self.between[-1:] == ["IS"] and self.command is None:
            self.claiming = "IS"
            return True
        return False

    def _with_follows(self, index: int) -> bool:
        """ "pH 6.0 with NaOH": a list line that sets the pH."""
        after = self.found[index + 1 : index + 3]
        return (
            len(after) == 2
            and not self.phrases
            and isinstance(after[0], Role)
            and after[0].kind == "WITH"
            and isinstance(after[1], (Material, Dose))
        )

    def _sets_ph(self, material: Material, role: str | None) -> bool:
        """Whether the pH of this material is an instruction."""
        if material.words and not self.adjusting:
            return False
        if self.adjusting:
            return (
                not material.words
                or material.ph is not None
                and material.start == material.ph.start
            )
        return role == "to" and self.ph_word and not material.words and self.claiming is None

    def _set_ph(self, material: Material) -> None:
        assert material.ph is not None
        reagents = tuple(self.reagents)
        if material.words:
            reagents += (replace(material, ph=None),)
        self.phrases.append(
            SetPH(material.start, material.end, material.ph, material.temperature, reagents)
        )
        self.reagents = []

    def _per_litre(self, material: Material) -> bool:
        """ "15 g agar per litre (1.5 %)": what the brackets say of the dose before."""
        between = [kind for kind in self.between if kind != "COMMA"]
        if not _LITRE.fullmatch(material.words) or between not in (["PER"], ["SLASH"]):
            return False
        before = stands_before(self.phrases)
        for strength in (*material.bracket, *material.finals):
            self._claim(before, strength, "per litre")
        taken = any(isinstance(phrase, (Dose, ToVolume)) for phrase in self.phrases)
        if not taken and self.command in (None, "PREPARE"):
            self.phrases.append(per_litre(material.start, material.start + len(material.words)))
        return True

    def _nameless(self, material: Material, role: str | None, index: int) -> None:
        if material.ph is not None and not material.strengths:
            said = self.ph_word or "IS" in self.between or "GIVES" in self.between
            if "AT" in self.between:
                self.measured = True
            if self.measured or self.command == "CALIBRATE":
                said = False  # "electrode checked at pH 9.18"
            elif self.command == "VERIFY":
                said = True
            if said:
                self.phrases.append(Claim(material.start, material.end, material.ph, kind="pH"))
                return
        last = self.phrases[-1] if self.phrases else None
        mixed = isinstance(last, ToVolume) or (
            isinstance(last, Dose) and last.material is not None and last.material.is_water
        )
        if self.claiming or mixed or (self.command == "DILUTE" and role == "to"):
            # "the final concentration of KCl is 5 mM"
            named = last if self.claiming == "FINALCONC" and isinstance(last, Material) else None
            if named is None and material.bracket:
                named = material  # "0.1 ppm (10 µg/L)": the bracket says it again
            kind = "diluted" if self._at_fold(index) else None
            for strength in material.strengths:
                self._claim(named, strength, kind)
            return
        self.phrases.append(material)

    def _at_fold(self, index: int) -> bool:
        """ "(1 mM at 1X)": the strength after a dilution."""
        at, fold = (*self.found[index + 1 : index + 3], None, None)[:2]
        return (
            isinstance(at, Role)
            and at.kind == "AT"
            and isinstance(fold, Material)
            and any(m.dimension == "fold" for m in fold.strengths)
        )

    def _condition(self, part: Condition) -> None:
        last = self.phrases[-1] if self.phrases else None
        if isinstance(last, SetPH) and last.temperature is None:
            self.phrases[-1] = replace(last, temperature=part.loose.measure)
        else:
            self.phrases.append(part.loose)

    def _loose(self, part: Loose, index: int) -> None:
        last = self.phrases[-1] if self.phrases else None
        if part.measure.dimension == "ratio":
            materials = self._trailing_materials()
            if len(materials) >= len(part.measure.parts) >= 2:
                materials = materials[-len(part.measure.parts) :]
                start = materials[0].start
                del self.phrases[len(self.phrases) - len(materials) :]
                self.phrases.append(Mixture(start, part.end, part.measure, tuple(materials)))
                return
            self.phrases.append(self._ratio(part, materials[-1:], index))
            return
        if part.measure.dimension == "temperature" and isinstance(last, SetPH):
            if last.temperature is None:
                self.phrases[-1] = replace(last, temperature=part.measure)
                return
        self.phrases.append(part)

    def _ratio(self, part: Loose, before: list[Material], index: int) -> Claim:
        """ "serum 1:400", "1:50 dilution of the extract": one thing in so many parts."""
        material = before[0] if before else None
        if material is None:
            for after in self.found[index + 1 : index + 4]:
                if isinstance(after, Material) and after.words:
                    material = after
                if not isinstance(after, (Role, Command)) or after.kind == "WITH":
                    break
        return Claim(part.start, part.end, part.measure, material, "dilution")

    def _trailing_materials(self) -> list[Material]:
        found: list[Material] = []
        for phrase in reversed(self.phrases):
            if not isinstance(phrase, Material) or not phrase.words:
                break
            found.append(phrase)
        return found[::-1]


def _in_brackets(found: Sequence[Part]) -> bool:
    """Whether a sentence is one bracket from its first sign to its last."""
    depth = 0
    for index, part in enumerate(found):
        kind = part.kind if isinstance(part, Role) else ""
        depth += (kind == "LPAR") - (kind == "RPAR")
        if depth < 1:
            return index == len(found) - 1 and index > 0
    return False


def meaning(found: Sequence[Part]) -> list[Phrase]:
    """The typed phrases of a sentence whose parts have been joined."""
    return Meaning(found).read()
