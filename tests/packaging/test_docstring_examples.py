"""Every example in a docstring of the program gives what it says."""

import doctest
import importlib
from pathlib import Path

import pytest

import soplint

PACKAGE = Path(soplint.__file__).resolve().parent
MODULES = sorted(
    ".".join(("soplint", *path.relative_to(PACKAGE).with_suffix("").parts)).removesuffix(
        ".__init__"
    )
    for path in PACKAGE.rglob("*.py")
    if ">>>" in path.read_text(encoding="utf-8")
)


def test_there_are_examples():
    assert "soplint.reports.inert" in MODULES


@pytest.mark.parametrize("name", MODULES)
def test_examples(name):
    result = doctest.testmod(importlib.import_module(name))
    assert result.attempted > 0
    assert result.failed == 0
