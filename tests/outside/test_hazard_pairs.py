"""Pairs of published lists are found in one vessel, and not in two."""

import pytest

from soplint.review import review_bytes

# Regulation (EC) No 1272/2008, Annex II, 1.2.1 (EUH029, EUH031, EUH032) and Annex VI entries that
# carry them, from memory: substance, acid, rule.
EUH = [
    ("potassium cyanide", "cyanide-alkaline"),  # EUH032
    ("sodium cyanide", "cyanide-alkaline"),  # EUH032
    ("sodium azide", "azide-apart-from-acid-and-metal"),  # EUH032
    ("sodium fluoride", "no-toxic-gas"),  # EUH032
    ("calcium hypochlorite", "hypochlorite-alone"),  # EUH031
    ("sodium sulfide nonahydrate", "sulfide-alkaline"),  # EUH031
    ("sodium metabisulfite", "no-toxic-gas"),  # EUH031
    ("sodium dithionite", None),  # EUH031: no row of the table, so not assessed
]

# 40 CFR 265 Appendix V, examples of potentially incompatible wastes: group A with group B, and the
# consequence that the appendix names.
APPENDIX_V = [
    # group 2-A reactive metals with group 2-B acids: fire, hydrogen gas
    ("Place 500 mL of hydrochloric acid 2 mol/L in the tank.", "Add 20 g of zinc powder."),
    # group 5-A spent cyanide and sulfide solutions with group 5-B acids: HCN, H2S
    ("Dissolve 5 g of sodium cyanide in 100 mL of water.", "Add 50 mL of sulfuric acid 2 mol/L."),
    ("Dissolve 5 g of sodium sulfide in 100 mL of water.", "Add 50 mL of sulfuric acid 2 mol/L."),
    # group 6-A chlorates, hypochlorites, nitric acid, permanganate with group 6-B organics, metals
    ("Place 50 mL of nitric acid 65 % in the tank.", "Add 100 mL of ethanol."),
    ("Dissolve 10 g of potassium permanganate in 50 mL of water.", "Add 100 mL of glycerol."),
    ("Place 500 mL of sodium hypochlorite 10 % in the tank.", "Add 100 mL of ethanol."),
    # group 1-A alkaline caustics with group 1-B acids: heat, violent reaction
    ("Place 500 mL of hydrochloric acid 8 mol/L in the tank.", "Add 500 mL of sodium hydroxide 8 mol/L."),
]  # fmt: skip


def hazards(text):
    return [
        f
        for f in review_bytes(text.encode(), "a.sop").findings
        if f.rule.startswith("hazards.") and f.severity in ("critical", "major")
    ]


@pytest.mark.parametrize(("name", "rule"), [row for row in EUH if row[1]])
def test_euh_substance_meets_acid(name, rule):
    text = f"4 Test\n4.1 Dissolve 10 g of {name} in 100 mL of water.\n4.2 Add 50 mL of hydrochloric acid 6 mol/L.\n"
    assert f"hazards.{rule}" in {f.rule for f in hazards(text)}


@pytest.mark.parametrize("name", [row[0] for row in EUH])
def test_euh_substance_beside_acid(name):
    text = (
        f"4 Test\n4.1 Dissolve 10 g of {name} in 100 mL of water.\n\n"
        "5 Acid rinse\n5.1 Place 50 mL of hydrochloric acid 1 mol/L in the tray.\n"
    )
    assert hazards(text) == []


def test_pair_outside_the_table_is_counted_as_not_assessed():
    text = "4 Test\n4.1 Dissolve 10 g of sodium dithionite in 100 mL of water.\n4.2 Add 50 mL of hydrochloric acid 6 mol/L.\n"
    coverage = review_bytes(text.encode(), "a.sop").coverage
    assert (coverage.pairs_assessed, coverage.pairs_not_assessed) == (0, 1)


@pytest.mark.parametrize(("first", "second"), APPENDIX_V)
def test_appendix_v_example(first, second):
    found = hazards(f"4 Tank\n4.1 {first}\n4.2 {second}\n")
    assert found and all(f.caution for f in found)


@pytest.mark.parametrize(("first", "second"), APPENDIX_V)
def test_appendix_v_example_in_two_tanks(first, second):
    other = second.removesuffix(".") + " to 2 L of water."
    text = f"4 First tank\n4.1 {first}\n\n5 Second tank, never joined with the first\n5.1 {other}\n"
    assert [f for f in hazards(text) if f.rule != "hazards.heat-of-dilution-controlled"] == []
