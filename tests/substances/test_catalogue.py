"""The catalogue: rows, families, related forms, strengths, densities, and the prepared index."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest

import soplint.substances
from soplint.substances import (
    Substance,
    catalogue,
    check_cas,
    concentrated,
    density,
    forms,
    grams_per_litre,
    hydrates,
    lookup,
    mol_per_litre,
    molar_mass,
    percent_w_w,
)
from soplint.substances.inorganic import ions, neutralised
from soplint.substances.naming import key
from soplint.substances.prepare import text
from soplint.substances.rows import rows
from soplint.substances.tables import read_table

ALL = list(catalogue())
DATA = Path(soplint.substances.__file__).parent / "data"


def one(name: str) -> Substance:
    substance = catalogue().named(name)
    assert substance is not None, name
    return substance


def test_the_prepared_index_is_up_to_date() -> None:
    assert (DATA / "index.json").read_text(encoding="utf-8") == text()


def test_names_are_unique_and_numbers_in_range() -> None:
    assert len({s.name for s in ALL}) == len(ALL) > 600
    for substance in ALL:
        assert substance.state in {"solid", "liquid", "solution", "gas"}
        if substance.formula:
            assert substance.molar_mass == pytest.approx(molar_mass(substance.formula))
        else:
            assert substance.molar_mass is None
        if substance.strength is not None:
            assert 0 < substance.strength <= 100
        if substance.strength_low is not None and substance.strength_high is not None:
            assert substance.strength is not None
            assert substance.strength_low <= substance.strength <= substance.strength_high
        if substance.density is not None:
            assert 0.6 <= substance.density <= 3.2


@pytest.mark.parametrize("substance", [s for s in ALL if s.cas], ids=lambda s: s.name)
def test_cas_check_digits(substance: Substance) -> None:
    assert check_cas(substance.cas or "")


@pytest.mark.parametrize(
    "cas", ["", "7647-14-6", "7647145", "07647-14-5", "7647-14-5 ", "٧647-14-5"]
)
def test_a_wrong_cas_number_is_refused(cas: str) -> None:
    assert not check_cas(cas)


def test_other_forms_name_rows_of_the_catalogue() -> None:
    missing = {
        other
        for substance in ALL
        for other in substance.other_forms
        if catalogue().named(other) is None
    }
    assert not missing


def test_every_catalogue_name_is_found_by_look_up() -> None:
    for row in rows():
        found = lookup(row.substance.name)
        assert found is not None
        assert found.substances == (row.substance,)


def test_every_synonym_of_a_row_can_mean_its_family() -> None:
    overridden = {key(record["synonym"]) for record in read_table("synonyms.csv")}
    for row in rows():
        for synonym in row.synonyms:
            if key(synonym) in overridden or "%" in synonym:
                continue
            found = lookup(synonym)
            assert found is not None, synonym
            assert row.substance.family in {s.family for s in found.substances}, synonym


def test_every_line_of_the_synonyms_is_found() -> None:
    for record in read_table("synonyms.csv"):
        found = lookup(record["synonym"])
        if record["kind"] == "none":
            assert found is None, record["synonym"]
        else:
            assert found is not None, record["synonym"]
            assert found.generic == (record["kind"] == "generic"), record["synonym"]


def test_acid_systems_are_those_that_the_equilibria_know() -> None:
    path = DATA.parent.parent / "equilibria" / "data" / "acids.csv"
    lines = [
        line for line in path.read_text(encoding="utf-8").splitlines() if not line.startswith("#")
    ]
    known = {line.split(",", 1)[0].strip('"') for line in lines}
    assert {s.acid_system for s in ALL if s.acid_system} <= known


def test_families_hold_the_hydrates() -> None:
    found = hydrates(one("disodium hydrogen phosphate heptahydrate"))
    assert [s.hydrate for s in found] == [0, 2, 7, 12]
    assert {s.family for s in found} == {"Na2HPO4"}


def test_isomers_are_kept_apart() -> None:
    assert one("dimethyl sulfoxide").family != one("2-mercaptoethanol").family
    found = lookup("C2H6OS")
    assert found is not None
    assert {s.name for s in found.substances} == {"dimethyl sulfoxide", "2-mercaptoethanol"}


def test_related_forms_hold_hydrates_salts_and_the_free_acid() -> None:
    names = {s.name for s in forms(one("sodium dihydrogen phosphate monohydrate"))}
    assert "sodium dihydrogen phosphate monohydrate" not in names
    assert {
        "sodium dihydrogen phosphate, anhydrous",
        "potassium dihydrogen phosphate",
        "disodium hydrogen phosphate dodecahydrate",
        "phosphoric acid 85 %",
    } <= names
    assert "Tris base" in {s.name for s in forms(one("Tris hydrochloride"))}
    assert "L-arginine" in {s.name for s in forms(one("L-arginine hydrochloride"))}
    assert "sodium chloride" not in {s.name for s in forms(one("potassium chloride"))}


def test_strengths_of_a_concentrated_acid() -> None:
    strengths = concentrated(one("hydrochloric acid 32 %"))
    assert [s.percent_w_w for s in strengths] == [37.2, 32, 25]
    assert strengths[0].mol_per_litre == pytest.approx(12.1, rel=0.01)
    assert strengths[0].mol_low < strengths[0].mol_per_litre < strengths[0].mol_high
    assert concentrated(one("sodium chloride")) == ()
    assert concentrated(one("dimethyl sulfoxide")) == ()  # an isomer of 2-mercaptoethanol


@pytest.mark.parametrize(
    "record", read_table("concentrated_reagents.csv"), ids=lambda record: record["name"]
)
def test_published_molar_strengths(record: dict[str, str]) -> None:
    # published tables of concentrated laboratory reagents, the column of the file
    computed = mol_per_litre(
        float(record["percent_w_w"]),
        float(record["density_g_mL_20C"]),
        molar_mass(record["formula"]),
    )
    assert computed == pytest.approx(float(record["mol_per_L_published"]), rel=0.022)


def test_conversions_are_inverse_of_each_other() -> None:
    strength = mol_per_litre(65, 1.39, molar_mass("HNO3"))
    assert percent_w_w(strength, 1.39, molar_mass("HNO3")) == pytest.approx(65)
    assert strength * molar_mass("HNO3") == pytest.approx(grams_per_litre(65, 1.39))


@pytest.mark.parametrize(
    ("formula", "percent", "temperature", "expected"),
    [
        ("H2SO4", 96, 20, 1.8355),  # Perry's Chemical Engineers' Handbook, as in the file
        ("HCl", 37, 20, 1.1837),
        ("CH3COOH", 100, 20, 1.0498),
        ("H2O", 0, 25, 0.99704),  # Kell 1975
        ("NaOH", 25, 20, 1.2739),  # Perry's, from memory
        ("H2SO4", 0, 20, 0.9982),
    ],
)
def test_densities(formula: str, percent: float, temperature: float, expected: float) -> None:
    found = density(formula, percent, temperature)
    assert found == pytest.approx(expected, abs=0.002)


@pytest.mark.parametrize(
    ("formula", "percent", "temperature"),
    [("HCl", 45, 20), ("HCl", 30, 60), ("NaCl", 10, 20), ("H2O", 0, 90), ("no formula", 1, 20)],
)
def test_no_density_outside_the_tables(formula: str, percent: float, temperature: float) -> None:
    assert density(formula, percent, temperature) is None


@pytest.mark.parametrize("formula", ["K2S2O8", "CsCl", "Fe2(SO4)3", "NH4NO3", "KAl(SO4)2", "Cu2O"])
def test_neutral_rows_of_ions(formula: str) -> None:
    found = ions(formula)
    assert found is not None and found.neutral


@pytest.mark.parametrize("formula", ["PBS", "CO", "NiCd", "AgNP", "NaPi", "InAs"])
def test_no_rows_of_ions(formula: str) -> None:
    assert ions(formula) is None


def test_the_neutral_formula_of_two_ions() -> None:
    found = ions("AlSO4")
    assert found is not None and not found.neutral
    assert neutralised(found) == "Al2(SO4)3"


def test_no_heavy_module_is_loaded() -> None:
    code = (
        "import sys; from soplint.substances import NameIndex, lookup\n"
        "NameIndex().find('5 g NaCl, 7 g zinc sulfate heptahydrate in water'); lookup('KHP')\n"
        "print([m for m in ('numpy', 'scipy', 'pint', 'csv', 'pathlib') if m in sys.modules])"
    )
    done = subprocess.run(
        [sys.executable, "-c", code], capture_output=True, text=True, check=True, timeout=60
    )
    assert done.stdout.strip() == "[]"
