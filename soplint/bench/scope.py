"""Which words belong to which preparation.

Headings, bold lines and lead-ins open a scope; a make-up closes a preparation; a line that names a
solution and says how it is made is a preparation of its own.  Make-up volumes never pass to a
sibling, volumes of headings pass to children.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field, replace

from soplint.bench.collect import Collector
from soplint.bench.preparation import Preparation, Stated, Title
from soplint.bench.title import title_of
from soplint.intake.model import Block
from soplint.notation.document import ReadBlock
from soplint.notation.phrases import (
    Claim,
    Command,
    Dose,
    Equivalent,
    Loose,
    Material,
    Mixture,
    Sentence,
    SetPH,
    ToVolume,
)
from soplint.notation.rows import RecipeTable, Row, Variant
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


def _sets_aside(title: Title) -> bool:
    """Whether a heading says apparatus, scope, records or the like and nothing else."""
    words = {word.lower() for word in _HEADING_WORD.findall(title.words)}
    bare = not title.targets and title.volume is None and title.source != "document"
    return bare and bool(words & _ASIDE) and words <= _ASIDE | _BESIDE


@dataclass(slots=True)
class Scope:
    """The preparations of a document and what stands outside them."""

    preparations: list[Preparation] = field(default_factory=list)
    reagents: list[tuple[Sentence, Material]] = field(default_factory=list)  # listed, with facts
    equivalents: list[tuple[Sentence, Equivalent]] = field(default_factory=list)
    tables: list[tuple[RecipeTable, list[Preparation]]] = field(default_factory=list)
    aside: set[int] = field(default_factory=set)  # blocks set aside whole


def scope_of(blocks: Sequence[ReadBlock]) -> Scope:
    """Divide the document into preparations."""
    return _Walker(blocks).walk()


class _Walker:
    def __init__(self, blocks: Sequence[ReadBlock]) -> None:
        self.blocks = blocks
        self.scope = Scope()
        self.headings: list[tuple[int, Title]] = []
        self.lead: Title | None = None
        self.lead_number: str | None = None  # of a leading item whose parts carry its number
        self.lead_level = 0  # nesting level of the item that leads, 0 for a paragraph
        self.aside = False
        self.section = 0
        self.cover = _cover(blocks)
        self.collector = Collector(self.scope.reagents, self.scope.equivalents)

    def walk(self) -> Scope:
        for index, read in enumerate(self.blocks):
            if read.block.kind == "heading":
                self._heading(read)
            elif self.aside:
                self.scope.aside.add(index)
            elif read.table is not None:
                self._table(read.table)
            elif self._may_title(read) and self._titles(read, index):
                self._title_line(read)
            elif self._leads(index):
                self._flush()
                self.lead = title_of(read.sentences[0], "lead")
                self.lead_level = read.block.level if read.block.kind == "item" else 0
                below = self.blocks[index + 1].block.number if self.lead_level else None
                parted = (below or "").startswith(f"{read.block.number}.")
                self.lead_number = read.block.number if parted else None
                self._open()
            else:
                self._leave_lead(read)
                self._text(read)
        self._flush()
        kept = [p for p in self.scope.preparations if _holds(p)]
        self.scope.preparations = sorted(kept, key=_first_line)
        return self.scope

    # --- scopes --------------------------------------------------------------------------------

    def _heading(self, read: ReadBlock) -> None:
        self._flush()
        level = read.block.level or 1
        while self.headings and self.headings[-1][0] >= level:
            self.headings.pop()
        self.lead = None
        self.section += 1
        if not read.sentences:
            return
        source = "document" if read.block is self.cover else "title"
        title = title_of(read.sentences[0], source)
        self.headings.append((level, title))
        self.aside = _sets_aside(title)
        self._open()

    def _open(self) -> None:
        title, parents = self._title()
        self.collector.open(title, parents, self.section)

    def _title(self) -> tuple[Title | None, tuple[Title, ...]]:
        """The nearest title, filled up from above where it names no solution itself."""
        chain = [title for _, title in reversed(self.headings)]
        if self.lead is not None:
            chain.insert(0, self.lead)
        return (inherit(chain), tuple(chain[1:])) if chain else (None, ())

    def _flush(self) -> None:
        self.scope.preparations.extend(self.collector.close())

    def _leave_lead(self, read: ReadBlock) -> None:
        """A lead-in ends where its list ends."""
        if self.lead is None:
            return
        block = read.block
        if self.lead_level and block.kind == "item" and self._within(block.number):
            return
        if self.lead_level and (block.kind != "item" or block.level <= self.lead_level):
            self._flush()
            self.lead = None
            self._open()

    def _within(self, number: str | None) -> bool:
        """Whether an item is a part of the item that leads: 5.1.1 of 5.1."""
        if self.lead_number is None:
            return False
        return number is None or number.startswith(f"{self.lead_number}.")

    def _leads(self, index: int) -> bool:
        """Whether the block at ``index`` opens a scope: a bold line, "Buffer A:", a nesting item."""
        read = self.blocks[index]
        block = read.block
        if len(read.sentences) != 1 or not any(c.isalpha() for c in block.text.chars):
            return False
        phrases = read.sentences[0].phrases
        if any(_is_recipe(phrase) for phrase in phrases):
            return False
        following = self.blocks[index + 1].block if index + 1 < len(self.blocks) else None
        if following is None or following.kind == "heading":
            return False
        if block.bold:
            return True
        colon = block.text.chars.rstrip().endswith(":")
        if block.kind == "item":
            if block.number and (following.number or "").startswith(f"{block.number}."):
                return following.kind == "item"  # "5.1 Saline, 0.5 mol/L", then "5.1.1 Weigh ..."
            return following.kind == "item" and following.level > block.level
        if following.table is not None:
            return colon or (len(block.text.chars) < 120 and not block.text.chars.endswith("."))
        if following.kind == "item":
            names = any(isinstance(phrase, (Material, Dose)) for phrase in phrases)
            return colon or (names and len(block.text.chars) < 120 and not _commands(phrases))
        return colon and len(block.text.chars) < 100

    def _may_title(self, read: ReadBlock) -> bool:
        """A paragraph, or the numbered line of a section: "4.2 Silver nitrate, 0.1 mol/L"."""
        block = read.block
        return block.kind == "paragraph" or (block.kind == "item" and "." in (block.number or ""))

    def _titles(self, read: ReadBlock, index: int) -> bool:
        """ "5X transfer buffer, 500 mL" on a line of its own, the recipe in the block below."""
        chars = read.block.text.chars.strip()
        phrases = read.sentences[0].phrases
        if len(read.sentences) != 1 or len(chars) > 200 or chars.endswith((".", ":")):
            return False
        if index + 1 >= len(self.blocks) or not _only_names(phrases):
            return False
        if not any(_carries(phrase) for phrase in phrases):
            return False
        if sum(isinstance(phrase, Dose) for phrase in phrases) > 1 or _divided(read):
            return False
        below = self.blocks[index + 1]
        before = self.blocks[index - 1].block if index else None
        line = read.block.text.line
        if below.block.text.line < line + 2:
            return False  # one of several lines of a recipe
        if before is not None and before.kind != "heading" and before.text.line > line - 2:
            return False
        return below.table is not None or _doses(below) or _batch(below)

    def _title_line(self, read: ReadBlock) -> None:
        """A title without the marks of a heading: it holds until the next one."""
        self._flush()
        while self.headings and self.headings[-1][0] >= _TITLE_LINE:
            self.headings.pop()
        self.lead = None
        self.headings.append((_TITLE_LINE, title_of(read.sentences[0])))
        self._open()

    # --- contents --------------------------------------------------------------------------------

    def _text(self, read: ReadBlock) -> None:
        """Sentences of a block; one that names a solution and makes it stands alone."""
        for part in _segments(read):
            if part.sentences and part.sentences[0].leads:
                self._led(part)
                continue
            opening = _opening(part)
            divided = _divided(part)
            alone = _one_line(part)
            if opening is not None:
                self._alone(replace(part, sentences=part.sentences[1:]), opening)
            elif divided is not None:
                self._alone(*divided)
            elif alone is not None:
                self._alone(*alone)
            elif (label := _label(part)) is not None:
                self._alone(replace(part, sentences=()), label)
            else:
                if read.block.kind == "paragraph" and read.block.number is None and _doses(part):
                    self.collector.fresh(always=_run_in_heading(part))
                for sentence in part.sentences:
                    self.collector.sentence(sentence)

    def _led(self, read: ReadBlock) -> None:
        """A line whose title and recipe stand apart: "1 mol/L KCl (7.46 g in 100 mL)"."""
        first = read.sentences[0]
        title = title_of(first, "line")
        words = first.text.chars.strip(" :-–—=")
        self._alone(replace(read, sentences=read.sentences[1:]), replace(title, words=words))

    def _alone(self, read: ReadBlock, title: Title) -> None:
        """A line that names a solution and makes it: its own preparation."""
        collector = Collector(self.scope.reagents, self.scope.equivalents)
        above, parents = self._title()
        if above is not None and (title.bare and title.volume or _without_volume(read, title)):
            title = inherit([title, above])
        collector.open(title, parents, self.section, kind="line")
        for number, sentence in enumerate(read.sentences):
            if number and _takes_from_it(sentence):
                collector.fresh(always=True)
            collector.sentence(sentence)
        self.scope.preparations.extend(collector.close())

    def _table(self, table: RecipeTable) -> None:
        if table.kind == "list":
            for row in table.rows:
                if _is_preparation(row):
                    self._row(row, table.head[0].chars if table.head else "")
                else:
                    self.collector.sentence(row.sentence)
            return
        if table.kind != "recipe":
            return
        title, parents = self._title()
        own = [r for r in table.rows if r.kind != "total" and _own_volume(r)]
        if len(own) > 1:
            for row in table.rows:
                self._row(row, table.head[0].chars if table.head else "")
            return
        if len(table.variants) == 1 and not self._has_head(table.variants[0]):
            self.collector.rows(table, 0)
            return
        self._flush()
        made: list[Preparation] = []
        for number, variant in enumerate(table.variants):
            head = _variant_title(variant, title)
            self.collector.open(head, parents, self.section, kind="table")
            self.collector.rows(table, number)
            made.extend(self.collector.close())
        self.scope.tables.append((table, made))
        self.scope.preparations.extend(made)
        self._open()

    def _row(self, row: Row, head: str) -> None:
        """A row that is a preparation: "Level 2 | 5.0 mL | 100 mL | 10 mg/L"."""
        above, parents = self._title()
        words = f"{head} {row.text.chars.split(' | ')[0]}".strip()
        volume = above.volume if above is not None else None
        title = Title(row.text, words, (), (), volume=volume, source="line")
        first = row.sentence.phrases[0]
        label = row.material or (first if isinstance(first, Material) else None)
        if label is not None and (label.strengths or label.ph):
            told = title_of(replace(row.sentence, phrases=(label,)), "line")
            title = replace(told, words=label.words or words, volume=told.volume or volume)
        collector = Collector(self.scope.reagents, self.scope.equivalents)
        collector.open(title, parents, self.section, kind="row")
        collector.sentence(row.sentence)
        self.scope.preparations.extend(collector.close())

    @staticmethod
    def _has_head(variant: Variant) -> bool:
        return bool(variant.volume or variant.fold or variant.name)


def _cover(blocks: Sequence[ReadBlock]) -> Block | None:
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


def _without_volume(read: ReadBlock, title: Title) -> bool:
    """Whether a line states no volume of its own, so that the heading's counts."""
    phrases = [phrase for sentence in read.sentences for phrase in sentence.phrases]
    liquids = [p for p in phrases if isinstance(p, Dose) and p.amount.dimension == "volume"]
    own = _makes(phrases) or len(liquids) > 1
    return title.volume is None and not own and not title.bare


def _own_volume(row: Row) -> bool:
    """Whether a row takes something and is made up to a volume by itself."""
    taken = any(isinstance(phrase, Dose) for phrase in row.sentence.phrases)
    made = any(
        isinstance(phrase, ToVolume) and phrase.volume is not None
        for phrase in row.sentence.phrases
    )
    return taken and made


def _is_preparation(row: Row) -> bool:
    """Whether a row takes something and says what comes of it."""
    phrases = row.sentence.phrases
    taken = any(isinstance(phrase, Dose) for phrase in phrases)
    return taken and any(isinstance(phrase, (Claim, ToVolume)) for phrase in phrases)


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


def _variant_title(variant: Variant, title: Title | None) -> Title:
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


def _opening(read: ReadBlock) -> Title | None:
    """The title that opens a paragraph: "Borax, 0.05 mol/L, one litre. Dissolve 19.1 g ...", else None."""
    if len(read.sentences) < 2:
        return None
    first, rest = read.sentences[0], read.sentences[1:]
    if not any(_carries(phrase) for phrase in first.phrases):
        return None
    if not all(_carries(phrase) or _known(phrase) for phrase in first.phrases[1:]):
        return None
    if len(first.text.chars) > 120 or not _only_names(first.phrases):
        return None
    made = any(isinstance(p, (Dose, ToVolume)) for s in rest for p in s.phrases)
    title = title_of(first, "line")
    return title if made and (title.targets or title.volume or title.ph or title.fold) else None


def _carries(phrase: object) -> bool:
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


def _only_names(phrases: Sequence[object]) -> bool:
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


def _divided(read: ReadBlock) -> tuple[ReadBlock, Title] | None:
    """ "25 mmol/L MES with 0.1 mol/L NaCl, 1 L: 250 mL of ...": title and body at the first colon."""
    if not read.sentences:
        return None
    first = read.sentences[0]
    colon = _COLON.search(first.text.chars)
    if colon is None:
        return None
    before = tuple(p for p in first.phrases if p.end <= colon.start())
    after = tuple(p for p in first.phrases if p.start >= colon.end())
    if len(before) + len(after) != len(first.phrases) or not _only_names(before):
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


_TITLE_LINE = 9  # deeper than every marked heading


def _takes_from_it(sentence: Sentence) -> bool:
    """Whether a sentence uses the solution before it: "Add 10 µL to 90 µL medium per well"."""
    doses = [phrase for phrase in sentence.phrases if isinstance(phrase, Dose)]
    return (
        len(doses) > 1
        and doses[0].material is None
        and doses[0].role is None
        and doses[0].amount.dimension == "volume"
    )


def _batch(read: ReadBlock) -> bool:
    """Whether a block says nothing but a volume: "For 250 mL:"."""
    title = title_of(read.sentences[0]) if len(read.sentences) == 1 else None
    return title is not None and title.bare and title.volume is not None


def _run_in_heading(read: ReadBlock) -> bool:
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


def _doses(read: ReadBlock) -> bool:
    """Whether a block takes anything."""
    return any(isinstance(p, Dose) for sentence in read.sentences for p in sentence.phrases)


def _segments(read: ReadBlock) -> Iterator[ReadBlock]:
    """The block, cut before every later sentence that names a solution and makes it."""
    start = 0
    for index in range(1, len(read.sentences)):
        single = replace(read, sentences=(read.sentences[index],))
        if read.sentences[index - 1].leads:
            continue  # the recipe of the title before it
        led = read.sentences[index].leads
        if led or _divided(single) is not None or _one_line(single) is not None:
            yield replace(read, sentences=read.sentences[start:index])
            start = index
    yield replace(read, sentences=read.sentences[start:])


_LETTERED = re.compile(
    r"\s*(?P<name>(?:stock |buffer )?(?:solution|stock|buffer|reagent|component) [A-Z0-9]{1,2})"
    r"\s?[:=–—-]\s",
    re.IGNORECASE,
)


def _label(read: ReadBlock) -> Title | None:
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


def _one_line(read: ReadBlock) -> tuple[ReadBlock, Title] | None:
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
    if not (named and taken and (_makes(phrases) or read.block.kind == "item")):
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
    if aimed and (_makes(rest) or liquids):
        # the dose stays: its own strength is what it is tested against
        name = replace(material, strengths=(), finals=(), bracket=())
        title = title_of(replace(head, phrases=(name,)), "line")
        return read, replace(title, words=material.words)
    return None


def _makes(phrases: Sequence[object]) -> bool:
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


def _is_recipe(phrase: object) -> bool:
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


def _commands(phrases: Sequence[object]) -> bool:
    return any(isinstance(p, Command) and p.kind not in ("PREPARE", "MAKE_UP") for p in phrases)


def _first_line(preparation: Preparation) -> int:
    """Line on which a preparation begins, so that stocks come before what is made of them."""
    texts = [taken.text for taken in preparation.taken]
    texts += [made.text for made in preparation.made]
    if not texts and preparation.title is not None:
        texts = [preparation.title.text]
    return min((text.line for text in texts), default=0)


def _holds(preparation: Preparation) -> bool:
    return bool(
        preparation.taken
        or preparation.made
        or preparation.adjusted
        or preparation.claimed
        or preparation.mixed
        or (preparation.title and (preparation.title.targets or preparation.title.ph))
    )
