"""Headings: which set their section aside, which title a document, what they inherit."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from soplint.bench.preparation import Stated, Title
from soplint.bench.title import title_of
from soplint.intake.model import Block
from soplint.notation.document import ReadBlock
from soplint.notation.rows import Variant
from soplint.quantities.model import Measure

# Sections whose quantities describe equipment, dates or limits, not a recipe.
# Headings of sections that hold no recipe.  Only a heading of nothing else sets its section aside:
# "Reference buffers" and "Instrument check solution" are recipes.
_ASIDE = {
    *("apparatus", "equipment", "purpose", "scope", "record", "records", "reference", "references"),
    *("revision", "history", "responsibility", "responsibilities", "instruments", "definitions"),
    *("instrumentation", "personnel", "training", "definition", "distribution", "glassware"),
}


_BESIDE = {
    *("and", "of", "the", "or", "for", "related", "normative", "change", "document", "documents"),
    *("control", "list", "abbreviations", "terms", "roles", "field", "application", "use", "forms"),
    *("required", "other", "general", "used", "log", "laboratory", "ware", "storage", "staff"),
}


_HEADING_WORD = re.compile(r"[A-Za-z]+")


def sets_aside(title: Title) -> bool:
    """Whether a heading says apparatus, scope, records or the like and nothing else."""
    words = {word.lower() for word in _HEADING_WORD.findall(title.words)}
    bare = not title.targets and title.volume is None and title.source != "document"
    return bare and bool(words & _ASIDE) and words <= _ASIDE | _BESIDE


def cover(blocks: Sequence[ReadBlock]) -> Block | None:
    """The heading that titles the whole document: the first, where others stand below it."""
    headings = [read.block for read in blocks if read.block.kind == "heading"]
    if len(headings) < 2:
        return None
    first = headings[0]
    titles = [
        title_of(read.sentences[0])
        for read in blocks
        if read.block.kind == "heading" and read.sentences
    ]
    sizes = all(t.bare for t in titles[1:]) and any(t.volume is not None for t in titles[1:])
    if titles and titles[0].targets and sizes:
        return None  # "## Buffer (20 mM KCl)" over "### For 250 mL" and "### For 500 mL"
    below = all(other.level > first.level for other in headings[1:])
    return first if below or _DOCUMENT.search(first.text.chars) else None


_DOCUMENT = re.compile(
    r"\b[A-Z]{2,5}-(?:[A-Z]{2,5}-)?\d{2,5}\b|\bprocedure\b|\bSOP\b", re.IGNORECASE
)


def inherit(chain: Sequence[Title]) -> Title:
    """The first title of the chain; what it leaves open is taken from those above.

    A title that names a solution of its own takes nothing but a volume from above; a bare one
    ("Recipe:", "For 50 mL:") takes everything.
    """
    title = chain[0]
    for above in chain[1:]:
        if title.source == "lead" and title.targets and above.fold is not None:
            title = _at_its_fold(title, above)
            break
        if title.bare and not above.bare:
            title = replace(
                above,
                volume=title.volume or above.volume,
                text=title.text if title.volume else above.text,
            )
            break
        lends = above.source != "document" or not (above.targets or above.ph)
        if title.volume is None and above.volume is not None and lends:
            title = replace(title, volume=above.volume)
    if title.bare and title.volume is not None and len(chain) > 1 and chain[0].volume is not None:
        title = replace(title, words=chain[1].words)  # "Per 30 mL:" names nothing
    return title


_WORKING = re.compile(r"\b(final|working|use|1\s?[x×])\b", re.IGNORECASE)


def _at_its_fold(title: Title, above: Title) -> Title:
    """ "1x: 137 mM NaCl, ..." above the list of a 10X stock: strengths at another fold."""
    own = title.fold.measure if title.fold is not None else None
    if own is None and _WORKING.search(title.words) and above.fold is not None:
        own = replace(above.fold.measure, value=1.0, low=1.0, high=1.0)
    if own is None:
        return replace(title, volume=title.volume or above.volume)
    targets = tuple(replace(target, fold=own) for target in title.targets)
    return replace(
        above, targets=above.targets + targets, volume=title.volume or above.volume,
        materials=above.materials or title.materials,
    )  # fmt: skip


def variant_title(variant: Variant, title: Title | None) -> Title:
    """The title of an amount column: its own volume, fold and pH, the rest from above."""

    def stated(measure: Measure | None) -> Stated | None:
        return Stated(variant.head, measure) if measure is not None else None

    volume, fold, ph = stated(variant.volume), stated(variant.fold), stated(variant.ph)
    if title is None or variant.name:
        base = Title(variant.head, variant.name or variant.head.chars, (), ())
    else:
        base = title
    return replace(
        base,
        volume=volume or base.volume,
        fold=fold or base.fold,
        ph=ph or base.ph,
        source="column" if volume else base.source,
    )
