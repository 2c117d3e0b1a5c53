"""Buffers that a pH meter is calibrated with: their value at a temperature, what they enclose.

Kind of relation made here: ``ph-standard``.
"""

from __future__ import annotations

import csv
import os
import re
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache
from typing import TYPE_CHECKING

from soplint.bench.passages import Passage, passages, readings_of
from soplint.bench.preparation import Stated
from soplint.bench.relation import Relation
from soplint.findings.model import Interval
from soplint.quantities.model import Measure

if TYPE_CHECKING:
    from soplint.bench.carry_out import Bench

_DATA = os.path.join(os.path.dirname(__file__), "data", "ph_standards.csv")
NEAR = 0.03  # printed with two decimals, and older scales differ by up to 0.02
FAR = 0.15  # farther from every value of a standard it is another buffer
# Values at 25 °C by which a buffer is known; makers' own buffers (7.00, 10.00) have tables of their own.
_KNOWN = {
    "phthalate": ("4.00", "4.01", "4.005"),
    "phosphate": ("6.86", "6.87", "6.88", "6.865"),
    "borax": ("9.18", "9.180", "9.23"),
    "tetraoxalate": ("1.68", "1.679"),
    "carbonate": ("10.01", "10.012"),
    "calcium hydroxide": ("12.45", "12.454"),
}
_NAMES = {
    "phthalate": "phthalate",
    "borax": "borax",
    "tetraborate": "borax",
    "tetraoxalate": "tetraoxalate",
    "tetroxalate": "tetraoxalate",
    "phosphate": "phosphate",
    "carbonate": "carbonate",
}


@cache
def standard_values() -> dict[str, tuple[tuple[float, float], ...]]:
    """Temperature [°C] and pH of each standard buffer, in order of temperature.

    >>> dict(standard_values()["borax"])[25.0]
    9.18
    """
    found: dict[str, list[tuple[float, float]]] = {}
    with open(_DATA, encoding="utf-8", newline="") as file:
        for row in csv.DictReader(line for line in file if not line.startswith("#")):
            point = float(row["temperature_C"]), float(row["pH"])
            found.setdefault(row["standard"], []).append(point)
    return {name: tuple(sorted(points)) for name, points in found.items()}


def standard_ph(name: str, temperature: float) -> float | None:
    """pH of a standard buffer at a temperature [°C], between the rows by straight line.

    None outside the table.

    >>> round(standard_ph("borax", 36.0), 3)
    9.095
    """
    points = standard_values()[name]
    for (low, first), (high, second) in zip(points, points[1:], strict=False):
        if low <= temperature <= high:
            return first + (second - first) * (temperature - low) / (high - low)
    return None


_METER = re.compile(
    r"\b(?:calibrat\w*|standard (?:ph )?buffers?|ph standards?|meter|electrode|two-point)\b",
    re.IGNORECASE,
)


_HELD = re.compile(r"\b(?:calibrat\w*|standard (?:ph )?buffers?|ph standards?)\b", re.IGNORECASE)


def meter_relations(bench: Bench) -> Iterator[Relation]:
    """pH values of calibration buffers against the tables of the standards."""
    for passage in passages(bench):
        if "pH" in passage.chars:
            yield from _standards(passage)


@dataclass(frozen=True, slots=True)
class _Told:
    ph: Stated
    degrees: Measure
    beside: bool  # the temperature stands at the value: "pH 9.18 at 35 °C"
    name: str
    value: float


def _standards(passage: Passage) -> Iterator[Relation]:
    told = list(_told(passage))
    # a phosphate buffer of pH 6.8 need not be the standard: only the meter's buffers are held to it
    held = bool(_HELD.search(passage.chars)) and not passage.heading
    moved = any(abs(t.ph.measure.nominal - t.value) <= NEAR and not _is_nominal(t) for t in told)
    for one in told:
        gap = one.ph.measure.nominal - one.value
        agrees = abs(gap) <= NEAR
        if not agrees and not (held and (one.beside or moved)):
            continue  # "the buffer pH 9.18": its name on the bottle, whatever the temperature
        yield Relation(
            "ph-standard",
            one.ph,
            f"{one.name} buffer",
            Interval(
                round(one.value, 3), "pH", round(one.value - NEAR, 3), round(one.value + NEAR, 3)
            ),
            agrees,
            0.0 if agrees else gap,
            f"table of the standard buffers: {one.name} at {one.degrees.nominal:g} °C"
            f" pH {one.value:.2f}",
            (Stated(passage.sentence.text, one.degrees),) if agrees else (),
        )


def _is_nominal(told: _Told) -> bool:
    chars = told.ph.text.chars[told.ph.measure.start : told.ph.measure.end]
    return any(chars.endswith(value) for value in _KNOWN.get(told.name, ()))


def _told(passage: Passage) -> Iterator[_Told]:
    chars = passage.chars
    meter = bool(_METER.search(chars))
    degrees = [m for m in passage.sentence.measures if m.dimension == "temperature"]
    ends = 0
    readings = readings_of(passage.sentence)
    for reading in readings:
        ph = reading.ph
        before = chars[ends : ph.start].lower()
        ends = ph.end
        if ph.value is None or ph.manner != "plain" or ph.places < 2:
            continue
        named = {standard for word, standard in _NAMES.items() if word in before}
        single = degrees[0] if len(degrees) == 1 else None
        leads = single is not None and single.end <= readings[0].ph.start
        at = reading.degrees or (single if (meter or leads) and len(named) <= 1 else None)
        if at is None or at.value is None or not (meter or named):
            continue
        name = _standard(ph, at.nominal, named, meter)
        if name is None:
            continue
        value = standard_ph(name, at.nominal)
        if value is not None and abs(ph.nominal - value) < FAR:
            beside = reading.degrees is not None and at.start >= ph.end
            yield _Told(Stated(passage.sentence.text, ph), at, beside, name, value)


def _standard(ph: Measure, degrees: float, named: set[str], meter: bool) -> str | None:
    """Which standard a value belongs to: by its name, else by the value it is known by."""
    if len(named) == 1:
        (name,) = named
        value = standard_ph(name, 25.0)
        return name if meter or (value is not None and abs(ph.nominal - value) < FAR) else None
    if named:
        return None
    for name in _KNOWN:
        value = standard_ph(name, degrees)
        usual = standard_ph(name, 25.0)
        if value is None or usual is None:
            continue
        if abs(ph.nominal - usual) <= 0.011 or abs(ph.nominal - value) <= 0.011:
            return name
    return None


# --- what the buffers enclose --------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Calibration:
    """All pH values that a document calibrates its meter with."""

    values: tuple[Stated, ...]

    @property
    def low(self) -> float:
        """The lowest of them."""
        return min(s.measure.nominal for s in self.values)

    @property
    def high(self) -> float:
        """The highest of them."""
        return max(s.measure.nominal for s in self.values)


_CALIBRATES = re.compile(
    r"\b(?:calibrat(?:e|ed|ion|ing)|standardi[sz]e (?:the )?(?:ph )?meter|two-point|three-point)\b",
    re.IGNORECASE,
)
_ENCLOSE = re.compile(r"\b(?:bracket|enclos|either side|above and below|span)", re.IGNORECASE)


def calibration(bench: Bench) -> Calibration | None:
    """The calibration buffers of a document, or None where fewer than two are named.

    Every pH of a sentence about calibration counts, and every buffer that is called a standard; a
    text that asks for buffers which enclose the sample is not held to a list.
    """
    found: list[Stated] = []
    told = False
    for block in bench.blocks:
        for sentence in block.sentences:
            chars = sentence.text.chars
            if _ENCLOSE.search(chars) and "pH" in chars:
                return None
            calibrates = bool(_CALIBRATES.search(chars)) and "curve" not in chars
            if not (calibrates or (_METER.search(chars) and "buffer" in chars.lower())):
                continue
            readings = [r for r in readings_of(sentence) if r.ph.value is not None]
            told = told or (calibrates and len(readings) > 1)
            found += [Stated(sentence.text, r.ph) for r in readings]
    return Calibration(tuple(found)) if told and len(found) > 1 else None
