"""Whole documents: the blocks of each file in ``documents/`` are those of its ``.blocks`` file.

To add a case put a document there and write its blocks as ``show_blocks.py`` prints them.
"""

from __future__ import annotations

import importlib.util
from pathlib import Path

import pytest

from soplint.intake import read

DOCUMENTS = sorted(Path(__file__).with_name("documents").glob("*.blocks"))


def _shown(path: Path) -> list[str]:
    source = Path(__file__).with_name("show_blocks.py")
    spec = importlib.util.spec_from_file_location("show_blocks", source)
    assert spec is not None and spec.loader is not None
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return list(module.shown(read(path)))


def test_there_are_documents_of_every_kind() -> None:
    kinds = {path.with_suffix("").suffix for path in DOCUMENTS}
    assert kinds == {".md", ".sop", ".txt", ".rst"}


@pytest.mark.parametrize("expected", DOCUMENTS, ids=lambda path: path.stem)
def test_blocks(expected: Path) -> None:
    assert _shown(expected.with_suffix("")) == expected.read_text("utf-8").splitlines()
