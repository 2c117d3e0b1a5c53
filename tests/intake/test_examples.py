"""The examples in the room's own descriptions hold."""

from __future__ import annotations

import doctest
import importlib
import pkgutil

import pytest

import soplint.intake

MODULES = ["soplint.intake"] + [
    f"soplint.intake.{module.name}" for module in pkgutil.iter_modules(soplint.intake.__path__)
]


@pytest.mark.parametrize("name", MODULES)
def test_examples(name: str) -> None:
    assert doctest.testmod(importlib.import_module(name)).failed == 0


def test_there_are_examples() -> None:
    tried = sum(doctest.testmod(importlib.import_module(name)).attempted for name in MODULES)
    assert tried >= 12
