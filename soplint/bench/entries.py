"""Which quantities of a document are listed in the ledger, and what is set aside."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field

from soplint.bench.ledger import ROLES, Ledger
from soplint.bench.preparation import Preparation, Stated
from soplint.bench.scope import Scope
from soplint.notation.document import ReadBlock
from soplint.notation.phrases import (
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

_NOISE_COMMANDS = {"WASH", "STORE", "FILTER", "REPEAT"}
# After these a quantity without a substance means that the sentence was not understood.
_QUANTITATIVE = {"WEIGH", "DISSOLVE", "DILUTE"}
_UNIT_FREE = {"number", "time", "money", "count", "other"}


@dataclass(slots=True)
class Reading:
    """What was read of the sentences that hold a quantity."""

    with_quantities: int = 0
    unread: list[tuple[int, str, Sentence]] = field(default_factory=list)
    set_aside: Counter[str] = field(default_factory=Counter)


def enter_all(ledger: Ledger, blocks: Sequence[ReadBlock], scope: Scope) -> Reading:
    """List every quantity of a solution, recipe or titration; count what is set aside."""
    reading = Reading()
    named = {
        taken.stated.key
        for preparation in scope.preparations
        for taken in preparation.taken
        if taken.dose.material is not None
    }
    for index, block in enumerate(blocks):
        aside = index in scope.aside
        for sentence in block.sentences:
            heading = block.block.kind == "heading"
            _sentence(ledger, sentence, aside, reading, named, heading)
        if block.table is not None and block.table.kind != "other":
            for variant in block.table.variants:
                for measure in (variant.volume, variant.fold, variant.ph):
                    if measure is not None:
                        ledger.enter(Stated(variant.head, measure))
    for preparation in scope.preparations:
        _enter_title(ledger, preparation)
    return reading


def _enter_title(ledger: Ledger, preparation: Preparation) -> None:
    """What a title, a lead-in or the flask in use says, wherever no phrase has listed it."""
    title, volume = preparation.title, preparation.volume
    if volume is not None and volume.stated is not None:
        ledger.enter(volume.stated)
    if title is None:
        return
    for stated in (title.volume, title.ph, title.fold, *(t.stated for t in title.targets)):
        if stated is not None:
            ledger.enter(stated)


def _sentence(
    ledger: Ledger,
    sentence: Sentence,
    aside: bool,
    reading: Reading,
    named: set[tuple[int, int, int, int]],
    heading: bool,
) -> None:
    bound = {} if aside else dict(_bound(sentence, heading))
    loose = [] if aside else _unbound(sentence)
    for measure in loose:
        if Stated(sentence.text, measure).key in named:
            bound[(measure.start, measure.end)] = (None, "given")
    loose = [m for m in loose if (m.start, m.end) not in bound]
    open_keys = {(m.start, m.end) for m in loose}
    for measure in sentence.measures:
        key = (measure.start, measure.end)
        if key in bound:
            of, reason = bound[key]
            ledger.enter(Stated(sentence.text, measure), of, reason)
        elif key not in open_keys and measure.dimension not in _UNIT_FREE:
            reading.set_aside["ware" if aside else measure.dimension] += 1
    for measure in loose:
        ledger.enter(Stated(sentence.text, measure), None, "not-recomputable")
    reading.with_quantities += bool(bound or loose)
    if loose and not bound:
        line = sentence.text.place(loose[0].start)[0]
        reading.unread.append((line, sentence.text.chars.strip(), sentence))


def _bound(
    sentence: Sentence, heading: bool
) -> Iterator[tuple[tuple[int, int], tuple[str | None, str]]]:
    """Quantities that a phrase took up, with what they are quantities of and a first reason.

    In a heading "rinse" and "wash" are names ("Citrate rinse, 5 mmol/L"), no commands.
    """
    command: str | None = None
    for phrase in sentence.phrases:
        if isinstance(phrase, Command):
            command = phrase.kind
        elif heading or command not in _NOISE_COMMANDS:
            for measure, material in _quantities(phrase):
                if measure.dimension in ROLES or measure.unit == "drop":
                    yield (measure.start, measure.end), (_name(material), _reason(material))


def _quantities(phrase: Phrase) -> Iterator[tuple[Measure, Material | None]]:
    if isinstance(phrase, Dose):
        yield from _of_doses(phrase)
    elif isinstance(phrase, Material):
        yield from _of_material(phrase)
    elif isinstance(phrase, ToVolume):
        if phrase.volume is not None:
            yield phrase.volume, phrase.diluent
    elif isinstance(phrase, SetPH):
        if phrase.ph is not None:
            yield phrase.ph, None
        if phrase.temperature is not None:
            yield phrase.temperature, None
        for reagent in phrase.reagents:
            yield from _of_material(reagent)
        for dose in phrase.doses:
            yield from _quantities(dose)
    elif isinstance(phrase, Claim):
        yield phrase.measure, phrase.material
        if phrase.material is not None:
            yield from _of_material(phrase.material)
    elif isinstance(phrase, Equivalent):
        yield from _of_material(phrase.titrant)
        yield from _quantities(phrase.mass)
        if phrase.volume is not None:
            yield phrase.volume, phrase.titrant
    elif isinstance(phrase, Mixture):
        yield phrase.ratio, None
        for material in phrase.materials:
            yield from _of_material(material)


def _of_doses(first: Dose) -> Iterator[tuple[Measure, Material | None]]:
    """The quantities of a dose and of all that may be used instead of it."""
    doses = [first]
    while doses:
        dose = doses.pop()
        if dose.material is not None or dose.role is not None:
            yield dose.amount, dose.material
            yield from ((m, dose.material) for m in dose.same)
        if dose.material is not None:
            yield from _of_material(dose.material)
        doses.extend(reversed(dose.alternatives))


def _of_material(material: Material) -> Iterator[tuple[Measure, Material | None]]:
    single = (material.ph, material.temperature, material.molar_mass, material.density)
    for measure in (*material.strengths, *material.bracket, *material.finals, *single):
        if measure is not None:
            yield measure, material
    for part in material.contents:
        yield from _of_material(part)


def _name(material: Material | None) -> str | None:
    if material is None:
        return None
    if material.match is not None and material.match.substances:
        if material.match.form_named or len(material.match.substances) == 1:
            return material.match.substances[0].name
        return material.match.written
    return material.words or None


def _reason(material: Material | None) -> str:
    if material is not None and material.words and material.match is None and not material.solution:
        return "substance-unknown"
    return "given"


def _unbound(sentence: Sentence) -> list[Measure]:
    """Masses and volumes that no phrase took up: the sentence was not understood.

    A single one without a command to weigh or dissolve is a remark ("about 17 mL is needed").
    """
    command: str | None = None
    found: list[Measure] = []
    quantitative = False
    for phrase in sentence.phrases:
        if isinstance(phrase, Command):
            command = phrase.kind
        elif command in _NOISE_COMMANDS or isinstance(phrase, (Loose, Ware)):
            continue
        elif isinstance(phrase, Dose) and phrase.material is None and phrase.role is None:
            if phrase.amount.dimension in ("mass", "volume", "amount"):
                found.append(phrase.amount)
                quantitative = quantitative or command in _QUANTITATIVE
    return found if quantitative or len(found) > 1 else []
