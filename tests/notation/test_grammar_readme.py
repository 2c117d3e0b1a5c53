"""Every example of the reference of the notation reads as the reference says."""

from __future__ import annotations

import importlib.util
import sys
from pathlib import Path

import pytest

HERE = Path(__file__).parent
README = HERE.parents[1] / "grammar" / "README.md"

_spec = importlib.util.spec_from_file_location("reading_form", HERE / "reading_form.py")
assert _spec is not None and _spec.loader is not None
form = importlib.util.module_from_spec(_spec)
sys.modules[_spec.name] = form
_spec.loader.exec_module(form)

EXAMPLES = list(form.examples(README))


def test_reference_holds_examples_of_every_section_of_the_survey():
    """The reference is organised by the sections it covers; none may lose its examples."""
    text = README.read_text(encoding="utf-8")
    sections = text.split("\n## ")[1:]
    bare = [section.splitlines()[0] for section in sections if "```reading" not in section]
    assert len(EXAMPLES) >= 100
    assert bare == ["How to read the examples"]


@pytest.mark.parametrize("example", EXAMPLES, ids=lambda example: example.name)
def test_example_reads_as_written(example):
    assert form.reading(example.text) == example.expected
