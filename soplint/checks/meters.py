"""pH meters: buffers that enclose the sample, stand near enough, and have the value of their temperature."""

from __future__ import annotations

from collections.abc import Iterator

from soplint.bench import Bench, Stated
from soplint.bench.meter_buffers import Calibration, calibration
from soplint.bench.numbers import shown
from soplint.checks.registry import Judgement, rule
from soplint.checks.telling import about_ph
from soplint.findings.model import Finding, Related

_EDGE = 0.3  # outside the outermost buffer by less: nothing is lost
_FAR = 0.3
_LOW, _HIGH = 4.01, 10.05  # beyond these a second buffer is seldom at hand
_SPAN = 4.0


@rule("measurement.calibration-encloses-ph")
def calibration_encloses_ph(bench: Bench) -> Iterator[Judgement]:
    """The pH to be measured lies between the buffers that the meter is calibrated with."""
    found = calibration(bench)
    if found is None:
        return
    for stated in _measured(bench):
        ph = stated.measure.nominal
        below, above = found.low - ph, ph - found.high
        if max(below, above) <= _EDGE or any(stated.key == s.key for s in found.values):
            continue
        usual = _LOW <= ph <= _HIGH and max(below, above) > _FAR
        grade = "major" if usual else "remark"
        yield _outside(found, stated, grade)
        return  # one calibration, one finding


def _measured(bench: Bench) -> Iterator[Stated]:
    """pH values that are set or checked with the meter."""
    for preparation in bench.preparations:
        for adjusted in preparation.adjusted:
            ph = adjusted.set_ph.ph
            if ph is not None and ph.value is not None and "paper" not in adjusted.text.chars:
                yield Stated(adjusted.text, ph)


def _outside(found: Calibration, stated: Stated, grade: str) -> Judgement:
    values = ", ".join(f"{v:g}" for v in sorted({s.measure.nominal for s in found.values}))
    edge = max(found.values, key=lambda s: s.measure.nominal)
    if stated.measure.nominal < found.low:
        edge = min(found.values, key=lambda s: s.measure.nominal)
    finding = Finding(
        rule="measurement.calibration-encloses-ph",
        severity=grade,
        span=edge.span,
        text=shown(edge.measure),
        message=(
            f"pH {stated.measure.nominal:g} is measured, but the calibration buffers are {values}"
        ),
        stated=shown(edge.measure),
        working=f"{found.low:g} ≤ {stated.measure.nominal:g} ≤ {found.high:g} does not hold",
        related=(Related(stated.span, shown(stated.measure), "measured with this calibration"),),
    )
    return Judgement(finding)


@rule("measurement.calibration-buffers-near")
def calibration_buffers_near(bench: Bench) -> Iterator[Judgement]:
    """Two calibration buffers lie no more than four units apart."""
    found = calibration(bench)
    if found is None:
        return
    distinct = sorted({round(s.measure.nominal, 1) for s in found.values})
    if len(distinct) != 2 or distinct[1] - distinct[0] <= _SPAN:
        return
    last = max(found.values, key=lambda s: s.measure.nominal)
    finding = Finding(
        rule="measurement.calibration-buffers-near", severity="minor", span=last.span,
        text=shown(last.measure),
        message=(
            f"calibration buffers pH {found.low:g} and {found.high:g} lie"
            f" {found.high - found.low:.1f} units apart; a third one between them checks the slope"
        ),
        stated=shown(last.measure),
        working=f"|{found.high:g} − {found.low:g}| = {found.high - found.low:.2f} > {_SPAN:g}",
    )  # fmt: skip
    yield Judgement(finding)


@rule("measurement.ph-buffer-value-at-temperature")
def ph_buffer_value_at_temperature(bench: Bench) -> Iterator[Judgement]:
    """A standard buffer has the pH that the tables give at its temperature."""
    for relation in bench.relations:
        if relation.kind == "ph-standard" and not relation.agrees:
            value = relation.computed.value
            assert value is not None
            grade = "major" if abs(relation.deviation) > 0.045 else "minor"
            message = (
                f"{relation.of}: pH {relation.tested.measure.nominal:g} stated,"
                f" pH {value:.2f} at this temperature"
            )
            name = "measurement.ph-buffer-value-at-temperature"
            yield about_ph(bench, relation, name, grade, message)
