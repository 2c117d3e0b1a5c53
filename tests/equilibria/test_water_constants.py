"""Water, activity and pK against published values (sources in the rows of the data files)."""

from __future__ import annotations

import pytest

from soplint.equilibria.acids import system, systems
from soplint.equilibria.water import CELSIUS, debye_huckel_slope, density, ionisation


def test_ionisation_of_water_follows_iapws(table_of):
    rows = [row for row in table_of("kw.csv") if row["kind"].startswith("liquid")]
    within = [row for row in rows if float(row["temperature_C"]) <= 60]
    assert len(within) == 13
    for row in within:
        assert ionisation(float(row["temperature_C"])) == pytest.approx(
            float(row["pKw"]), abs=0.001
        )


def test_ionisation_reproduces_the_program_check_values(table_of):
    rows = [row for row in table_of("kw.csv") if row["kind"].startswith("computer-program")]
    assert len(rows) == 5
    for row in rows:
        computed = ionisation(float(row["temperature_C"]), float(row["density_kg_m3"]) / 1000)
        assert computed == pytest.approx(float(row["pKw"]), abs=1e-6)


def test_debye_huckel_slope_is_the_recommended_one(table_of):
    rows = table_of("debye_huckel.csv")
    assert len(rows) == 11
    for row in rows:
        slope = debye_huckel_slope(float(row["temperature_C"]))
        assert slope == pytest.approx(float(row["A_log10"]), abs=0.0003)


@pytest.mark.parametrize(
    ("temperature", "expected"),
    [(0, 0.99984), (4, 0.99997), (20, 0.99820), (25, 0.99704), (40, 0.99222), (50, 0.98804)],
)
def test_density_of_water(temperature, expected):
    """Handbook values (CRC Handbook of Chemistry and Physics)."""
    assert density(temperature) == pytest.approx(expected, abs=2e-5)


def test_equations_reproduce_the_pk_at_25_degrees():
    """Within 0.005, the agreement the compilation states (0.003) plus rounding."""
    checked = 0
    for name in systems():
        for step in system(name).steps:
            if step.equation or step.log_equation:
                assert step.at(25.0 + CELSIUS) == pytest.approx(step.pk, abs=0.005), name
                checked += 1
    assert checked == 24


def test_temperature_course_agrees_with_the_enthalpy():
    """dpK/dT of an equation against -dH/(R T² ln 10) of an independent calorimetric value.

    The worst is borate, whose rounded dH differs by 0.7 kJ/mol from the equation.
    """
    checked = 0
    for name in systems():
        for step in system(name).steps:
            if step.equation and step.enthalpy:
                slope = (step.at(303.15) - step.at(293.15)) / 10.0
                enthalpy = -slope * 8.314462618 * 2.302585 * 298.15**2
                assert enthalpy == pytest.approx(step.enthalpy, abs=1000.0), (name, step.pk)
                checked += 1
    assert checked >= 20
