"""A first guess of pH from a count of protons, before any equation is solved."""

from __future__ import annotations

from math import log10

from soplint.equilibria.species import LN10, Problem


def first_guess(problem: Problem, d: float) -> float:
    """pH to start from, by the short cuts a chemist would take.

    The strong ions say how many protons the acid systems must have lost for neutrality. Taken
    from the steps in order of pKa' that number ends inside one step (a buffer: ratio of
    the forms), before the first (free strong acid) or beyond the last (free strong base);
    at the ends of a step the mean of the neighbouring pKa' bounds the guess.

    Parameters: problem; d, the Debye-Hückel term D of a rough ionic strength.
    Returns: pH, within a few tenths for ordinary solutions.

    >>> round(first_guess(Problem((), 0.001, 0.001, 0.51, 14.0, 0.0, 0.0), 0.0), 1)
    11.0
    """
    lost = problem.strong_charge
    steps = []
    for dissolved in problem.systems:
        shape, total = dissolved.shape, dissolved.total
        lost += total * shape.charge
        before, z = 0.0, shape.charge
        for power, form in zip(shape.powers, shape.forms[1:], strict=True):
            if form[0] == 1:
                steps.append(((power - before) / LN10 + (2 * z - 1) * d, total))
                before, z = power, z - 1
    if len(steps) > 1:
        steps.sort()
    if lost < 0.0 and not problem.fixed:
        strong = -log10(-lost)
        return min(strong, _acid_alone(steps[0])) if steps else strong
    lower = None
    for index, (pk, total) in enumerate(steps):
        if lost <= total:
            part = min(max(lost / total, 1e-9), 1.0 - 1e-9)
            low = _acid_alone((pk, total)) if lower is None else 0.5 * (lower + pk)
            following = steps[index + 1][0] if index + 1 < len(steps) else _base(problem, total)
            return min(max(pk + log10(part / (1.0 - part)), low), 0.5 * (pk + following))
        lost -= total
        lower = pk
    return _base(problem, lost) if lost > 0.0 else 0.5 * problem.pkw


def _acid_alone(step: tuple[float, float]) -> float:
    """pH of a weak acid alone, (pK - lg c)/2, not above 7."""
    return min(0.5 * (step[0] - log10(step[1])), 7.0)


def _base(problem: Problem, excess: float) -> float:
    """pH of a strong base."""
    return max(problem.pkw + log10(excess), 0.5 * problem.pkw)
