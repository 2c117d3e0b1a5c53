"""Procedures about buffers with a key, written before they were first reviewed."""

import importlib.util
from pathlib import Path

HERE = Path(__file__).parent


def test_planted_buffer_mistakes():
    spec = importlib.util.spec_from_file_location("procedure_scoring", HERE / "scoring.py")
    assert spec is not None and spec.loader is not None
    scoring = importlib.util.module_from_spec(spec)
    import sys

    sys.modules["procedure_scoring"] = scoring
    spec.loader.exec_module(scoring)
    result = scoring.score(HERE / "buffers")
    assert not result.false, result.false
    assert len(result.found) / (len(result.found) + len(result.missed)) >= 0.8, result.missed
