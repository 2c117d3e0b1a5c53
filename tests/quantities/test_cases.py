"""The cases of cases.txt: text in, quantities out."""

from __future__ import annotations

import math
from pathlib import Path

import pytest

from soplint.quantities import Measure, find_measures

_FILE = Path(__file__).with_name("cases.txt")
_MANNERS = {"about", "at-least", "at-most"}
_BASES = {"w/v", "v/v", "w/w", "mol"}


def _cases() -> list[tuple[str, str]]:
    lines = _FILE.read_text(encoding="utf-8").splitlines()
    rows = [line.split(" => ") for line in lines if line.strip() and not line.startswith("#")]
    return [(text, expected) for text, expected in rows]


def test_there_are_enough_cases() -> None:
    assert len(_cases()) >= 200


@pytest.mark.parametrize(("text", "expected"), _cases())
def test_case(text: str, expected: str) -> None:
    found = find_measures(text)
    wanted = [] if expected == "nothing" else expected.split(" ; ")
    assert len(found) == len(wanted), [text[m.start : m.end] for m in found]
    for measure, words in zip(found, wanted, strict=True):
        _compare(measure, words.split())


def _compare(measure: Measure, words: list[str]) -> None:
    value, unit, dimension, *more = words
    assert (measure.unit, measure.dimension) == (unit.replace("_", " ").strip("-"), dimension)
    _compare_value(measure, value)
    flags = [word for word in more if word not in _MANNERS | _BASES and not word.startswith("or=")]
    assert list(measure.flags) == flags
    assert measure.basis == next((word for word in more if word in _BASES), None)
    assert list(measure.alternatives) == [float(word[3:]) for word in more if word[:3] == "or="]
    if ".." not in value and "+-" not in value:
        manner = next((word for word in more if word in _MANNERS), "plain")
        assert measure.manner == manner


def _compare_value(measure: Measure, value: str) -> None:
    if ".." in value:
        assert (measure.value, measure.manner) == (None, "range")
        assert [measure.low, measure.high] == [float(part) for part in value.split("..")]
    elif "+-" in value:
        middle, spread = (float(part) for part in value.split("+-"))
        assert (measure.value, measure.manner) == (middle, "tolerance")
        assert math.isclose(measure.high - middle, spread, rel_tol=1e-9)
        assert math.isclose(middle - measure.low, spread, rel_tol=1e-9)
    elif ":" in value:
        assert measure.parts == tuple(float(part) for part in value.split(":"))
    else:
        assert measure.value is not None
        assert math.isclose(measure.value, float(value), rel_tol=1e-12)
        assert measure.low <= measure.value <= measure.high
