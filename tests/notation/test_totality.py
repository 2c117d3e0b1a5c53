"""No text breaks the reader, and brackets reach the grammar balanced."""

from __future__ import annotations

from hypothesis import given, settings
from hypothesis import strategies as st

from soplint.intake.model import Text
from soplint.notation.lexicon import spellings, terminals
from soplint.notation.read import Reading, read_sentence
from soplint.quantities import DEFAULT, find_measures
from soplint.substances import NameIndex

READING = Reading(DEFAULT, NameIndex())
WORDS = st.sampled_from(
    sorted({" ".join((first, *rest)) for first, all_ in spellings().items() for rest, _ in all_})
)
PIECES = st.one_of(
    WORDS,
    st.sampled_from(
        ["12 g", "500 mL", "0.1 mol/L", "5 %", "10X", "pH 7.4", "1:4", "25 °C", "58.44 g/mol"]
        + ["KBr", "water", "HCl", "Tris", "buffer A", "zzq", "4", "3 drops", "2 volumes"]
        + ["(", ")", "[", "]", ",", ";", ":", "-", "–", "/", "->", "=", "+", "x", "×", "w/v", "V ="]
    ),
)


@given(st.lists(PIECES, max_size=14).map(" ".join))
@settings(max_examples=400, deadline=None)
def test_phrases_of_any_text_lie_in_it(chars):
    """Phrases and quantities keep to the text, and no quantity is taken up by two doses."""
    sentence = read_sentence(Text(chars, 1, 1), READING, always=True)
    for phrase in sentence.phrases:
        assert 0 <= phrase.start <= phrase.end <= len(chars)
    for measure in sentence.measures:
        assert 0 <= measure.start < measure.end <= len(chars)
    places = [(m.start, m.end) for m in sentence.measures]
    assert places == sorted(places)
    assert len(places) == len(set(places))


@given(st.text(alphabet="()[] ab,5mLg=x/", max_size=40))
@settings(max_examples=300, deadline=None)
def test_brackets_are_balanced_before_the_grammar(chars):
    depth = 0
    for terminal in terminals(chars, find_measures(chars), READING.names.find(chars)):
        depth += (terminal.kind == "LPAR") - (terminal.kind == "RPAR")
        assert depth >= 0
    assert depth == 0


def test_deep_brackets_are_read_flat():
    chars = "5 g KBr " + "(" * 300 + "0.1 mol/L" + ")" * 300
    sentence = read_sentence(Text(chars, 1, 1), READING)
    assert [m.unit for m in sentence.measures] == ["g", "mol/L"]
    assert sentence.phrases[0].amount.unit == "g"
