"""The batched kernel: many solutions of the same acid systems at once, in numpy arrays.

Same equations as `balance`; points run along the last axis. A first guess comes from a
coarse grid of pH, then Newton moves pH and ionic strength together. Points that do not
settle are handed to the scalar kernel, so both paths give the same numbers.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from soplint.equilibria.acids import ION_SIZE
from soplint.equilibria.balance import balance
from soplint.equilibria.species import Dissolved, Form, Problem, shape_of

_LN10 = float(np.log(10.0))
_GRID = np.linspace(-1.0, 15.0, 57)
_ROUNDS = 12
_SMALL = 3e-7  # quadratic convergence: after a step this small the error is below 1e-11

Floats = NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class Batch:
    """Problems that share their acid systems and temperature.

    `forms` lists the species of each system; `totals` has one row for each
    system; the rest has one value for each point (mol/kg).
    """

    forms: tuple[tuple[Form, ...], ...]
    totals: Floats
    strong_charge: Floats
    strong_squares: Floats
    slope: float
    pkw: float
    proton_term: Floats
    hydroxide_term: Floats

    def point(self, index: int) -> Problem:
        """One point as a problem of the scalar kernel."""
        systems = tuple(
            Dissolved(float(total), shape_of(forms))
            for forms, total in zip(self.forms, self.totals[:, index], strict=True)
            if total > 0.0
        )
        return Problem(
            systems,
            float(self.strong_charge[index]),
            float(self.strong_squares[index]),
            self.slope,
            self.pkw,
            float(self.proton_term[index]),
            float(self.hydroxide_term[index]),
        )


class _Tables:
    """Numbers of the species as columns, and one matrix that forms all sums over them.

    Rows are the species of the systems, then H+ and OH-. The unknowns are y = ln 10 pH and I,
    so that ln m = j y - power + lift ln 10 D (+ the free monomer of the system).
    """

    def __init__(self, batch: Batch) -> None:
        forms = batch.forms
        flat = [(index, form) for index, group in enumerate(forms) for form in group]
        first = [group[0][2] ** 2 for group in forms]
        self.count, self.species = len(forms), len(flat)
        self.owner = np.array([index for index, _ in flat], dtype=np.intp)
        self.q = np.array([float(form[0]) for _, form in flat])
        self.z = np.array([float(form[2]) for _, form in flat])
        lift = [form[2] ** 2 - form[0] * first[index] for index, form in flat]
        self.j = np.array([[float(form[1])] for _, form in flat] + [[-1.0], [1.0]])
        self.lift = np.array([[float(value)] for value in lift] + [[1.0], [1.0]])
        self.nuclear = [i for i, group in enumerate(forms) if any(f[0] > 1 for f in group)]
        self.member = (self.owner[None, :] == np.arange(self.count)[:, None]).astype(float)
        self.power = self._powers(batch, [form[3] for _, form in flat])
        self.sums = self._matrix()

    def _powers(self, batch: Batch, pks: list[float]) -> Floats:
        """ln 10 times the constants of each species at each point."""
        power = np.empty((self.species + 2, len(batch.strong_charge)))
        power[: self.species] = np.array(pks).reshape(-1, 1)
        power[-2] = batch.proton_term
        power[-1] = batch.pkw + batch.hydroxide_term
        return power * _LN10

    def _matrix(self) -> Floats:
        """Rows: P, N, S; the same by y; by ln 10 D; then for each system six weighted sums."""
        z = np.concatenate([self.z, [1.0, -1.0]])
        charges = np.stack([np.maximum(z, 0.0), np.maximum(-z, 0.0), z * z])
        j, lift = self.j[:, 0], self.lift[:, 0]
        q = np.concatenate([self.q, [0.0, 0.0]])
        member = np.concatenate([self.member, np.zeros((self.count, 2))], axis=1)
        own = [member * (row * q) for row in charges]
        means = [member * (q * j), member * (q * lift), member * (q * q)]
        return np.concatenate([charges, charges * j, charges * lift, *own, *means])


def _scale(tables: _Tables, m: Floats, totals: Floats) -> None:
    """Turns weights into molalities, in place; clusters need the root of their free monomer."""
    weights = m[: tables.species]
    if not tables.nuclear:
        weights *= (totals / (tables.member @ weights))[tables.owner]
        return
    b = totals / (tables.member @ weights)
    for index in tables.nuclear:
        rows = tables.owner == index
        b[index] = _free_monomer(tables.q[rows], weights[rows], totals[index])
    weights *= b[tables.owner] ** tables.q[:, None]


def _free_monomer(q: Floats, w: Floats, total: Floats) -> Floats:
    """Positive root of sum q w b^q = total, q up to 3, by Newton from above."""
    one, two, three = (float(k) * w[q == float(k)].sum(axis=0) for k in (1, 2, 3))
    b: Floats = total / one
    for k, factor in ((2, two), (3, three)):
        b = np.fmin(b, (total / factor) ** (1.0 / k))
    for _ in range(60):
        slope = (3.0 * three * b + 2.0 * two) * b + one
        step = (((three * b + two) * b + one) * b - total) / slope
        b = b - step
        if np.all(np.abs(step) <= 1e-9 * b):
            break
    return b


def _guess(batch: Batch, tables: _Tables) -> tuple[Floats, Floats]:
    """pH where the charge changes sign on the coarse grid, and a first ionic strength."""
    rough = 0.5 * float(np.median(batch.strong_squares + np.abs(batch.strong_charge)))
    root = np.sqrt(rough)
    d = batch.slope * root / (1.0 + ION_SIZE * root)
    single = np.flatnonzero(tables.q == 1.0)
    power = tables.power[single, :1] - _LN10 * d * tables.lift[single]
    weights = np.exp(tables.j[single] * (_LN10 * _GRID) - power)
    member, z = tables.member[:, single], tables.z[single, None]
    whole = member @ weights
    mean = (member @ (weights * z)) / whole
    water = 10.0 ** (d - _GRID) - 10.0 ** (_GRID - batch.pkw + d)
    charge = batch.totals.T @ mean
    charge += water
    charge += batch.strong_charge[:, None]
    last = np.minimum(np.maximum((charge > 0.0).sum(axis=1), 1), len(_GRID) - 1)
    points = np.arange(len(last))
    above = np.arcsinh(charge[points, last - 1] * 1e7)
    below = np.arcsinh(charge[points, last] * 1e7)
    part = above / (above - below)
    x: Floats = _GRID[last - 1] + np.fmin(np.fmax(part, 0.0), 1.0) * (_GRID[1] - _GRID[0])
    squares = (member @ (weights * (z * z))) / whole
    ions = np.exp(_LN10 * (d - x)) + np.exp(_LN10 * (x - batch.pkw + d))
    weak = (batch.totals * squares[:, last]).sum(axis=0)
    return x, 0.5 * (batch.strong_squares + ions + weak)


def _newton_step(
    batch: Batch, tables: _Tables, base: Floats, y: Floats, strength: Floats
) -> tuple[Floats, Floats]:
    """Steps of y and of ionic strength at every point; `base` holds P, N and S of strong ions."""
    root = np.sqrt(strength)
    bottom = 1.0 + ION_SIZE * root
    slope = _LN10 * batch.slope
    m: Floats = np.exp(tables.j * y + tables.lift * (slope * root / bottom) - tables.power)
    if tables.count:
        _scale(tables, m, batch.totals)
    total = tables.sums @ m
    by = total[3:9].reshape(2, 3, -1)
    if tables.count:
        own = total[9:].reshape(6, tables.count, -1)
        means = own[3:5] / np.maximum(own[5], 1e-300)
        by = by - (own[None, :3] * means[:, None]).sum(axis=2)
    charge = total[:3] + base
    f = np.log(charge[0] / charge[1])
    r = 0.5 * charge[2] - strength
    move = 0.5 * slope / (root * bottom * bottom)
    by_y, by_d = by
    fy = by_y[0] / charge[0] - by_y[1] / charge[1]
    fi = move * (by_d[0] / charge[0] - by_d[1] / charge[1])
    ry = 0.5 * by_y[2]
    ri = 0.5 * move * by_d[2] - 1.0
    determinant = fy * ri - fi * ry
    return (r * fi - f * ri) / determinant, (f * ry - r * fy) / determinant


def balance_batch(batch: Batch) -> tuple[Floats, Floats]:
    """Closes the charge balance of every point.

    Parameters: batch, in mol/kg water.
    Returns: pH and ionic strength [mol/kg] of each point.
    Validity and reference: as for `balance.balance`, with which it agrees to 1e-8.
    Errors: NotConvergedError, from the scalar kernel.

    >>> none = np.zeros(2)
    >>> batch = Batch((), np.zeros((0, 2)), none, none, 0.51, 14.0, none, none)
    >>> balance_batch(batch)[0].round(6).tolist()
    [7.0, 7.0]
    """
    tables = _Tables(batch)
    charge = batch.strong_charge
    base = np.stack([np.maximum(charge, 0.0), np.maximum(-charge, 0.0), batch.strong_squares])
    with np.errstate(all="ignore"):
        x, strength = _guess(batch, tables)
        y = _LN10 * x
        settled = np.zeros(len(y), dtype=bool)
        for _ in range(_ROUNDS):
            dy, di = _newton_step(batch, tables, base, y, strength)
            settled = (np.abs(dy) < _SMALL) & (np.abs(di) <= _SMALL * strength)
            y = y + np.minimum(np.maximum(dy, -2.5), 2.5)
            strength = np.maximum(strength + di, 0.2 * strength)
            if settled.all():
                break
    x = y / _LN10
    for index in np.flatnonzero(~settled):
        root = balance(batch.point(int(index)))
        x[index], strength[index] = root.ph, root.ionic_strength
    return x, strength
