"""The step table: what each vessel of a procedure holds after each step, for people."""

from __future__ import annotations

from typing import TYPE_CHECKING

from soplint.reports.inert import inert
from soplint.reports.layout import padded, width

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator

    from soplint.bench.vessel import Step, Vessel

WIDEST = 52  # columns of a step before it pushes the ones behind it
HEAD = ("line", "step", "volume", "T", "pH")


def as_text(path: str, made: Iterable[Vessel]) -> Iterator[str]:
    """One table for each vessel: line, step, volume, temperature, pH, contents after it."""
    yield inert(path)
    empty = True
    for vessel in made:
        empty = False
        yield ""
        yield inert(vessel.name)
        rows = [_cells(step) for step in vessel.steps]
        widest = min(max(width(row[1]) for row in (HEAD, *rows)), WIDEST)
        yield _row(HEAD, widest)
        for row in rows:
            yield _row(row, widest)
        last = vessel.steps[-1]
        if last.holds:
            yield f"      holds {_holds(last)}"
        if last.note:
            yield f"      pH not computed: {inert(last.note)}"
    if empty:
        yield ""
        yield "No preparation was read."


def _cells(step: Step) -> tuple[str, str, str, str, str]:
    volume = f"{step.litres * 1000:.4g} mL" if step.litres is not None else ""
    ph = f"{step.ph:.2f}" if step.ph is not None else ""
    return str(step.line), inert(step.does), volume, f"{step.degrees:g} °C", ph


def _row(cells: tuple[str, str, str, str, str], widest: int) -> str:
    line, does, volume, degrees, ph = cells
    return f"{line:>4}  {padded(does, widest)}  {volume:>9}  {degrees:>6}  {ph:>5}".rstrip()


def _holds(step: Step) -> str:
    return ", ".join(f"{mol * 1000:.4g} mmol {name}" for name, mol in step.holds)
