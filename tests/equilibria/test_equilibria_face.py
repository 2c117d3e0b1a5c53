"""The public face: names documented, nothing heavy loaded, doctests true."""

from __future__ import annotations

import doctest
import inspect
import os
import subprocess
import sys
from importlib import import_module
from pathlib import Path

import pytest

import soplint.equilibria as room

MODULES = sorted(
    f"soplint.equilibria.{path.stem}"
    for path in Path(room.__file__).parent.glob("*.py")
    if path.stem != "__init__"
)


def _loaded_after(code):
    """Modules loaded by a fresh interpreter that runs some code."""
    root = str(Path(room.__file__).parents[2])
    script = f"{code}\nimport sys\nprint(*sorted(m.partition('.')[0] for m in sys.modules))"
    done = subprocess.run(
        [sys.executable, "-c", script],
        capture_output=True,
        text=True,
        check=True,
        env={**os.environ, "PYTHONPATH": root},
    )
    return set(done.stdout.split())


def test_the_scalar_path_loads_neither_numpy_nor_scipy():
    code = (
        "from soplint.equilibria import solve, adjust, buffer_recipe, pka, saturation\n"
        "s = solve({'KH2PO4': 0.025, 'Na2HPO4': 0.025, 'H3BO3': 0.01})\n"
        "s.buffer_capacity, s.uncertainty, s.validity, s.species, saturation(s)\n"
        "adjust({'Tris': 0.05}, 7.4); buffer_recipe('KH2PO4', 'K2HPO4', 7.0, 0.05)"
    )
    assert not _loaded_after(code) & {"numpy", "scipy", "pint"}
    curve = (
        "from soplint.equilibria import titration_curve as t\nt({'HCl': 1}, 1, {'NaOH': 1}, [1])"
    )
    assert "numpy" in _loaded_after(curve)
    assert "scipy" not in _loaded_after(curve)


def test_importing_the_package_loads_none_of_its_modules():
    code = "import soplint.equilibria, sys\nassert not [m for m in sys.modules if m.startswith('soplint.equilibria.')]"
    assert "soplint" in _loaded_after(code)


@pytest.mark.parametrize("name", room.__all__)
def test_every_public_name_is_there_and_documented(name):
    thing = getattr(room, name)
    assert inspect.getdoc(thing)
    if inspect.isfunction(thing):
        hints = inspect.get_annotations(thing)
        assert set(inspect.signature(thing).parameters) | {"return"} == set(hints), name


def test_all_and_the_lazy_table_agree():
    assert sorted(room._WHERE) == room.__all__
    with pytest.raises(AttributeError):
        room.nothing_of_the_kind  # noqa: B018


@pytest.mark.parametrize("name", ["soplint.equilibria", *MODULES])
def test_examples_in_the_docstrings(name):
    result = doctest.testmod(import_module(name))
    assert result.failed == 0


def test_public_functions_have_an_example():
    for name in MODULES:
        module = import_module(name)
        for label, thing in vars(module).items():
            if inspect.isfunction(thing) and thing.__module__ == name and label[0] != "_":
                assert ">>>" in (thing.__doc__ or ""), f"{name}.{label}"
