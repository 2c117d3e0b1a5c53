"""``soplint substances``: what is known of one substance, with the working of its molar mass."""

from __future__ import annotations

from typing import TYPE_CHECKING

from soplint.commands.arguments import UsageError, read, usage_text
from soplint.commands.exits import NOT_HELD

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator

    from soplint.reports.layout import Page
    from soplint.substances.model import Match, Substance

HEAD = """
soplint substances NAME

Tells what a name or formula stands for: molar mass with its working, other forms, strength and
density of a commercial solution, pKa values, hazard statements, and the status of these figures.
"""

TAIL = """
Ends with 0, or with 2 when the name is not known.

Examples:
  soplint substances "disodium hydrogen phosphate heptahydrate"
  soplint substances "Na2HPO4·7H2O"
"""

ATOMIC_WEIGHTS = "standard atomic weights 2021 (Prohaska et al. 2022, Pure Appl. Chem. 94, 573)"
FIGURES = "figures of makers' product data and safety data sheets; the supplier's own come first"
STANDARD = 298.15  # K, at which pKa values are printed
LABEL = 16
SHOWN_FORMS = 12


def usage() -> str:
    """The help of this command."""
    return usage_text(HEAD, (), TAIL)


def run(arguments: list[str]) -> int:
    """Prints what is known of a substance.  Errors: ``UsageError``, ``Unwritten``."""
    import sys

    from soplint.commands.output import write
    from soplint.reports.layout import page_for

    told = read(arguments, (), "substances")
    name = " ".join(told.operands).strip()
    if not name:
        raise UsageError("which substance? Give its name or formula")
    match = _match(name)
    if match is None:
        rows = _formula_only(name)
    elif match.generic:
        rows = _generic(match)
    else:
        rows = _substance(match.substances[0], match.substances[1:])
    write(_laid_out(rows, page_for(sys.stdout)))
    return NOT_HELD


def _match(name: str) -> Match | None:
    from soplint.substances import lookup

    match = lookup(name)
    return match if match is not None and match.substances else None


def _laid_out(rows: Iterable[tuple[str, str]], page: Page) -> Iterator[str]:
    """Rows of label and value; a row without label is a heading."""
    from soplint.reports.inert import inert
    from soplint.reports.layout import wrapped

    last = ""
    for label, value in rows:
        if not label:
            yield page.strong(inert(value)) if value else ""
        else:
            shown = "" if label == last else label
            for line in wrapped(inert(value), page.width, LABEL + 2):
                yield f"  {shown:{LABEL}}{line}"
                shown = ""
        last = label


def _generic(match: Match) -> Iterator[tuple[str, str]]:
    yield "", f"{match.written}: names an acid system, not one reagent"
    system = match.substances[0].acid_system
    if system:
        yield from _acid(system)
    yield from _brief_list("can mean", match.substances)


def _substance(substance: Substance, also: tuple[Substance, ...] = ()) -> Iterator[tuple[str, str]]:
    """Everything about a substance; ``also`` are the forms that the name can mean as well."""
    yield "", substance.name
    for other in also:
        yield "can also mean", _brief(other)
    if substance.formula:
        yield "formula", substance.formula
        yield from _molar_mass(substance.formula)
    else:
        yield "formula", "none: a mixture, polymer or natural product"
    if substance.cas:
        yield "CAS number", substance.cas
    yield "state", substance.state
    yield from _strength(substance)
    if substance.solubility is not None:
        yield "solubility", f"{substance.solubility:g} g per 100 mL water, about 20 °C"
    if substance.hazards:
        yield "hazards", ", ".join(substance.hazards)
    yield "status", f"{substance.status or 'none recorded'} ({FIGURES})"
    if substance.acid_system:
        yield from _acid(substance.acid_system)
    yield from _forms(substance, also)


def _molar_mass(formula: str) -> Iterator[tuple[str, str]]:
    from soplint.substances.elements import atomic_weights
    from soplint.substances.formula import parse_formula

    parsed = parse_formula(formula)
    weights = atomic_weights()
    terms = (f"{count:g} {e} × {weights[e].value:.10g}" for e, count in parsed.elements.items())
    yield "molar mass", f"{parsed.molar_mass:.2f} ± {parsed.uncertainty:.2g} g/mol"
    yield "working", f"{' + '.join(terms)} = {parsed.molar_mass:.3f} g/mol"
    yield "source", ATOMIC_WEIGHTS


def _strength(substance: Substance) -> Iterator[tuple[str, str]]:
    if substance.density is not None:
        yield "density", f"{substance.density:g} g/mL at 20 °C"
    solution = substance.state == "solution" or (substance.strength or 100.0) < 100.0
    if substance.strength is None or not solution:
        return
    low, high = substance.strength_low, substance.strength_high
    usual = "" if low is None or high is None else f" (as sold {low:g} to {high:g} %)"
    yield "strength", f"{substance.strength:g} % w/w{usual}"
    if substance.density is not None and substance.molar_mass is not None:
        molar = 10.0 * substance.density * substance.strength / substance.molar_mass
        working = (
            f"1000 mL/L × {substance.density:g} g/mL × {substance.strength:g} % "
            f"/ {substance.molar_mass:.2f} g/mol = {molar:#.3g} mol/L"
        )
        yield "working", working


def _acid(name: str) -> Iterator[tuple[str, str]]:
    from soplint.equilibria.acids import system, systems

    if name not in systems():
        return
    acid = system(name)
    for charge, step in zip(acid.charges, acid.steps, strict=False):
        value = step.at(STANDARD)
        loss = f"{name}, charge {_charge(charge)} to {_charge(charge - 1)}"
        yield (
            "pKa",
            f"{value:.2f} ± {step.uncertainty:.2g} ({loss}; 25 °C, zero ionic strength; "
            f"{step.status}; {step.source})",
        )


def _charge(charge: int) -> str:
    return f"{charge:+d}" if charge else "0"


def _forms(substance: Substance, shown: tuple[Substance, ...]) -> Iterator[tuple[str, str]]:
    from soplint.substances import forms

    names = {other.name for other in shown}
    others = tuple(other for other in forms(substance) if other.name not in names)
    yield from _brief_list("other forms", others)


def _brief_list(label: str, substances: tuple[Substance, ...]) -> Iterator[tuple[str, str]]:
    for substance in substances[:SHOWN_FORMS]:
        yield label, _brief(substance)
    if len(substances) > SHOWN_FORMS:
        yield label, f"and {len(substances) - SHOWN_FORMS} more"


def _brief(substance: Substance) -> str:
    mass = "" if substance.molar_mass is None else f", {substance.molar_mass:.2f} g/mol"
    formula = "" if substance.formula is None else f" {substance.formula}"
    return f"{substance.name}{formula}{mass}"


def _formula_only(name: str) -> Iterator[tuple[str, str]]:
    """A formula that the catalogue does not hold still has a molar mass."""
    from soplint.substances.formula import FormulaError, parse_formula

    try:
        parse_formula(name)
    except FormulaError:
        raise UsageError(f"no substance has the name or formula {name!r}{_near(name)}") from None
    yield "", name
    yield "formula", f"{name} (not in the catalogue)"
    yield from _molar_mass(name)


def _near(name: str) -> str:
    from difflib import get_close_matches

    from soplint.substances.catalogue import catalogue

    near = get_close_matches(name.lower(), [substance.name for substance in catalogue()], n=3)
    return f"; near: {', '.join(near)}" if near else ""
