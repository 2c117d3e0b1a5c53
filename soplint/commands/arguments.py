"""Reads the arguments of a command: options with ``--``, everything else is an operand."""

from __future__ import annotations

TYPE_CHECKING = False  # known to type checkers; importing typing would cost as much as Python
if TYPE_CHECKING:
    from collections.abc import Iterator
    from datetime import date


class UsageError(Exception):
    """The command line asks for something that does not exist."""


class Option:
    """An option of a command: its name, the word for its value in help, what it does."""

    __slots__ = ("choices", "does", "name", "repeats", "value")

    def __init__(
        self,
        name: str,
        value: str,
        does: str,
        choices: tuple[str, ...] = (),
        repeats: bool = False,
    ) -> None:
        self.name = name
        self.value = value  # for people; the choices where there are some; "" for a switch
        self.does = does
        self.choices = choices
        self.repeats = repeats


class Arguments:
    """The values given for each option, and the operands, in order."""

    __slots__ = ("_values", "operands")

    def __init__(self) -> None:
        self.operands: list[str] = []
        self._values: dict[str, list[str]] = {}

    def add(self, name: str, value: str) -> None:
        """Keeps one value of an option."""
        self._values.setdefault(name, []).append(value)

    def all(self, name: str) -> tuple[str, ...]:
        """Every value given for an option, in order."""
        return tuple(self._values.get(name, ()))

    def one(self, name: str) -> str | None:
        """The value of an option that is given at most once."""
        values = self._values.get(name)
        return values[0] if values else None


def read(arguments: list[str], options: tuple[Option, ...], command: str) -> Arguments:
    """Options as ``--name VALUE`` or ``--name=VALUE``; after ``--`` everything is an operand.

    Errors: ``UsageError`` for an unknown option, a missing or impossible value, a repetition.

    >>> told = read(["--as", "json", "a.sop"], (Option("--as", "FORM", ""),), "review")
    >>> told.one("--as"), told.operands
    ('json', ['a.sop'])
    """
    known = {option.name: option for option in options}
    told = Arguments()
    rest = iter(arguments)
    for argument in rest:
        if argument == "--":
            told.operands.extend(rest)
        elif argument == "-" or not argument.startswith("-"):
            told.operands.append(argument)
        else:
            name, equals, value = argument.partition("=")
            option = known.get(name)
            if option is None:
                raise UsageError(_unknown(name, known, command))
            if not option.value and not option.choices:
                if equals:
                    raise UsageError(f"{name} takes no value")
                value = "yes"
            elif not equals:
                value = _next(rest, option)
            _check(option, value, told)
            told.add(name, value)
    return told


def _next(rest: Iterator[str], option: Option) -> str:
    value = next(rest, None)
    if value is None:
        raise UsageError(f"{option.name} is given without its {option.value}")
    return value


def _check(option: Option, value: str, told: Arguments) -> None:
    if option.choices and value not in option.choices:
        raise UsageError(f"{option.name} takes {', '.join(option.choices)}; not {value!r}")
    if not value:
        raise UsageError(f"{option.name} is given without its {option.value}")
    if not option.repeats and told.one(option.name) is not None:
        raise UsageError(f"{option.name} is given twice")


def _unknown(name: str, known: dict[str, Option], command: str) -> str:
    if not known:
        return f"{command} has no option {name}; it has none"
    return f"{command} has no option {name}; it has {', '.join(known)}"


def review_date(text: str | None) -> date:
    """The date of ``--on``, today where it is not given.  Errors: ``UsageError``."""
    from datetime import date

    if text is None:
        return date.today()
    try:
        day = date.fromisoformat(text)
    except ValueError:
        day = None
    # Python also reads 20261201 and 2026-W49-2; a record should be asked for in one way only.
    if day is None or day.isoformat() != text:
        raise UsageError(f"--on takes a date as YYYY-MM-DD; not {text!r}")
    return day


def usage_text(head: str, options: tuple[Option, ...], tail: str = "") -> str:
    """Help of a command: how it is called, its options, examples."""
    lines = [head.strip(), ""]
    if options:
        lines.append("Options:")
    for option in options:
        value = "|".join(option.choices) or option.value
        again = " (may repeat)" if option.repeats else ""
        lines.append(f"  {option.name} {value}".rstrip())
        lines.append(f"      {option.does}{again}")
    lines += ["", tail.strip()] if tail else []
    return "\n".join(lines).strip()
