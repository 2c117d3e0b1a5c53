"""Titration curves: pH against volume, equivalence points, end-point errors."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from functools import lru_cache
from itertools import accumulate
from typing import TYPE_CHECKING

from soplint.equilibria.acids import acid_at
from soplint.equilibria.dissociation import ion_charges, plain_name, table_rows
from soplint.equilibria.door import check_amount, check_temperature
from soplint.equilibria.errors import BadAmountError, EquilibriumError, UnreachableError
from soplint.equilibria.mixing import Mixture, mixture
from soplint.equilibria.roots import bracketed_root

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

_SHARP = (
    2.5  # an equivalence counts as observable when the slope is this many times its surroundings
)


@dataclass(frozen=True, slots=True)
class Equivalence:
    """A stoichiometric equivalence point.

    `volume` in mL, `pH` there, `slope` dpH/dV in 1/mL (its size is the
    sharpness); `observable` when the curve is steeper there than around it.
    """

    volume: float
    pH: float
    slope: float
    observable: bool


@dataclass(frozen=True, slots=True)
class Indicator:
    """An indicator with its range of change."""

    name: str
    low: float
    high: float

    @property
    def middle(self) -> float:
        """Middle of the range of change."""
        return 0.5 * (self.low + self.high)


@dataclass(frozen=True, slots=True, eq=False)
class TitrationCurve:
    """pH at each titrant volume [mL], and the equivalence points in order of volume."""

    volumes: NDArray[np.float64]
    pH: NDArray[np.float64]
    mixture: Mixture = field(repr=False)
    _kept: dict[str, tuple[Equivalence, ...]] = field(default_factory=dict, repr=False)

    @property
    def equivalences(self) -> tuple[Equivalence, ...]:
        """Equivalence points in order of volume, computed on first access."""
        if "equivalences" not in self._kept:
            self._kept["equivalences"] = _equivalences(self.mixture)
        return self._kept["equivalences"]

    def volume_at(self, ph: float) -> float:
        """Titrant volume [mL] at which a pH is reached, dilution included.

        Errors: UnreachableError when no volume up to a hundredfold excess reaches it.
        """
        farthest = max(
            [float(self.volumes.max()), 1e-9]
            + [100.0 * point.volume for point in self.equivalences]
        )

        def above(volume: float) -> float:
            return self.mixture.solve(volume, ph).pH - ph

        try:
            return bracketed_root(above, 0.0, farthest)
        except UnreachableError as error:
            raise UnreachableError(
                f"pH {ph:g} is not reached by this titration", f"{ph:g}"
            ) from error

    def titration_error(self, end_point: float | str, equivalence: int | None = None) -> float:
        """Relative error of the volume when the titration stops at an end point.

        (V_end - V_eq)/V_eq.

        Parameters: end_point, a pH or the name of an indicator (the middle of its
        range is taken); equivalence, position in `equivalences`, the nearest
        in volume if absent.
        Returns: relative error [1], negative when the end comes too early.
        Errors: EquilibriumError names an unknown indicator; UnreachableError.
        """
        ph = indicator(end_point).middle if isinstance(end_point, str) else float(end_point)
        if not self.equivalences:
            raise UnreachableError("this titration has no equivalence point", "equivalence")
        end = self.volume_at(ph)
        if equivalence is None:
            point = min(self.equivalences, key=lambda item: abs(item.volume - end))
        else:
            point = self.equivalences[equivalence]
        return end / point.volume - 1.0


@lru_cache(maxsize=1)
def _indicators() -> dict[str, Indicator]:
    return {
        plain_name(row["indicator"]): Indicator(
            row["indicator"], float(row["pH_low"]), float(row["pH_high"])
        )
        for row in table_rows("indicators.csv")
    }


def indicator(name: str) -> Indicator:
    """An indicator by name, from data/indicators.csv.

    Errors: EquilibriumError names an unknown indicator.

    >>> indicator("Phenolphthalein").low
    8.2
    """
    found = _indicators().get(plain_name(name))
    if found is None:
        raise EquilibriumError(f"no indicator named {name!r}", name)
    return found


def _levels(mixed: Mixture) -> Iterator[tuple[float, float]]:
    """Protons lost [mmol] at each equivalence: (constant part, part for each mL of titrant).

    Steps of all systems are taken in order of pK; a level is where the protons of the
    weaker step begin to go. The first level is the end of free strong acid.
    """
    steps = []
    for name in mixed.names()[0]:
        cumulative = acid_at(name, mixed.temperature).cumulative
        for low, high in zip(cumulative, cumulative[1:], strict=False):
            here = mixed.first.totals.get(name, 0.0) * mixed.first_volume
            steps.append((high - low, here, mixed.second.totals.get(name, 0.0)))
    steps.sort()
    yield 0.0, 0.0
    yield from zip(
        accumulate(step[1] for step in steps), accumulate(step[2] for step in steps), strict=True
    )


def _protons_lost(mixed: Mixture) -> tuple[float, float]:
    """Protons the systems must have lost for neutrality: constant part, part for each mL."""
    charges = ion_charges()
    parts = []
    for side in (mixed.first, mixed.second):
        strong = sum(charges[ion] * value for ion, value in side.strong.items())
        weak = sum(
            acid_at(name, mixed.temperature).charge * value for name, value in side.totals.items()
        )
        parts.append(strong + weak)
    return parts[0] * mixed.first_volume, parts[1]


def _equivalence_volumes(mixed: Mixture) -> list[float]:
    start, rate = _protons_lost(mixed)
    found = set()
    for constant, each in _levels(mixed):
        if abs(rate - each) > 1e-12:
            volume = (constant - start) / (rate - each)
            if volume > 1e-9 * mixed.first_volume:
                found.add(float(f"{volume:.12g}"))
    return sorted(found)


def _slope(mixed: Mixture, volume: float) -> float:
    """dpH/dV by central difference over a step that moves pH by less than 0.02."""
    width = 1e-3 * volume
    for _ in range(12):
        change = mixed.solve(volume + width).pH - mixed.solve(volume - width).pH
        if abs(change) < 0.02:
            break
        width *= max(0.005 / abs(change), 0.01)
    return change / (2.0 * width)


def _equivalences(mixed: Mixture) -> tuple[Equivalence, ...]:
    """Equivalence points with slope there and a comparison with the slopes half-way between."""
    volumes = _equivalence_volumes(mixed)
    middles = [0.5 * (a + b) for a, b in zip([0.0, *volumes], volumes, strict=False)]
    middles.append(1.5 * volumes[-1] if volumes else 0.0)
    found = []
    for number, volume in enumerate(volumes):
        slope = _slope(mixed, volume)
        around = [abs(_slope(mixed, middle)) for middle in middles[number : number + 2]]
        sharp = abs(slope) > _SHARP * max(around)
        found.append(Equivalence(volume, mixed.solve(volume).pH, slope, sharp))
    return tuple(found)


def _curve(mixed: Mixture, volumes: NDArray[np.float64]) -> NDArray[np.float64]:
    """pH at each volume, by the batched kernel."""
    import numpy as np

    from soplint.equilibria.batch import Batch, balance_batch
    from soplint.equilibria.problem import forms_of, interactions
    from soplint.equilibria.water import properties

    water, slope, pkw = properties(mixed.temperature)
    systems, ions = mixed.names()
    whole = (mixed.first_volume + volumes) * water

    def blend(one: Mapping[str, float], two: Mapping[str, float], name: str) -> NDArray[np.float64]:
        mixed_amount: NDArray[np.float64] = (
            one.get(name, 0.0) * mixed.first_volume + two.get(name, 0.0) * volumes
        ) / whole
        return mixed_amount

    charges, table = ion_charges(), interactions()
    nothing = np.zeros(len(volumes))
    strong = {ion: blend(mixed.first.strong, mixed.second.strong, ion) for ion in ions}
    terms = [
        sum((table.get(i, {}).get(k, 0.0) * m for k, m in strong.items()), nothing)
        for i in ("H+", "OH-")
    ]
    totals = [blend(mixed.first.totals, mixed.second.totals, name) for name in systems]
    batch = Batch(
        tuple(forms_of(acid_at(name, mixed.temperature), {}) for name in systems),
        np.array(totals).reshape(len(systems), len(volumes)),
        sum((charges[ion] * m for ion, m in strong.items()), nothing),
        sum((charges[ion] ** 2 * m for ion, m in strong.items()), nothing),
        slope,
        pkw,
        terms[0],
        terms[1],
    )
    return balance_batch(batch)[0]


def titration_curve(
    analyte: Mapping[str, float],
    analyte_volume: float,
    titrant: Mapping[str, float],
    titrant_volumes: Sequence[float] | NDArray[np.float64],
    temperature: float = 25.0,
) -> TitrationCurve:
    """pH against titrant volume, dilution included, with equivalence points.

    Each point is a full equilibrium (see `solve`); volumes add up.

    Parameters: analyte, formula or name -> mol/L; analyte_volume [mL]; titrant,
    formula or name -> mol/L; titrant_volumes [mL]; temperature [°C].
    Returns: the curve; its equivalences follow from stoichiometry alone.
    Validity: as for `solve`; strong and weak acids and bases on either side,
    polyprotic ones and mixtures.
    Errors: BadAmountError, UnknownSubstanceError; both name the culprit.
    Reference: de Levie 1993, J. Chem. Educ. 70, 209 (general theory of the curve).

    >>> curve = titration_curve({"CH3COOH": 0.1}, 25.0, {"NaOH": 0.1}, [0.0, 12.5, 25.0])
    >>> [round(float(ph), 1) for ph in curve.pH], curve.equivalences[0].volume
    ([2.9, 4.7, 8.6], 25.0)
    """
    import numpy as np

    mixed = mixture(analyte, analyte_volume, titrant, check_temperature(temperature))
    volumes = np.asarray(titrant_volumes, dtype=np.float64).reshape(-1)
    if volumes.size == 0:
        raise BadAmountError("no titrant volumes given", "titrant_volumes")
    for extreme in (float(volumes.min()), float(volumes.max())):
        check_amount("titrant volume", extreme / 1e9)
    if not np.isfinite(volumes).all():
        raise BadAmountError("a titrant volume is not finite", "titrant_volumes")
    return TitrationCurve(volumes, _curve(mixed, volumes), mixed)
