"""The published tables, read once, and how a row of them is computed."""

from __future__ import annotations

import csv
from dataclasses import dataclass
from math import sqrt
from pathlib import Path

import pytest

DATA = Path(__file__).parent / "data"
SCALE_OFFSET = 0.04  # pH, Sørensen scale below the present one (pH_scale of the table)


@dataclass(frozen=True)
class Published:
    """One published pH with what the solver gives, brought to the scale of the table."""

    group: str
    kind: str
    composition: dict[str, float]
    temperature: float
    expected: float
    computed: float
    old_scale: bool
    gate: bool
    source: str
    status: str
    note: str

    @property
    def error(self) -> float:
        return self.computed - self.expected


def rms(rows: list[Published]) -> float:
    assert rows, "no rows to judge"
    return sqrt(sum(row.error**2 for row in rows) / len(rows))


def _molar_mass(formula: str) -> float:
    from molmass import Formula

    anhydrous, *water = formula.split(".")
    mass = Formula(anhydrous).mass
    for piece in water:
        mass += int(piece[: -len("H2O")] or 1) * Formula("H2O").mass
    return float(mass)


def _row(raw: dict[str, str]) -> Published:
    from soplint.equilibria import solve

    amounts = {}
    for piece in raw["composition"].split(";"):
        formula, _, amount = piece.rpartition(" ")
        amounts[formula] = float(amount)
        if raw["unit"] == "g/L":
            amounts[formula] /= _molar_mass(formula)
    basis = "mol/kg" if raw["unit"] == "mol/kg" else "mol/L"
    old = raw["pH_scale"].startswith("Sorensen")
    computed = solve(amounts, float(raw["temperature"]), basis).pH - SCALE_OFFSET * old
    return Published(
        raw["group"],
        raw["kind"],
        amounts,
        float(raw["temperature"]),
        float(raw["expected"]),
        computed,
        old,
        raw["gate"] == "yes",
        raw["source"],
        raw["status"],
        raw["note"],
    )


@pytest.fixture(scope="session")
def published() -> list[Published]:
    with (DATA / "published_ph.csv").open(encoding="utf-8", newline="") as file:
        rows = [_row(raw) for raw in csv.DictReader(file)]
    assert len(rows) > 400
    return rows


@pytest.fixture(scope="session")
def table_of():
    """Rows of one of the data files beside the tests."""

    def read(name: str) -> list[dict[str, str]]:
        with (DATA / name).open(encoding="utf-8", newline="") as file:
            return list(csv.DictReader(file))

    return read


@pytest.fixture(scope="session")
def root_mean_square():
    return rms
