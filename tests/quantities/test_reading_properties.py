"""Whatever the line, reading it ends, in order and within bounds; what is written is read back."""

from __future__ import annotations

import math
import time

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from soplint.quantities import Measure, NumberStyle, find_measures, format_like, unit_table
from soplint.quantities import scan as scan_module

_PIECES = st.sampled_from(
    "1 10 0.5 .5 5. 1,250 12,5 1/5 1/2 ½ 1½ 10^-3 2e7 1E-3 5-10 2:3 1:10:5 2026-03-02 10:30 7647-14-5 "
    "two half ten tenfold a of an in to and per x X × ± +/- - – ~ about < > ≥ ( ) , ; . / : + = ^ % ‰ "
    "mL ml m1 µL g mg kg M mM mol/L mol L-1 dm-3 N N/50 pH pH8 MW Mw d = °C C oC K F rpm rcf g/mL "
    "H2O 5H2O CuSO4·5H2O QX1145 K-1190 w/v (v/v) wt% per cent vol volumes fold times drops U/mL $ € "
    "step table lot no. at least not more than between from dilute wash spin мл г М 10⁵ 10⁻³ e5".split(
        " "
    )
)
_LINES = st.lists(st.tuples(_PIECES, st.sampled_from(("", " ", "  "))), max_size=14).map(
    lambda pairs: "".join(piece + gap for piece, gap in pairs)
)
_STYLES = st.sampled_from((NumberStyle(), NumberStyle(3), NumberStyle(0, 2), NumberStyle(1, 0, 4)))


def _check(line: str, measures: list[Measure]) -> None:
    end = 0
    for measure in measures:
        assert end <= measure.start < measure.end <= len(line)
        end = measure.end
        assert measure.start <= measure.numeral[0] < measure.numeral[1] <= measure.end
        assert math.isfinite(measure.low) and math.isfinite(measure.high)
        assert measure.low <= measure.high
        assert math.isfinite(measure.nominal) and math.isfinite(measure.base)
        assert measure.digits >= 1 and measure.factor > 0
        if measure.value is None:
            assert measure.manner == "range" or len(measure.parts) > 1


@settings(max_examples=600, deadline=None)
@given(_LINES, _STYLES)
def test_lines_of_recipe_pieces(line: str, style: NumberStyle) -> None:
    _check(line, find_measures(line, style))


@pytest.mark.parametrize("line", [".½", "1½,.½М", "½ N/50", "5.½ mL"])
def test_lines_that_once_led_back(line: str) -> None:
    _check(line, find_measures(line))


@settings(max_examples=300, deadline=None)
@given(st.text(max_size=60))
def test_any_text(line: str) -> None:
    _check(line, find_measures(line))


@settings(max_examples=400, deadline=None)
@given(_LINES)
def test_the_short_way_reads_what_the_long_way_reads(line: str) -> None:
    short = find_measures(line)
    kept = scan_module.quick_measure
    try:
        scan_module.quick_measure = lambda chars, at: None
        assert find_measures(line) == short
    finally:
        scan_module.quick_measure = kept


_UNITS = sorted(
    {
        unit.symbol
        for unit in unit_table().values()
        if unit.dimension in ("mass", "volume", "molarity")
    }
)


@settings(max_examples=300, deadline=None)
@given(st.integers(1, 999_999), st.integers(0, 5), st.sampled_from([*_UNITS, "%", "X", "pH", "°C"]))
def test_what_is_written_is_read_back(whole: int, places: int, unit: str) -> None:
    value = whole / 10**places
    model = Measure(
        0, 1, "", value, value, value, unit, 1.0, places + 1, numeral=(0, 1), places=places
    )
    text = format_like(value, model)
    (read,) = find_measures(text)
    assert read.value is not None and math.isclose(read.value, value, rel_tol=1e-12)
    assert (read.unit, text[read.start : read.end]) == (unit, text)


@pytest.mark.parametrize(
    "piece",
    "1 |1:|1,|5-|1.|1/|pH |pH 7, |N/50|(|±|1 ± |x 10^|10^|9|1 000 |two |half a |~|about |5 mL - |½|< |-1 |1 to |m1"
    .split("|"),
)  # fmt: skip
def test_long_lines_take_time_in_proportion(piece: str) -> None:
    def seconds(repeats: int) -> float:
        line = piece * repeats
        started = time.process_time()
        find_measures(line)
        return time.process_time() - started

    seconds(10)
    short, long = min(seconds(2_000) for _ in range(3)), min(seconds(16_000) for _ in range(2))
    assert long < 0.02 + 30 * short
