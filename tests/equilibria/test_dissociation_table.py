"""The table that says what a substance brings into water."""

from __future__ import annotations

import csv

import pytest

import soplint
from soplint.equilibria import UnknownSubstanceError, acid_systems_of, solve
from soplint.equilibria.acids import system
from soplint.equilibria.composition import components, decompose
from soplint.equilibria.dissociation import dissociation, ion_charges, table_rows
from soplint.equilibria.formulas import adducts, parse_formula


def _pairs(text):
    found = [piece.rpartition(" ") for piece in text.split(";") if piece]
    return {label: float(count) for label, _, count in found}


def test_every_row_is_neutral():
    rows = list(table_rows("dissociation.csv"))
    assert len(rows) > 300
    charges = ion_charges()
    for row in rows:
        strong = sum(charges[ion] * n for ion, n in _pairs(row["strong_ions"]).items())
        assert strong + float(row["state"]) + float(row["free_protons"]) == 0, row["name"]


def test_the_state_of_every_row_is_one_its_systems_can_take():
    for row in table_rows("dissociation.csv"):
        systems = _pairs(row["systems"])
        highest = sum(system(name).charges[0] * n for name, n in systems.items())
        lowest = sum(system(name).charges[-1] * n for name, n in systems.items())
        assert lowest <= float(row["state"]) <= highest, row["name"]


def test_every_row_has_the_atoms_of_its_formula():
    """Ions and acid forms, less the protons lost, give back the formula but for water."""
    parts = {part.name: part for part in components()}
    checked = 0
    for row in table_rows("dissociation.csv"):
        if row["kind"] != "dissociates" or "," in row["formula"]:
            continue
        atoms, _ = parse_formula(row["formula"])
        brought: dict[str, float] = {}
        for name, n in (_pairs(row["systems"]) | _pairs(row["strong_ions"])).items():
            for element, count in parts[name].atoms:
                brought[element] = brought.get(element, 0) + count * n
        assert brought == {e: n for e, n in atoms.items() if e not in "HO"}, row["name"]
        checked += 1
    assert checked > 300


def test_every_acid_system_has_a_form_of_its_charge():
    forms = {row["system"]: row for row in table_rows("acid_forms.csv")}
    names = {row["system"] for row in table_rows("acids.csv")}
    assert set(forms) == names
    for name, row in forms.items():
        assert int(row["charge"]) == system(name).charge, name


def test_reagents_of_the_published_tables_bring_what_they_should(table_of):
    """Against an assignment made by hand by the compiler of the tables."""
    rows = table_of("reagent_ions.csv")
    assert len(rows) == 20
    for row in rows:
        found = dissociation(row["formula"])
        systems, ions = _pairs(row["acid_systems"]), _pairs(row["strong_ions"])
        if "calcium hydroxide ion pair" in systems:
            systems, ions = {}, {"Ca2+": 1.0}  # the solver turns Ca2+ into that system
        assert dict(found.systems) == systems, row["formula"]
        assert dict(found.ions) == ions, row["formula"]


def test_the_whole_catalogue_is_resolved():
    from soplint.substances import catalogue

    substances = list(catalogue())
    assert len(substances) >= 296
    for substance in substances:
        found = dissociation(substance.name)
        if substance.acid_system:
            assert substance.acid_system in dict(found.systems), substance.name


@pytest.mark.parametrize(
    "spelling",
    [
        "Na2HPO4·7H2O",
        "Na2HPO4.7H2O",
        "Na2HPO4*7H2O",
        "Na2HPO4 · 7 H2O",
        "Na₂HPO₄·7H₂O",
        "HNa2O4P",
        "Disodium Hydrogen Phosphate heptahydrate",
        "disodium hydrogen phosphate",
        "sodium phosphate dibasic",
    ],
)
def test_spellings_of_one_substance(spelling):
    found = dissociation(spelling)
    assert found.systems == (("phosphate", 1.0),)
    assert found.ions == (("Na+", 2.0),)


@pytest.mark.parametrize(
    "name", ["sucrose", "urea", "glycerol", "ethanol", "polysorbate 20", "H2O"]
)
def test_neutral_substances_are_accepted(name):
    assert acid_systems_of(name) == {}
    with_it = solve({"KH2PO4": 0.025, "Na2HPO4": 0.025, name: 0.01}).pH
    assert with_it == pytest.approx(solve({"KH2PO4": 0.025, "Na2HPO4": 0.025}).pH, abs=1e-9)


@pytest.mark.parametrize(
    "name", ["", "no such thing", "Xx2", "Na", "phosphate", "(NaQz", "9" * 300]
)
def test_unknown_substances_are_named(name):
    with pytest.raises(UnknownSubstanceError) as caught:
        solve({"NaCl": 0.1, name: 0.1})
    assert caught.value.culprit[:20] == name[:20]


@pytest.mark.parametrize("name", [" " * 10**6, "9" * 10**6, "(" * 10**6, "C9" * 10**5, 5, None])
def test_hostile_names_are_refused_at_once(name):
    with pytest.raises(UnknownSubstanceError):
        solve({name: 0.1})


@pytest.mark.parametrize(
    ("formula", "systems", "ions"),
    [
        ("C3H5KO3", {"lactate": 1}, {"K+": 1}),
        ("Mg(CH3COO)2", {"acetate": 2}, {"Mg2+": 1}),
        ("NH4OH", {"ammonia": 1}, {}),
        ("C4H9NO·HCl", {"morpholine": 1}, {"Cl-": 1}),
        ("Rb2SO4", {"sulfate": 1}, {"Rb+": 2}),
        ("CO2", {"carbonate": 1}, {}),
        ("C6H14N2O7", {"citrate": 1, "ammonia": 2}, {}),
        ("C2H8N2O3", {"ethylamine": 1}, {"NO3-": 1}),
    ],
)
def test_formulas_in_no_table_are_taken_apart(formula, systems, ions):
    found = dissociation(formula)
    assert (dict(found.systems), dict(found.ions)) == (systems, ions)


def test_a_formula_with_a_charge_left_over_is_refused():
    assert decompose(parse_formula("Na3HPO4")[0], "Na3HPO4") is None
    assert decompose(parse_formula("Na2HPO4")[0], "Na2HPO4") is not None


def test_fractional_water():
    assert adducts("CaSO4·0.5H2O")[1] == 0.5
    assert parse_formula("C6H6Na2O7·1.5H2O")[1] == 1.5


def test_constants_carry_source_status_and_uncertainty():
    for name in (
        "acids.csv",
        "clusters.csv",
        "interactions.csv",
        "ksp.csv",
        "solubilities.csv",
        "heats.csv",
    ):
        rows = list(table_rows(name))
        assert rows, name
        for row in rows:
            value = row.get("uncertainty") or row.get("uncertainty_pKa")
            assert value and float(value) > 0, (name, row)
            assert row["source"], (name, row)
            assert row["status"] in ("confirmed", "partly confirmed", "from memory"), (name, row)


def test_the_table_is_what_its_generator_writes_for_the_shipped_reagents(tmp_path, monkeypatch):
    """Runs the generator on the reagents of the substances room and compares every row it shares."""
    import importlib.util
    import sys
    from pathlib import Path

    here = Path(__file__).parent
    spec = importlib.util.spec_from_file_location("made", here / "generate_dissociation.py")
    made = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(made)
    source = Path(soplint.__file__).parent / "substances" / "data" / "reagents.csv"
    plain = tmp_path / "reagents.csv"
    with source.open(encoding="utf-8") as file:
        plain.write_text("".join(line for line in file if not line.startswith("#")), "utf-8")
    made.TARGET = tmp_path / "dissociation.csv"
    monkeypatch.setattr(sys, "argv", ["generate", str(plain)])
    made.main()
    with made.TARGET.open(encoding="utf-8", newline="") as file:
        rows = {r["name"]: r for r in csv.DictReader(x for x in file if not x.startswith("#"))}
    shared = [row for row in table_rows("dissociation.csv") if row["name"] in rows]
    assert len(shared) > 290
    for row in shared:
        assert row["systems"] == rows[row["name"]]["systems"], row["name"]
        assert row["strong_ions"] == rows[row["name"]]["strong_ions"], row["name"]
