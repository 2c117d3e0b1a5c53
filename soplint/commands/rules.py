"""``soplint rules``: the list of rules, and the card of one."""

from __future__ import annotations

from typing import TYPE_CHECKING

from soplint.commands.arguments import UsageError, read, usage_text
from soplint.commands.exits import FAULT, NOT_HELD

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator

    from soplint.checks.cards import Card
    from soplint.reports.layout import Page

HEAD = """
soplint rules [NAME]

Without NAME: every rule with the class it may give and what it requires, by family. With the name
of a family: its rules. With the name of a rule: its card, with working, examples and sources.
"""

TAIL = """
Ends with 0, or with 2 when there is no such rule or family.

Examples:
  soplint rules
  soplint rules hazards
  soplint rules amounts.mass-gives-concentration
"""


def usage() -> str:
    """The help of this command."""
    return usage_text(HEAD, (), TAIL)


def run(arguments: list[str]) -> int:
    """Prints the list or a card.  Errors: ``UsageError``, ``Unwritten``."""
    import sys

    from soplint.checks.cards import FAMILIES, CardError, card_paths, cards
    from soplint.commands.messages import say
    from soplint.commands.output import write
    from soplint.reports.layout import page_for

    told = read(arguments, (), "rules")
    if len(told.operands) > 1:
        raise UsageError("one rule or family at a time")
    name = told.operands[0] if told.operands else None
    try:
        known = cards()
    except CardError as error:
        say(f"fault in soplint: a rule card is not in form: {error}")
        return FAULT
    if name is None or name in FAMILIES:
        chosen = [card for card in known.values() if name in (None, card.family)]
        write(_listed(chosen, FAMILIES, page_for(sys.stdout)))
    elif name in known:
        path = dict(zip(known, card_paths(), strict=True))[name]
        write(_card(path))
    else:
        raise UsageError(_unknown(name, [*known, *FAMILIES]))
    return NOT_HELD


def _listed(chosen: list[Card], families: Iterable[str], page: Page) -> Iterator[str]:
    from soplint.reports.layout import wrapped

    for family in families:
        members = [card for card in chosen if card.family == family]
        if members:
            yield page.strong(family)
        for card in members:
            yield f"  {card.name} ({card.severity})"
            for line in wrapped(card.summary, page.width, 6):
                yield f"      {line}"
    if not chosen:
        yield "There are no rules here."


def _card(path: str) -> Iterator[str]:
    from soplint.reports.inert import inert

    with open(path, encoding="utf-8") as file:
        for line in file:
            yield inert(line.rstrip("\r\n"))


def _unknown(name: str, names: list[str]) -> str:
    from difflib import get_close_matches

    near = get_close_matches(name, names, n=3)
    hint = f"near: {', '.join(near)}" if near else "'soplint rules' lists them"
    return f"no rule or family has the name {name!r}; {hint}"
