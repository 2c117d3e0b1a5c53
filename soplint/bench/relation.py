"""A relation between numbers of the text, tested: what was stated, what the others give."""

from __future__ import annotations

from dataclasses import dataclass

from soplint.bench.preparation import FinalVolume, Preparation, Stated, Taken
from soplint.findings.model import Interval
from soplint.substances.model import Substance


@dataclass(frozen=True, slots=True, eq=False)
class Relation:
    """One tested relation.

    ``kind``: mass, stock, concentrate, neat, fold, parts, sum, ratio, columns, molar-mass,
    label-strength, ph, pair, range, equivalent, total.  ``tested`` is the number that was
    calculated (amount taken before strength before volume); ``inputs`` are the others.
    """

    kind: str
    tested: Stated
    of: str | None
    computed: Interval  # in the stated unit
    agrees: bool
    deviation: float  # stated / computed - 1, by nominal values
    working: str
    inputs: tuple[Stated, ...] = ()
    reading: str = ""
    preparation: Preparation | None = None
    volume: FinalVolume | None = None
    target: Stated | None = None
    taken: Taken | None = None
    substance: Substance | None = None
    exact: bool = False  # no percent band: only rounding counts
    one_figure: bool = False  # the nominal strength has one figure
    note: str = ""
    several: bool = False  # another reading of the target was possible as well
    members: tuple[Relation, ...] = ()  # of a sum: each member, as if the others were right
