"""Recipe tables: every shape of the case file, and properties that hold for any table."""

from __future__ import annotations

import random
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from pathlib import Path

import pytest

from soplint.intake.model import Table, Text
from soplint.notation import Reading
from soplint.notation.phrases import Claim, Dose, Material, Phrase, SetPH, ToVolume
from soplint.notation.rows import RecipeTable, Row, Variant
from soplint.notation.tables import WIDEST, read_table
from soplint.quantities import number_style
from soplint.quantities.model import Measure
from soplint.substances import NameIndex

CASES = Path(__file__).with_name("tables") / "cases.txt"


# --- the case file ---------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Case:
    title: str
    table: Table
    context: tuple[Text, ...]
    expected: tuple[str, ...]


def read_cases(source: str) -> Iterator[Case]:
    title, context, lines, expected = "", [], [], []
    for number, line in enumerate([*source.splitlines(), "== "], start=1):
        if line.startswith("== "):
            if title:
                yield Case(title, as_table(lines), tuple(context), tuple(expected))
            title, context, lines, expected = line[3:], [], [], []
        elif line.startswith("context: "):
            context.append(Text(line[9:], number, 10))
        elif line.startswith("|"):
            lines.append((number, line))
        elif line.startswith("> "):
            expected.append(line[2:].rstrip())


def as_table(lines: Sequence[tuple[int, str]]) -> Table:
    rows = [tuple(as_cells(line, number)) for number, line in lines]
    return Table(rows[0], tuple(rows[1:]))


def as_cells(line: str, number: int) -> Iterator[Text]:
    column = 2
    for piece in line.strip()[1:-1].split("|"):
        lead = len(piece) - len(piece.lstrip()) if piece.strip() else 0
        yield Text(piece.strip(), number, column + lead)
        column += len(piece) + 1


def reading_of(table: Table) -> Reading:
    texts = [cell.chars for row in (table.head, *table.rows) for cell in row]
    return Reading(number_style(texts), NameIndex())


# --- how a case is written down ---------------------------------------------------------------------


def written(table: RecipeTable) -> list[str]:
    heads = "; ".join(variant(v) for v in table.variants)
    lines = [f"{table.kind}: {heads}" if heads else table.kind]
    if table.kind != "other":
        lines.extend(row_line(row, table.kind) for row in table.rows)
    return lines


def variant(v: Variant) -> str:
    told = [v.name or "", amount(v.volume), amount(v.fold), amount(v.ph)]
    return ", ".join(part for part in told if part) or "-"


def row_line(row: Row, kind: str) -> str:
    if row.kind == "note":
        return " ".join(["note", *(phrase(p) for p in row.sentence.phrases)])
    columns = [
        dose_words(d, row.material) if d else to_words(v) if v else "-"
        for d, v in zip(row.doses, row.to_volumes, strict=True)
    ]
    line = f"{row.kind} {material(row.material)}"
    if columns:
        line += ": " + "; ".join(columns)
    several = kind == "list" and len(row.sentence.phrases) > 1
    shown = (Material, SetPH, ToVolume) if several else (SetPH, ToVolume)
    behind = [p for p in row.sentence.phrases if isinstance(p, shown) and p not in row.to_volumes]
    return " ".join([line, *(phrase(p) for p in behind)])


def phrase(p: Phrase) -> str:
    if isinstance(p, Material):
        return f"<{material(p)}>"
    if isinstance(p, Dose):
        return f"<{amount(p.amount)} {material(p.material)}>"
    if isinstance(p, ToVolume):
        return f"<{to_words(p)}>"
    if isinstance(p, SetPH):
        by = " with " + ", ".join(m.words for m in p.reagents) if p.reagents else ""
        return f"<set {amount(p.ph)}{by}>"
    if isinstance(p, Claim):
        return f"<claim {amount(p.measure)} {material(p.material)}>"
    return f"<{type(p).__name__}>"


def to_words(v: ToVolume) -> str:
    diluent = f" {v.diluent.words}" if v.diluent else ""
    return f"to {amount(v.volume) or 'the mark'}{diluent}"


def dose_words(d: Dose, m: Material | None) -> str:
    words = amount(d.amount)
    words += "".join(f" = {amount(same)}" for same in d.same)
    if d.material is not None and d.material != m:
        words += f" of {material(d.material)}"
    return words + "".join(f" or {amount(o.amount)}" for o in d.alternatives)


def material(m: Material | None) -> str:
    if m is None:
        return "?"
    known = m.match.substances[0].name if m.match else "?"
    facts = [
        *(f"stock {amount(x)}" for x in m.strengths),
        *(f"final {amount(x)}" for x in m.finals),
        *(f"either {amount(x)}" for x in m.bracket),
        *(amount(x) for x in (m.ph, m.molar_mass, m.density) if x),
    ]
    return f"{m.words} [{known}]" + (f" ({', '.join(facts)})" if facts else "")


def amount(m: Measure | None) -> str:
    if m is None:
        return ""
    number = f"{m.nominal:.10g}"
    if m.unit == "pH":
        return f"pH {number}"
    return f"{number} {m.unit}".strip() + (f" {m.basis}" if m.basis else "")


ALL = list(read_cases(CASES.read_text(encoding="utf-8"))) if CASES.exists() else []


def test_there_are_cases() -> None:
    assert len(ALL) >= 60
    assert all(case.expected for case in ALL)


@pytest.mark.parametrize("case", ALL, ids=[case.title for case in ALL])
def test_case(case: Case) -> None:
    found = read_table(case.table, reading_of(case.table), context=case.context)
    assert written(found) == list(case.expected)


# --- properties of any table -----------------------------------------------------------------------


def phrases_of(row: Row) -> Iterator[Phrase]:
    yield from row.sentence.phrases
    yield from (d for d in row.doses if d)
    yield from (v for v in row.to_volumes if v)
    if row.material is not None:
        yield row.material


def measures_of(p: Phrase) -> Iterator[Measure]:
    if isinstance(p, Material):
        yield from (*p.strengths, *p.finals, *p.bracket)
        yield from (m for m in (p.ph, p.molar_mass, p.density) if m)
    elif isinstance(p, Dose):
        yield from (p.amount, *p.same)
        for other in p.alternatives:
            yield from measures_of(other)
        if p.material:
            yield from measures_of(p.material)
    elif isinstance(p, ToVolume) and p.volume:
        yield p.volume
    elif isinstance(p, SetPH) and p.ph:
        yield p.ph
    elif isinstance(p, Claim):
        yield p.measure


@pytest.mark.parametrize("case", ALL, ids=[case.title for case in ALL])
def test_offsets_point_at_the_digits(case: Case) -> None:
    """Each quantity stands where its offsets say, in the row and in the source."""
    found = read_table(case.table, reading_of(case.table), context=case.context)
    source = CASES.read_text(encoding="utf-8").splitlines()
    for row in found.rows:
        assert row.sentence.text is row.text
        for measure in [
            *row.sentence.measures,
            *(m for p in phrases_of(row) for m in measures_of(p)),
        ]:
            chars = row.text.chars[measure.start : measure.end]
            assert any(char.isdigit() for char in chars)
            first, last = measure.numeral
            assert measure.start <= first < last <= measure.end
            assert any(char.isdigit() for char in row.text.chars[first:last])
            span = row.text.span(measure.start, measure.end)
            assert source[span.line - 1][span.column - 1 : span.end_column - 1] == chars


@pytest.mark.parametrize("case", ALL, ids=[case.title for case in ALL])
def test_each_quantity_once(case: Case) -> None:
    found = read_table(case.table, reading_of(case.table), context=case.context)
    for row in found.rows:
        spans = [(m.start, m.end) for m in row.sentence.measures]
        assert spans == sorted(set(spans))
        assert len(row.doses) == len(row.to_volumes) == (len(found.variants) if row.doses else 0)


@pytest.mark.parametrize("case", ALL, ids=[case.title for case in ALL])
def test_all_quantities_of_a_phrase_stand_in_the_sentence(case: Case) -> None:
    """The ledger sees every quantity of the cells that a phrase uses (headings count by themselves)."""
    found = read_table(case.table, reading_of(case.table), context=case.context)
    for row in found.rows:
        told = {(m.start, m.end) for m in row.sentence.measures}
        for measure in (m for p in phrases_of(row) for m in measures_of(p)):
            in_heading = row.text.span(measure.start, measure.end).line == case.table.head[0].line
            assert in_heading or (measure.start, measure.end) in told


def test_strict_and_block_are_kept() -> None:
    table = ALL[0].table
    found = read_table(table, reading_of(table), block=7, strict=True)
    assert {row.sentence.block for row in found.rows} == {7}
    assert all(row.sentence.strict for row in found.rows)


PIECES = (
    *(
        "",
        "-",
        "Component",
        "Mass (g)",
        "[Stock]",
        "Final",
        "100 mL",
        "1x",
        "to",
        "pH",
        "g / L",
        "%",
    ),
    *(
        "NaCl",
        "5 M NaCl",
        "water",
        "Total",
        "12 g",
        "12",
        "to 1 L",
        "pH 7",
        "fill up",
        "n/a",
        "(((",
        "|",
    ),
    *(
        "Unit",
        "mL",
        "Take",
        "5 mL of S0",
        "Make up to",
        "1 M, pH 8",
        "Σ",
        "1e999 g",
        "Tris (1 M)",
        "M",
    ),
)


def test_no_table_fails() -> None:
    chance = random.Random(20261201)
    reading = Reading(number_style(()), NameIndex())
    kinds = set()
    for _ in range(400):
        rows = [
            tuple(Text(chance.choice(PIECES), 1, 1) for _ in range(chance.randrange(6)))
            for _ in range(chance.randrange(6))
        ]
        found = read_table(Table(rows[0] if rows else (), tuple(rows[1:])), reading)
        kinds.add(found.kind)
        assert len(found.rows) <= max(0, len(rows) - 1)
    assert kinds == {"recipe", "list", "other"}


def test_empty_and_very_wide_tables_are_other() -> None:
    reading = Reading(number_style(()), NameIndex())
    assert read_table(Table((), ()), reading).kind == "other"
    wide = tuple(Text("1 g", 1, 1) for _ in range(WIDEST + 1))
    assert read_table(Table(wide, (wide,)), reading).kind == "other"


def test_a_long_table_has_all_its_rows() -> None:
    case = ALL[0]
    rows = case.table.rows[:2] * 1000
    found = read_table(replace(case.table, rows=rows), reading_of(case.table))
    assert len(found.rows) == 2000
    assert all(row.kind == "component" for row in found.rows)
