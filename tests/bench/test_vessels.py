"""Which things meet in which vessel."""

import pytest

from soplint.bench import carry_out
from soplint.bench.contact import contacts, pairs
from soplint.bench.streams import asides, destinations
from soplint.bench.vessels import vessels
from soplint.intake import read_bytes
from soplint.notation.document import read_document


def bench(text, name="a.sop"):
    return carry_out(read_document(read_bytes(text.encode(), name)))


def held(text, name="a.sop"):
    """Families and words of the contents, vessel by vessel."""
    return [[c.key for c in v.contents] for v in vessels(bench(text, name)) if v.contents]


def test_steps_of_a_section_share_a_vessel():
    text = "3 Bath\n3.1 Add 200 mL of sodium hypochlorite 10 % to 2 L of water.\n3.2 Add 100 mL of hydrochloric acid 37 % to the tub.\n"
    assert held(text) == [["NaOCl", "water", "HCl"]]


def test_a_second_beaker_is_another_vessel():
    text = "3 Two\n3.1 Dissolve 5 g of sodium nitrite in 50 mL of water.\n3.2 Place 20 mL of sulfuric acid 4 mol/L in a second beaker.\n"
    assert held(text) == [["NaNO2", "water"], ["H2SO4"]]


def test_a_reagent_list_is_no_vessel():
    text = "3 Reagents\n- Sodium hypochlorite, 10 %, 500 mL\n- Hydrochloric acid, 37 %, 1 L\n"
    assert held(text, "a.md") == []


def test_rinsing_empties_the_vessel():
    text = "3 Tub\n3.1 Add 100 mL of sodium hypochlorite 5 % to 1 L of water.\n3.2 Rinse with water.\n3.3 Add 50 mL of hydrochloric acid 1 mol/L.\n"
    assert contacts(bench(text)) == []


def test_a_stock_carries_its_contents():
    text = (
        "2 Sulfide stock, 100 mL\n2.1 Dissolve 2.4 g of sodium sulfide nonahydrate in 80 mL of water.\n"
        "2.2 Make up to 100 mL.\n\n3 Check\n3.1 Pipette 50 mL of the sulfide stock into a beaker.\n"
    )
    last = [v for v in vessels(bench(text)) if v.contents][-1]
    assert last.contents[0].key == "Na2S"
    assert last.contents[0].moles == pytest.approx(0.005, rel=0.01)


def test_residues_follow_into_the_named_container():
    text = "4 Column\n4.1 Dissolve 0.5 g of sodium azide in 50 mL of water.\n4.2 Collect the residues in the acid waste.\n"
    stream = [v for v in vessels(bench(text)) if v.kind == "stream"]
    assert [v.name for v in stream] == ["acid waste"]
    assert "NaN3" in [c.key for c in stream[0].contents]


def test_pairs_with_an_unknown_thing_are_not_assessed():
    text = "3 Bleaching\n3.1 Add 50 mL of sodium hypochlorite 10 % to 200 mL of zedoline extract.\n"
    assert pairs(bench(text)) == (0, 1)


@pytest.mark.parametrize(
    ("chars", "names"),
    [
        ("Pour the lysate into the bleach tub.", ["bleach tub"]),
        ("Collect it in the acid waste, never in the bleach tub.", ["acid waste", "bleach tub"]),
        ("Soak the pipettes in the bleach bath for 15 min.", []),
        ("Solvent can: acetonitrile and methanol.", ["solvent can"]),
        ("Add 10 mL to the beaker.", []),
    ],
)
def test_destinations(chars, names):
    assert [d.name for d in destinations(chars)] == names


@pytest.mark.parametrize(
    ("chars", "aside"),
    [
        ("Never mix bleach with acid.", "bleach"),
        ("Collect it in the can, never in the acid waste.", "acid"),
        ("Keep azide away from acid and metal.", "acid"),
    ],
)
def test_warnings_are_no_actions(chars, aside):
    place = chars.index(aside)
    assert any(start <= place < end for start, end in asides(chars))


def test_a_plain_step_is_an_action():
    assert asides("Add 10 mL of bleach to the tub.") == []
