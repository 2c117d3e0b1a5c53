"""Which stretches of a sentence meet: a name in a quantity, a quantity in a name."""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Iterable, Iterator
from itertools import accumulate


class Stretches:
    """Stretches of characters (first offset, end exclusive), kept in order.

    >>> list(Stretches([(0, 4), (6, 9), (8, 12)]).meeting(3, 9))
    [(8, 12), (6, 9), (0, 4)]
    """

    def __init__(self, stretches: Iterable[tuple[int, int]]) -> None:
        self._all = sorted(stretches)
        self._starts = [start for start, _ in self._all]
        # how far any of the stretches up to here reaches: where the search backwards may end
        self._reach = list(accumulate((end for _, end in self._all), max))

    def meeting(self, start: int, end: int) -> Iterator[tuple[int, int]]:
        """The stretches that share a character with ``start`` to ``end``, last first."""
        index = bisect_left(self._starts, end) - 1
        while index >= 0 and self._reach[index] > start:
            if self._all[index][1] > start:
                yield self._all[index]
            index -= 1
