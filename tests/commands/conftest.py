"""Runs the command line as people do: in a process of its own."""

import os
import subprocess
import sys
from pathlib import Path

import pytest

import soplint

CHECKOUT = Path(soplint.__file__).resolve().parent.parent
DRIVER = Path(__file__).with_name("driver.py")


def environment(**more):
    kept = {k: v for k, v in os.environ.items() if not k.startswith(("GIT_", "SOPLINT_"))}
    return {**kept, "PYTHONPATH": str(CHECKOUT), "PYTHONUTF8": "1", **more}


@pytest.fixture
def run(tmp_path):
    """``run("review", "a.md")`` in an empty folder, with the orders of ``driver.py``."""

    def run(*arguments, input=b"", cwd=tmp_path, **environ):
        if isinstance(input, str):
            input = input.encode()
        done = subprocess.run(
            [sys.executable, DRIVER, *arguments],
            input=input,
            capture_output=True,
            cwd=cwd,
            env=environment(**environ),
            timeout=60,
        )
        done.stdout = done.stdout.decode()
        done.stderr = done.stderr.decode()
        assert "Traceback" not in done.stderr or environ.get("SOPLINT_TRACE")
        return done

    return run


@pytest.fixture
def write(tmp_path):
    """``write("a.md", text)`` below the folder that ``run`` runs in."""

    def write(name, text=""):
        path = tmp_path / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_bytes(text if isinstance(text, bytes) else text.encode())
        return path

    return write


@pytest.fixture
def python(tmp_path):
    """``python(code)``: what a fresh interpreter prints that can import this soplint."""

    def python(code):
        return subprocess.run(
            [sys.executable, "-c", code],
            capture_output=True,
            cwd=tmp_path,
            env=environment(),
            timeout=60,
            check=True,
            text=True,
        ).stdout

    return python
