"""Which words belong to which preparation.

Headings, bold lines and lead-ins open a scope; a make-up closes a preparation; a line that names a
solution and says how it is made is a preparation of its own.  Make-up volumes never pass to a
sibling, volumes of headings pass to children.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace

from soplint.bench.collect import Collector
from soplint.bench.headings import cover, inherit, sets_aside, variant_title
from soplint.bench.lines import (
    batch,
    carries,
    commands,
    divided_line,
    doses,
    is_recipe,
    label_of,
    makes,
    one_line,
    only_names,
    opening_of,
    run_in_heading,
    segments,
    takes_from_it,
)
from soplint.bench.preparation import Preparation, Title
from soplint.bench.shares import is_concentrate
from soplint.bench.title import title_of
from soplint.notation.document import ReadBlock
from soplint.notation.phrases import (
    Claim,
    Dose,
    Equivalent,
    Material,
    Phrase,
    Sentence,
    ToVolume,
)
from soplint.notation.rows import RecipeTable, Row, Variant


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
        self.cover = cover(blocks)
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
        self.aside = sets_aside(title)
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
        if any(is_recipe(phrase) for phrase in phrases):
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
            return colon or (names and len(block.text.chars) < 120 and not commands(phrases))
        return colon and len(block.text.chars) < 100

    @staticmethod
    def _may_title(read: ReadBlock) -> bool:
        """A paragraph, or the numbered line of a section: "4.2 Silver nitrate, 0.1 mol/L"."""
        block = read.block
        return block.kind == "paragraph" or (block.kind == "item" and "." in (block.number or ""))

    def _titles(self, read: ReadBlock, index: int) -> bool:
        """ "5X transfer buffer, 500 mL" on a line of its own, the recipe in the block below."""
        chars = read.block.text.chars.strip()
        phrases = read.sentences[0].phrases
        if len(read.sentences) != 1 or len(chars) > 200 or chars.endswith((".", ":")):
            return False
        if index + 1 >= len(self.blocks) or not only_names(phrases):
            return False
        if not any(carries(phrase) for phrase in phrases):
            return False
        if sum(isinstance(phrase, Dose) for phrase in phrases) > 1 or divided_line(read):
            return False
        below = self.blocks[index + 1]
        before = self.blocks[index - 1].block if index else None
        line = read.block.text.line
        if below.block.text.line < line + 2:
            return False  # one of several lines of a recipe
        if before is not None and before.kind != "heading" and before.text.line > line - 2:
            return False
        return below.table is not None or doses(below) or batch(below)

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
        for part in segments(read):
            if part.sentences and part.sentences[0].leads:
                self._led(part)
                continue
            opening = opening_of(part)
            divided = divided_line(part)
            alone = one_line(part)
            if opening is not None:
                self._alone(replace(part, sentences=part.sentences[1:]), opening)
            elif divided is not None:
                self._alone(*divided)
            elif alone is not None:
                self._alone(*alone)
            elif (label := label_of(part)) is not None:
                self._alone(replace(part, sentences=()), label)
            else:
                if read.block.kind == "paragraph" and read.block.number is None and doses(part):
                    self.collector.fresh(always=run_in_heading(part))
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
            if number and takes_from_it(sentence):
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
            head = variant_title(variant, title)
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
        sentence = row.sentence
        if label is not None and (bought := _bought(sentence)) is not None:
            sentence, label = bought, replace(label, finals=())
        if label is not None and (label.strengths or label.ph):
            told = title_of(replace(row.sentence, phrases=(label,)), "line")
            title = replace(told, words=label.words or words, volume=told.volume or volume)
        collector = Collector(self.scope.reagents, self.scope.equivalents)
        collector.open(title, parents, self.section, kind="row")
        collector.sentence(sentence)
        self.scope.preparations.extend(collector.close())

    @staticmethod
    def _has_head(variant: Variant) -> bool:
        return bool(variant.volume or variant.fold or variant.name)


def _without_volume(read: ReadBlock, title: Title) -> bool:
    """Whether a line states no volume of its own, so that the heading's counts."""
    phrases = [phrase for sentence in read.sentences for phrase in sentence.phrases]
    liquids = [p for p in phrases if isinstance(p, Dose) and p.amount.dimension == "volume"]
    own = makes(phrases) or len(liquids) > 1
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


def _bought(sentence: Sentence) -> Sentence | None:
    """The row with the concentrate's per cent given to the dose, the strength wanted to the name.

    "Hydrochloric acid 0.1 mol/L | 37 % | 8.3 mL | 1000 mL": only a concentrate is sold as 37 %.
    """
    turned = False
    phrases: list[Phrase] = []
    for phrase in sentence.phrases:
        material = phrase.material if isinstance(phrase, Dose) else None
        if isinstance(phrase, Dose) and material is not None and material.strengths:
            sold = tuple(m for m in material.finals if is_concentrate(material, m))
            molar = all(m.dimension in ("molarity", "normality") for m in material.strengths)
            if sold and molar and phrase.amount.dimension == "volume":
                own = replace(material, strengths=sold, finals=())
                phrase, turned = replace(phrase, material=own), True
        phrases.append(phrase)
    return replace(sentence, phrases=tuple(phrases)) if turned else None


_TITLE_LINE = 9  # deeper than every marked heading


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
