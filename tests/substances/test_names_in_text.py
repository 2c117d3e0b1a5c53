"""Names of substances in running text: a table of lines, negatives included."""

from __future__ import annotations

import csv
import time
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from soplint.substances import Match, NameIndex, lookup

INDEX = NameIndex()
TABLE = Path(__file__).with_name("names_in_text.csv")


def rows() -> list[tuple[str, str]]:
    lines = [
        line for line in TABLE.read_text(encoding="utf-8").splitlines() if not line.startswith("#")
    ]
    return [(row["text"], row["expected"]) for row in csv.DictReader(lines)]


ROWS = rows()


def shown(match: Match) -> str:
    form = "generic" if match.generic else "named" if match.form_named else "open"
    return ":".join([f"{match.written}={match.substances[0].name}", form, *match.flags])


def test_the_table_holds_enough_rows() -> None:
    assert len(ROWS) >= 250
    assert sum(1 for _, expected in ROWS if not expected) >= 20


@pytest.mark.parametrize(("text", "expected"), ROWS, ids=[text[:60] for text, _ in ROWS])
def test_names_in_a_line(text: str, expected: str) -> None:
    found = INDEX.find(text)
    assert "||".join(map(shown, found)) == expected
    for match in found:
        assert text[match.start : match.end] == match.written
        assert match.substances


def test_an_unnamed_hydrate_means_every_common_hydrate() -> None:
    (match,) = INDEX.find("calcium chloride")
    assert [s.hydrate for s in match.substances] == [0, 2, 6]
    (match,) = INDEX.find("Na2HPO4")
    assert [s.hydrate for s in match.substances] == [0, 2, 7, 12]
    (match,) = INDEX.find("manganese chloride tetrahydrate")
    assert [s.hydrate for s in match.substances] == [4]


def test_the_anhydrous_form_is_computed_where_only_hydrates_are_sold() -> None:
    (match,) = INDEX.find("sodium molybdate")
    assert [s.hydrate for s in match.substances] == [2, 0]
    assert match.substances[1].status == "computed"


def test_edta_leaves_the_salt_form_open() -> None:
    (match,) = INDEX.find("EDTA")
    names = [s.name for s in match.substances]
    assert {"EDTA, acid", "disodium EDTA dihydrate", "tetrasodium EDTA dihydrate"} <= set(names)


def test_a_commercial_acid_means_its_strengths_and_the_undiluted_acid() -> None:
    (match,) = INDEX.find("phosphoric acid")
    assert [s.strength for s in match.substances] == [85, 100]
    (match,) = INDEX.find("conc. hydrochloric acid")
    assert [s.strength for s in match.substances] == [37, 32]


def test_a_formula_outside_the_catalogue_gets_its_molar_mass() -> None:
    (match,) = INDEX.find("Rb2CO3·1.5H2O")
    # 2 x 85.4678 + 12.011 + 3 x 15.999 + 1.5 x 18.015, standard atomic weights 2021
    assert match.substances[0].molar_mass == pytest.approx(257.966, abs=0.001)
    assert match.substances[0].status == "computed"


@pytest.mark.parametrize(
    ("name", "expected"),
    [
        ("hydrochloric acid 37 %", "hydrochloric acid 37 %"),
        ("hydrochloric acid (36 %)", "hydrochloric acid 37 %"),
        ("HNO3 (65%)", "nitric acid 65 %"),
        ("ammonia solution, 28 %", "ammonia solution 28 %"),
        ("picric acid (wetted)", "picric acid (wetted)"),
        ("di-sodium hydrogen phosphate, 7H2O", "disodium hydrogen phosphate heptahydrate"),
        ("milliQ", "water"),
    ],
)
def test_look_up_of_one_name(name: str, expected: str) -> None:
    match = lookup(name)
    assert match is not None
    assert match.substances[0].name == expected


@pytest.mark.parametrize("name", ["", "  ", "unobtainium", "wash buffer", "NaCl and KCl", "5"])
def test_look_up_wants_the_whole_name_understood(name: str) -> None:
    assert lookup(name) is None


CHARACTERS = "NaHKClCuSO40125·.,*x-()[] H2Oanhydrous conc. di sodium phosphate sulphate Трис½₂⁺\n\t"


@settings(max_examples=400, deadline=None)
@given(st.one_of(st.text(max_size=80), st.text(alphabet=CHARACTERS, max_size=60)))
def test_no_text_raises_and_places_are_right(text: str) -> None:
    reached = 0
    for match in INDEX.find(text):
        assert reached <= match.start < match.end <= len(text)
        assert match.written == text[match.start : match.end]
        assert match.substances
        reached = match.end
    lookup(text)


@pytest.mark.parametrize(
    "unit", ["(NaCl", "di-", "sodium ", "N,N'-", "sterile ", "CuSO4(", "conc. ", "Na2HPO4·7H2O "]
)
def test_the_time_grows_with_the_length_only(unit: str) -> None:
    def seconds(size: int) -> float:
        text = unit * (size // len(unit))
        start = time.process_time()
        INDEX.find(text)
        return time.process_time() - start

    seconds(10_000)
    short = max(seconds(30_000), 0.005)
    assert seconds(240_000) < 24 * short  # eight times the length; quadratic would be 64
