"""The scalar kernel: charge balance and ionic strength of one solution, in plain floats.

Unknowns are x = pH (activity) and the ionic strength I. With P and N the
concentrations of positive and negative charge, the residual is

    f(x, I) = ln(P/N) = 2 asinh((P - N) / (2 sqrt(P N))),

nearly straight in x over the whole range, which Newton's method likes. The derivatives
come with each evaluation, so that I moves in the same iteration.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import log, sqrt

from soplint.equilibria.acids import ION_SIZE
from soplint.equilibria.charges import charge_sums, plain_sums, slopes
from soplint.equilibria.errors import NotConvergedError
from soplint.equilibria.guess import first_guess
from soplint.equilibria.species import LN10, Problem, damping

_LOWEST, _HIGHEST = -6.0, 21.0
_SMALL = 3e-7  # Newton converges quadratically: after a step this small the error is below 1e-11


@dataclass(frozen=True, slots=True)
class Root:
    """A closed charge balance; `iterations` counts evaluations of the sums."""

    ph: float
    ionic_strength: float
    iterations: int


def _bracketed(problem: Problem, strength: float, x: float) -> tuple[float, int]:
    """pH at a fixed ionic strength, by Newton inside a bracket; f falls with x."""
    d = damping(problem.slope, strength)
    low, high = _LOWEST, _HIGHEST
    for count in range(1, 200):
        sums = charge_sums(problem, x, d)
        f = log(sums.p / sums.n)
        if f > 0.0:
            low = x
        else:
            high = x
        step = -f / (LN10 * (sums.px / sums.p - sums.nx / sums.n))
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
    for count in range(1, 16):
        root = sqrt(strength)
        bottom = 1.0 + ION_SIZE * root
        p, n, s, px, nx, sx, pd, nd, sd = plain_sums(problem, x, problem.slope * root / bottom)
        if p <= 0.0 or n <= 0.0:
            return None
        f = log(p / n)
        r = 0.5 * s - strength
        by_strength = 0.5 * problem.slope / (root * bottom * bottom) * LN10
        fx = LN10 * (px / p - nx / n)
        fi = by_strength * (pd / p - nd / n)
        rx = 0.5 * LN10 * sx
        ri = 0.5 * by_strength * sd - 1.0
        determinant = fx * ri - fi * rx
        if determinant == 0.0:
            return None
        dx = (r * fi - f * ri) / determinant
        di = (f * rx - r * fx) / determinant
        if not -2.0 < dx < 2.0:
            return None
        x += dx
        strength = max(strength + di, 0.2 * strength)
        if -_SMALL < dx < _SMALL and abs(di) <= _SMALL * strength:
            return Root(x, strength, count)
    return None


def _alternating(problem: Problem, x: float, strength: float) -> Root:
    """The slow sure way: pH at fixed I, then I with half its step, until both rest."""
    spent = 0
    for _ in range(400):
        x, count = _bracketed(problem, strength, x)
        better = 0.5 * slopes(problem, x, strength).s
        polished = _newton(problem, x, better)
        spent += count + 1
        if polished is not None:
            return Root(polished.ph, polished.ionic_strength, polished.iterations + spent)
        strength = 0.5 * (strength + better)
    raise NotConvergedError("the charge balance did not close", f"I = {strength:.3g} mol/kg")


def balance(problem: Problem, start: float | None = None) -> Root:
    """Closes the charge balance with a self-consistent ionic strength.

    Parameters: problem, in mol/kg water; start, a first guess of pH when one is known.
    Returns: pH and ionic strength [mol/kg].
    Validity: any totals from 0 to several mol/kg (numerically); the activity
    model itself holds up to I = 0.7 mol/kg.
    Errors: NotConvergedError, not met in any of the random mixtures tested.
    Reference: Bates & Guggenheim 1960, Pure Appl. Chem. 1, 163 (activity).

    >>> pure = Problem((), 0.0, 0.0, 0.51, 14.0, 0.0, 0.0)
    >>> round(balance(pure).ph, 6)
    7.0
    """
    strength = 0.5 * (problem.strong_squares + abs(problem.strong_charge))
    x = first_guess(problem, damping(problem.slope, strength)) if start is None else start
    strength += 0.5 * (10.0**-x + 10.0 ** (x - problem.pkw))
    root = _newton(problem, x, strength)
    return _alternating(problem, x, strength) if root is None else root
