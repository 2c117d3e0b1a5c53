"""Sentences of a block."""

from __future__ import annotations

import pytest

from soplint.intake import Text, sentences

CASES = [
    ["Add 5.0 mL of conc. HCl.", "Mix for 2 min.", "Cool."],
    ["Dilute approx. 5 mL in 10 L.", "Add water."],
    ["See Fig. 3.", "Use No. 5.", "Heat to 37 °C.", "Store."],
    ["H. pylori is grown.", "E. coli too.", "Use buffer A.", "Mix."],
    ["pH 7.4.", "Add KOH until pH 8.", "Then stop."],
    ["1. Weigh 5 g.", "2. Dissolve it."],
    ["Wait ...", "Then add.", "Is it clear?", "Yes!", "Go."],
    ["5 g KBr; 10 g KCl.", "Water ca. 500 mL."],
    ["(See Section 5.)", "Mix.", '"Done."', "Next"],
    ["Use e.g. KBr or i.e. Salt vs. KCl.", "Max. 5 g, min. 3 g.", "Keep."],
    ["Titrate with 0.1 N.", "Record V.", "The end."],
    ["Dr. Smith, St. Mary.", "M.W. 58.44.", "F.W. 40.", "Vol. 5 mL"],
    ["Add water to 1 L.", "5 mL of HCl is added."],
    ["Dissolve in 10 mL of sat. KBr and dil. HCl, q.s. 5 mL.", "Mix."],
    ["no end"],
]


@pytest.mark.parametrize("parts", CASES, ids=lambda parts: parts[0])
def test_sentences(parts: list[str]) -> None:
    text = Text(" ".join(parts), 3, 5)
    found = sentences(text)
    assert [sentence.chars for sentence in found] == parts
    for sentence in found:
        assert sentence.line == 3
        offset = sentence.column - 5
        assert text.chars[offset : offset + len(sentence.chars)] == sentence.chars


def test_line_breaks_and_full_width_stops_part_sentences() -> None:
    assert [s.chars for s in sentences(Text("5 g KBr\n6 g KCl", 1, 1))] == ["5 g KBr", "6 g KCl"]
    assert [s.chars for s in sentences(Text("加5克。搅拌。", 1, 1))] == ["加5克。", "搅拌。"]
    assert sentences(Text("", 1, 1)) == []
