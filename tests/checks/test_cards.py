"""Every rule has a card, every card a rule, and the examples on the cards do what they say."""

import pytest

from soplint.checks import RULES
from soplint.checks.cards import cards
from soplint.review import review_bytes
from soplint.settings import Settings

CARDS = cards()
TRIPS = [(card.name, example) for card in CARDS.values() for example in card.trips]
PASSES = [(card.name, example) for card in CARDS.values() for example in card.passes]


def label(value):
    return value if isinstance(value, str) else f"line {value.line}"


def given(rule, example):
    """Class and line of the findings of ``rule`` in the review of ``example``."""
    review = review_bytes(example.text.encode(), f"example.{example.kind}", Settings())
    return sorted(
        (found.severity, found.span.line) for found in review.findings if found.rule == rule
    )


def test_there_are_cards():
    assert CARDS and TRIPS and PASSES


def test_rules_and_cards_are_the_same_set():
    assert set(RULES) == set(CARDS)


@pytest.mark.parametrize(("rule", "example"), TRIPS, ids=label)
def test_example_trips(rule, example):
    assert given(rule, example) == sorted((e.severity, e.line) for e in example.expects)


@pytest.mark.parametrize(("rule", "example"), PASSES, ids=label)
def test_example_passes(rule, example):
    assert given(rule, example) == []
