"""Lines that hold a title and its recipe: "0.2 mol/L TCEP: 57 mg in 1 mL of water"."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import replace

from soplint.bench.preparation import Title
from soplint.bench.title import title_of
from soplint.notation.document import ReadBlock
from soplint.notation.phrases import (
    Claim,
    Command,
    Dose,
    Loose,
    Material,
    Mixture,
    Sentence,
    SetPH,
    ToVolume,
)


def opening_of(read: ReadBlock) -> Title | None:
    """The title that opens a paragraph: "Borax, 0.05 mol/L, one litre. Dissolve 19.1 g ...", else None."""
    if len(read.sentences) < 2:
        return None
    first, rest = read.sentences[0], read.sentences[1:]
    if not any(carries(phrase) for phrase in first.phrases):
        return None
    if not all(carries(phrase) or _known(phrase) for phrase in first.phrases[1:]):
        return None
    if len(first.text.chars) > 120 or not only_names(first.phrases):
        return None
    made = any(isinstance(p, (Dose, ToVolume)) for s in rest for p in s.phrases)
    title = title_of(first, "line")
    return title if made and (title.targets or title.volume or title.ph or title.fold) else None


def carries(phrase: object) -> bool:
    """Whether a phrase names something with a strength, pH or volume."""
    if isinstance(phrase, Dose):
        return phrase.material is not None
    return isinstance(phrase, Material) and bool(
        phrase.strengths or phrase.bracket or phrase.ph or phrase.contents or phrase.solution
    )


# Commands that a title may hold: "buffer brought to pH 2.5", "diluted acid".
_AIMING = ("PREPARE", "MAKE_UP", "DILUTE", "ADJUST")


def _known(phrase: object) -> bool:
    """Whether a phrase is no run of unknown words ("run in slowly from the dispenser")."""
    if isinstance(phrase, Material):
        return phrase.match is not None or not phrase.words
    return isinstance(phrase, (Dose, Mixture, ToVolume, Loose, SetPH)) or (
        isinstance(phrase, Command) and phrase.kind in _AIMING
    )


def only_names(phrases: Sequence[object]) -> bool:
    """Whether phrases name a solution and what it shall be, and do nothing."""
    named = False
    for phrase in phrases:
        if isinstance(phrase, Dose):
            if phrase.amount.dimension != "volume" or phrase.role is not None:
                return False
            named = named or phrase.material is not None
        elif isinstance(phrase, Material):
            named = True
        elif isinstance(phrase, Command) and phrase.kind not in _AIMING:
            return False
        elif isinstance(phrase, ToVolume) and not phrase.said_final:
            return False
    return named


_COLON = re.compile(r":(?=\s)|\s[-–—]\s")


def divided_line(read: ReadBlock) -> tuple[ReadBlock, Title] | None:
    """ "25 mmol/L MES with 0.1 mol/L NaCl, 1 L: 250 mL of ...": title and body at the first colon."""
    if not read.sentences:
        return None
    first = read.sentences[0]
    colon = _COLON.search(first.text.chars)
    if colon is None:
        return None
    before = tuple(p for p in first.phrases if p.end <= colon.start())
    after = tuple(p for p in first.phrases if p.start >= colon.end())
    if len(before) + len(after) != len(first.phrases) or not only_names(before):
        return None
    body = [p for s in read.sentences[1:] for p in s.phrases] + list(after)
    doses = [p for p in body if isinstance(p, Dose)]
    title = title_of(replace(first, text=first.text, phrases=before), "line")
    own = bool(title.targets or title.volume or title.ph or title.fold)
    result = any(isinstance(p, (Claim, ToVolume)) for p in body) or len(doses) > 1
    if not doses or not (own or (read.block.kind == "item" or len(doses) > 1) and result):
        return None
    title = replace(title, words=first.text.chars[: colon.start()].strip())
    rest = (replace(first, phrases=after), *read.sentences[1:])
    return replace(read, sentences=rest), title


def takes_from_it(sentence: Sentence) -> bool:
    """Whether a sentence uses the solution before it: "Add 10 µL to 90 µL medium per well"."""
    doses = [phrase for phrase in sentence.phrases if isinstance(phrase, Dose)]
    return (
        len(doses) > 1
        and doses[0].material is None
        and doses[0].role is None
        and doses[0].amount.dimension == "volume"
    )


def batch(read: ReadBlock) -> bool:
    """Whether a block says nothing but a volume: "For 250 mL:"."""
    title = title_of(read.sentences[0]) if len(read.sentences) == 1 else None
    return title is not None and title.bare and title.volume is not None


def run_in_heading(read: ReadBlock) -> bool:
    """Whether a paragraph opens with a word or two of its own: "Assay. Mix 2.0 mL of ..."."""
    first = read.sentences[0]
    chars = first.text.chars.strip()
    return (
        len(read.sentences) > 1
        and len(chars.split()) <= 4
        and chars.endswith(".")
        and not first.measures
        and not any(isinstance(phrase, Command) for phrase in first.phrases)
    )


def doses(read: ReadBlock) -> bool:
    """Whether a block takes anything."""
    return any(isinstance(p, Dose) for sentence in read.sentences for p in sentence.phrases)


def segments(read: ReadBlock) -> Iterator[ReadBlock]:
    """The block, cut before every later sentence that names a solution and makes it."""
    start = 0
    for index in range(1, len(read.sentences)):
        single = replace(read, sentences=(read.sentences[index],))
        if read.sentences[index - 1].leads:
            continue  # the recipe of the title before it
        led = read.sentences[index].leads
        if led or divided_line(single) is not None or one_line(single) is not None:
            yield replace(read, sentences=read.sentences[start:index])
            start = index
    yield replace(read, sentences=read.sentences[start:])


_LETTERED = re.compile(
    r"\s*(?P<name>(?:stock |buffer )?(?:solution|stock|buffer|reagent|component) [A-Z0-9]{1,2})"
    r"\s?[:=–—-]\s",
    re.IGNORECASE,
)


def label_of(read: ReadBlock) -> Title | None:
    """ "Solution A: 0.2 mol/L sodium dihydrogen phosphate": a bottle with its label, no recipe."""
    if len(read.sentences) != 1:
        return None
    sentence = read.sentences[0]
    named = _LETTERED.match(sentence.text.chars)
    if named is None:
        return None
    told = [p for p in sentence.phrases if p.end > named.end()]
    if len(told) != 1 or not isinstance(told[0], Material) or told[0].match is None:
        return None
    title = title_of(replace(sentence, phrases=tuple(told)), "line")
    return replace(title, words=named["name"]) if title.targets else None


def one_line(read: ReadBlock) -> tuple[ReadBlock, Title] | None:
    """A line such as "0.2 mol/L TCEP: 57 mg in 1 mL of ..." with its title, else None."""
    if not read.sentences or not read.sentences[0].phrases:
        return None
    head = read.sentences[0]
    first = head.phrases[0]
    rest = replace(head, phrases=head.phrases[1:])
    body = replace(read, sentences=(rest, *read.sentences[1:]))
    if isinstance(first, Dose):
        return _dose_first(read, body, first)
    if isinstance(first, ToVolume) and first.said_final and len(head.phrases) > 1:
        if _goes_on(head, first):  # "10 L: 9 L water, 100 mL stock A, ..."
            return body, title_of(replace(head, phrases=(first,)), "line")
    if not isinstance(first, Material) or not first.words:
        return None
    phrases = [phrase for sentence in read.sentences for phrase in sentence.phrases]
    named = bool(first.strengths or first.finals or first.solution or first.contents) or any(
        m.dimension not in ("mass", "volume", "amount", "ratio") for m in first.bracket
    )
    taken = any(isinstance(p, Dose) and p.amount.dimension in ("mass", "volume") for p in phrases)
    if not (named and taken and (makes(phrases) or read.block.kind == "item")):
        return None
    if _facts_only(phrases):
        return None
    title = title_of(replace(head, phrases=(first,)), "line")
    return body, _named_by(title, first.end)


def _dose_first(read: ReadBlock, body: ReadBlock, first: Dose) -> tuple[ReadBlock, Title] | None:
    """ "10 L: 100 mL stock A ...", "MES 0.5 mol/L, 1 L: 97.6 g ...", "5 % milk: 2.5 g in 50 mL"."""
    head, material = read.sentences[0], first.material
    rest = [phrase for sentence in body.sentences for phrase in sentence.phrases]
    titled = replace(head, phrases=(first,))
    if first.amount.dimension == "volume" and first.role is None and _goes_on(head, first):
        if rest and (material is None or material.start == first.start):
            return body, _named_by(title_of(titled, "line"), first.end)
        return None
    if material is None or material.start != first.start or not material.words:
        return None
    aimed = material.finals or (material.strengths and first.amount.dimension == "mass")
    liquids = any(isinstance(p, Dose) and p.amount.dimension == "volume" for p in rest)
    if aimed and (makes(rest) or liquids):
        # the dose stays: its own strength is what it is tested against
        name = replace(material, strengths=(), finals=(), bracket=())
        title = title_of(replace(head, phrases=(name,)), "line")
        return read, replace(title, words=material.words)
    return None


def makes(phrases: Sequence[object]) -> bool:
    """Whether a line says what its volume is."""
    return any(isinstance(phrase, ToVolume) for phrase in phrases) or any(
        isinstance(phrase, Dose) and phrase.role == "in" for phrase in phrases
    )


def _named_by(title: Title, end: int) -> Title:
    """The title with only the words up to ``end``, where its recipe begins."""
    return replace(title, words=title.text.chars[:end].strip())


def _goes_on(sentence: Sentence, first: Dose | ToVolume) -> bool:
    """Whether a colon or dash follows: "Borax 0.1 mol/L, 1 L: 38.1 g ..."."""
    return sentence.text.chars[first.end :].lstrip()[:1] in (":", "-", "–", "—")


def _facts_only(phrases: Sequence[object]) -> bool:
    return not any(isinstance(phrase, (Command, ToVolume)) for phrase in phrases) and not any(
        isinstance(phrase, Dose) and phrase.amount.dimension == "mass" for phrase in phrases
    )


def is_recipe(phrase: object) -> bool:
    """Whether a phrase makes its line part of a recipe, so that the line is no lead-in."""
    if isinstance(phrase, ToVolume):
        return not phrase.said_final
    if not isinstance(phrase, Dose):
        return False
    if phrase.amount.dimension != "volume":
        return phrase.amount.dimension in ("mass", "amount")
    material = phrase.material
    if material is None:
        return False
    return phrase.command not in (None, "PREPARE", "MAKE_UP")


def commands(phrases: Sequence[object]) -> bool:
    return any(isinstance(p, Command) and p.kind not in ("PREPARE", "MAKE_UP") for p in phrases)
