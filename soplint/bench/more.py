"""Relations of the further families, tested after those of the amounts."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING

from soplint.bench.adjusting import adjuster_relations, room_relations, start_relations
from soplint.bench.meter_buffers import meter_relations
from soplint.bench.passages import bottles_of
from soplint.bench.ph_changes import change_relations
from soplint.bench.relation import Relation

if TYPE_CHECKING:
    from soplint.bench.carry_out import Bench


def more_relations(bench: Bench) -> Iterator[Relation]:
    """Relations that look at a bench whose amounts have been tested.

    Kinds: adjuster, room, ph-start, ph-at, ph-diluted, ph-loaded, ph-standard.
    """
    bottles = bottles_of(bench)
    for order, preparation in enumerate(bench.preparations):
        if not preparation.adjusted and (preparation.title is None or not preparation.title.ph):
            continue
        finished = bottles.finished(order)
        if finished is not None:
            yield from adjuster_relations(finished, bottles)
            yield from room_relations(finished, bottles)
            yield from start_relations(finished)
    yield from change_relations(bench, bottles)
    yield from meter_relations(bench)
