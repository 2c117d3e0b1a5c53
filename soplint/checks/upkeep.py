"""What steam, vacuum, air and enzymes do to a buffer that is right on paper."""

from __future__ import annotations

import re
from collections.abc import Iterator

from soplint.bench import Bench, Preparation
from soplint.bench.numbers import shown
from soplint.bench.passages import Passage, bottles_of, passages, passages_of, readings_of
from soplint.bench.portions import candidates
from soplint.bench.preparation import Taken
from soplint.checks.registry import Judgement, rule
from soplint.checks.telling import about_passage
from soplint.findings.model import Related
from soplint.notation.phrases import Dose, Material


def _doses_before(preparation: Preparation, passage: Passage) -> Iterator[Taken]:
    """The doses that are in the vessel when a sentence is reached."""
    here = passage.sentence.text.place(0)
    for taken in preparation.taken:
        if taken.text.place(taken.dose.start) <= here or taken.text is passage.sentence.text:
            yield taken


def _formulas(taken: Taken) -> set[str]:
    material = taken.dose.material
    if material is None or material.is_water:
        return set()
    return {s.family for s in candidates(material)[:1]}


# --- autoclave -----------------------------------------------------------------------------------------

_AUTOCLAVE = re.compile(r"\bautoclav(?:e|ed|ing)\b", re.IGNORECASE)
_NOT_ITSELF = re.compile(
    r"\b(?:not|never|without|instead|cannot|must not|do not|autoclaved|previously|empty|glassware"
    r"|bottles?|tips|flasks?|separately|waste|before (?:disposal|discard\w*))\b",
    re.IGNORECASE,
)
_STEAMED = {
    "NaHCO3": ("major", "carbon dioxide leaves and the pH rises"),
    "KHCO3": ("major", "carbon dioxide leaves and the pH rises"),
    "CH5NO3": ("major", "ammonia and carbon dioxide leave"),
    "NH4HCO3": ("major", "ammonia and carbon dioxide leave"),
    "NaN3": ("minor", "hydrazoic acid can leave with the steam"),
    "NaClO": ("major", "hypochlorite decomposes"),
    "NaOCl": ("major", "hypochlorite decomposes"),
    "H2O2": ("major", "hydrogen peroxide decomposes"),
}


@rule("buffers.contents-bear-autoclave")
def contents_bear_autoclave(bench: Bench) -> Iterator[Judgement]:
    """What is autoclaved holds nothing that steam drives off or destroys."""
    for passage in passages(bench):
        found = _AUTOCLAVE.search(passage.chars)
        if found is None or passage.order is None or passage.heading:
            continue
        if _NOT_ITSELF.search(passage.chars):
            continue
        for taken in _doses_before(bench.preparations[passage.order], passage):
            if taken.text is passage.sentence.text and taken.dose.start > found.start():
                continue
            for family in _formulas(taken) & set(_STEAMED):
                grade, why = _STEAMED[family]
                name = taken.dose.material.words if taken.dose.material is not None else family
                yield about_passage(
                    "buffers.contents-bear-autoclave", grade, passage.sentence.text, found.start(),
                    found.end(), f"{name} does not bear the autoclave: {why}",
                    "filter it sterile and add it after cooling",
                    (Related(taken.stated.span, shown(taken.stated.measure), name),),
                )  # fmt: skip


# --- volatile ------------------------------------------------------------------------------------------

_VOLATILE = {"NH4HCO3", "CH5NO3", "(NH4)2CO3", "NaHCO3", "KHCO3", "NH3"}
_DRIVEN = re.compile(
    r"\b(?:degas\w*[^.]*\bvacuum|under vacuum|vacuum degas\w*|evaporat\w*|boil\w*)\b", re.IGNORECASE
)
_MEANT = re.compile(
    r"\b(?:lyophili\w*|freeze-dr\w*|remov\w*|drive off|distil\w*|reflux|not|never|boiled|filter\w*)\b",
    re.IGNORECASE,
)


@rule("buffers.volatile-buffer-kept-closed")
def volatile_buffer_kept_closed(bench: Bench) -> Iterator[Judgement]:
    """A volatile buffer is not degassed under vacuum, boiled or evaporated before use."""
    for passage in passages(bench):
        found = _DRIVEN.search(passage.chars)
        if found is None or passage.order is None or _MEANT.search(passage.chars):
            continue
        preparation = bench.preparations[passage.order]
        title = preparation.title
        if title is None or not re.search(r"buffer|phase|eluent", title.words, re.IGNORECASE):
            continue
        for taken in _doses_before(preparation, passage):
            if _formulas(taken) & _VOLATILE:
                name = taken.dose.material.words if taken.dose.material is not None else "it"
                yield about_passage(
                    "buffers.volatile-buffer-kept-closed", "minor", passage.sentence.text,
                    found.start(), found.end(),
                    f"{name} is volatile: its pH and strength change in this step",
                    "degas the water before, or use ultrasound for a short time in a closed bottle",
                )  # fmt: skip


# --- azide ---------------------------------------------------------------------------------------------

_PEROXIDASE = re.compile(r"\b(?:peroxidase|HRP)\b")
_WITHOUT = re.compile(
    r"\b(?:without|azide-free|free of|wash\w*|rinse\w*|not|never|inhibit\w*|remov\w*|exchange\w*"
    r"|dialys\w*|desalt\w*)\b",
    re.IGNORECASE,
)


@rule("buffers.azide-suits-use")
def azide_suits_use(bench: Bench) -> Iterator[Judgement]:
    """A solution for peroxidase holds no azide, which inhibits it."""
    for order, preparation in enumerate(bench.preparations):
        azide = [t for t in preparation.taken if "NaN3" in _formulas(t)]
        if not azide:
            continue
        title = preparation.title
        own = title is not None and title.source != "document" and _PEROXIDASE.search(title.words)
        uses = [
            p
            for p in passages_of(bench, order)
            if _PEROXIDASE.search(p.chars)
            and re.search(
                r"\bin (?:this|the|it)\b|\bwith (?:this|it)\b|\binto (?:this|it)\b", p.chars
            )
        ]
        around = [p for p in passages_of(bench, order) if _WITHOUT.search(p.chars)]
        if around or not (uses or own):
            continue
        taken = azide[0]
        where = uses[0].sentence.text if uses else taken.stated.text
        found = _PEROXIDASE.search(where.chars)
        start, end = (found.start(), found.end()) if found else (taken.dose.start, taken.dose.end)
        yield about_passage(
            "buffers.azide-suits-use", "minor", where, start, end,
            "azide inhibits peroxidase: the conjugate loses its activity in this solution",
            "another preservative, or the solution without azide",
            (Related(taken.stated.span, shown(taken.stated.measure), "azide"),),
        )  # fmt: skip


# --- carbon dioxide ------------------------------------------------------------------------------------

_ALKALINE = 9.0
_KEPT = re.compile(r"\b(\d+)\s*(months?|weeks?|years?)\b", re.IGNORECASE)
_CLOSED = re.compile(
    r"carbon dioxide|\bCO2\b|boil|closed|tight|sealed|soda lime|guard|polyethylene|plastic|stopper"
    r"|cap\b|nitrogen|bottle",
    re.IGNORECASE,
)


@rule("buffers.carbon-dioxide-kept-out")
def carbon_dioxide_kept_out(bench: Bench) -> Iterator[Judgement]:
    """An alkaline buffer that is kept for weeks is protected from carbon dioxide."""
    bottles = bottles_of(bench)
    whole = " ".join(s.text.chars for b in bench.blocks for s in b.sentences)
    if _CLOSED.search(whole):
        return
    for order, _ in enumerate(bench.preparations):
        finished = bottles.finished(order)
        if finished is None or finished.setting is None:
            continue
        if finished.setting.ph.measure.nominal < _ALKALINE:
            continue
        for passage in passages_of(bench, order):
            found = _KEPT.search(passage.chars)
            if (
                found is None
                or "stor" not in passage.chars.lower()
                and "keep" not in passage.chars.lower()
            ):
                continue
            yield about_passage(
                "buffers.carbon-dioxide-kept-out", "remark", passage.sentence.text, found.start(),
                found.end(),
                f"pH {finished.setting.ph.measure.nominal:g} falls in air: nothing keeps carbon"
                " dioxide out",
                "freshly boiled water and a closed bottle, or a shorter shelf life",
            )  # fmt: skip
            break


# --- the label -----------------------------------------------------------------------------------------

_STEEP = {"tris", "glycylglycine", "ammonia", "imidazole", "ethanolamine", "bicine", "tricine"}
_LABEL = re.compile(r"^\W*(?:label|mark the bottle|labelled|labeled)\b", re.IGNORECASE)


@rule("buffers.label-carries-temperature")
def label_carries_temperature(bench: Bench) -> Iterator[Judgement]:
    """The label of a buffer whose pH moves with temperature carries the temperature of its pH."""
    for passage in passages(bench):
        if not _LABEL.search(passage.chars):
            continue
        readings = [r for r in readings_of(passage.sentence) if r.degrees is None]
        phrases = passage.sentence.phrases
        materials = [p for p in phrases if isinstance(p, Material)]
        materials += [p.material for p in phrases if isinstance(p, Dose) and p.material is not None]
        named = {s.acid_system for m in materials for s in candidates(m)}
        if not readings or not named & _STEEP:
            continue
        ph = readings[0].ph
        yield about_passage(
            "buffers.label-carries-temperature", "remark", passage.sentence.text, ph.start, ph.end,
            "the pH of this buffer moves by 0.02 to 0.03 for each °C: the label needs its temperature",
        )  # fmt: skip
