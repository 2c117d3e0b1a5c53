"""Each command loads only the rooms that it needs: seen in the list of loaded modules."""

import json

import pytest

HEAVY = {"numpy", "scipy", "pint"}
CODE = """
import contextlib, io, json, sys
from soplint.__main__ import main
printed = io.TextIOWrapper(io.BytesIO())
with contextlib.redirect_stdout(printed):
    code = main({arguments!r})
print(json.dumps([code, sorted(sys.modules)]))
"""

PROCEDURES = {
    "buffer.sop": "Phosphate buffer pH 7.2, 0.1 mol/L, 1 L\n"
    "Weigh 4.68 g of sodium dihydrogen phosphate dihydrate.\n"
    "Weigh 9.94 g of disodium hydrogen phosphate.\n"
    "Dissolve in 800 mL of water and make up to 1000 mL.\n",
    "titrant.md": "# Sodium hydroxide 0.1 mol/L, 500 mL\n\n"
    "1. Weigh 2.0 g of sodium hydroxide.\n2. Make up to 500 mL with water.\n",
}


@pytest.fixture
def loaded(python):
    def loaded(*arguments):
        code, modules = json.loads(python(CODE.format(arguments=list(arguments))))
        assert code in (0, 1)
        return set(modules)

    return loaded


@pytest.mark.parametrize("name", PROCEDURES)
@pytest.mark.parametrize("form", ["text", "json"])
def test_reviewing_a_procedure_loads_no_heavy_library(loaded, write, name, form):
    path = write(name, PROCEDURES[name])
    modules = loaded("review", "--as", form, str(path))
    assert "soplint.review" in modules
    assert not modules & HEAVY


def test_version_loads_nothing_else(loaded):
    rooms = {name for name in loaded("--version") if name.startswith("soplint.")}
    assert rooms == {
        "soplint.__main__",
        "soplint.commands",
        "soplint.commands.arguments",
        "soplint.commands.output",
    }


def test_the_door_loads_little(python):
    """What costs milliseconds before the first byte of a procedure is read stays out."""
    code = "import sys, soplint.__main__, soplint.commands.review; print(*sys.modules)"
    modules = set(python(code).split())
    costly = {"argparse", "dataclasses", "inspect", "json", "lark", "re", "subprocess", "typing"}
    assert "soplint.commands.review" in modules
    assert not modules & (costly | HEAVY)


def test_rules_need_no_chemistry(loaded):
    modules = loaded("rules")
    assert "soplint.checks.cards" in modules
    assert not modules & (HEAVY | {"soplint.review"})
