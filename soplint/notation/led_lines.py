"""Lines that name a solution and say how it is made: "1 mol/L KCl (7.46 g in 100 mL)".

The name with its strengths leads, the recipe follows behind a colon, a dash, an equals sign or in
brackets.  Both are read apart, so that no phrase runs over the sign between them.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator
from dataclasses import replace

from soplint.intake.model import Text
from soplint.notation.litre import per_litre
from soplint.notation.phrases import (
    Assigned,
    Claim,
    Command,
    Dose,
    Loose,
    Material,
    Mixture,
    Phrase,
    Sentence,
    SetPH,
    ToVolume,
)

Read = Callable[[Text], Sentence]

# A title is not longer than this.
_TITLE = 140
_SIGN = re.compile(r":(?=\s)|\s[-–—=]+>?\s")
_BRACKETED = re.compile(r"\s(\()([^()]*(?:\([^()]*\)[^()]*)*)\)[\s.;,]*$")
_PER = re.compile(r",?\s*\b(?:per|/)\s*(?:1\s*)?(l|litre|liter)\b[\s.;)]*$", re.IGNORECASE)
_BATCH = re.compile(r"(?:for|per|to make)(?: (?!of\b)[^\s:]{1,15}){1,3}:", re.IGNORECASE)
_PARTS = re.compile(r";\s+(?=\S)")
_AIMS = frozenset({"PREPARE", "DILUTE"})
_DOSED = ("mass", "volume", "amount", "count")
_TAKEN = ("mass", "volume", "amount")


def led(whole: Sentence, read: Read) -> list[Sentence] | None:
    """The title and the recipe of a line, or of each part of it between semicolons.

    Args:
        whole: one sentence of the document, read as it stands.
        read: reads a text into a sentence.

    Returns:
        Sentences of which those that ``lead`` are titles of the sentences behind them; None for a
        line that is no such recipe.
    """
    text = whole.text
    if len(whole.measures) < 2:
        return None
    cuts = [0, *(match.end() for match in _PARTS.finditer(text.chars)), len(text.chars)]
    if 2 < len(cuts) <= 12:
        found = [_led(whole, a, b, read) for a, b in zip(cuts, cuts[1:], strict=False)]
        if all(pair is not None for pair in found):
            return [sentence for pair in found for sentence in pair or ()]
    return _led(whole, 0, len(text.chars), read)


def opens_batch(first: Sentence, second: Text) -> bool:
    """Whether "50 mM glucose, 25 mM Tris." leads the recipe "For 100 mL: 0.9 g glucose ..."."""
    told = first.kinds & {"IS", "GIVES", "FINALCONC", "AT"}
    return _BATCH.match(second.chars) is not None and not told and _is_title(first)


def _led(whole: Sentence, start: int, end: int, read: Read) -> list[Sentence] | None:
    text = whole.text.piece(start, end)
    for before, body in _divisions(text):
        if not _may_divide(whole, start, start + len(before.chars), end):
            continue
        title = _for_a_litre(read(before))
        if not _is_title(title):
            continue
        recipe = _for_a_litre(read(body))
        if _is_recipe(recipe) or (_has_volume(title) and _takes_any(recipe)):
            return [replace(title, leads=True), _named_after(title, recipe)]
    return None


def _may_divide(whole: Sentence, start: int, cut: int, end: int) -> bool:
    """Whether quantities and commands leave it open that a title ends at ``cut``: a quick test."""
    if cut - start > _TITLE:
        return False
    aims = any(start <= m.start and m.end <= cut for m in whole.measures)
    taken = any(cut <= m.start and m.end <= end and m.dimension in _DOSED for m in whole.measures)
    done = any(
        isinstance(p, Command) and p.kind not in _AIMS and start <= p.start and p.end <= cut
        for p in whole.phrases
    )
    return aims and taken and not done


def _named_after(title: Sentence, recipe: Sentence) -> Sentence:
    """ "1 mol/L KCl (7.46 g in 100 mL)": the amount without a name is of what the title names."""
    found = [m for m in map(_material_of, title.phrases) if m is not None and m.words]
    named = list({m.words: m for m in found}.values())
    first = next((p for p in recipe.phrases if isinstance(p, Dose)), None)
    if len(named) != 1 or first is None or first.role is not None:
        return recipe
    own = first.material
    if own is not None and (own.words or own.molar_mass):
        return recipe
    thing = Material(first.start, first.end, named[0].words, named[0].match)
    if own is not None:
        thing = replace(own, words=thing.words, match=thing.match)
    dose = replace(first, material=thing)
    return replace(recipe, phrases=tuple(dose if p is first else p for p in recipe.phrases))


def _material_of(phrase: Phrase) -> Material | None:
    if isinstance(phrase, Material):
        return phrase
    return phrase.material if isinstance(phrase, (Dose, Claim)) else None


def _divisions(text: Text) -> Iterator[tuple[Text, Text]]:
    """Left and right of each sign that may part title and recipe, the last sign first."""
    chars = text.chars
    bracket = _BRACKETED.search(chars)
    if bracket is not None and bracket.start() > 0:
        yield text.piece(0, bracket.start()), text.piece(*bracket.span(2))
    for sign in reversed(list(_SIGN.finditer(chars))[:6]):
        if chars.count("(", 0, sign.start()) == chars.count(")", 0, sign.start()):
            yield text.piece(0, sign.start()), text.piece(sign.end(), len(chars))


def _is_title(sentence: Sentence) -> bool:
    """Whether a sentence names a solution with what it shall be, and takes nothing."""
    named = aimed = False
    for phrase in sentence.phrases:
        if isinstance(phrase, (Material, Claim)) and not isinstance(phrase, Assigned):
            material = phrase if isinstance(phrase, Material) else phrase.material
            named = named or (material is not None and bool(material.words))
            aimed = aimed or isinstance(phrase, Claim) or _aims(material)
            if material is not None and any(m.dimension in _TAKEN for m in material.bracket):
                return False
            if material is not None and material.role not in (None, "of", "with", "in"):
                return False
        elif isinstance(phrase, Dose):
            if phrase.amount.dimension != "volume" or phrase.role or phrase.material is None:
                return False
            named, aimed = True, aimed or _aims(phrase.material)
        elif isinstance(phrase, Command):
            if phrase.kind not in _AIMS:
                return False
        elif isinstance(phrase, ToVolume) and not phrase.said_final:
            return False
        elif not isinstance(phrase, (Loose, Mixture, SetPH, ToVolume)):
            return False
    return aimed and (named or _has_volume(sentence))


def _aims(material: Material | None) -> bool:
    if material is None:
        return False
    return bool(
        material.strengths or material.contents or material.finals
        or any(m.dimension not in (*_TAKEN, "ratio") for m in material.bracket)
    )  # fmt: skip


def _is_recipe(sentence: Sentence) -> bool:
    """Whether a sentence takes something and says what volume it comes to."""
    doses = [p for p in sentence.phrases if isinstance(p, Dose) and _takes(p)]
    if not doses or any(isinstance(p, Assigned) for p in sentence.phrases):
        return False
    if any(isinstance(p, ToVolume) for p in sentence.phrases):
        return True
    if any(d.role in ("in", "into") and d.amount.dimension == "volume" for d in doses):
        return len(doses) > 1
    liquids = [d for d in doses if d.amount.dimension == "volume" and not d.role]
    return len(liquids) > 1 and any(d.material and d.material.is_water for d in liquids)


def _has_volume(title: Sentence) -> bool:
    return any(isinstance(p, ToVolume) and p.volume is not None for p in title.phrases)


def _takes_any(sentence: Sentence) -> bool:
    return any(isinstance(p, Dose) and _takes(p) and not p.role for p in sentence.phrases)


def _takes(dose: Dose) -> bool:
    return dose.amount.dimension in ("mass", "volume", "amount", "count")


def _for_a_litre(sentence: Sentence) -> Sentence:
    """ "30.3 g Tris, 144 g glycine per litre": the volume that the amounts are for."""
    found = _PER.search(sentence.text.chars)
    if found is not None and not any(m.start < found.start(1) < m.end for m in sentence.measures):
        made = per_litre(*found.span(1))
        kept = [p for p in sentence.phrases if p.end <= found.start()]
        return _made(sentence, kept, made)
    last = sentence.phrases[-1] if sentence.phrases else None
    if isinstance(last, Dose) and last.role == "per" and last.amount.dimension == "volume":
        liquid = last.material
        if liquid is None or liquid.match is not None or liquid.solution:
            made = ToVolume(last.start, last.end, last.amount, liquid, said_final=True)
            return _made(sentence, sentence.phrases[:-1], made)
    return sentence


def _made(
    sentence: Sentence, phrases: list[Phrase] | tuple[Phrase, ...], made: ToVolume
) -> Sentence:
    measures = sentence.measures
    if made.volume is not None and made.volume not in measures:
        measures = (*measures, made.volume)
    return replace(sentence, phrases=(*phrases, made), measures=measures)
