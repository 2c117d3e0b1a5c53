"""Carry a document out: preparations, shelf, relations, ledger."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field

from soplint.bench.acidity import ph_relations
from soplint.bench.balances import balance_relations
from soplint.bench.columns import column_relations
from soplint.bench.dimensions import dimension_relations
from soplint.bench.entries import Reading, enter_all
from soplint.bench.equivalents import equivalent_relations
from soplint.bench.examples import example_relations
from soplint.bench.facts import Facts
from soplint.bench.labels import label_relation, molar_mass_relation
from soplint.bench.ledger import Ledger
from soplint.bench.more import more_relations
from soplint.bench.parts import (
    fold_relations,
    ratio_relations,
    sum_relations,
    volume_relations,
)
from soplint.bench.preparation import Preparation, Stated
from soplint.bench.relation import Relation
from soplint.bench.scope import Scope, scope_of
from soplint.bench.shelf import stock_shelf
from soplint.bench.twofold import twofold_relation
from soplint.bench.volumes import final_volume
from soplint.bench.worked import worked_relations
from soplint.findings.model import Interval
from soplint.notation.document import ReadBlock
from soplint.notation.phrases import Claim, Dose, Material, Sentence


@dataclass(slots=True)
class Bench:
    """Everything that the checks look at."""

    blocks: Sequence[ReadBlock]
    scope: Scope
    facts: Facts
    ledger: Ledger
    reading: Reading
    relations: list[Relation] = field(default_factory=list)

    @property
    def preparations(self) -> list[Preparation]:
        """The preparations in order of the document."""
        return self.scope.preparations


def carry_out(blocks: Sequence[ReadBlock]) -> Bench:
    """Carry out every preparation and test every relation.

    The ledger holds all stated quantities afterwards; those that relations closed agree, those
    that a relation disproves wait for the checks, which decide what is shown.
    """
    scope = scope_of(blocks)
    facts = Facts([material for _, material in scope.reagents])
    making = [p for p in scope.preparations if p.taken]
    for preparation in scope.preparations:
        preparation.volume = final_volume(preparation)
        preparation.sole = len(making) == 1 and preparation.taken != []
    stock_shelf(scope.preparations, facts)
    ledger = Ledger()
    bench = Bench(blocks, scope, facts, ledger, enter_all(ledger, blocks, scope))
    for relation in _relations(bench):
        bench.relations.append(relation)
    bench.relations.extend(more_relations(bench))
    _close(bench)
    return bench


def _relations(bench: Bench) -> Iterator[Relation]:
    for order, preparation in enumerate(bench.preparations):
        yield from balance_relations(preparation, bench.facts, order)
        yield from fold_relations(preparation, bench.facts, order)
        yield from sum_relations(preparation)
        yield from volume_relations(preparation)
        yield from ratio_relations(preparation)
        yield from ph_relations(preparation, bench.facts, order)
    for table, made in bench.scope.tables:
        yield from column_relations(table, made)
    for block in bench.blocks:
        for sentence in block.sentences:
            yield from dimension_relations(sentence)
            yield from worked_relations(sentence)
    yield from example_relations(_sections(bench.blocks))
    for sentence, material in _materials(bench.blocks):
        for relation in (
            molar_mass_relation(sentence.text, material),
            label_relation(sentence.text, material),
        ):
            if relation is not None:
                yield relation
    for sentence, material in _undosed(bench.blocks):
        twofold = twofold_relation(sentence.text, material)
        if twofold is not None:
            yield twofold
    for sentence, equivalent in bench.scope.equivalents:
        yield from equivalent_relations(sentence, equivalent, bench.ledger)


def _sections(blocks: Sequence[ReadBlock]) -> list[list[Sentence]]:
    """The sentences of the document, heading by heading."""
    sections: list[list[Sentence]] = [[]]
    for block in blocks:
        if block.block.kind == "heading":
            sections.append([])
        sections[-1].extend(block.sentences)
    return sections


def _materials(blocks: Sequence[ReadBlock]) -> Iterator[tuple[Sentence, Material]]:
    """Every material of the document, those of doses included."""
    for block in blocks:
        for sentence in block.sentences:
            for phrase in sentence.phrases:
                if isinstance(phrase, Material):
                    yield sentence, phrase
                elif isinstance(phrase, Claim) and phrase.material is not None:
                    yield sentence, phrase.material
                elif isinstance(phrase, Dose) and phrase.material is not None:
                    yield sentence, phrase.material


def _undosed(blocks: Sequence[ReadBlock]) -> Iterator[tuple[Sentence, Material]]:
    """Materials and claims that are no doses: brackets behind them say the same strength again."""
    for block in blocks:
        for sentence in block.sentences:
            for phrase in sentence.phrases:
                material = phrase.material if isinstance(phrase, Claim) else phrase
                if isinstance(material, Material):
                    yield sentence, material
                elif isinstance(phrase, Dose) and phrase.amount.dimension == "volume":
                    if phrase.material is not None and block.block.kind == "heading":
                        yield sentence, phrase.material


# Relations that say nothing about one number alone.
_STRUCTURAL = ("columns", "total", "volume", "ratio")


def _close(bench: Bench) -> None:
    """Enter what agrees; what disagrees is left to the checks."""
    broken = {r.tested.key for r in bench.relations if not r.agrees}
    for relation in bench.relations:
        if relation.target is not None:
            bench.ledger.enter(relation.target, relation.of)  # a strength without a name of its own
        if relation.agrees and relation.tested.key in broken and relation.kind in _STRUCTURAL:
            continue  # rows scale alike, yet all of them are wrong
        if relation.agrees:
            bench.ledger.agree(relation.tested, relation.computed, relation.working)
            for stated in relation.inputs:
                if stated.key not in broken:
                    bench.ledger.agree(stated, _implied(relation, stated), relation.working)


def _implied(relation: Relation, stated: Stated) -> Interval:
    """The value of an input that would close the relation exactly, the others as stated.

    Strength aimed at and final volume grow with the amount, the strength of a stock falls with it.
    """
    measure = stated.measure
    if measure.value is None:
        return Interval(None, measure.unit or "1", measure.low, measure.high)
    factor = 1 + relation.deviation if relation.kind != "ph" else 1.0
    aimed = {s.key for s in (relation.target, relation.volume and relation.volume.stated) if s}
    if stated.key not in aimed and factor > 0:
        factor = 1 / factor
    value = measure.value * factor
    half = abs(relation.computed.high - relation.computed.low) / 2
    share = half / abs(relation.computed.value) if relation.computed.value else 0.0
    return Interval(value, measure.unit or "1", value * (1 - share), value * (1 + share))
