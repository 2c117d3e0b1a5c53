"""How fast lines are read: lines per second, by stage, over the corpus and the samples.

Run by hand from the top of the checkout:  python tests/benchmarks/bench_notation.py
"""

from __future__ import annotations

import importlib.util
import sys
import time
from collections.abc import Callable, Iterable
from pathlib import Path

from soplint.intake import read_bytes
from soplint.intake.model import Document, Text
from soplint.intake.sentences import sentences
from soplint.notation.build import parts
from soplint.notation.document import read_document
from soplint.notation.lexicon import terminals
from soplint.notation.meaning import meaning
from soplint.notation.parser import parse
from soplint.notation.read import Reading, read_sentence
from soplint.notation.refine import refine
from soplint.quantities import DEFAULT, find_measures
from soplint.substances import NameIndex

ROOT = Path(__file__).parents[2]
ROUNDS = 5


def documents() -> list[Document]:
    """Every case of the corpus and every sample procedure."""
    path = ROOT / "tests" / "corpus" / "scoring.py"
    spec = importlib.util.spec_from_file_location("corpus_scoring", path)
    assert spec is not None and spec.loader is not None
    scoring = importlib.util.module_from_spec(spec)
    sys.modules[spec.name] = scoring
    spec.loader.exec_module(scoring)
    found = [
        read_bytes(case.document.encode(), f"{case.name}.md")
        for folder in ("held-first", "open")
        for case in scoring.cases(path.parent / folder)
    ]
    samples = sorted(p for p in (ROOT / "samples").rglob("*") if p.suffix in (".md", ".sop"))
    return found + [read_bytes(p.read_bytes(), p.name) for p in samples]


def best(work: Callable[[], object]) -> float:
    """Shortest time of a few rounds, in seconds."""
    times = []
    for _ in range(ROUNDS):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return min(times)


def stages(lines: list[Text], reading: Reading) -> Iterable[tuple[str, float]]:
    """Time of each stage over all lines that hold a quantity."""
    chars = [line.chars for line in lines]
    measures = [find_measures(c) for c in chars]
    names = [reading.names.find(c) for c in chars]
    words = [terminals(*args) for args in zip(chars, measures, names, strict=True)]
    settled = [refine(*args) for args in zip(chars, words, strict=True)]
    trees = [parse(terms) for terms in settled]
    phrases = [parts(c, *tree) for c, tree in zip(chars, trees, strict=True)]
    yield "quantities", best(lambda: [find_measures(c) for c in chars])
    yield "names", best(lambda: [reading.names.find(c) for c in chars])
    yield "lexicon", best(lambda: list(map(terminals, chars, measures, names)))
    yield "refine", best(lambda: list(map(refine, chars, words)))
    yield "parse", best(lambda: list(map(parse, settled)))
    yield "build and join", best(lambda: [parts(c, *t) for c, t in zip(chars, trees, strict=True)])
    yield "meaning", best(lambda: list(map(meaning, phrases)))


def main() -> None:
    found = documents()
    lines = sum(len(document.lines) for document in found)
    reading = Reading(DEFAULT, NameIndex())
    for document in found:
        read_document(document)  # warm: grammar, lexicon and catalogue are loaded once
    whole = best(lambda: [read_document(document) for document in found])
    texts = [s for d in found for b in d.blocks if b.table is None for s in sentences(b.text)]
    holding = [text for text in texts if find_measures(text.chars)]
    print(f"{lines} lines of {len(found)} documents: {lines / whole:,.0f} lines/s")
    alone = best(lambda: [read_sentence(text, reading) for text in texts])
    print(f"{len(texts)} sentences: {len(texts) / alone:,.0f} sentences/s")
    print(f"{len(holding)} sentences with a quantity, microseconds for one:")
    for name, seconds in stages(holding, reading):
        print(f"  {name:16s}{1e6 * seconds / len(holding):8.1f}")


if __name__ == "__main__":
    main()
