"""Commands and role words give the joined phrases their meaning.

"to 500 mL" after "make up" is a final volume, after "add ... to 500 mL of water" it is a dose;
"pH 7.2" after "adjust" is an instruction, after "the pH is" a claim.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from soplint.notation.closings import (
    close,
    join_equivalent,
    same_thing,
    stands_before,
    without_claims,
)
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


class Meaning:
    """Walks the parts of one sentence once."""

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
        self.reading = False  # after a burette reading: nameless volumes are readings too

    def read(self) -> list[Phrase]:
        """The typed phrases of the sentence."""
        index = 0
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
            self._role(part)
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

    def _last_role(self) -> str | None:
        for kind in reversed(self.between):
            if kind in _ROLES:
                return _ROLES[kind]
        return None

    def _role(self, role: Role) -> None:
        self.between.append(role.kind)
        last = self.phrases[-1] if self.phrases else None
        self.bracket += (role.kind == "LPAR") - (role.kind == "RPAR")
        if role.kind in ("EQUIVALENT", "EACHML"):
            self.phrases.append(Command(role.start, role.end, role.kind))
        if role.kind in _CLAIMING:
            self.claiming = role.kind
        elif role.kind == "LPAR" and isinstance(last, (ToVolume, Command)):
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
        elif role.kind == "FINAL" and isinstance(last, (Material, Dose)):
            self._said_final(last)
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

    # --- volumes ---------------------------------------------------------------------------------

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

    # --- doses -----------------------------------------------------------------------------------

    def _dose(self, dose: Dose, index: int) -> None:
        dose = replace(dose, role=self._last_role(), command=self.command)
        last = self.phrases[-1] if self.phrases else None
        if self._is_reading(dose):
            self.phrases.append(Claim(dose.start, dose.end, dose.amount, kind="titre"))
            return
        if dose.role == "into" and self.command == "MAKE_UP" and isinstance(last, Material):
            if dose.material is None and dose.amount.dimension == "volume":
                # "fill water into 580 mL"
                self.phrases.pop()
                self._made_to(ToVolume(dose.start, dose.end, dose.amount), last)
                return
        if dose.role == "of" and dose.material is None and dose.amount.dimension == "volume":
            if isinstance(last, Command) and last.kind == "MAKE_UP":
                self._made_to(ToVolume(dose.start, dose.end, dose.amount), None)
                return
        total = self.claiming == "EQUALS" and isinstance(last, Dose) and dose.material is None
        if total and dose.amount.dimension == "volume" and "EQUALS" in self.between:
            # "12 mL extract + 38 mL water = 50 mL"
            self._made_to(ToVolume(dose.start, dose.end, dose.amount, said_final=True), None)
            return
        if self._leads(dose, index):
            self._made_to(ToVolume(dose.start, dose.end, dose.amount, said_final=True), None)
            return
        if isinstance(last, Dose) and self.between and self.between[-1] == "OR":
            dose = same_thing(last, dose)
            self.phrases[-1] = replace(last, alternatives=(*last.alternatives, dose), end=dose.end)
            return
        if isinstance(last, SetPH) and dose.role == "with":
            reagents = last.reagents + ((dose.material,) if dose.material else ())
            self.phrases[-1] = replace(last, doses=(*last.doses, dose), reagents=reagents)
            return
        claims: tuple[Measure, ...] = ()
        if dose.material is not None and self.phrases:
            # "250 µL of stock + 500 µL water (30 µg/mL)": the strength is that of the mixture
            water, claims = without_claims(dose.material)
            dose = replace(dose, material=water)
        self.phrases.append(dose)
        join_equivalent(self.phrases)
        for strength in claims:
            self._claim(None, strength)

    def _leads(self, dose: Dose, index: int) -> bool:
        """ "1 L: 5 g NaCl, 10 g peptone": the volume that the recipe behind the colon is for."""
        if dose.material is not None or dose.amount.dimension != "volume" or dose.role:
            return False
        first = all(isinstance(p, Command) and p.kind == "PREPARE" for p in self.phrases)
        after = self.found[index + 1 : index + 3]
        return (
            first
            and len(after) == 2
            and isinstance(after[0], Role)
            and after[0].kind == "COLON"
            and isinstance(after[1], Dose)
        )

    def _is_reading(self, dose: Dose) -> bool:
        if not self.reading or dose.amount.dimension != "volume":
            return False
        material = dose.material
        return material is None or not (material.match or material.strengths or material.solution)

    def _part_of(self, last: Phrase | None) -> None:
        """ "water to 55 mL (50 mL of it ice cold)" states a part; elsewhere "it" is taken."""
        if not (isinstance(last, Dose) and last.material is None and self.between == ["OFIT"]):
            return
        if self.bracket:
            before = stands_before(self.phrases[:-1])
            self.phrases[-1] = Claim(last.start, last.end, last.amount, before, "part")
        else:
            self.phrases[-1] = replace(last, role="of")

    # --- materials -------------------------------------------------------------------------------

    def _material(self, material: Material, index: int) -> None:
        role = self._last_role()
        material = replace(material, role=role)
        last = self.phrases[-1] if self.phrases else None
        if material.ph is not None and self._says_ph(material):
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

    def _claim(self, material: Material | None, strength: Measure, kind: str | None = None) -> None:
        start = min(strength.start, material.start) if material else strength.start
        end = max(strength.end, material.end) if material else strength.end
        kind = kind or ("fold" if strength.dimension == "fold" else "strength")
        self.phrases.append(Claim(start, end, strength, material, kind))

    # --- loose quantities ----------------------------------------------------------------------------

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


def meaning(found: Sequence[Part]) -> list[Phrase]:
    """The typed phrases of a sentence whose parts have been joined."""
    return Meaning(found).read()
