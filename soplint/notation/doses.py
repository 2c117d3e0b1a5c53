"""Amounts: taken, an alternative, a reading, a total, part of what stands before."""

from __future__ import annotations

from dataclasses import replace

from soplint.notation.closings import (
    join_equivalent,
    same_thing,
    without_claims,
    without_weight_claims,
)
from soplint.notation.parts import Role
from soplint.notation.phrases import (
    Claim,
    Command,
    Dose,
    Material,
    SetPH,
    ToVolume,
)
from soplint.notation.volumes import Volumes
from soplint.quantities.model import Measure


class Doses(Volumes):
    """An amount in its sentence."""

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
        if self._comes_out(dose):
            self._made_to(ToVolume(dose.start, dose.end, dose.amount, said_final=True), None)
            named = dose.material if dose.material and dose.material.words else None
            for strength in dose.material.strengths if dose.material else ():
                self._claim(named, strength)
            return
        if self._leads(dose, index):
            if self.phrases and self.command == "PREPARE":
                self.phrases.pop()  # "For 1 L: 5 mL of ...": what follows is taken, not aimed at
                self.command = None
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
            if dose.role == "in" and self._weighed():
                # "0.1 g of methyl red in 100 mL of ethanol (0.1 % w/v)": not a strength of ethanol
                water, claims = without_weight_claims(water, claims)
            dose = replace(dose, material=water)
        self.phrases.append(dose)
        join_equivalent(self.phrases)
        for strength in claims:
            self._claim(None, strength)

    def _weighed(self) -> bool:
        return any(isinstance(p, Dose) and p.amount.dimension == "mass" for p in self.phrases)

    def _comes_out(self, dose: Dose) -> bool:
        """ "5 mL of 2 M KCl and 95 mL water give 100 mL of 0.1 M KCl": what was mixed."""
        if self.claiming != "GIVES" or dose.amount.dimension != "volume" or dose.role:
            return False
        mixed = [p.amount for p in self.phrases if isinstance(p, Dose)]
        liquid = sum(m.base for m in mixed if m.dimension == "volume")
        return bool(mixed) and liquid <= 1.1 * dose.amount.base

    def _leads(self, dose: Dose, index: int) -> bool:
        """ "1 L: 5 g NaCl, 10 g peptone": the volume that the recipe behind the colon is for."""
        if dose.material is not None or dose.amount.dimension != "volume":
            return False
        if dose.role and self.between != ["PER"]:
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
