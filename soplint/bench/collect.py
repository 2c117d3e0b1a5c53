"""Collect the phrases of consecutive sentences into preparations."""

from __future__ import annotations

import re
from bisect import bisect_right
from collections.abc import Sequence
from dataclasses import replace

from soplint.bench.facts import tokens
from soplint.bench.preparation import (
    Adjusted,
    Claimed,
    Made,
    Mixed,
    Preparation,
    Stated,
    Taken,
    Title,
)
from soplint.bench.title import title_of
from soplint.intake.model import Text
from soplint.notation.phrases import (
    Claim,
    Command,
    Dose,
    Equivalent,
    Material,
    Mixture,
    Phrase,
    Sentence,
    SetPH,
    ToVolume,
    Ware,
)
from soplint.notation.rows import RecipeTable
from soplint.quantities.model import Measure

# A clause with one of these commands says nothing about the composition of the preparation.
_NOISE = {"WASH", "STORE", "CALIBRATE", "FILTER", "REPEAT", "TITRATE"}
_STARTS = {"WEIGH", "DISSOLVE", "DILUTE", "PREPARE"}
_TWO_STAGE = 1.45  # a later make-up of up to this many times the earlier finishes the same recipe


_OR_COMMAND = re.compile(r"\bor\s+(?:weigh|add|dissolve|use|dilute|take|mix)\b", re.IGNORECASE)


def _finals_to_doses(phrases: tuple[Phrase, ...]) -> list[Phrase]:
    """ "Add 10 mL of 1 M DTT to 990 mL buffer (final 1 mM)": the final is that of the DTT."""
    result = list(phrases)
    for index in range(1, len(result)):
        giver, receiver = result[index - 1], result[index]
        if not (isinstance(giver, Dose) and isinstance(receiver, Dose)):
            continue
        if receiver.role not in ("to", "into", "in") or receiver.material is None:
            continue
        own = giver.material
        finals = receiver.material.finals
        if own is None or not finals or own.finals or receiver.amount.dimension != "volume":
            continue
        result[index - 1] = replace(giver, material=replace(own, finals=finals))
        result[index] = replace(receiver, material=replace(receiver.material, finals=()))
    return result


def _fold_of(chars: str, folds: Sequence[Measure], claim: Claim) -> Measure | None:
    """The fold that a claim holds at: "1x is 30 mM Tris", "(1 mM at 1x)".

    ``folds`` are all of the sentence in order; only the ones beside the claim can be meant.
    """
    at = bisect_right(folds, claim.measure.start, key=lambda fold: fold.end)
    for measure in folds[at : at + 2]:
        if _AT.match(chars[claim.measure.end : measure.start]):
            return measure
    if at and not _CLAUSE.search(chars, folds[at - 1].end, claim.measure.start):
        return folds[at - 1]
    return None


_OF_THIS = re.compile(r"\s*of\s+(?:this|that|it)\b", re.IGNORECASE)
# "0.3888 g of potassium hydrogen phthalate consumes 18.64 mL of ..."
_TITRATED = re.compile(
    r"\b(?:consumes?|is consumed by|uses up|(?:is )?neutrali[sz](?:es|ed by))\s+(?:about\s+)?\d",
    re.IGNORECASE,
)


def _diluted_for_use(sentence: Sentence, claim: Claim) -> bool:
    """Whether a dilution stands before a claim in a sentence that takes nothing itself."""
    if any(isinstance(p, (Dose, ToVolume)) for p in sentence.phrases):
        return False
    return any(
        m.dimension == "ratio" and len(m.parts) == 2 and m.end <= claim.measure.start
        for m in sentence.measures
    )


_AT_FOLD = re.compile(r"\W*(?:final\s+|at\s+)?\d+(?:\.\d+)?\s?[x×X]\s*(?:[:=]|is\b)", re.IGNORECASE)
_CLAUSE = re.compile(r"[;:(]|\.\s")
_AT = re.compile(r"\W*(?:at|in|for|@)\s+(?:the\s+)?$", re.IGNORECASE)


def _bracketed_dose(material: Material, command: str | None) -> Dose | None:
    """ "Tris base (3.03 g) was dissolved": the amount stands in brackets behind the name."""
    amounts = [m for m in material.bracket if m.dimension in ("mass", "volume")]
    if len(amounts) != 1 or not material.words or command in ("ADJUST", "PREPARE"):
        return None
    others = tuple(m for m in material.bracket if m is not amounts[0] and m.dimension != "ratio")
    rest = replace(material, bracket=others)
    own, stock = material.strengths, others
    if len(own) == len(stock) == 1 and own[0].dimension == stock[0].dimension:
        if stock[0].base > own[0].base and amounts[0].dimension == "volume":
            # "10 mM Tris-HCl (10 mL of 1 M)": aimed at 10 mM, taken from 1 M
            rest = replace(material, bracket=(), strengths=stock, finals=own)
    elif own and amounts[0].dimension == "mass" and not stock:
        rest = replace(material, bracket=(), strengths=(), finals=own)
    return Dose(material.start, material.end, amounts[0], rest, role=material.role, command=command)


def _thing_titled(named: list[Material]) -> Material | None:
    """The one reagent that a title names; a whole acid system ("citrate") is none."""
    if len(named) != 1 or named[0].match is None or named[0].match.generic:
        return None
    return named[0]


class Collector:
    """Grows one preparation after the other within one scope."""

    def __init__(
        self,
        reagents: list[tuple[Sentence, Material]],
        equivalents: list[tuple[Sentence, Equivalent]],
    ) -> None:
        self.reagents = reagents
        self.equivalents = equivalents
        self.done: list[Preparation] = []
        self.current = Preparation(None)
        self.title: Title | None = None
        self.parents: tuple[Title, ...] = ()
        self.section = 0
        self.kind = "steps"
        self.closed = False
        self.step = 0
        self.folds: list[Measure] = []  # of the sentence in hand
        self.mentioned: Material | None = None  # "Dry potassium nitrate ...": weighed next
        self.pending: list[Taken] = []  # added after the make-up
        self.waiting: list[tuple[Stated, str]] = []  # flasks named after the make-up

    def open(
        self, title: Title | None, parents: tuple[Title, ...], section: int, kind: str = "steps"
    ) -> None:
        """Begin a scope; its first preparation carries the title."""
        self.title, self.parents, self.section, self.kind = title, parents, section, kind
        self.current = Preparation(title, parents, section=section, kind=kind)
        self.closed = False
        self.pending = []
        self.mentioned = None

    def close(self) -> list[Preparation]:
        """End the scope; its preparations in order."""
        self._settle_pending()
        done, self.done = [*self.done, self.current], []
        self.current = Preparation(None)
        self.closed = False
        return done

    def fresh(self, always: bool) -> None:
        """A paragraph of its own takes something: what was finished before is left behind."""
        if self.closed or (always and self.current.taken):
            self._settle_pending()
            self._next()

    def _next(self, title: Title | None = None) -> None:
        """End the current preparation and begin another one in the same scope."""
        self.done.append(self.current)
        self.current = Preparation(title, self.parents, section=self.section, kind=self.kind)
        self.current.flasks.extend(self.waiting)
        self.waiting = []
        self.closed = False

    def _settle_pending(self) -> None:
        for taken in self.pending:
            self.current.taken.append(replace(taken, late=True))
        self.pending = []

    # --- sentences -------------------------------------------------------------------------------

    def sentence(self, sentence: Sentence) -> None:
        """Take up all phrases of a sentence."""
        self.step += 1
        self.folds = [m for m in sentence.measures if m.dimension == "fold"]
        if _TITRATED.search(sentence.text.chars):
            return  # what a titration takes is no addition to a preparation
        command: str | None = None
        other = _OR_COMMAND.search(sentence.text.chars)
        for index, phrase in enumerate(_finals_to_doses(sentence.phrases)):
            if other is not None and phrase.start > other.start():
                break  # "..., or weigh 75.6 g": one of the two ways is gone
            if isinstance(phrase, Command):
                command = phrase.kind
                continue
            if command in _NOISE and not isinstance(phrase, (Equivalent, Claim)):
                continue
            self._phrase(sentence, phrase, index, command)

    def _phrase(self, sentence: Sentence, phrase: Phrase, index: int, command: str | None) -> None:
        text = sentence.text
        if isinstance(phrase, Dose):
            self._dose(sentence, phrase, command)
        elif isinstance(phrase, ToVolume):
            self._to_volume(text, phrase)
        elif isinstance(phrase, SetPH):
            self.current.adjusted.append(Adjusted(text, phrase, self.step, self.closed))
        elif isinstance(phrase, Claim) and self._of_another(sentence, command):
            pass  # "for use dilute 1:5 to 50 mM" speaks of another solution
        elif isinstance(phrase, Claim) and _diluted_for_use(sentence, phrase):
            pass  # "Use 1:1000 (final 100 µg/mL)" as well
        elif isinstance(phrase, Claim):
            fold = _fold_of(text.chars, self.folds, phrase)
            self.current.claimed.append(Claimed(text, phrase, self.step, fold))
        elif isinstance(phrase, Mixture):
            self.current.mixed.append(Mixed(text, phrase, self.step))
        elif isinstance(phrase, Ware):
            words = text.chars[phrase.start : phrase.end + 30].lower()
            ware = (Stated(text, phrase.measure), words)
            (self.waiting if self.closed else self.current.flasks).append(ware)
        elif isinstance(phrase, Equivalent):
            self.equivalents.append((sentence, phrase))
        elif isinstance(phrase, Material):
            self._mention(phrase)
            if self._at_a_fold(sentence, phrase):
                return
            if command == "PREPARE" and self._already_taken(sentence):
                self._obtained(text, phrase)
                return
            bracketed = _bracketed_dose(phrase, command)
            if bracketed is not None:
                self._dose(sentence, bracketed, command)
            elif command == "ADJUST" and phrase.match is not None and not phrase.is_water:
                # "adjusted with phosphoric acid": the pH stands in the title
                with_it = SetPH(phrase.start, phrase.end, None, reagents=(phrase,))
                self.current.adjusted.append(Adjusted(text, with_it, self.step, self.closed))
            elif command == "PREPARE" and (phrase.strengths or phrase.ph or phrase.solution):
                self._inline_title(sentence, phrase)
            else:
                self.reagents.append((sentence, phrase))

    def _of_another(self, sentence: Sentence, command: str | None) -> bool:
        """Whether a claim is of what a later dilution makes that is not carried out here."""
        if command != "DILUTE" or not self.closed:
            return False
        return sum(isinstance(phrase, ToVolume) for phrase in sentence.phrases) != 1

    def _inline_title(self, sentence: Sentence, phrase: Phrase) -> None:
        """ "To prepare 0.05 mol/L buffer from the stock, dilute ...": a title within a sentence."""
        title = title_of(replace(sentence, phrases=(phrase,)), "inline")
        if self.closed or self.current.taken:
            self._settle_pending()
            self._next(title)
        elif title.bare and title.volume is not None and self.current.title is not None:
            self.current.title = replace(self.current.title, volume=title.volume)
        elif title.bare or self.current.title is None or self.current.title.bare:
            self.current.title = title if not title.bare else self.current.title or title
        elif title.targets or title.ph or title.volume:
            own = self.current.title
            self.current.title = replace(
                title, volume=title.volume or own.volume, ph=title.ph or own.ph
            )

    # --- doses and volumes ---------------------------------------------------------------------------

    def _dose(self, sentence: Sentence, dose: Dose, command: str | None) -> None:
        material = dose.material
        if command == "PREPARE" and material is None and dose.role is None:
            if dose.amount.dimension == "volume":
                self._inline_title(sentence, dose)  # "For 20 mL take ..."
                return
        aims = command in ("PREPARE", "MAKE_UP") and dose.amount.dimension == "volume"
        if aims and dose.role is None and material is not None and not material.is_water:
            if material.strengths or material.solution or material.ph:
                self._inline_title(sentence, dose)
                return
        if self._is_the_batch(dose):
            self._to_volume(sentence.text, ToVolume(dose.start, dose.end, dose.amount))
            return
        if self._from_the_last(sentence, dose, command):
            self._settle_pending()
            self._next()
            last = dose.material or Material(dose.start, dose.end, "", solution=True)
            dose = replace(dose, material=last)
            taken = Taken(sentence.text, dose, self.step, block=sentence.block)
            self.current.taken.append(taken)
            return
        solvent = dose.role == "in" and dose.amount.dimension == "volume"
        if dose.role == "per" or (dose.material is None and dose.role == "to"):
            return  # "1 tablet per 50 mL"; "weigh to 1 mg": how exactly, not how much
        if self._belongs_to_adjustment(dose):
            return
        dose = self._with_material(dose, solvent)
        taken = Taken(sentence.text, dose, self.step, solvent, block=sentence.block)
        self._contents(taken)
        if not self.closed:
            self.current.taken.append(taken)
        elif command in _STARTS or solvent or self.pending:
            self._begin_after_make_up(taken, command)
        else:
            self.pending.append(taken)

    def _at_a_fold(self, sentence: Sentence, material: Material) -> bool:
        """ "1x = 25 mM Tris, 192 mM glycine": what the solution holds when it is diluted."""
        if not _AT_FOLD.match(sentence.text.chars) or material.match is None:
            return False
        folds = [m for m in sentence.measures if m.dimension == "fold"]
        if len(folds) != 1 or any(isinstance(p, (Dose, ToVolume)) for p in sentence.phrases):
            return False
        for strength in material.strengths:
            if strength.dimension != "fold":
                claim = Claim(strength.start, material.end, strength, material)
                self.current.claimed.append(Claimed(sentence.text, claim, self.step, folds[0]))
        return True

    def _is_the_batch(self, dose: Dose) -> bool:
        """ "(250 mL): 45.4 g ... in 180 mL water, HCl to 8.8, then 250 mL": the volume it is for."""
        title = self.current.title
        if dose.material is not None or dose.role is not None or not self.current.taken:
            return False
        if title is None or title.volume is None or dose.amount.dimension != "volume":
            return False
        batch = title.volume.measure.base
        return self.kind == "line" and abs(dose.amount.base / batch - 1) < 1e-9 if batch else False

    def _from_the_last(self, sentence: Sentence, dose: Dose, command: str | None) -> bool:
        """ "..., 0.5 mg/mL; 5.0 mL of this to 50.0 mL": the solution just made is diluted."""
        if dose.amount.dimension != "volume" or self.closed:
            return False
        if dose.material is None:
            if not self.current.claimed:
                return False
            if command == "DILUTE" and dose.role is None and self._weighed():
                return True  # "219.5 mg KH2PO4/L = 50 mg/L P; dilute 50 mL to 1 L"
            if not _OF_THIS.match(sentence.text.chars, dose.amount.end):
                return False
        else:
            the_stock = dose.material.solution and not tokens(dose.material.words)
            if command != "DILUTE" or not the_stock or not self._weighed():
                return False
        return any(taken.solvent for taken in self.current.taken)

    def _weighed(self) -> bool:
        return any(taken.dose.amount.dimension == "mass" for taken in self.current.taken)

    def _already_taken(self, sentence: Sentence) -> bool:
        """Whether this sentence has taken something: what it "obtains" is the result."""
        return bool(self.current.taken) and self.current.taken[-1].step == self.step

    def _obtained(self, text: Text, material: Material) -> None:
        for strength in material.strengths:
            kind = "fold" if strength.dimension == "fold" else "strength"
            named = None if material.solution else material
            claim = Claim(strength.start, material.end, strength, named, kind)
            self.current.claimed.append(Claimed(text, claim, self.step))

    def _mention(self, material: Material) -> None:
        if material.match is not None and not material.is_water and not material.solution:
            if not material.match.generic:
                self.mentioned = material

    def _belongs_to_adjustment(self, dose: Dose) -> bool:
        """ "About 17 mL is needed": of the acid or base that sets the pH just before."""
        if dose.material is not None or not self.current.adjusted or self.closed:
            return False
        last = self.current.adjusted[-1]
        if self.step - last.step > 1 or dose.role not in (None, "of"):
            return False
        changed = replace(last.set_ph, doses=(*last.set_ph.doses, dose))
        self.current.adjusted[-1] = replace(last, set_ph=changed)
        return True

    def _with_material(self, dose: Dose, solvent: bool) -> Dose:
        """A dose without a name: of what the line's title names, or of the solution before it."""
        material = dose.material
        nameless = material is None or not (material.words or material.molar_mass)
        title = self.current.title
        if not nameless or solvent or dose.role not in (None, "of"):
            return dose
        named = [m for m in title.materials if m.words] if title is not None else []
        anonymous = material is None and dose.amount.dimension == "volume"
        if anonymous and (self.closed or self.done):
            # "pipette 1.00 mL of it": of the solution made just before
            return replace(dose, material=Material(dose.start, dose.end, "", solution=True))
        if dose.amount.dimension == "mass" and material is None:
            thing = self.mentioned or _thing_titled(named)
            if thing is not None:
                base = replace(thing, strengths=(), finals=(), bracket=(), ph=None, solution=False)
                return replace(dose, material=base)
        if self.kind == "line" and len(named) == 1 and not self.closed:
            base = replace(named[0], strengths=(), finals=(), bracket=(), ph=None, solution=False)
            if material is not None:
                base = replace(
                    base, strengths=material.strengths, bracket=material.bracket,
                    finals=material.finals,
                )  # fmt: skip
            return replace(dose, material=base)
        return dose

    def _contents(self, taken: Taken) -> None:
        """ "..., 10 µL water (95 % formamide, 10 mM EDTA)": what the mixture holds."""
        material = taken.dose.material
        if material is None or not material.contents:
            return
        if material.is_water or (material.match is not None and not material.match.generic):
            for part in material.contents:
                for strength in part.strengths:
                    claim = Claim(strength.start, part.end, strength, part)
                    self.current.claimed.append(Claimed(taken.text, claim, self.step))

    def _begin_after_make_up(self, taken: Taken, command: str | None) -> None:
        if command in _STARTS and not self.pending:
            self._next()
            self.current.taken.append(taken)
        else:
            self.pending.append(taken)

    def _to_volume(self, text: Text, to: ToVolume) -> None:
        if self.closed and self.pending:
            last = self.current.made[-1].to.volume
            grown = to.volume.base / last.base if to.volume and last and last.base else 0.0
            if 1.001 <= grown <= _TWO_STAGE:
                self.current.taken.extend(self.pending)
            else:
                pending = self.pending
                self._next()
                self.current.taken.extend(pending)
            self.pending = []
        self.current.made.append(Made(text, to, self.step, len(self.current.taken)))
        if to.diluent is not None:
            for strength in (*to.diluent.bracket, *to.diluent.finals):
                # "to 100 mL with water (200 mg/L)" speaks of what comes of it
                if strength.dimension in ("molarity", "mass-concentration", "fraction", "ppm"):
                    claim = Claim(strength.start, strength.end, strength)
                    self.current.claimed.append(Claimed(text, claim, self.step))
        ahead = to.said_final and not self.current.taken  # "For 100 mL: 0.9 g glucose ..."
        self.closed = bool(self.current.taken) or (self.kind == "line" and not ahead)

    # --- tables ------------------------------------------------------------------------------------

    def rows(self, table: RecipeTable, number: int) -> None:
        """Take up one amount column of a recipe table."""
        if self.closed or self.current.total is not None:
            self._settle_pending()
            self._next()
        for row in table.rows:
            self.step += 1
            dose = row.doses[number] if number < len(row.doses) else None
            to = row.to_volumes[number] if number < len(row.to_volumes) else None
            if dose is not None:
                self.current.taken.append(Taken(row.text, dose, self.step))
            if to is not None:
                if row.kind == "total" and to.volume is not None:
                    self.current.total = Stated(row.text, to.volume)
                else:
                    self.current.made.append(Made(row.text, to, self.step, len(self.current.taken)))
                    self.closed = True
            if dose is None and to is None:
                for phrase in row.sentence.phrases:
                    if isinstance(phrase, SetPH):
                        self.current.adjusted.append(Adjusted(row.text, phrase, self.step, False))
