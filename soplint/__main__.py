"""Entry of the command line: finds the command and loads that one only."""

from __future__ import annotations

import sys

TYPE_CHECKING = False  # known to type checkers; importing typing would cost as much as Python
if TYPE_CHECKING:
    from collections.abc import Callable

COMMANDS = {
    "review": "recompute procedures and report what does not agree",
    "worksheet": "every quantity of one procedure: stated, computed, verdict, working",
    "rules": "the rules, or the card of one",
    "substances": "what is known of a substance: molar mass with working, forms, sources",
}

HELP = """
soplint COMMAND ...

Recomputes the numbers of laboratory procedures and reports, line by line, what does not agree.

Commands:
{commands}

soplint COMMAND --help tells the options of a command, soplint --version the version.

Ends with 0 when nothing is held, 1 when a finding at or above the hold level is open, 2 when
something could not be reviewed, 3 on a fault in soplint; the higher wins.

Examples:
  soplint review procedures/
  soplint worksheet HFL-SOP-014.md
  soplint rules hazards
  soplint substances "disodium hydrogen phosphate heptahydrate"
"""


def main(arguments: list[str] | None = None) -> int:
    """Runs one command line (default: that of the process) and returns its exit code."""
    given = sys.argv[1:] if arguments is None else arguments
    try:
        return _run(given)
    except KeyboardInterrupt:
        from soplint.commands.exits import INTERRUPTED

        return INTERRUPTED
    except Exception as error:
        return _failed(error)


def _run(given: list[str]) -> int:
    from soplint.commands.arguments import UsageError

    if not given:
        raise UsageError(f"which command? {', '.join(COMMANDS)}; soplint --help tells more")
    name, *rest = given
    if name in ("--help", "-h"):
        return _print(_help())
    if name == "--version":
        from soplint import __version__

        return _print(f"soplint {__version__}")
    if name not in COMMANDS:
        raise UsageError(f"no command is called {name!r}; there are {', '.join(COMMANDS)}")
    run, usage = _command(name)
    before_operands = rest[: rest.index("--")] if "--" in rest else rest
    if "--help" in before_operands or "-h" in before_operands:
        return _print(usage())
    return run(rest)


def _command(name: str) -> tuple[Callable[[list[str]], int], Callable[[], str]]:
    if name == "review":
        from soplint.commands import review

        return review.run, review.usage
    if name == "worksheet":
        from soplint.commands import worksheet

        return worksheet.run, worksheet.usage
    if name == "rules":
        from soplint.commands import rules

        return rules.run, rules.usage
    from soplint.commands import substances

    return substances.run, substances.usage


def _help() -> str:
    listed = "\n".join(f"  {name:<11} {what}" for name, what in COMMANDS.items())
    return HELP.strip().format(commands=listed)


def _print(text: str) -> int:
    from soplint.commands.output import write

    write(text.split("\n"))
    return 0


def _failed(error: Exception) -> int:
    from soplint.commands.arguments import UsageError
    from soplint.commands.exits import FAULT, NOT_REVIEWED
    from soplint.commands.messages import fault, say
    from soplint.commands.output import Unwritten

    if isinstance(error, (UsageError, Unwritten)):
        say(str(error))
        return NOT_REVIEWED
    fault(error)
    return FAULT


if __name__ == "__main__":
    raise SystemExit(main())
