"""Score the reader against the corpus.

Run by hand from the top of the checkout:

    python tests/corpus/scoring.py held-first open            # totals and one line per section
    python tests/corpus/scoring.py open --failures            # and every quantity that is wrong

Each case is read as a Markdown document, carried out, and its ledger compared with the key.  For
every quantity of the key the ledger line at an overlapping place is looked for; it is *found* if
its value and unit are right.  Of those found, role, substance and preparation are compared, each
as loosely as the README of this folder says; ``-`` in the key is not compared.  A ledger line that
overlaps no quantity of the key is noise.
"""

from __future__ import annotations

import argparse
import math
import re
import sys
from collections import Counter, defaultdict
from collections.abc import Iterator
from dataclasses import dataclass, field
from pathlib import Path

from soplint.bench import carry_out
from soplint.bench.carry_out import Bench
from soplint.bench.ledger import Line
from soplint.bench.preparation import Preparation, Stated
from soplint.intake import read_bytes
from soplint.intake.model import Document
from soplint.notation.document import read_document
from soplint.notation.phrases import Dose, Material
from soplint.quantities import lookup_unit
from soplint.quantities.model import Measure
from soplint.substances import lookup

HERE = Path(__file__).parent
_START = re.compile(r"^== (\S+) \| survey (.+)$")
_EQUAL = 1e-3  # values of the key are written with the digits of the text

Key = tuple[int, int, int, int]


@dataclass(frozen=True, slots=True)
class Expected:
    """One line of a key."""

    text: str
    value: str
    unit: str
    role: str
    substance: str
    preparation: str


@dataclass(frozen=True, slots=True)
class Case:
    """One case of the corpus."""

    name: str
    section: str  # file it stands in
    rows: tuple[str, ...]
    document: str
    expected: tuple[Expected, ...]


@dataclass(slots=True)
class Score:
    """Counts of one section or of everything."""

    counts: Counter[str] = field(default_factory=Counter)
    failures: list[str] = field(default_factory=list)

    def add(self, other: Score) -> None:
        self.counts.update(other.counts)
        self.failures.extend(other.failures)

    def share(self, what: str, of: str) -> str:
        total = self.counts[of]
        return f"{100 * self.counts[what] / total:5.1f} %" if total else "    -  "

    def __str__(self) -> str:
        c = self.counts
        return (
            f"{c['expected']:5d} quantities: found {self.share('found', 'expected')}, "
            f"all right {self.share('all', 'expected')}"
            f" (with preparation {self.share('whole', 'expected')}); "
            f"role {self.share('role', 'found')}, substance {self.share('substance', 'named')}, "
            f"preparation {self.share('preparation', 'titled')} of those found; "
            f"lines read {self.share('lines read', 'lines')}; noise {c['noise']}"
        )


# --- the corpus ------------------------------------------------------------------------------------


def cases(folder: Path) -> Iterator[Case]:
    """All cases of a folder, in the order of its files."""
    for path in sorted(folder.glob("*.txt")):
        yield from cases_in(path)


def cases_in(path: Path) -> Iterator[Case]:
    """The cases of one file."""
    lines = path.read_text(encoding="utf-8").split("\n")
    at = 0
    while at < len(lines):
        start = _START.match(lines[at])
        if start is None:
            at += 1
            continue
        end = lines.index("--", at)
        document = "\n".join(lines[at + 1 : end]) + "\n"
        at = end + 1
        expected = []
        while at < len(lines) and lines[at].strip() and not _START.match(lines[at]):
            if lines[at].strip() != "nothing":
                expected.append(Expected(*(part.strip() for part in lines[at].split(" | "))))
            at += 1
        rows = tuple(row.strip() for row in start[2].split(";"))
        yield Case(start[1], path.stem, rows, document, tuple(expected))


def places(case: Case, document: Document) -> list[Key]:
    """Where the quantities of the key stand: each after the one before it, if possible."""
    text = "\n".join(document.lines)
    starts = [0]
    for line in document.lines:
        starts.append(starts[-1] + len(line) + 1)
    found: list[Key] = []
    at = 0
    for quantity in case.expected:
        begin = _search(text, quantity.text, at)
        if begin < 0:
            begin = _search(text, quantity.text, 0)
        if begin < 0:
            raise ValueError(f"{case.name}: {quantity.text!r} is not in the text")
        at = begin + len(quantity.text)
        row = max(i for i, start in enumerate(starts[:-1]) if start <= begin)
        column = begin - starts[row] + 1
        found.append((row + 1, column, row + 1, column + len(quantity.text)))
    return found


def _search(text: str, part: str, at: int) -> int:
    """First place of ``part`` from ``at`` on that cuts no number or word in two."""
    while (begin := text.find(part, at)) >= 0:
        before = text[begin - 1] if begin else " "
        after = text[begin + len(part) : begin + len(part) + 1]
        cut = part[0].isdigit() and (before.isalnum() or before in ".-")
        if not (cut or (part[-1].isalnum() and after.isalnum())):
            return begin
        at = begin + 1
    return text.find(part, at)


# --- comparing --------------------------------------------------------------------------------------


def same_value(expected: Expected, measure: Measure) -> bool:
    """Whether the ledger's measure has the value and unit of the key."""
    if ":" in expected.value or measure.parts:
        return _parts(expected.value) == [float(f"{p:.4g}") for p in measure.parts] or (
            "/" in expected.value and _near(_number(expected.value), measure.nominal)
        )
    factor, dimension = _unit(expected)
    if factor is None or (dimension is not None and dimension != measure.dimension):
        return False
    if ".." in expected.value:
        low, high = (float(v) * factor for v in expected.value.split(".."))
        return _near(low, measure.low * measure.factor) and _near(
            high, measure.high * measure.factor
        )
    value = _number(expected.value)
    if measure.offset:
        return _near(value, measure.nominal)
    return _near(value * factor, measure.nominal * measure.factor)


def _parts(value: str) -> list[float]:
    return [float(p) for p in value.split(":")] if ":" in value else []


def _number(value: str) -> float:
    over, _, under = value.partition("/")
    return float(over) / float(under) if under else float(value)


# Units of the key that the unit table does not know, with the dimension they have in the ledger.
_UNITS = {
    "-": None,
    "x": "fold",
    "pH": "pH",
    "degC": "temperature",
    "drop": "count",
    "g/mol": "molar-mass",
}


def _unit(expected: Expected) -> tuple[float | None, str | None]:
    """Factor to the base unit and dimension of a unit of the key."""
    if expected.unit in _UNITS:
        return 1.0, _UNITS[expected.unit]
    if expected.unit == "g/mL":
        # the second is the slip of a molar mass in g/mL: any dimension, the role is compared
        return 1.0, "density" if expected.role == "density" else None
    unit = lookup_unit(re.sub(r"^u(?=mol/)|^u(?=g/)|(?<=/)u(?=L)", "µ", expected.unit))
    return (unit.factor, unit.dimension) if unit else (None, None)


def _near(first: float, second: float) -> bool:
    return math.isclose(first, second, rel_tol=_EQUAL, abs_tol=1e-15)


def same_role(expected: Expected, line: Line) -> bool:
    if expected.role == line.role:
        return True
    if expected.role == "titre":
        return line.role in ("volume", "titre")
    # parts per million stand as fraction in the key and as concentration in the record
    return expected.unit == "ppm" and line.role in ("fraction", "concentration")


_FILLER = re.compile(r"[^\w]+")
_WEAK = {
    *("solution", "stock", "buffer", "of", "the", "a", "dried", "pure", "conc", "concentrated"),
    *("anhydrous", "sterile", "glacial", "mix", "powder"),
}


def same_substance(expected: str, found: str | None) -> bool:
    """Whether two names mean the same substance, hydrates and strengths aside."""
    if not found:
        return False
    if _within(expected, found):
        return True
    left, right = lookup(expected), lookup(found)
    if left is None or right is None:
        return False
    first = {s.family for s in left.substances} | {s.acid_system for s in left.substances}
    second = {s.family for s in right.substances} | {s.acid_system for s in right.substances}
    return bool((first & second) - {None})


def _within(first: str, second: str) -> bool:
    """Loose containment: the telling words of one are all among those of the other."""
    left, right = _telling(first), _telling(second)
    return bool(left and right) and (left <= right or right <= left)


def _telling(name: str) -> set[str]:
    words = {w for w in _FILLER.sub(" ", name.lower()).split() if w}
    return (words - _WEAK) or words


def preparation_names(bench: Bench) -> dict[Key, list[str]]:
    """Titles of the preparations that each stated quantity belongs to."""
    names: dict[Key, list[str]] = defaultdict(list)
    for preparation in bench.preparations:
        for stated in _of_preparation(preparation):
            names[stated.key].append(preparation.name)
    return names


def _of_preparation(preparation: Preparation) -> Iterator[Stated]:
    title = preparation.title
    if title is not None:
        yield from (target.stated for target in title.targets)
        yield from (s for s in (title.fold, title.ph, title.volume) if s is not None)
    for taken in preparation.taken:
        for measure in _of_dose(taken.dose):
            yield Stated(taken.text, measure)
    for made in preparation.made:
        if made.to.volume is not None:
            yield Stated(made.text, made.to.volume)
    for adjusted in preparation.adjusted:
        if adjusted.set_ph.ph is not None:
            yield Stated(adjusted.text, adjusted.set_ph.ph)
        for reagent in adjusted.set_ph.reagents:
            yield from (Stated(adjusted.text, m) for m in _of_material(reagent))
        for dose in adjusted.set_ph.doses:
            yield from (Stated(adjusted.text, m) for m in _of_dose(dose))
    for claimed in preparation.claimed:
        yield Stated(claimed.text, claimed.claim.measure)
    for mixed in preparation.mixed:
        yield Stated(mixed.text, mixed.mixture.ratio)
    yield from (stated for stated, _ in preparation.flasks)
    if preparation.total is not None:
        yield preparation.total


def _of_dose(dose: Dose) -> Iterator[Measure]:
    yield dose.amount
    yield from dose.same
    if dose.material is not None:
        yield from _of_material(dose.material)
    for other in dose.alternatives:
        yield from _of_dose(other)


def _of_material(material: Material) -> Iterator[Measure]:
    yield from (*material.strengths, *material.bracket, *material.finals)
    for single in (material.ph, material.temperature, material.molar_mass, material.density):
        if single is not None:
            yield single


# --- scoring ---------------------------------------------------------------------------------------


def score(case: Case) -> Score:
    """Read one case and compare it with its key."""
    document = read_bytes(case.document.encode(), f"{case.name}.md")
    bench = carry_out(read_document(document))
    names = preparation_names(bench)
    result = Score()
    free = dict(bench.ledger.lines)
    where = places(case, document)
    by_line: dict[int, list[bool]] = defaultdict(list)
    touched: set[Key] = set()
    for expected, place in zip(case.expected, where, strict=True):
        result.counts["expected"] += 1
        over = [key for key in bench.ledger.lines if _overlap(key, place)]
        touched.update(over)
        right = [k for k in over if k in free and same_value(expected, free[k].stated.measure)]
        by_line[place[0]].append(bool(right))
        if not right:
            seen = "; ".join(document.source(free[k].stated.span) for k in over if k in free)
            _fail(result, case, expected, f"not found (there: {seen or 'nothing'})")
            continue
        line = free.pop(right[0])
        _compare(result, case, expected, line, names.get(right[0], []))
    for key, line in bench.ledger.lines.items():
        if key not in touched:
            result.counts["noise"] += 1
            source = document.source(line.stated.span)
            result.failures.append(f"{case.section}/{case.name}: noise {source!r} ({line.role})")
    result.counts["lines"] += len(by_line)
    result.counts["lines read"] += sum(all(found) for found in by_line.values())
    return result


def _overlap(first: Key, second: Key) -> bool:
    return first[:2] < second[2:] and second[:2] < first[2:]


def _compare(result: Score, case: Case, expected: Expected, line: Line, titles: list[str]) -> None:
    """Role, substance and preparation of a quantity that was found."""
    counts = result.counts
    counts["found"] += 1
    wrong = []
    if same_role(expected, line):
        counts["role"] += 1
    else:
        wrong.append(f"role {line.role}")
    if expected.substance != "-":
        counts["named"] += 1
        if same_substance(expected.substance, line.of):
            counts["substance"] += 1
        else:
            wrong.append(f"substance {line.of!r}")
    if not wrong:
        counts["all"] += 1
    if expected.preparation != "-" and not titles:
        counts["untitled"] += 1  # stands in no preparation: nothing to compare
    elif expected.preparation != "-":
        counts["titled"] += 1
        if any(_within(expected.preparation, title) for title in titles):
            counts["preparation"] += 1
        else:
            wrong.append(f"preparation {titles[0]!r}")
    if not wrong:
        counts["whole"] += 1
    if wrong:
        _fail(result, case, expected, ", ".join(wrong))


def _fail(result: Score, case: Case, expected: Expected, why: str) -> None:
    told = f"{expected.value} {expected.unit} {expected.role} of {expected.substance}"
    where = f"{case.section}/{case.name}"
    result.failures.append(f"{where}: {expected.text!r} [{told}; {expected.preparation}]: {why}")


def score_folder(folder: Path) -> dict[str, Score]:
    """Scores by section, and of everything under ``total``."""
    sections: dict[str, Score] = defaultdict(Score)
    for case in cases(folder):
        sections[case.section].add(score(case))
    total = Score()
    for part in sections.values():
        total.add(part)
    return {**sections, "total": total}


def main() -> int:
    parser = argparse.ArgumentParser(description="Score the reader against the corpus.")
    parser.add_argument("folders", nargs="+")
    parser.add_argument("--failures", action="store_true", help="list what is wrong")
    parser.add_argument("--case", help="only the case of this name")
    options = parser.parse_args()
    for name in options.folders:
        scores = score_folder(HERE / name)
        print(f"{name}:")
        for section, part in scores.items():
            print(f"  {section:24s}{part}")
        if options.failures:
            print(*scores["total"].failures, sep="\n")
    return 0


if __name__ == "__main__":
    sys.exit(main())
