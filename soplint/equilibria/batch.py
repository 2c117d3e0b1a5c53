"""The batched kernel: many solutions of the same acid systems at once, in numpy arrays.

Same equations as `balance`; points run along the last axis. A first guess comes from a
coarse grid of pH, then Newton moves pH and ionic strength together. Points that do not
settle are handed to the scalar kernel, so both paths give the same numbers.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from soplint.equilibria.acids import ION_SIZE
from soplint.equilibria.balance import Dissolved, Form, Problem, balance

_LN10 = float(np.log(10.0))
_GRID = np.linspace(-1.0, 15.0, 65)
_ROUNDS = 12

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
            Dissolved(float(total), forms, any(form[0] > 1 for form in forms))
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
    """Numbers of the species as columns, and the matrix that forms all sums over them."""

    def __init__(self, forms: Sequence[tuple[Form, ...]]) -> None:
        flat = [(index, form) for index, group in enumerate(forms) for form in group]
        first = [group[0][2] ** 2 for group in forms]
        self.owner = np.array([index for index, _ in flat], dtype=np.intp)
        self.q = np.array([[float(form[0])] for _, form in flat]).reshape(-1, 1)
        self.j = np.array([[float(form[1])] for _, form in flat]).reshape(-1, 1)
        z = np.array([float(form[2]) for _, form in flat])
        self.z = z
        self.pk = np.array([[form[3]] for _, form in flat]).reshape(-1, 1)
        squares = z**2
        self.lift = (squares - self.q[:, 0] * [first[i] for i, _ in flat]).reshape(-1, 1)
        self.nuclear = [i for i, group in enumerate(forms) if any(f[0] > 1 for f in group)]
        member = (self.owner[None, :] == np.arange(len(forms))[:, None]).astype(float)
        self.member = member
        charges = np.stack([np.maximum(z, 0.0), np.maximum(-z, 0.0), squares])
        j, lift, q = self.j[:, 0], self.lift[:, 0], self.q[:, 0]
        self.sums = np.concatenate([charges, charges * j, charges * lift])
        per_system = [member * (row * q) for row in charges]
        averages = [member * (q * j), member * (q * lift), member * (q * q)]
        self.per_system = np.concatenate(per_system + averages)
        self.count = len(forms)


def _free_monomers(tables: _Tables, weights: Floats, totals: Floats) -> Floats:
    """Molality of the first form of each system at each point."""
    whole = tables.member @ (weights * tables.q)
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        b: Floats = totals / whole
        for index in tables.nuclear:
            rows = tables.owner == index
            b[index] = _roots(tables.q[rows], weights[rows], totals[index])
    return b


def _roots(q: Floats, w: Floats, total: Floats) -> Floats:
    """Positive root of sum q w b^q = total, by Newton from above."""
    b: Floats = np.min((total / (q * w)) ** (1.0 / q), axis=0)
    for _ in range(60):
        terms = q * w * b ** (q - 1.0)
        step = ((terms * b).sum(axis=0) - total) / (q * terms).sum(axis=0)
        step = np.where(np.isfinite(step), step, 0.0)
        b = b - step
        if np.all(np.abs(step) <= 1e-15 * b):
            break
    return b


def _guess(batch: Batch, tables: _Tables) -> tuple[Floats, Floats]:
    """pH where the charge changes sign on the coarse grid, and a first ionic strength."""
    strength = np.maximum(0.5 * (batch.strong_squares + np.abs(batch.strong_charge)), 1e-7)
    root = float(np.sqrt(np.median(strength)))
    d = batch.slope * root / (1.0 + ION_SIZE * root)
    single = tables.q[:, 0] == 1.0
    power = tables.j[single] * _GRID - tables.pk[single] + d * tables.lift[single]
    weights = np.exp(_LN10 * power)
    member = tables.member[:, single]
    mean = (member @ (weights * tables.z[single, None])) / (member @ weights)
    water = 10.0 ** (d - _GRID) - 10.0 ** (_GRID - batch.pkw + d)
    charge = batch.strong_charge[:, None] + water + batch.totals.T @ mean
    last = np.clip((charge > 0.0).sum(axis=1), 1, len(_GRID) - 1)
    points = np.arange(len(charge))
    above = np.arcsinh(charge[points, last - 1] * 1e7)
    below = np.arcsinh(charge[points, last] * 1e7)
    with np.errstate(divide="ignore", invalid="ignore"):
        part = np.clip(np.nan_to_num(above / (above - below), nan=0.5), 0.0, 1.0)
    x: Floats = _GRID[last - 1] + part * (_GRID[1] - _GRID[0])
    squares = (member @ (weights * tables.z[single, None] ** 2)) / (member @ weights)
    ions = np.exp(_LN10 * (d - x)) + np.exp(_LN10 * (x - batch.pkw + d))
    weak = (batch.totals * squares[:, last]).sum(axis=0)
    return x, 0.5 * (batch.strong_squares + ions + weak)


def _newton_step(
    batch: Batch, tables: _Tables, x: Floats, strength: Floats
) -> tuple[Floats, Floats]:
    """Steps of pH and ionic strength at every point."""
    root = np.sqrt(strength)
    bottom = 1.0 + ION_SIZE * root
    d = batch.slope * root / bottom
    h = np.exp(_LN10 * (d - x - batch.proton_term))
    oh = np.exp(_LN10 * (x - batch.pkw + d - batch.hydroxide_term))
    p = h + np.maximum(batch.strong_charge, 0.0)
    n = oh + np.maximum(-batch.strong_charge, 0.0)
    s = h + oh + batch.strong_squares
    px, nx, sx, pd, nd, sd = -h, oh, oh - h, h, oh, h + oh
    if tables.count:
        w = np.exp(_LN10 * (tables.j * x - tables.pk + d * tables.lift))
        b = _free_monomers(tables, w, batch.totals)[tables.owner]
        m = w * (b if not tables.nuclear else b**tables.q)
        total = tables.sums @ m
        own = (tables.per_system @ m).reshape(6, tables.count, -1)
        whole = np.maximum(own[5], 1e-300)
        lost, lift = own[3] / whole, own[4] / whole
        by_x = total[3:6] - (own[:3] * lost).sum(axis=1)
        by_d = total[6:9] - (own[:3] * lift).sum(axis=1)
        p, n, s = p + total[0], n + total[1], s + total[2]
        px, nx, sx = px + by_x[0], nx + by_x[1], sx + by_x[2]
        pd, nd, sd = pd + by_d[0], nd + by_d[1], sd + by_d[2]
    f = np.log(p / n)
    r = 0.5 * s - strength
    move = 0.5 * batch.slope / (root * bottom * bottom) * _LN10
    fx = _LN10 * (px / p - nx / n)
    fi = move * (pd / p - nd / n)
    rx = 0.5 * _LN10 * sx
    ri = 0.5 * move * sd - 1.0
    determinant = fx * ri - fi * rx
    dx: Floats = (r * fi - f * ri) / determinant
    di: Floats = (f * rx - r * fx) / determinant
    return dx, di


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
    tables = _Tables(batch.forms)
    x, strength = _guess(batch, tables)
    settled = np.zeros(len(x), dtype=bool)
    with np.errstate(all="ignore"):
        for _ in range(_ROUNDS):
            dx, di = _newton_step(batch, tables, x, strength)
            settled = (np.abs(dx) < 1e-10) & (np.abs(di) <= 1e-10 * strength)
            x = x + np.clip(dx, -1.0, 1.0)
            strength = np.maximum(strength + di, 0.2 * strength)
            if settled.all():
                break
    for index in np.flatnonzero(~settled):
        root = balance(batch.point(int(index)))
        x[index], strength[index] = root.ph, root.ionic_strength
    return x, strength
