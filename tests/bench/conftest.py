"""Carries procedures out and looks up what became of one quantity."""

from __future__ import annotations

import pytest

from soplint.bench import carry_out
from soplint.intake import read_bytes
from soplint.notation.document import read_document


@pytest.fixture(scope="session")
def bench():
    """``bench(text)``: the bench after a procedure was carried out."""

    def of(text, name="procedure.md"):
        return carry_out(read_document(read_bytes(text.encode("utf-8"), name)))

    return of


@pytest.fixture(scope="session")
def volume_of():
    """``volume_of(bench, amount)``: (mL, provenance) of the preparation that takes the amount."""

    def of(carried, amount):
        found = [
            preparation
            for preparation in carried.preparations
            for taken in preparation.taken
            if taken.text.chars[taken.dose.amount.start : taken.dose.amount.end] == amount
        ]
        assert len(found) == 1, (amount, [p.name for p in found])
        volume = found[0].volume
        return None if volume is None else (round(volume.litres * 1000, 6), volume.provenance)

    return of
