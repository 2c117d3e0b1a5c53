"""The scalar kernel: charge balance and ionic strength of one solution, in plain floats.

Unknowns are x = pH (activity) and the ionic strength I. With P and N the
concentrations of positive and negative charge, the residual is

    f(x, I) = ln(P/N) = 2 asinh((P - N) / (2 sqrt(P N))),

nearly straight in x over the whole range, which Newton's method likes. Each
evaluation also returns the derivatives, so that I moves in the same iteration.

Activity: lg(gamma_i) = -z_i² D + b_i, D = A sqrt(I) / (1 + 1.5 sqrt(I)), where b_i
collects specific interactions with strong ions and is constant in a solution.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import log, sqrt

from soplint.equilibria.acids import ION_SIZE
from soplint.equilibria.errors import NotConvergedError

_LN10 = log(10.0)
_LOWEST, _HIGHEST = -6.0, 21.0

Form = tuple[int, int, int, float]
"""(monomers, protons lost, charge, pK with specific interactions) of one species."""


@dataclass(frozen=True, slots=True)
class Dissolved:
    """One acid system in a solution.

    `total` in mol/kg of monomer; `forms` lists the species, the fully
    protonated monomer first; `nuclear` tells that clusters are among them.
    """

    total: float
    forms: tuple[Form, ...]
    nuclear: bool


@dataclass(frozen=True, slots=True)
class Problem:
    """All the kernel needs: systems, strong ions as two sums, solvent constants."""

    systems: tuple[Dissolved, ...]
    strong_charge: float  # sum of z m over the strong ions, mol/kg
    strong_squares: float  # sum of z² m over the strong ions, mol/kg
    slope: float  # Debye-Hückel A
    pkw: float
    proton_term: float  # b of H+
    hydroxide_term: float  # b of OH-
    fixed: tuple[tuple[float, tuple[Form, ...]], ...] = ()
    """Systems open to a gas: (molality of the first form, forms)."""


@dataclass(frozen=True, slots=True)
class Root:
    """A closed charge balance."""

    ph: float
    ionic_strength: float
    iterations: int
    residual: float  # |P - N| / max(P, N)


def free_monomer(total: float, weights: Sequence[tuple[int, float]]) -> float:
    """Molality b of the first form from total = sum of q w b^q, by Newton from above.

    Parameters: total [mol/kg]; weights, pairs (monomers q, at most 3; w, the
    molality of the species at b = 1).
    Returns: b [mol/kg].

    >>> free_monomer(2.0, [(1, 1.0), (2, 0.5)])
    1.0
    """
    one = two = three = 0.0
    for q, w in weights:
        if q == 1:
            one += w
        elif q == 2:
            two += 2.0 * w
        else:
            three += 3.0 * w
    b = total / one
    if two > 0.0:
        b = min(b, sqrt(total / two))
    if three > 0.0:
        b = min(b, (total / three) ** (1.0 / 3.0))
    for _ in range(100):
        step = (((three * b + two) * b + one) * b - total) / (
            (3.0 * three * b + 2.0 * two) * b + one
        )
        b -= step
        if abs(step) <= 1e-15 * b:
            break
    return float(b)


class Sums:
    """P, N, S = sum z² m and their derivatives by x and by D at one point (x, I)."""

    __slots__ = ("p", "n", "s", "px", "nx", "sx", "pd", "nd", "sd")

    def __init__(self, problem: Problem, x: float, d: float) -> None:
        h = 10.0 ** (d - x - problem.proton_term)
        oh = 10.0 ** (x - problem.pkw + d - problem.hydroxide_term)
        charge = problem.strong_charge
        self.p = h + charge if charge > 0.0 else h
        self.n = oh - charge if charge < 0.0 else oh
        self.s = h + oh + problem.strong_squares
        self.px, self.nx, self.sx = -h, oh, oh - h
        self.pd, self.nd, self.sd = h, oh, h + oh
        for dissolved in problem.systems:
            if dissolved.nuclear:
                self._add_nuclear(dissolved, x, d)
            else:
                self._add(dissolved, x, d)
        for anchor, forms in problem.fixed:
            self._add_fixed(anchor, forms, x, d)

    def _add(self, dissolved: Dissolved, x: float, d: float) -> None:
        """A mononuclear system: fractions from one partition sum."""
        whole = lost = squares = 0.0
        p = n = s = 0.0
        px = nx = sx = pd = nd = sd = 0.0
        first = dissolved.forms[0][2] ** 2
        for _, j, z, pk in dissolved.forms:
            z2 = z * z
            w = 10.0 ** (j * x - pk + d * (z2 - first))
            whole += w
            lost += w * j
            squares += w * z2
            if z > 0:
                c = w * z
                p += c
                px += c * j
                pd += c * z2
            else:
                c = -w * z
                n += c
                nx += c * j
                nd += c * z2
            c = w * z2
            s += c
            sx += c * j
            sd += c * z2
        unit = dissolved.total / whole
        lost /= whole
        squares /= whole
        self.p += unit * p
        self.n += unit * n
        self.s += unit * s
        self.px += unit * (px - p * lost)
        self.nx += unit * (nx - n * lost)
        self.sx += unit * (sx - s * lost)
        self.pd += unit * (pd - p * squares)
        self.nd += unit * (nd - n * squares)
        self.sd += unit * (sd - s * squares)

    def _add_nuclear(self, dissolved: Dissolved, x: float, d: float) -> None:
        """A system with clusters: the free monomer is a root of its own."""
        first = dissolved.forms[0][2] ** 2
        weights = [
            (q, 10.0 ** (j * x - pk + d * (z * z - q * first))) for q, j, z, pk in dissolved.forms
        ]
        b = free_monomer(dissolved.total, weights)
        molalities = [w * b**q for q, w in weights]
        whole = sum(q * q * m for (q, _), m in zip(weights, molalities, strict=True))
        lost = squares = 0.0
        for (q, j, z, _), m in zip(dissolved.forms, molalities, strict=True):
            lost += q * m * j
            squares += q * m * (z * z - q * first)
        lost /= whole
        squares /= whole
        for (q, j, z, _), m in zip(dissolved.forms, molalities, strict=True):
            self._count(m, z, j - q * lost, z * z - q * first - q * squares)

    def _add_fixed(self, anchor: float, forms: tuple[Form, ...], x: float, d: float) -> None:
        """A system whose first form is held by a gas phase."""
        first = forms[0][2] ** 2
        for q, j, z, pk in forms:
            m = anchor**q * 10.0 ** (j * x - pk + d * (z * z - q * first))
            self._count(m, z, j, z * z - q * first)

    def _count(self, m: float, z: int, by_x: float, by_d: float) -> None:
        """Adds one species with d lg m / dx and d lg m / dD."""
        s = m * z * z
        self.s += s
        self.sx += s * by_x
        self.sd += s * by_d
        if z > 0:
            self.p += m * z
            self.px += m * z * by_x
            self.pd += m * z * by_d
        elif z < 0:
            self.n -= m * z
            self.nx -= m * z * by_x
            self.nd -= m * z * by_d


def _bracketed(problem: Problem, strength: float, x: float) -> tuple[float, int]:
    """pH at a fixed ionic strength, by Newton inside a bracket; f falls with x."""
    root = sqrt(strength)
    d = problem.slope * root / (1.0 + ION_SIZE * root)
    low, high = _LOWEST, _HIGHEST
    for count in range(1, 200):
        sums = Sums(problem, x, d)
        f = log(sums.p / sums.n)
        if f > 0.0:
            low = x
        else:
            high = x
        step = -f / (_LN10 * (sums.px / sums.p - sums.nx / sums.n))
        x += step
        if not low < x < high:
            x = 0.5 * (low + high)
        elif abs(step) < 0.02:
            return x, count
        if high - low < 1e-13:
            return x, count
    return x, 200


def _newton(problem: Problem, x: float, strength: float) -> Root | None:
    """Newton on pH and ionic strength together; None when it does not settle."""
    for count in range(1, 40):
        root = sqrt(strength)
        bottom = 1.0 + ION_SIZE * root
        sums = Sums(problem, x, problem.slope * root / bottom)
        f = log(sums.p / sums.n)
        r = 0.5 * sums.s - strength
        by_strength = 0.5 * problem.slope / (root * bottom * bottom) * _LN10
        fx = _LN10 * (sums.px / sums.p - sums.nx / sums.n)
        fi = by_strength * (sums.pd / sums.p - sums.nd / sums.n)
        rx = 0.5 * _LN10 * sums.sx
        ri = 0.5 * by_strength * sums.sd - 1.0
        determinant = fx * ri - fi * rx
        if determinant == 0.0:
            return None
        dx = (r * fi - f * ri) / determinant
        di = (f * rx - r * fx) / determinant
        if abs(dx) > 2.0:
            return None
        x += dx
        strength = max(strength + di, 0.2 * strength)
        if abs(dx) < 1e-11 and abs(di) <= 1e-11 * strength:
            return Root(x, strength, count, abs(f))
    return None


def _alternating(problem: Problem, x: float, strength: float) -> Root:
    """The slow sure way: pH at fixed I, then I with half its step, until both rest."""
    for _ in range(400):
        x, _ = _bracketed(problem, strength, x)
        root = sqrt(strength)
        sums = Sums(problem, x, problem.slope * root / (1.0 + ION_SIZE * root))
        polished = _newton(problem, x, strength)
        if polished is not None:
            return polished
        strength = 0.5 * (strength + 0.5 * sums.s)
    raise NotConvergedError("the charge balance did not close", f"I = {strength:.3g} mol/kg")


def balance(problem: Problem, start: float = 7.0) -> Root:
    """Closes the charge balance with a self-consistent ionic strength.

    Parameters: problem, in mol/kg water; start, a first guess of pH.
    Returns: pH, ionic strength [mol/kg], relative residual of charge.
    Validity: any totals from 0 to several mol/kg (numerically); the activity
    model itself holds up to I = 0.7 mol/kg.
    Errors: NotConvergedError, not met in any of the random mixtures tested.
    Reference: Bates & Guggenheim 1960, Pure Appl. Chem. 1, 163 (activity).

    >>> pure = Problem((), 0.0, 0.0, 0.51, 14.0, 0.0, 0.0)
    >>> round(balance(pure).ph, 6)
    7.0
    """
    strength = max(0.5 * (problem.strong_squares + abs(problem.strong_charge)), 1e-7)
    x, first = _bracketed(problem, strength, start)
    better = 0.5 * slopes(problem, x, strength).s
    root = _newton(problem, x, better)
    if root is None:
        return _alternating(problem, x, strength)
    return Root(root.ph, root.ionic_strength, root.iterations + first, root.residual)


def molalities(problem: Problem, ph: float, strength: float) -> list[tuple[float, ...]]:
    """Molality [mol/kg] of every form of every system, closed ones first, at a point.

    >>> acid = Dissolved(1.0, ((1, 0, 0, 0.0), (1, 1, -1, 5.0)), False)
    >>> pure = Problem((acid,), 0.0, 0.0, 0.51, 14.0, 0.0, 0.0)
    >>> [round(value, 3) for value in molalities(pure, 5.0, 0.0)[0]]
    [0.5, 0.5]
    """
    d = damping(problem.slope, strength)
    found: list[tuple[float, ...]] = []
    for dissolved in problem.systems:
        weights = form_weights(dissolved.forms, ph, d)
        if dissolved.nuclear:
            b = free_monomer(dissolved.total, weights)
        else:
            b = dissolved.total / sum(w for _, w in weights)
        found.append(tuple(w * b**q for q, w in weights))
    for anchor, forms in problem.fixed:
        found.append(tuple(w * anchor**q for q, w in form_weights(forms, ph, d)))
    return found


def form_weights(forms: tuple[Form, ...], ph: float, d: float) -> list[tuple[int, float]]:
    """(monomers, molality at unit molality of the first form) of each form.

    >>> form_weights(((1, 0, 0, 0.0), (1, 1, -1, 5.0)), 5.0, 0.0)
    [(1, 1.0), (1, 1.0)]
    """
    first = forms[0][2] ** 2
    return [(q, 10.0 ** (j * ph - pk + d * (z * z - q * first))) for q, j, z, pk in forms]


def damping(slope: float, strength: float) -> float:
    """D of the Bates-Guggenheim convention, D = A sqrt(I) / (1 + 1.5 sqrt(I)).

    Parameters: slope A [kg^½ mol^-½]; strength I [mol/kg].
    Returns: -lg(gamma) of a singly charged ion.

    >>> round(damping(0.5108, 0.1), 4)
    0.1096
    """
    root = sqrt(strength)
    return slope * root / (1.0 + ION_SIZE * root)


def slopes(problem: Problem, ph: float, strength: float) -> Sums:
    """Charge sums and their derivatives at a point, for capacities and sensitivities.

    >>> pure = Problem((), 0.0, 0.0, 0.51, 14.0, 0.0, 0.0)
    >>> round(slopes(pure, 7.0, 0.0).p * 1e7, 6)
    1.0
    """
    return Sums(problem, ph, damping(problem.slope, strength))
