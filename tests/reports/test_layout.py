"""Width, wrapping and the choice of a page."""

import io

import pytest

from soplint.intake.model import Span
from soplint.reports.inert import inert
from soplint.reports.layout import Page, page_for, width, wrapped
from soplint.reports.source import stretch


def test_width_counts_columns_not_characters():
    assert width("µL") == 2
    assert width("純水") == 4
    assert width("e\u0301") == 1


@pytest.mark.parametrize("columns", [None, 5, 12, 40])
def test_wrapping_loses_no_word(columns):
    text = "0.0676 mol/L × 1 L × 136.08 g/mol = 9.199 g"
    assert " ".join(wrapped(text, columns)) == text


def test_wrapped_lines_fit_unless_one_word_is_longer():
    assert wrapped("aa bb cc", 5) == ["aa bb", "cc"]
    assert wrapped("aa bb cc", 7, indent=2) == ["aa bb", "cc"]
    assert wrapped("a longest b", 4) == ["a", "longest", "b"]


class Terminal(io.StringIO):
    def isatty(self):
        return True


def test_only_a_terminal_has_bold_and_no_color_turns_it_off(monkeypatch):
    monkeypatch.delenv("NO_COLOR", raising=False)
    monkeypatch.setenv("TERM", "xterm")
    assert page_for(io.StringIO()) == Page()
    assert page_for(None) == Page()
    assert page_for(Terminal()).bold
    monkeypatch.setenv("NO_COLOR", "1")
    assert not page_for(Terminal()).bold
    monkeypatch.delenv("NO_COLOR")
    monkeypatch.setenv("TERM", "dumb")
    assert not page_for(Terminal()).bold


@pytest.mark.parametrize(
    "live",
    [
        "\x00",
        "\x1b",
        "\n",
        "\r",
        "\t",
        "\x7f",
        "\x9b",
        "\u202e",
        "\u2066",
        "\u2028",
        "\ud800",
        "\ufeff",
        "\U000e0041",
    ],
)
def test_live_characters_are_written_out(live):
    shown = inert(f"a{live}b")
    assert shown.isprintable()
    assert shown[0] + shown[-1] == "ab"


def test_ordinary_text_is_untouched():
    for text in ("4.87 g", "4.87\u202fg", "Na₂HPO₄·7H₂O", "20\u00a0°C", "緩衝液"):
        assert inert(text) == text


def test_stretch_of_source():
    lines = ("first line", "second")
    assert stretch(lines, Span(1, 7, 1, 11)) == "line"
    assert stretch(lines, Span(1, 7, 2, 4)) == "line\nsec"
    assert stretch(lines, Span(9, 1, 9, 2)) == ""
