"""Two solutions poured together: composition as a straight line in the volume added."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from soplint.equilibria.door import Resolved, check_amount, resolve, solve_systems
from soplint.equilibria.errors import BadAmountError
from soplint.equilibria.solution import Solution


@dataclass(frozen=True, slots=True)
class Mixture:
    """`first` of a volume [mL] to which `second` is added; compositions in mol/L."""

    first: Resolved
    first_volume: float
    second: Resolved
    temperature: float

    def names(self) -> tuple[tuple[str, ...], tuple[str, ...]]:
        """All acid systems and all strong ions of both."""
        systems = dict.fromkeys((*self.first.totals, *self.second.totals))
        ions = dict.fromkeys((*self.first.strong, *self.second.strong))
        return tuple(systems), tuple(ions)

    def composition(self, added: float) -> tuple[dict[str, float], dict[str, float]]:
        """Totals and strong ions [mol/L] after `added` mL of the second; volumes add up."""
        volume = self.first_volume + added
        systems, ions = self.names()
        return (
            {
                name: self._blend(self.first.totals, self.second.totals, name, added) / volume
                for name in systems
            },
            {
                name: self._blend(self.first.strong, self.second.strong, name, added) / volume
                for name in ions
            },
        )

    def _blend(
        self, one: Mapping[str, float], two: Mapping[str, float], name: str, added: float
    ) -> float:
        return one.get(name, 0.0) * self.first_volume + two.get(name, 0.0) * added

    def solve(self, added: float, start: float | None = None) -> Solution:
        """The solution after `added` mL of the second."""
        totals, strong = self.composition(added)
        notes = self.first.notes + self.second.notes
        return solve_systems(totals, strong, self.temperature, notes=notes, start=start)


def mixture(
    first: Mapping[str, float], first_volume: float, second: Mapping[str, float], temperature: float
) -> Mixture:
    """A mixture from two named compositions [mol/L]; volume in mL.

    Errors: BadAmountError, UnknownSubstanceError name the culprit.

    >>> mixture({"HCl": 0.1}, 10.0, {"NaOH": 0.1}, 25.0).solve(10.0).pH > 6.9
    True
    """
    if not first_volume > 0.0:
        raise BadAmountError(f"volume {first_volume!r} mL is not positive", "volume")
    check_amount("volume", first_volume / 1e9)
    return Mixture(resolve(first), float(first_volume), resolve(second), temperature)
