"""Sums of charge at one point (pH, D) and their derivatives: the innermost loop of the kernel."""

from __future__ import annotations

from math import exp
from typing import NamedTuple

from soplint.equilibria.species import LN10, Form, Problem, Shape, cubic_root, damping


class Sums(NamedTuple):
    """P, N, S = sum of z² m [mol/kg], and d/dlg of each by pH (x) and by D (d)."""

    p: float
    n: float
    s: float
    px: float
    nx: float
    sx: float
    pd: float
    nd: float
    sd: float


def charge_sums(problem: Problem, x: float, d: float) -> Sums:
    """Charge sums at a pH and a Debye-Hückel term D.

    >>> pure = Problem((), 0.0, 0.0, 0.51, 14.0, 0.0, 0.0)
    >>> round(charge_sums(pure, 7.0, 0.0).p * 1e7, 6)
    1.0
    """
    return Sums(*plain_sums(problem, x, d))


def plain_sums(problem: Problem, x: float, d: float) -> tuple[float, ...]:
    """The nine numbers of `Sums` without their names, for the solver.

    With the moments m_k of the number of protons lost, a system of total T whose first form
    has the charge z0 has the mean charge T (z0 - m1) and the mean square of charge
    T (z0² - 2 z0 m1 + m2); the derivatives are covariances of the same moments.

    >>> len(plain_sums(Problem((), 0.0, 0.0, 0.51, 14.0, 0.0, 0.0), 7.0, 0.0))
    9
    """
    y, e = LN10 * x, LN10 * d
    h = exp(e - y - LN10 * problem.proton_term)
    oh = exp(y + e - LN10 * (problem.pkw + problem.hydroxide_term))
    p, n, s = h, oh, h + oh + problem.strong_squares
    px, nx, sx, pd, nd, sd = -h, oh, oh - h, h, oh, h + oh
    if problem.strong_charge > 0.0:
        p += problem.strong_charge
    else:
        n -= problem.strong_charge
    for dissolved in problem.systems:
        shape, total = dissolved.shape, dissolved.total
        if shape.kind == "mixed":
            part = (_clusters if shape.nuclear else _both_signs)(total, shape, y, e)
            p, px, pd = p + part[0], px + part[1], pd + part[2]
            n, nx, nd = n + part[3], nx + part[4], nd + part[5]
            s, sx, sd = s + part[6], sx + part[7], sd + part[8]
            continue
        z0 = shape.charge
        m1, m2, m3, m4 = _moments(shape.powers, y, e, z0)
        variance, third = m2 - m1 * m1, m3 - m1 * m2
        z, zx = total * (z0 - m1), -total * variance
        zd = total * (2.0 * z0 * variance - third)
        s += total * (z0 * z0 - 2.0 * z0 * m1 + m2)
        sx -= zd
        sd += total * (4.0 * z0 * (z0 * variance - third) + m4 - m2 * m2)
        if shape.kind == "cations":
            p, px, pd = p + z, px + zx, pd + zd
        else:
            n, nx, nd = n - z, nx - zx, nd - zd
    for anchor, forms in problem.fixed:
        part = _held(anchor, forms, x, d)
        p, px, pd = p + part[0], px + part[1], pd + part[2]
        n, nx, nd = n + part[3], nx + part[4], nd + part[5]
        s, sx, sd = s + part[6], sx + part[7], sd + part[8]
    return p, n, s, px, nx, sx, pd, nd, sd


def _moments(
    powers: tuple[float, ...], y: float, e: float, z0: int
) -> tuple[float, float, float, float]:
    """First four moments of the number of protons lost, for pH = y/ln 10 and D = e/ln 10."""
    w = exp(y - powers[0] + e * (1 - 2 * z0))
    whole = 1.0 + w
    if len(powers) == 1:
        w /= whole
        return w, w, w, w
    m1 = m2 = m3 = m4 = w
    j = 1
    for power in powers[1:]:
        j += 1
        w = exp(j * y - power + e * (j * (j - 2 * z0)))
        whole += w
        w *= j
        m1 += w
        w *= j
        m2 += w
        w *= j
        m3 += w
        m4 += w * j
    return m1 / whole, m2 / whole, m3 / whole, m4 / whole


def _both_signs(total: float, shape: Shape, y: float, e: float) -> tuple[float, ...]:
    """The nine sums of a system with forms of both signs, form by form."""
    whole = lost = lifted = 0.0
    p = pj = pl = n = nj = nl = s = sj = sl = 0.0
    for j, power, lift, z, _ in shape.rows:
        w = exp(j * y - power + e * lift)
        whole += w
        lost += j * w
        lifted += lift * w
        if z > 0:
            c = w * z
            p += c
            pj += c * j
            pl += c * lift
        elif z < 0:
            c = -w * z
            n += c
            nj += c * j
            nl += c * lift
        else:
            continue
        c = w * z * z
        s += c
        sj += c * j
        sl += c * lift
    lost /= whole
    lifted /= whole
    unit = total / whole
    return (
        unit * p,
        unit * (pj - p * lost),
        unit * (pl - p * lifted),
        unit * n,
        unit * (nj - n * lost),
        unit * (nl - n * lifted),
        unit * s,
        unit * (sj - s * lost),
        unit * (sl - s * lifted),
    )


def _clusters(total: float, shape: Shape, y: float, e: float) -> tuple[float, ...]:
    """The nine sums of a system with clusters, none of whose forms is a cation."""
    weights = [exp(j * y - power + e * lift) for j, power, lift, _, _ in shape.rows]
    parts = [0.0, 0.0, 0.0, 0.0]
    for w, row in zip(weights, shape.rows, strict=True):
        parts[row[4]] += w
    b = cubic_root(total, parts[1], 2.0 * parts[2], 3.0 * parts[3])
    powers = (1.0, b, b * b, b * b * b)
    whole = lost = lifted = 0.0
    n = nq = nj = nl = s = sq = sj = sl = 0.0
    for w, (j, _, lift, z, q) in zip(weights, shape.rows, strict=True):
        c = powers[q] * w * q
        whole += q * c
        lost += j * c
        lifted += lift * c
        if z:
            c *= -z / q
            n += c
            nq += c * q
            nj += c * j
            nl += c * lift
            c *= -z
            s += c
            sq += c * q
            sj += c * j
            sl += c * lift
    lost /= whole
    lifted /= whole
    return (
        0.0,
        0.0,
        0.0,
        n,
        nj - nq * lost,
        nl - nq * lifted,
        s,
        sj - sq * lost,
        sl - sq * lifted,
    )


def _held(anchor: float, forms: tuple[Form, ...], x: float, d: float) -> tuple[float, ...]:
    """The same for a system whose first form is held at a molality by a gas."""
    first = forms[0][2] ** 2
    out = [0.0] * 9
    for q, j, z, pk in forms:
        lift = z * z - q * first
        m = anchor**q * 10.0 ** (j * x - pk + d * lift)
        for place, factor in ((0, max(z, 0)), (3, max(-z, 0)), (6, z * z)):
            out[place] += factor * m
            out[place + 1] += factor * m * j
            out[place + 2] += factor * m * lift
    return tuple(out)


def slopes(problem: Problem, ph: float, strength: float) -> Sums:
    """Charge sums at a pH and an ionic strength [mol/kg], for capacities and sensitivities.

    >>> pure = Problem((), 0.0, 0.0, 0.51, 14.0, 0.0, 0.0)
    >>> round(slopes(pure, 7.0, 0.0).n * 1e7, 6)
    1.0
    """
    return charge_sums(problem, ph, damping(problem.slope, strength))
