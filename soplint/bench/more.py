"""Relations of the further families, tested after those of the amounts."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING

from soplint.bench.relation import Relation

if TYPE_CHECKING:
    from soplint.bench.carry_out import Bench


def more_relations(bench: Bench) -> Iterator[Relation]:
    """Relations that look at a bench whose amounts have been tested."""
    yield from ()
