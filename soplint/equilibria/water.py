"""Water as a solvent: density, permittivity, Debye-Hückel slope, ionisation constant."""

from __future__ import annotations

from functools import lru_cache
from math import exp, log10, sqrt

CELSIUS = 273.15
_MOLAR_MASS_WATER = 18.015268  # g/mol, the value fixed in IAPWS R11


def density(temperature: float) -> float:
    """Density of air-free water at 101.325 kPa, by the rational polynomial of Kell.

    Parameters: temperature [°C].
    Returns: density [kg/L].
    Validity: 0 to 100 °C, within 0.00002 kg/L.
    Reference: Kell 1975, J. Chem. Eng. Data 20, 97.

    >>> round(density(25.0), 5)
    0.99704
    """
    t = temperature
    numerator = 999.83952 + t * (
        16.945176
        + t * (-7.9870401e-3 + t * (-46.170461e-6 + t * (105.56302e-9 - t * 280.54253e-12)))
    )
    return numerator / (1.0 + 16.879850e-3 * t) / 1000.0


def permittivity(temperature: float) -> float:
    """Relative permittivity of water, by the polynomial of Malmberg and Maryott.

    Parameters: temperature [°C].
    Returns: relative permittivity [1].
    Validity: 0 to 100 °C, within 0.05.
    Reference: Malmberg & Maryott 1956, J. Res. Natl. Bur. Stand. 56, 1.

    >>> round(permittivity(25.0), 2)
    78.3
    """
    t = temperature
    return 87.740 + t * (-0.40008 + t * (9.398e-4 - t * 1.410e-6))


def debye_huckel_slope(temperature: float) -> float:
    """Limiting slope A of the Debye-Hückel law, A = e³ (2 pi L rho)^½ / (ln 10 (4 pi e0 e k T)^3/2).

    Parameters: temperature [°C].
    Returns: A [kg^½ mol^-½], base 10, molal scale.
    Validity: 0 to 100 °C; within 0.0003 of the values recommended with the
    Bates-Guggenheim convention (Buck et al. 2002, Pure Appl. Chem. 74, 2169).
    Reference: Robinson & Stokes, Electrolyte Solutions, chapter 9 (numerical factor 1.8246e6).

    >>> round(debye_huckel_slope(25.0), 3)
    0.511
    """
    kelvin = temperature + CELSIUS
    polar = permittivity(temperature) * kelvin
    return 1.8246e6 * sqrt(density(temperature)) / (polar * sqrt(polar))


def ionisation(temperature: float, density_g_cm3: float | None = None) -> float:
    """Ionisation constant of water as pKw, by the IAPWS formulation of Bandura and Lvov.

    pKw = -2n [lg(1 + Q) - Q/(Q + 1) rho (b0 + b1/T + b2 rho)] + pKw(gas) + 2 lg(M/1000),
    Q = rho exp(a0 + a1/T + a2/T² rho^(2/3)), n = 6.

    Parameters: temperature [°C]; density_g_cm3 [g/cm³], that of the liquid at 101.325 kPa if absent.
    Returns: pKw [1], molal scale, I = 0.
    Validity: 0 to 800 °C with a density given; 0 to 100 °C without. Uncertainty 0.01.
    Reference: IAPWS R11-07 (Bandura & Lvov 2006, J. Phys. Chem. Ref. Data 35, 15).

    >>> round(ionisation(25.0), 3)
    13.995
    """
    kelvin = temperature + CELSIUS
    rho = density(temperature) if density_g_cm3 is None else density_g_cm3
    gas = 0.61415 + (48251.33 + (-67707.93 + 10102100.0 / kelvin) / kelvin) / kelvin
    q = rho * exp(-0.864671 + 8659.19 / kelvin - 22786.2 / kelvin**2 * rho ** (2.0 / 3.0))
    hydration = log10(1.0 + q) - q / (q + 1.0) * rho * (
        0.642044 - 56.8534 / kelvin - 0.375754 * rho
    )
    return -12.0 * hydration + gas + 2.0 * log10(_MOLAR_MASS_WATER / 1000.0)


@lru_cache(maxsize=256)
def properties(temperature: float) -> tuple[float, float, float]:
    """Density [kg/L], Debye-Hückel slope [kg^½ mol^-½] and pKw at a temperature [°C], remembered.

    >>> [round(value, 2) for value in properties(25.0)]
    [1.0, 0.51, 13.99]
    """
    return density(temperature), debye_huckel_slope(temperature), ionisation(temperature)
