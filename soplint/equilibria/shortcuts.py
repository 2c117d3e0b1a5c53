"""The short cuts practitioners know, as named functions to explain a result in the working.

None of them decides a verdict; tests say where each agrees with the full solver.
"""

from __future__ import annotations

from math import isfinite, log10

from soplint.equilibria.errors import BadAmountError


def _check(**values: float) -> None:
    for name, value in values.items():
        if not isfinite(value) or value <= 0.0:
            raise BadAmountError(f"{name} must be positive: {value!r}", name)


def henderson_hasselbalch(apparent_pka: float, base: float, acid: float) -> float:
    """pH of a buffer, pH = pKa' + lg([base]/[acid]).

    Parameters: apparent_pka, pKa' at the ionic strength of the buffer (see `pka`);
    base, acid, concentrations in one unit.
    Returns: pH [1].
    Validity: both forms at least twenty times [H+] and [OH-]: within 0.05.
    Errors: BadAmountError.
    Reference: Henderson 1908, Am. J. Physiol. 21, 173; Hasselbalch 1917, Biochem. Z. 78, 112.

    >>> henderson_hasselbalch(6.87, 0.05, 0.05)
    6.87
    """
    _check(base=base, acid=acid)
    return apparent_pka + log10(base / acid)


def ratio_for_ph(apparent_pka: float, ph: float) -> float:
    """Ratio [base]/[acid] for a pH, 10^(pH - pKa'); the same equation turned round.

    >>> ratio_for_ph(7.0, 8.0)
    10.0
    """
    return float(10.0 ** (ph - apparent_pka))


def weak_acid_ph(pka: float, concentration: float) -> float:
    """pH of a weak acid alone, [H+] = sqrt(Ka c), so pH = (pKa - lg c)/2.

    Parameters: pka; concentration [mol/L].
    Returns: pH [1].
    Validity: c/Ka above 100 and Ka c above 1e-12: within 0.05.
    Errors: BadAmountError.
    Reference: Bates, Determination of pH, chapter 5.

    >>> round(weak_acid_ph(4.756, 0.1), 2)
    2.88
    """
    _check(concentration=concentration)
    return 0.5 * (pka - log10(concentration))


def weak_base_ph(pka: float, concentration: float, pkw: float = 13.995) -> float:
    """pH of a weak base alone, [OH-] = sqrt(Kb c), so pH = pKw - (pKb - lg c)/2.

    Parameters: pka of the conjugate acid; concentration [mol/L]; pkw.
    Returns: pH [1].
    Validity: c/Kb above 100 and Kb c above 1e-12: within 0.05.
    Errors: BadAmountError.

    >>> round(weak_base_ph(9.245, 0.1), 2)
    11.12
    """
    _check(concentration=concentration)
    return pkw - 0.5 * (pkb(pka, pkw) - log10(concentration))


def pkb(pka: float, pkw: float = 13.995) -> float:
    """pKb of the conjugate base, Kb = Kw/Ka.

    >>> round(pkb(9.245), 3)
    4.75
    """
    return pkw - pka


def ampholyte_ph(first_pka: float, second_pka: float) -> float:
    """pH of an ampholyte (such as a hydrogen salt), the mean of the pKa on both its sides.

    Validity: pKa' at its ionic strength, concentration above about 0.01 mol/L and well above
    both 10^-pK1 and Kw/10^-pK2: within 0.1.

    >>> ampholyte_ph(6.0, 10.0)
    8.0
    """
    return 0.5 * (first_pka + second_pka)


def strong_acid_ph(concentration: float) -> float:
    """pH of a strong acid, pH = -lg c, activity left out.

    Parameters: concentration [mol/L]. Returns: pH [1].
    Validity: 1e-6 to 0.001 mol/L within 0.02; at 0.1 mol/L about 0.1 low.
    Errors: BadAmountError.

    >>> strong_acid_ph(0.01)
    2.0
    """
    _check(concentration=concentration)
    return -log10(concentration)


def strong_base_ph(concentration: float, pkw: float = 13.995) -> float:
    """pH of a strong base, pH = pKw + lg c, activity left out; validity as for the acid.

    >>> round(strong_base_ph(0.01), 3)
    11.995
    """
    _check(concentration=concentration)
    return pkw + log10(concentration)
