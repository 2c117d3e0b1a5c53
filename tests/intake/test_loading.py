"""What reading loads: the Markdown parser for Markdown only."""

from __future__ import annotations

import subprocess
import sys

import pytest


@pytest.mark.parametrize(("path", "loaded"), [("a.md", True), ("a.sop", False), ("a.rst", False)])
def test_markdown_parser_is_loaded_for_markdown_only(path: str, loaded: bool) -> None:
    program = (
        "import sys; from soplint.intake import read_bytes; "
        f"read_bytes(b'- 5 g of NaCl &micro;', {path!r}); "
        "print('markdown_it' in sys.modules, "
        "any(name in sys.modules for name in ('numpy', 'scipy', 'pint')))"
    )
    done = subprocess.run(
        [sys.executable, "-c", program], capture_output=True, text=True, check=True
    )
    assert done.stdout.split() == [str(loaded), "False"]
