"""What would put a buffer right: amounts for a pH, pairs in range, what to set, how strong to make it."""

from __future__ import annotations

from collections.abc import Mapping
from math import nan

from soplint.bench.acidity import NO_BUFFERS

Contents = Mapping[str, float]

# Pairs that laboratories weigh out, by acid system: acid form and base form.
_PAIRS = {
    "phosphate": (("NaH2PO4", "Na2HPO4"), ("H3PO4", "NaH2PO4")),
    "acetate": (("CH3COOH", "CH3COONa"),),
    "citrate": (("citric acid", "trisodium citrate"),),
    "tris": (("Tris hydrochloride", "Tris"),),
    "carbonate": (("NaHCO3", "Na2CO3"),),
    "borate": (("H3BO3", "NaOH"),),
    "ammonia": (("NH4Cl", "NH3"),),
    "hepes": (("HEPES", "NaOH"),),
    "mes": (("MES", "NaOH"),),
    "mops": (("MOPS", "NaOH"),),
    "formate": (("HCOOH", "NaOH"),),
    "glycine": (("glycine", "NaOH"),),
    "imidazole": (("HCl", "imidazole"),),
}
_RANGE = 1.0


def amounts_for(system: str, ph: float, strength: float, litres: float, degrees: float) -> str:
    """The amounts of a usual pair that give a pH: "22.3 mmol NaH2PO4 with 27.7 mmol Na2HPO4".

    Parameters: system, acid system; ph; strength of the buffer [mol/L]; litres made; degrees [°C].
    Returns: words for a working; empty where no usual pair reaches the pH.

    >>> amounts_for("phosphate", 7.2, 0.05, 1.0, 25.0)
    '15.5 mmol of NaH2PO4 with 34.5 mmol of Na2HPO4'
    """
    from soplint.equilibria import EquilibriumError, buffer_recipe

    for acid, base in _PAIRS.get(system, ()):
        try:
            recipe = buffer_recipe(acid, base, ph, strength, degrees)
        except EquilibriumError:
            continue
        first, second = recipe.acid_amount * litres * 1000, recipe.base_amount * litres * 1000
        return f"{first:.3g} mmol of {acid} with {second:.3g} mmol of {base}"
    return ""


def pairs_in_range(ph: float, strength: float, litres: float, degrees: float) -> str:
    """Usual buffers whose pKa' lies within one unit of a pH, the nearest first, with amounts.

    Parameters and returns as for `amounts_for`.

    >>> pairs_in_range(4.7, 0.05, 1.0, 25.0).startswith("acetate")
    True
    """
    from soplint.equilibria import EquilibriumError, system_pkas

    near: list[tuple[float, str]] = []
    for system in _PAIRS:
        try:
            values = system_pkas(system, degrees, min(strength, 0.7))
        except EquilibriumError:
            continue
        distance = min((abs(ph - value) for value in values), default=nan)
        if distance <= _RANGE:
            near.append((distance, system))
    found = []
    for _, system in sorted(near)[:3]:
        words = amounts_for(system, ph, strength, litres, degrees)
        if words:
            found.append(f"{system} ({words})")
    return "; ".join(found)


def strength_for_load(
    contents: Contents, litres: float, acid: str, mol: float, volume: float, ph: float
) -> float | None:
    """How many times stronger a buffer must be so that a load leaves it at a pH.

    Parameters: contents [mol/L] and litres of the buffer; acid or base added, its mol and its
    volume [L]; ph to be kept.
    Returns: the factor, at most 50; None where no strength keeps it.
    """
    from soplint.equilibria import EquilibriumError, after_addition, solve

    def left(factor: float) -> float:
        stronger = {name: value * factor for name, value in contents.items()}
        added = {acid: mol / volume}
        return after_addition(stronger, litres * 1000, added, volume * 1000).pH - ph

    try:
        start = solve(contents).pH
        if (start - ph) * (left(1.0)) >= 0:
            return None
        low, high = 1.0, 50.0
        if left(low) * left(high) > 0:
            return None
        for _ in range(40):
            middle = (low + high) / 2
            if left(low) * left(middle) <= 0:
                high = middle
            else:
                low = middle
    except EquilibriumError:
        return None
    return high


def systems_of(contents: Contents) -> dict[str, float]:
    """The buffer systems of a solution and their strengths in mol/L."""
    from soplint.equilibria import EquilibriumError, acid_systems_of

    found: dict[str, float] = {}
    for name, mol in contents.items():
        try:
            for system, count in acid_systems_of(name).items():
                if system not in NO_BUFFERS:
                    found[system] = found.get(system, 0.0) + count * mol
        except EquilibriumError:
            continue
    return found
