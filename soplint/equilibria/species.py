"""What a solution holds, as the kernel sees it: species of acid systems and sums over strong ions.

Activity: lg(gamma_i) = -z_i² D + b_i, D = A sqrt(I) / (1 + 1.5 sqrt(I)), where b_i
collects specific interactions with strong ions and is constant in a solution.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import log, sqrt

from soplint.equilibria.acids import ION_SIZE
from soplint.equilibria.errors import EquilibriumError

LN10 = log(10.0)

Form = tuple[int, int, int, float]
"""(monomers, protons lost, charge, pK with specific interactions) of one species."""


@dataclass(frozen=True, slots=True)
class Shape:
    """The species of one acid system, the fully protonated monomer first.

    `nuclear` tells that clusters are among them. `kind` is "cations" or "anions" when no
    form has the other sign and none is a cluster: then the forms lose one proton after
    another, and `charge` of the first with `powers` = ln 10 times each further pK says
    all there is. Otherwise it is "mixed", and `rows` serves: (protons lost, ln 10 pK,
    z² - q z0², charge z, monomers q) of each form.
    """

    forms: tuple[Form, ...]
    nuclear: bool
    kind: str
    charge: int
    powers: tuple[float, ...]
    rows: tuple[tuple[int, float, int, int, int], ...]


@dataclass(frozen=True, slots=True)
class Dissolved:
    """One acid system in a solution; `total` in mol/kg of monomer."""

    total: float
    shape: Shape


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


def shape_of(forms: tuple[Form, ...]) -> Shape:
    """The shape of a list of forms; a system with clusters may hold no cation.

    >>> shape_of(((1, 0, 0, 0.0), (1, 1, -1, 5.0))).charge
    0
    """
    nuclear = any(form[0] > 1 for form in forms)
    highest, lowest = forms[0][2], min(form[2] for form in forms)
    if nuclear and highest > 0:
        raise EquilibriumError("clusters of cations are not in the model", str(forms))
    kind = "mixed" if nuclear or highest > 0 > lowest else "cations" if highest > 0 else "anions"
    rows = tuple((j, LN10 * pk, z * z - q * highest * highest, z, q) for q, j, z, pk in forms)
    return Shape(forms, nuclear, kind, highest, tuple(row[1] for row in rows[1:]), rows)


def cubic_root(total: float, one: float, two: float, three: float) -> float:
    """Positive root b of one b + two b² + three b³ = total, by Newton from above.

    >>> cubic_root(2.0, 1.0, 1.0, 0.0)
    1.0
    """
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
        if abs(step) <= 1e-9 * b:  # quadratic: the error is now below the last digit
            break
    return float(b)


def free_monomer(total: float, weights: Sequence[tuple[int, float]]) -> float:
    """Molality b of the first form from total = sum of q w b^q.

    Parameters: total [mol/kg]; weights, pairs (monomers q, at most 3; w, the
    molality of the species at b = 1).
    Returns: b [mol/kg].

    >>> free_monomer(2.0, [(1, 1.0), (2, 0.5)])
    1.0
    """
    one, two, three = (k * sum(w for q, w in weights if q == k) for k in (1, 2, 3))
    return cubic_root(total, one, two, three)


def molalities(problem: Problem, ph: float, strength: float) -> list[tuple[float, ...]]:
    """Molality [mol/kg] of every form of every system, closed ones first, at a point.

    >>> acid = Dissolved(1.0, shape_of(((1, 0, 0, 0.0), (1, 1, -1, 5.0))))
    >>> pure = Problem((acid,), 0.0, 0.0, 0.51, 14.0, 0.0, 0.0)
    >>> [round(value, 3) for value in molalities(pure, 5.0, 0.0)[0]]
    [0.5, 0.5]
    """
    d = damping(problem.slope, strength)
    found: list[tuple[float, ...]] = []
    for dissolved in problem.systems:
        weights = form_weights(dissolved.shape.forms, ph, d)
        if dissolved.shape.nuclear:
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
